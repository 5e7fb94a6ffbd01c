import { STATUS_CODES } from 'node:http';
import type { ErrorRequestHandler, Response } from 'express';
import { type Fault, type FaultCode, faultLine, InputError } from './errors.ts';

/** A problem document of RFC 9457, with every fault of the input beside it. */
export interface Problem {
  readonly type: string;
  readonly title: string;
  readonly status: number;
  readonly detail: string;
  /** Where to mend, in the order of `faults`: field paths, lines, or the part of the request where there is neither. */
  readonly errors: readonly string[];
  readonly faults: readonly Fault[];
}

/** Faults that are not about the content of what was sent; every other one is 422. */
const STATUS_OF: Partial<Record<FaultCode, number>> = {
  not_json: 400,
  bad_option: 400,
  not_found: 404,
  conflict: 409,
  too_large: 413,
};

/** The problem document for an {@link InputError}. */
function problemOf(error: InputError): Problem {
  const statuses = error.faults.map((fault) => STATUS_OF[fault.code] ?? 422);
  const status = statuses.every((each) => each === statuses[0]) ? (statuses[0] ?? 422) : 422;
  return {
    type: `urn:nth-pump:problem:${error.faults[0]?.code ?? 'input'}`,
    title: status === 422 ? 'The input has faults' : titleOf(status),
    status,
    detail: error.faults.map(faultLine).join('\n'),
    errors: error.faults.map((fault) => fault.at || fault.file),
    faults: error.faults,
  };
}

/** Answers with a problem that has no fault of a file behind it. */
export function sendProblem(response: Response, status: number, detail: string): void {
  send(response, { type: 'about:blank', title: titleOf(status), status, detail, errors: [], faults: [] });
}

/**
 * The one place where what was thrown becomes an answer: faults of people 4xx, anything else is our bug, logged whole
 * and answered with a bare 500.
 */
export function problemHandler(log: (error: unknown) => void): ErrorRequestHandler {
  return (error, _request, response, next) => {
    if (response.headersSent) return next(error);
    if (error instanceof InputError) return send(response, problemOf(error));
    const refused = refusedBody(error);
    if (refused instanceof InputError) return send(response, problemOf(refused));
    if (refused !== null) return sendProblem(response, refused.status, refused.detail);
    log(error);
    sendProblem(response, 500, 'This is a fault of the program. Its log has the details.');
  };
}

/** Errors of the body reader and of the router carry a 4xx status: the request could not be read. */
function refusedBody(error: unknown): InputError | { status: number; detail: string } | null {
  if (!(error instanceof Error) || !('status' in error)) return null;
  const { status, message } = error;
  const type = 'type' in error ? error.type : null;
  const fault = (code: FaultCode, found: string, wanted: string): InputError =>
    new InputError([{ code, file: 'body', at: '', found, wanted }]);
  if (type === 'entity.too.large') {
    const limit = 'limit' in error && typeof error.limit === 'number' ? `at most ${error.limit / 2 ** 20} MB` : 'less';
    return fault('too_large', 'a larger body', limit);
  }
  if (typeof status !== 'number' || status < 400 || status > 499) return null;
  return { status, detail: message };
}

function send(response: Response, problem: Problem): void {
  response.status(problem.status).type('application/problem+json').send(JSON.stringify(problem));
}

function titleOf(status: number): string {
  return STATUS_CODES[status] ?? 'Error';
}
