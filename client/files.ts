/** Which of the program's files a dropped file is, told by its content and not by its name. */
export type Told =
  | { readonly kind: 'station' | 'tariff' | 'case'; readonly content: unknown }
  /** `type` is what a record is sent as: rows of text, or a profile in JSON. */
  | { readonly kind: 'record'; readonly type: 'text/csv' | 'application/json' }
  | { readonly kind: 'unknown'; readonly line: string };

const WANTED = 'a station, tariff, case or profile in JSON, or a record as CSV';

/**
 * @param name  what its owner calls the file, for the fault
 * @param text  all of a JSON file; of any other, its beginning is enough
 */
export function tellFile(name: string, text: string): Told {
  const unknown = (found: string, at = ''): Told => ({
    kind: 'unknown',
    line: `${name}${at === '' ? '' : ` ${at}`}: found ${found}; wanted ${WANTED}`,
  });
  const trimmed = text.replace(/^\uFEFF/, '').trimStart();
  if (trimmed === '') return unknown('an empty file');
  if (!looksLikeJson(trimmed)) {
    if (trimmed.includes('\u0000') && !/^\w/.test(trimmed)) return unknown('bytes that are not text');
    return { kind: 'record', type: 'text/csv' };
  }
  let content: unknown;
  try {
    content = JSON.parse(trimmed);
  } catch (error) {
    return unknown(`JSON that cannot be read (${error instanceof Error ? error.message : 'no reason given'})`);
  }
  const format = typeof content === 'object' && content !== null ? (content as { format?: unknown }).format : undefined;
  if (typeof format !== 'string') return unknown('no format', 'format');
  if (format.startsWith('nth-pump/station/')) return { kind: 'station', content };
  if (format.startsWith('nth-pump/tariff/')) return { kind: 'tariff', content };
  if (format.startsWith('nth-pump/case/')) return { kind: 'case', content };
  if (format.startsWith('nth-pump/profile/')) return { kind: 'record', type: 'application/json' };
  return unknown(`'${format}'`, 'format');
}

/** Whether a text is meant as JSON, also where it is broken. */
export function looksLikeJson(text: string): boolean {
  return /^\uFEFF?\s*[{[]/.test(text);
}

/** Hands a file to the reader, as JSON. */
export function saveFile(name: string, content: unknown): void {
  const url = URL.createObjectURL(new Blob([`${JSON.stringify(content, null, 2)}\n`], { type: 'application/json' }));
  const link = document.createElement('a');
  link.href = url;
  link.download = name;
  link.click();
  URL.revokeObjectURL(url);
}
