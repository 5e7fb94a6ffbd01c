import { useEffect, useState } from 'preact/hooks';
import { ChoiceField, NumberField, TextField } from '../parts/Field.tsx';
import type { Path } from '../station.ts';
import { useEditing } from './context.ts';
import { pathText, valueAt } from './paths.ts';

interface AtPath {
  readonly path: Path;
  readonly label: string;
  readonly hint?: string | undefined;
}

/** A number of the file; an empty field is left out of the file. */
export function NumberAt({
  path,
  label,
  unit,
  scale,
  hint,
}: AtPath & { readonly unit?: string; readonly scale?: number }) {
  const { file, faults, set } = useEditing();
  const value = valueAt(file, path);
  return (
    <NumberField
      label={label}
      unit={unit}
      {...(scale !== undefined && { scale })}
      value={typeof value === 'number' ? value : null}
      onChange={(next) => set(path, next ?? undefined)}
      fault={faults.get(pathText(path))}
      hint={hint}
    />
  );
}

export function TextAt({ path, label, hint, known }: AtPath & { readonly known?: readonly string[] }) {
  const { file, faults, set } = useEditing();
  const value = valueAt(file, path);
  return (
    <TextField
      label={label}
      value={typeof value === 'string' ? value : ''}
      onChange={(next) => set(path, next === '' ? undefined : next)}
      fault={faults.get(pathText(path))}
      hint={hint}
      {...(known && { known })}
    />
  );
}

export function ChoiceAt<T extends string>({
  path,
  label,
  options,
  hint,
  otherwise,
}: AtPath & { readonly options: readonly { readonly value: T; readonly name: string }[]; readonly otherwise?: T }) {
  const { file, faults, set } = useEditing();
  return (
    <ChoiceField
      label={label}
      value={(valueAt(file, path) ?? otherwise ?? options[0]!.value) as T}
      options={options}
      onChange={(next) => set(path, next)}
      fault={faults.get(pathText(path))}
      hint={hint}
    />
  );
}

/** A column of a table of entries. */
export interface RowColumn {
  readonly path: Path;
  readonly head: string;
  readonly unit?: string;
  /** A number shown times `scale`, or text; `read` and `write` turn anything else into text and back. */
  readonly kind: 'number' | 'text';
  readonly scale?: number;
  readonly read?: (value: unknown) => string;
  readonly write?: (text: string) => unknown;
  readonly known?: readonly string[];
}

interface RowsAtProps {
  readonly path: Path;
  readonly caption: string;
  readonly columns: readonly RowColumn[];
  /** What a new row holds. */
  readonly blank: (rows: readonly unknown[]) => unknown;
  readonly least?: number;
  readonly most?: number;
}

/** A list of the file as a table of inputs, with rows to add and to take away. */
export function RowsAt({ path, caption, columns, blank, least = 0, most = 100 }: RowsAtProps) {
  const { file, faults, set } = useEditing();
  const value = valueAt(file, path);
  const rows = Array.isArray(value) ? (value as unknown[]) : [];
  const own = faults.get(pathText(path));
  const said = rows.flatMap((_, i) =>
    columns.flatMap((column) => {
      const fault = faults.get(pathText([...path, i, ...column.path]));
      return fault === undefined ? [] : [`${column.head}, row ${i + 1}: ${fault}`];
    }),
  );
  const rowFaults = rows.flatMap((_, i) => faults.get(pathText([...path, i])) ?? []);
  return (
    <div class="rows">
      <div class="scroll">
        <table>
          <caption>
            <span class="caption">{caption}</span>
          </caption>
          {rows.length > 0 && (
            <thead>
              <tr>
                {columns.map((column) => (
                  <th key={column.head} scope="col" class="head">
                    {column.head}
                    {column.unit && <span class="unit">{column.unit}</span>}
                  </th>
                ))}
                <td />
              </tr>
            </thead>
          )}
          <tbody>
            {rows.map((_, i) => (
              <tr key={i}>
                {columns.map((column) => (
                  <td key={column.head} class="slot">
                    <Cell
                      path={[...path, i, ...column.path]}
                      column={column}
                      label={`${caption}, row ${i + 1}, ${column.head}`}
                    />
                  </td>
                ))}
                <td>
                  <button
                    type="button"
                    class="quiet"
                    disabled={rows.length <= least}
                    aria-label={`Remove row ${i + 1} of ${caption}`}
                    onClick={() => set([...path, i], undefined)}
                  >
                    Remove
                  </button>
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      {[own, ...rowFaults, ...said].map(
        (line) =>
          line && (
            <p key={line} class="fault">
              {line}
            </p>
          ),
      )}
      <button
        type="button"
        class="quiet"
        disabled={rows.length >= most}
        aria-label={`Add a row to ${caption}`}
        onClick={() => set(path, [...rows, blank(rows)])}
      >
        Add a row
      </button>
      {rows.length > 0 && rows.length <= 1 && least === 0 && (
        <button type="button" class="quiet" aria-label={`Leave out ${caption}`} onClick={() => set(path, undefined)}>
          Leave out
        </button>
      )}
    </div>
  );
}

interface CellProps {
  readonly path: Path;
  readonly column: Omit<RowColumn, 'path'>;
  readonly label: string;
}

/** One input of a table; what is typed stays as typed until the value changes from elsewhere. */
export function Cell({ path, column, label }: CellProps) {
  const { file, faults, set } = useEditing();
  const { kind, scale = 1, known } = column;
  const value = valueAt(file, path);
  const shown =
    kind === 'number' ? numberText(value, scale) : (column.read?.(value) ?? (typeof value === 'string' ? value : ''));
  const [text, setText] = useState(shown);
  const [typed, setTyped] = useState<unknown>(value);
  useEffect(() => {
    if (value !== typed) setText(shown);
  }, [value]);
  const write = (next: string) => {
    setText(next);
    // A place in a list of numbers cannot be left out: it is empty until it is filled.
    const none = typeof path.at(-1) === 'number' ? null : undefined;
    const meant =
      next === '' ? none : kind === 'number' ? Number(next) / scale : column.write ? column.write(next) : next;
    setTyped(meant);
    set(path, meant);
  };
  const common = {
    'aria-label': label,
    'aria-invalid': faults.has(pathText(path)) ? true : undefined,
    value: text,
  } as const;
  if (known) {
    return (
      <select {...common} class="cell choice" onChange={(event) => write(event.currentTarget.value)}>
        {[...new Set([...known, shown])].map((each) => (
          <option key={each} value={each}>
            {each}
          </option>
        ))}
      </select>
    );
  }
  if (kind === 'number') {
    return (
      <input {...common} class="cell" type="number" step="any" onInput={(event) => write(event.currentTarget.value)} />
    );
  }
  return <input {...common} class="cell text" type="text" onInput={(event) => write(event.currentTarget.value)} />;
}

function numberText(value: unknown, scale: number): string {
  return typeof value === 'number' ? String(Number((value * scale).toPrecision(10))) : '';
}
