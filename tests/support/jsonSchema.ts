/** A small check of values against JSON Schema: the words that our documents use, and no others. */

type Schema = Readonly<Record<string, unknown>>;

/** Words that say something of the schema, not of the value. */
const SILENT = new Set(['$schema', '$id', 'title', 'description', 'default', 'format']);

/** What is wrong with a value, one line each; none where it matches. */
export function mismatches(schema: Schema, value: unknown, root: Schema, at = 'value'): string[] {
  const wrong: string[] = [];
  const fail = (message: string) => wrong.push(`${at}: ${message}`);
  for (const [word, rule] of Object.entries(schema)) {
    if (SILENT.has(word)) continue;
    const check = WORDS[word];
    if (!check) throw new Error(`the check of JSON Schema does not know '${word}' (${at})`);
    check({ rule, value, schema, root, at, fail, wrong });
  }
  return wrong;
}

interface Check {
  readonly rule: unknown;
  readonly value: unknown;
  readonly schema: Schema;
  readonly root: Schema;
  readonly at: string;
  readonly fail: (message: string) => void;
  readonly wrong: string[];
}

const isObject = (value: unknown): value is Record<string, unknown> =>
  typeof value === 'object' && value !== null && !Array.isArray(value);
const isNumber = (value: unknown): value is number => typeof value === 'number' && Number.isFinite(value);

function isOfType(type: string, value: unknown): boolean {
  if (type === 'object') return isObject(value);
  if (type === 'array') return Array.isArray(value);
  if (type === 'integer') return Number.isInteger(value);
  if (type === 'number') return isNumber(value);
  if (type === 'null') return value === null;
  if (type === 'string' || type === 'boolean') return typeof value === type;
  throw new Error(`the check of JSON Schema does not know the type '${type}'`);
}

/** A limit on numbers. */
const limit =
  (holds: (value: number, rule: number) => boolean) =>
  ({ rule, value, schema, fail }: Check): void => {
    if (isNumber(value) && !holds(value, rule as number)) fail(`${value} against ${JSON.stringify(schema)}`);
  };

const WORDS: Readonly<Record<string, (check: Check) => void>> = {
  $ref({ rule, value, root, at, wrong }) {
    const steps = String(rule).replace(/^#\//, '').split('/');
    const found = steps.reduce<unknown>((node, step) => (node as Schema)[step], root);
    wrong.push(...mismatches(found as Schema, value, root, at));
  },
  type({ rule, value, fail }) {
    const types = Array.isArray(rule) ? (rule as string[]) : [rule as string];
    if (!types.some((type) => isOfType(type, value))) fail(`${JSON.stringify(value)} is no ${types.join(' or ')}`);
  },
  const({ rule, value, fail }) {
    if (value !== rule) fail(`${JSON.stringify(value)} is not ${JSON.stringify(rule)}`);
  },
  enum({ rule, value, fail }) {
    if (!(rule as unknown[]).includes(value)) fail(`${JSON.stringify(value)} is none of ${JSON.stringify(rule)}`);
  },
  anyOf({ rule, value, root, at, fail }) {
    const each = (rule as Schema[]).map((schema) => mismatches(schema, value, root, at));
    if (each.every((list) => list.length > 0)) fail(`fits no alternative: ${each.map((list) => list[0]).join(' | ')}`);
  },
  properties({ rule, value, root, at, wrong }) {
    if (!isObject(value)) return;
    for (const [key, schema] of Object.entries(rule as Record<string, Schema>)) {
      if (value[key] !== undefined) wrong.push(...mismatches(schema, value[key], root, `${at}.${key}`));
    }
  },
  required({ rule, value, fail }) {
    if (!isObject(value)) return;
    for (const key of rule as string[]) if (value[key] === undefined) fail(`lacks ${key}`);
  },
  additionalProperties({ rule, value, schema, root, at, fail, wrong }) {
    if (!isObject(value)) return;
    const known = Object.keys((schema.properties as object | undefined) ?? {});
    for (const [key, inner] of Object.entries(value)) {
      if (known.includes(key)) continue;
      if (rule === false) fail(`has ${key} beside`);
      else wrong.push(...mismatches(rule as Schema, inner, root, `${at}.${key}`));
    }
  },
  propertyNames({ rule, value, root, at, wrong }) {
    if (isObject(value)) for (const key of Object.keys(value)) wrong.push(...mismatches(rule as Schema, key, root, at));
  },
  items({ rule, value, root, at, wrong }) {
    if (!Array.isArray(value)) return;
    value.forEach((inner, i) => {
      wrong.push(...mismatches(rule as Schema, inner, root, `${at}[${i}]`));
    });
  },
  minItems({ rule, value, fail }) {
    if (Array.isArray(value) && value.length < (rule as number)) fail(`has ${value.length} entries`);
  },
  maxItems({ rule, value, fail }) {
    if (Array.isArray(value) && value.length > (rule as number)) fail(`has ${value.length} entries`);
  },
  minLength({ rule, value, fail }) {
    if (typeof value === 'string' && value.length < (rule as number)) fail('is too short');
  },
  pattern({ rule, value, fail }) {
    if (typeof value === 'string' && !new RegExp(String(rule)).test(value)) fail(`${value} does not match ${rule}`);
  },
  minimum: limit((value, rule) => value >= rule),
  maximum: limit((value, rule) => value <= rule),
  exclusiveMinimum: limit((value, rule) => value > rule),
  exclusiveMaximum: limit((value, rule) => value < rule),
};
