import { useEffect, useState } from 'preact/hooks';
import { usePage } from '../context.ts';
import type { Measure } from '../format.ts';

interface TouchProps {
  readonly label: string;
  readonly measure: Measure;
  /** In the unit of the API per unit of the file. */
  readonly fileFactor: number;
  /** In the unit of the file: as it stands now, and as it is saved. */
  readonly value: number;
  readonly saved: number;
  readonly step?: number;
  readonly least?: number;
  readonly onChange: (value: number) => void;
}

/** Enough figures for any number a person gives, few enough to hide what a conversion adds. */
const FIGURES = 7;

/** A number of the reader's own that can be changed where it is shown; a mark says what is saved until it is kept. */
export function Touch({ label, measure, fileFactor, value, saved, step = 1, least = 0, onChange }: TouchProps) {
  const { format } = usePage();
  const shown = (inFile: number) => String(Number((inFile * fileFactor * measure.factor).toPrecision(FIGURES)));
  const [text, setText] = useState(shown(value));
  const [typed, setTyped] = useState<number | null>(null);
  // Only a change from elsewhere replaces what is being typed.
  useEffect(() => {
    if (typed === null || Math.abs(typed - value) > 1e-9 * Math.abs(value)) setText(shown(value));
  }, [value, measure.unit]);
  const wrong = text.trim() === '' || !(Number(text) >= least);
  const typedIn = (next: string) => {
    setText(next);
    if (next.trim() === '' || !(Number(next) >= least)) return;
    const inFile = format.toApi(measure, Number(next)) / fileFactor;
    setTyped(inFile);
    onChange(inFile);
  };
  const differs = value !== saved;
  return (
    <label class={differs ? 'touch differs' : 'touch'}>
      <span class="label">{label}</span>
      <input
        type="number"
        step={step}
        min={least}
        value={text}
        aria-invalid={wrong}
        onInput={(event) => typedIn(event.currentTarget.value)}
      />
      <span class="unit">{measure.unit}</span>
      {wrong && <span class="fault">a number, {least} or more</span>}
      {differs && !wrong && (
        <span class="was">
          saved: {shown(saved)} {measure.unit}
        </span>
      )}
    </label>
  );
}
