import type { Topic } from './all.ts';
import type { Kind, OutsideCheck } from './check.ts';

/** A check and what came of it. */
export interface Found {
  readonly check: OutsideCheck;
  /** NaN where it could not be worked out; then the reason is in `error`. */
  readonly ours: number;
  readonly error: string | null;
  /** Ours less printed. */
  readonly difference: number;
  readonly passes: boolean;
}

/** Whether ours is near enough; what is no number, or cannot be worked out, never is. */
export function found(check: OutsideCheck): Found {
  const { ours, error } = workedOut(check);
  const difference = ours - check.printed;
  return { check, ours, error, difference, passes: Math.abs(difference) <= check.allowed };
}

/** One figure that cannot be worked out must not keep the others from being shown. */
function workedOut(check: OutsideCheck): { ours: number; error: string | null } {
  try {
    return { ours: check.ours(), error: null };
  } catch (error) {
    return { ours: Number.NaN, error: String(error) };
  }
}

/** Neighbours that share their source and kind, so that these are said once above them. */
export interface Group {
  readonly source: string;
  readonly kind: Kind;
  /** Why they may differ so much, where the reason is one for all of them. */
  readonly why: string | null;
  readonly rows: readonly Found[];
}

export function groupsOf(topic: Topic): Group[] {
  const groups: Found[][] = [];
  for (const check of topic.checks) {
    const last = groups[groups.length - 1];
    const { source, kind } = last?.[0]?.check ?? {};
    if (last && source === check.source && kind === check.kind) last.push(found(check));
    else groups.push([found(check)]);
  }
  return groups.map((rows) => {
    const { source, kind, why } = rows[0]!.check;
    return { source, kind, why: rows.every(({ check }) => check.why === why) ? why : null, rows };
  });
}

const COLUMNS = ['what', 'unit', 'printed', 'ours', 'difference', 'allowed'];

/** The table of a group: its head and its rows; the reasons are a column where they differ. */
export function tableOf({ why, rows }: Group): string[][] {
  if (why !== null) return [COLUMNS, ...rows.map(cells)];
  return [[...COLUMNS, 'why'], ...rows.map((row) => [...cells(row), row.check.why])];
}

/**
 * The cells of a row. Ours and the difference are cut one digit below the first of what is allowed, where the rounding of
 * one machine or another is not seen.
 */
function cells({ check, ours, difference }: Found): string[] {
  const decimals = Math.min(20, Math.max(0, Math.ceil(-Math.log10(check.allowed)) + 1));
  return [
    check.what,
    check.unit,
    String(check.printed),
    short(ours, decimals),
    short(difference, decimals),
    String(Number(check.allowed.toPrecision(2))),
  ];
}

/** So many decimals, without zeros at the end. */
function short(value: number, decimals: number): string {
  const text = value.toFixed(decimals);
  const cut = text.includes('.') ? text.replace(/\.?0+$/, '') : text;
  return cut === '-0' ? '0' : cut;
}

/** Title of the section, which is the last of the README. */
export const SECTION = '## Accuracy';

const INTRODUCTION = `What the program computes, held against figures that others worked out. \`npm run accuracy\` works ours out anew and
prints this table; \`npm test\` fails where a difference is more than allowed, and where this section is not what the
program gives today. Ours come from the functions that a comparison calls. Misprints found in sources are left out.

- *published*: printed in the source named;
- *from memory*: known to be printed there, but quoted from memory;
- *common practice*: a rule of thumb of the trade;
- *closed form*: worked by hand from a formula, where nothing is published;
- *independent solver*: worked out by code that shares none with the program, where nothing is published.`;

const KINDS: readonly Kind[] = ['published', 'from memory', 'common practice', 'closed form', 'independent solver'];

/** The section of the README, without a line break at its end. */
export function section(topics: readonly Topic[]): string {
  const counted = topics.map((topic) => [
    topic.heading,
    ...KINDS.map((kind) => topic.checks.filter((check) => check.kind === kind).length),
    topic.checks.length,
  ]);
  const sums = KINDS.map((kind) => topics.flatMap(({ checks }) => checks).filter((c) => c.kind === kind).length);
  const total = topics.reduce((sum, { checks }) => sum + checks.length, 0);
  const overview = markdown(
    ['checks', ...KINDS, 'all'],
    [...counted, ['all', ...sums, total]].map((row) => row.map(String)),
  );
  return [SECTION, INTRODUCTION, overview, ...topics.map(topicText)].join('\n\n');
}

function topicText(topic: Topic): string {
  const groups = groupsOf(topic).map((group) => {
    const { source, kind, why } = group;
    const [head, ...rows] = tableOf(group);
    return `*${kind}*: ${plain(source)}.${why === null ? '' : ` Allowed: ${plain(why)}.`}\n\n${markdown(head!, rows)}`;
  });
  const count = topic.checks.length === 1 ? '1 check' : `${topic.checks.length} checks`;
  return [`### ${topic.heading}`, `<details><summary>${count}</summary>`, ...groups, '</details>'].join('\n\n');
}

/** Text that Markdown shows as it stands. */
const plain = (text: string) => text.replace(/[|*<]/g, '\\$&');

const WORDS = ['what', 'unit', 'why', 'checks'];

function markdown(head: readonly string[], rows: readonly (readonly string[])[]): string {
  const line = (row: readonly string[]) => `| ${row.map(plain).join(' | ')} |`;
  const rule = head.map((name) => (WORDS.includes(name) ? '---' : '---:'));
  return [line(head), `|${rule.join('|')}|`, ...rows.map(line)].join('\n');
}

/** A document with this section as its last; whatever followed the old one comes before it. */
export function withSection(document: string, text: string): string {
  const lines = document.split('\n');
  const from = lines.indexOf(SECTION);
  if (from < 0) return `${document.trimEnd()}\n\n${text}\n`;
  const next = lines.findIndex((line, i) => i > from && line.startsWith('## '));
  const rest = [...lines.slice(0, from), ...(next < 0 ? [] : lines.slice(next))];
  return `${rest.join('\n').trimEnd()}\n\n${text}\n`;
}
