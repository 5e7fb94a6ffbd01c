import { createHash } from 'node:crypto';

/** SHA-256 of bytes or text, hexadecimal. */
export function sha256(content: Uint8Array | string): string {
  return createHash('sha256').update(content).digest('hex');
}

/**
 * SHA-256 of what a JSON file says, whatever its spaces and the order of its fields: a file on disk and the same file
 * in the database have one digest.
 */
export function jsonDigest(value: unknown): string {
  return sha256(JSON.stringify(inOrder(value)));
}

function inOrder(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(inOrder);
  if (typeof value !== 'object' || value === null) return value;
  const fields = Object.entries(value).sort(([a], [b]) => (a < b ? -1 : 1));
  return Object.fromEntries(fields.map(([key, inner]) => [key, inOrder(inner)]));
}
