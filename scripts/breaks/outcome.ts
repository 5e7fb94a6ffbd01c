import type { Break } from './list.ts';

/** What vitest's JSON reporter says, as far as it is read here. */
export interface Report {
  readonly testResults: readonly {
    readonly message?: string;
    readonly assertionResults: readonly {
      readonly status: string;
      readonly title: string;
      readonly ancestorTitles: readonly string[];
    }[];
  }[];
}

/**
 * What the tests said: all passed, or which failed first. Where nothing failed and yet not all files passed (one could
 * not be loaded, or ran too long), the tests said nothing.
 */
export type Outcome =
  | { readonly kind: 'green'; readonly passed: number }
  | { readonly kind: 'red'; readonly test: string }
  | { readonly kind: 'silent'; readonly why: string };

export function outcomeOf(report: Report | null): Outcome {
  if (report === null) return { kind: 'silent', why: 'the run left no report' };
  let passed = 0;
  for (const { message, assertionResults } of report.testResults) {
    for (const { status, title, ancestorTitles } of assertionResults) {
      if (status === 'failed') return { kind: 'red', test: [...ancestorTitles, title].join(' › ') };
    }
    const ran = assertionResults.filter(({ status }) => status === 'passed').length;
    if (ran === 0) return { kind: 'silent', why: message?.split('\n')[0] || 'a file without a test that ran' };
    passed += ran;
  }
  return passed > 0 ? { kind: 'green', passed } : { kind: 'silent', why: 'no test ran' };
}

/** Heading under which DEVELOPERS.md has the table. */
export const SECTION = '## The suite can fail';

const HEAD = ['| what is broken | where | first test that goes red |', '|---|---|---|'];

/** The row of a break in DEVELOPERS.md, and the part of it that is known before any test ran. */
export function row(broken: Break, test: string): string {
  return `${rowStart(broken)}${cell(test)} |`;
}

export function rowStart({ what, file, tests }: Break): string {
  return `| ${cell(what)} | \`${file}\` | \`${tests}\`: `;
}

/** A document with the rows in the place of those under the heading. */
export function withRows(document: string, rows: readonly string[]): string {
  const lines = document.split('\n');
  const heading = lines.indexOf(SECTION);
  const from = lines.indexOf(HEAD[0]!, heading);
  if (heading < 0 || from < 0) throw new Error(`no table under ${SECTION}`);
  const after = lines.findIndex((line, i) => i > from && !line.startsWith('|'));
  return [...lines.slice(0, from), ...HEAD, ...rows, ...lines.slice(after)].join('\n');
}

/** Text that Markdown shows as it stands, also in a table; code marks stay. */
function cell(text: string): string {
  return text.replace(/[\\*_<|]/g, '\\$&');
}
