/** A file without the fields that answers carry beside it, so that what was got can be changed and put back. */
export function ownFields<T>(body: T): T | Record<string, unknown> {
  if (typeof body !== 'object' || body === null || Array.isArray(body)) return body;
  const { id: _id, demo: _demo, ...file } = body as Record<string, unknown>;
  return file;
}
