export type Encoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252';

/** A text, and the encoding it was found to be in. */
export interface DecodedText {
  readonly text: string;
  readonly encoding: Encoding;
}

/**
 * The text of a file whose encoding nobody wrote down: a byte-order mark decides; without one, UTF-8 if every byte
 * fits it (text in another encoding practically never does), else Windows-1252, the usual of older exports.
 */
export function decodeText(data: Uint8Array | string): DecodedText {
  if (typeof data === 'string') return { text: data.startsWith('\uFEFF') ? data.slice(1) : data, encoding: 'utf-8' };
  const marked = markedEncoding(data);
  if (marked !== null) return { text: new TextDecoder(marked).decode(data), encoding: marked };
  try {
    return { text: new TextDecoder('utf-8', { fatal: true }).decode(data), encoding: 'utf-8' };
  } catch {
    return { text: new TextDecoder('windows-1252').decode(data), encoding: 'windows-1252' };
  }
}

function markedEncoding(data: Uint8Array): Encoding | null {
  if (data[0] === 0xff && data[1] === 0xfe) return 'utf-16le';
  if (data[0] === 0xfe && data[1] === 0xff) return 'utf-16be';
  return null;
}

/** Whether a decoded file is no text at all: control characters that no export writes (a workbook, an image). */
export function isBinary(text: string): boolean {
  if (text.includes('\0')) return true;
  const head = Math.min(text.length, 4096);
  for (let i = 0; i < head; i++) {
    const code = text.charCodeAt(i);
    if (code < 9 || (code > 13 && code < 32 && code !== 26)) return true; // 26 ends files of old loggers
  }
  return false;
}
