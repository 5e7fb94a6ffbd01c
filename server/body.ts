import express, { type RequestHandler, type Router } from 'express';
import { refuseDeepNesting } from './nesting.ts';
import { sendProblem } from './problem.ts';
import { parseJson } from './readFile.ts';

function requireType(types: readonly string[]): RequestHandler {
  return (request, response, next) => {
    const sent = request.headers['content-type'];
    if (sent !== undefined && types.includes(sent.split(';')[0]!.trim().toLowerCase())) return next();
    response.set('Accept', types.join(', '));
    sendProblem(response, 415, `Found a body of type ${sent ?? '(none said)'}; wanted ${types.join(' or ')}.`);
  };
}

/**
 * Handlers that leave the JSON of the body in `request.body`.
 *
 * @param file  what the faults call it
 */
export function jsonBody(file: string): RequestHandler[] {
  return [
    requireType(['application/json']),
    express.text({ type: () => true, limit: '5mb' }),
    (request, _response, next) => {
      const text = typeof request.body === 'string' ? request.body : '';
      refuseDeepNesting(Buffer.from(text), file);
      request.body = parseJson(text, file);
      next();
    },
  ];
}

/** Types under which a record may be sent; what it is, its content says. */
const RECORD_TYPES = ['text/csv', 'text/plain', 'application/octet-stream', 'application/json'];

/** Handlers that leave the bytes of a record in `request.body`. */
export const recordBody: RequestHandler[] = [
  requireType(RECORD_TYPES),
  express.raw({ type: () => true, limit: '200mb' }),
];

type Method = 'get' | 'post' | 'put' | 'delete';

/** A path with its methods; any other method is answered with 405 and the list of those that are. */
export function resource(router: Router, path: string, handlers: Partial<Record<Method, RequestHandler[]>>): void {
  const route = router.route(path);
  const methods = Object.keys(handlers) as Method[];
  for (const method of methods) route[method](...handlers[method]!);
  const allow = methods.flatMap((method) => (method === 'get' ? ['GET', 'HEAD'] : [method.toUpperCase()])).join(', ');
  route.all((request, response) => {
    response.set('Allow', allow);
    sendProblem(response, 405, `Found ${request.method}; wanted ${allow}.`);
  });
}
