import type { ComponentChildren } from 'preact';
import { useState } from 'preact/hooks';

export interface Column<Row> {
  readonly head: string;
  readonly unit?: string;
  readonly cell: (row: Row) => ComponentChildren;
  /** Left out where the screen is narrow; the row's details then have it. */
  readonly wide?: boolean;
  /** Words, not figures: they begin at the left. */
  readonly words?: boolean;
}

function classOf({ wide, words }: Pick<Column<never>, 'wide' | 'words'>): string | undefined {
  const names = [wide && 'wide', words && 'words'].filter(Boolean).join(' ');
  return names === '' ? undefined : names;
}

interface TableProps<Row> {
  readonly caption: string;
  readonly rows: readonly Row[];
  readonly name: Column<Row>;
  readonly columns: readonly Column<Row>[];
  readonly keyOf: (row: Row) => string;
  /** Marks a row, with a word for those who do not see the mark. */
  readonly mark?: (row: Row) => string | null;
  /** What a row opens into. */
  readonly details?: (row: Row) => ComponentChildren;
  readonly tall?: boolean;
}

/** Rows of numbers under one head; it scrolls within itself where it is too wide or long. */
export function Table<Row>({ caption, rows, name, columns, keyOf, mark, details, tall }: TableProps<Row>) {
  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reached by keyboard
    <section class={tall ? 'scroll tall' : 'scroll'} aria-label={caption} tabIndex={0}>
      <table>
        <caption>{caption}</caption>
        <thead>
          <tr>
            {[name, ...columns].map((column) => (
              <th key={`${column.head} ${column.unit}`} scope="col" class={classOf(column)}>
                {column.head}
                {column.unit && <span class="unit">{column.unit}</span>}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <Row
              key={keyOf(row)}
              row={row}
              name={name}
              columns={columns}
              mark={mark?.(row) ?? null}
              details={details}
            />
          ))}
        </tbody>
      </table>
    </section>
  );
}

interface RowProps<Row> {
  readonly row: Row;
  readonly name: Column<Row>;
  readonly columns: readonly Column<Row>[];
  readonly mark: string | null;
  readonly details: ((row: Row) => ComponentChildren) | undefined;
}

function Row<R>({ row, name, columns, mark, details }: RowProps<R>) {
  const [open, setOpen] = useState(false);
  return (
    <>
      <tr class={mark ? 'marked' : undefined}>
        <th scope="row">
          {details ? (
            <button type="button" class="opens" aria-expanded={open} onClick={() => setOpen(!open)}>
              {name.cell(row)}
            </button>
          ) : (
            name.cell(row)
          )}
          {mark && <span class="mark">{mark}</span>}
        </th>
        {columns.map((column) => (
          <td key={`${column.head} ${column.unit}`} class={classOf(column)}>
            {column.cell(row)}
          </td>
        ))}
      </tr>
      {open && details && (
        <tr class="details">
          <td colSpan={columns.length + 1}>{details(row)}</td>
        </tr>
      )}
    </>
  );
}
