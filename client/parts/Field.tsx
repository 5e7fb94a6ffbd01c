import { useEffect, useId, useState } from 'preact/hooks';

interface FieldProps {
  readonly label: string;
  readonly unit?: string | undefined;
  /** What is wrong with the value, said where it stands. */
  readonly fault?: string | null | undefined;
  readonly hint?: string | undefined;
}

interface NumberFieldProps extends FieldProps {
  readonly value: number | null | undefined;
  /** null where the field is empty. */
  readonly onChange: (value: number | null) => void;
  /** Shown is the value times this: 100 for percent. */
  readonly scale?: number;
  readonly step?: number | 'any';
}

/** Enough figures for any number a person gives, few enough to hide the dust of a scale. */
const FIGURES = 10;

/** A number with its name, unit and fault. What is typed stays as typed until the value changes from elsewhere. */
export function NumberField({ label, unit, value, onChange, scale = 1, step = 'any', fault, hint }: NumberFieldProps) {
  const id = useId();
  const shown = value == null ? '' : String(Number((value * scale).toPrecision(FIGURES)));
  const [text, setText] = useState(shown);
  const typed = text.trim() === '' ? null : Number(text) / scale;
  useEffect(() => {
    // A field that was emptied to type anew stays empty, though it counts as 0 meanwhile.
    const same = typed === null ? !value : value != null && Math.abs(typed - value) <= 1e-9 * Math.abs(value);
    if (!same) setText(shown);
  }, [value]);
  return (
    <p class={fault ? 'field faulty' : 'field'}>
      <label for={id}>{label}</label>
      <span class="entry">
        <input
          id={id}
          type="number"
          step={step}
          value={text}
          aria-invalid={fault ? true : undefined}
          aria-describedby={fault || hint ? `${id}-says` : undefined}
          onInput={(event) => {
            const next = event.currentTarget.value;
            setText(next);
            onChange(next.trim() === '' ? null : Number(next) / scale);
          }}
        />
        {unit && <span class="unit">{unit}</span>}
      </span>
      <Says id={`${id}-says`} fault={fault} hint={hint} />
    </p>
  );
}

interface TextFieldProps extends FieldProps {
  readonly value: string | undefined;
  readonly onChange: (value: string) => void;
  /** Values to offer while typing. */
  readonly known?: readonly string[];
}

export function TextField({ label, value, onChange, fault, hint, known }: TextFieldProps) {
  const id = useId();
  return (
    <p class={fault ? 'field text faulty' : 'field text'}>
      <label for={id}>{label}</label>
      <span class="entry">
        <input
          id={id}
          type="text"
          value={value ?? ''}
          list={known ? `${id}-known` : undefined}
          aria-invalid={fault ? true : undefined}
          aria-describedby={fault || hint ? `${id}-says` : undefined}
          onInput={(event) => onChange(event.currentTarget.value)}
        />
        {known && (
          <datalist id={`${id}-known`}>
            {known.map((each) => (
              <option key={each} value={each} />
            ))}
          </datalist>
        )}
      </span>
      <Says id={`${id}-says`} fault={fault} hint={hint} />
    </p>
  );
}

interface ChoiceFieldProps<T extends string> extends FieldProps {
  readonly value: T;
  readonly options: readonly { readonly value: T; readonly name: string }[];
  readonly onChange: (value: T) => void;
}

export function ChoiceField<T extends string>({ label, value, options, onChange, fault, hint }: ChoiceFieldProps<T>) {
  const id = useId();
  return (
    <p class={fault ? 'field faulty' : 'field'}>
      <label for={id}>{label}</label>
      <span class="entry">
        <select
          id={id}
          value={value}
          aria-invalid={fault ? true : undefined}
          aria-describedby={fault || hint ? `${id}-says` : undefined}
          onChange={(event) => onChange(event.currentTarget.value as T)}
        >
          {options.map((option) => (
            <option key={option.value} value={option.value}>
              {option.name}
            </option>
          ))}
        </select>
      </span>
      <Says id={`${id}-says`} fault={fault} hint={hint} />
    </p>
  );
}

function Says({
  id,
  fault,
  hint,
}: {
  readonly id: string;
  readonly fault: string | null | undefined;
  readonly hint: string | undefined;
}) {
  if (!fault && !hint) return null;
  return (
    <span id={id} class={fault ? 'fault' : 'aside'}>
      {fault ?? hint}
    </span>
  );
}
