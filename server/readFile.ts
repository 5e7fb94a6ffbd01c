import type { z } from 'zod';
import { type Fault, type FaultCode, InputError } from './errors.ts';

/** `pumps[0].curve.points[2].head` */
export function fieldPath(path: readonly PropertyKey[]): string {
  let text = '';
  for (const step of path)
    text += typeof step === 'number' ? `[${step}]` : text === '' ? String(step) : `.${String(step)}`;
  return text;
}

/** The value that stands at a path, for the message. */
function valueAt(value: unknown, path: readonly PropertyKey[]): unknown {
  let here = value;
  for (const step of path) {
    if (here === null || typeof here !== 'object') return undefined;
    here = (here as Record<PropertyKey, unknown>)[step];
  }
  return here;
}

/** A value as a person wrote it, cut to a readable length. */
export function shown(value: unknown): string {
  if (value === undefined) return 'nothing';
  const text = JSON.stringify(value) ?? String(value);
  return text.length > 60 ? `${text.slice(0, 57)}...` : text;
}

function codeOf(issue: z.core.$ZodIssue, found: unknown): FaultCode {
  switch (issue.code) {
    case 'invalid_type':
      return found === undefined ? 'missing_field' : 'wrong_type';
    case 'unrecognized_keys':
      return 'unknown_field';
    case 'custom':
      return (issue.params?.code as FaultCode | undefined) ?? 'out_of_range';
    case 'invalid_value':
      return found === undefined ? 'missing_field' : 'out_of_range';
    default:
      return found === undefined ? 'missing_field' : 'out_of_range';
  }
}

function faultsOf(
  issues: readonly z.core.$ZodIssue[],
  value: unknown,
  file: string,
  base: readonly PropertyKey[],
): Fault[] {
  return issues.flatMap((issue): Fault[] => {
    const path = [...base, ...issue.path];
    if (issue.code === 'invalid_union' && issue.errors.length > 0) {
      // The alternative that comes nearest is the one the person meant: the one with the fewest faults.
      const nearest = [...issue.errors].sort((a, b) => nearness(a) - nearness(b))[0]!;
      return faultsOf(nearest, value, file, path);
    }
    if (issue.code === 'unrecognized_keys') {
      return issue.keys.map((key) => ({
        code: 'unknown_field',
        file,
        at: fieldPath([...path, key]),
        found: `a field '${key}'`,
        wanted: 'only fields that the format has',
      }));
    }
    const found = valueAt(value, path);
    return [{ code: codeOf(issue, found), file, at: fieldPath(path), found: shown(found), wanted: wantedBy(issue) }];
  });
}

function nearness(issues: readonly z.core.$ZodIssue[]): number {
  return issues.reduce((sum, issue) => sum + (issue.code === 'unrecognized_keys' ? issue.keys.length + 1 : 1), 0);
}

function wantedBy(issue: z.core.$ZodIssue): string {
  switch (issue.code) {
    case 'invalid_type':
      return issue.expected === 'array' ? 'a list' : issue.expected === 'object' ? 'an object' : `a ${issue.expected}`;
    case 'invalid_value':
      return issue.values.length === 1 ? shown(issue.values[0]) : `one of ${issue.values.map(shown).join(', ')}`;
    case 'too_small':
      return issue.origin === 'array'
        ? issue.minimum === 1
          ? 'an entry or more'
          : `${issue.minimum} entries or more`
        : issue.origin === 'string'
          ? 'some text'
          : issue.inclusive
            ? `${issue.minimum} or more`
            : `more than ${issue.minimum}`;
    case 'too_big':
      return issue.origin === 'array'
        ? `at most ${issue.maximum} entries`
        : issue.inclusive
          ? `${issue.maximum} or less`
          : `less than ${issue.maximum}`;
    default:
      return issue.message;
  }
}

/**
 * A value checked against a schema, or an {@link InputError} with one fault per thing to mend, each with its field path.
 *
 * @param file  the name a person knows the value by, for the faults
 */
export function readAs<T>(schema: z.ZodType<T>, value: unknown, file: string): T {
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  throw new InputError(faultsOf(parsed.error.issues, value, file, []));
}

/** Text as JSON, or a fault with the line where it stops being JSON. */
export function parseJson(text: string, file: string): unknown {
  try {
    return JSON.parse(text.replace(/^\uFEFF/, ''));
  } catch {
    throw new InputError([
      {
        code: 'not_json',
        file,
        at: text.trim() === '' ? '' : `line ${text.slice(0, endOfJson(text)).split('\n').length}`,
        found: text.trim() === '' ? 'an empty file' : 'text that is not JSON',
        wanted: 'JSON',
      },
    ]);
  }
}

/**
 * How much of a text that is no JSON could still have become JSON: up to the character at which it cannot. Engines name
 * the place in some of their messages and not in others, so it is found by halving.
 */
function endOfJson(text: string): number {
  const hopeless = (length: number): boolean => {
    const head = text.slice(0, length).replace(/^\uFEFF/, '');
    try {
      JSON.parse(head);
      return false;
    } catch (error) {
      const message = error instanceof Error ? error.message : '';
      const position = Number(/position (\d+)/.exec(message)?.[1] ?? Number.NaN);
      return !/end of JSON|Unterminated/.test(message) && position !== head.length;
    }
  };
  if (!hopeless(text.length)) return text.trimEnd().length;
  let good = 0;
  let bad = text.length;
  while (bad - good > 1) {
    const middle = Math.floor((good + bad) / 2);
    if (hopeless(middle)) bad = middle;
    else good = middle;
  }
  return good;
}
