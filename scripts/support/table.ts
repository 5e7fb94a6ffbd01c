/** Rows of text as columns: the first left-aligned, the others right-aligned, two spaces between. */
export function table(rows: readonly (readonly string[])[]): string {
  const widths: number[] = [];
  for (const row of rows) {
    for (const [i, cell] of row.entries()) widths[i] = Math.max(widths[i] ?? 0, cell.length);
  }
  const line = (row: readonly string[]) =>
    row
      .map((cell, i) => (i === 0 ? cell.padEnd(widths[i]!) : cell.padStart(widths[i]!)))
      .join('  ')
      .trimEnd();
  return `${rows.map(line).join('\n')}\n`;
}

/** A number with thousands set apart by a thin space of plain text: 12 345.6 */
export function grouped(value: number, digits = 0): string {
  const [whole = '', fraction] = Math.abs(value).toFixed(digits).split('.');
  const sign = value < 0 && Number(value.toFixed(digits)) !== 0 ? '-' : '';
  const spaced = whole.replace(/\B(?=(\d{3})+(?!\d))/g, ' ');
  return `${sign}${spaced}${fraction === undefined ? '' : `.${fraction}`}`;
}
