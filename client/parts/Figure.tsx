import { usePage } from '../context.ts';
import type { Measure } from '../format.ts';

interface FigureProps {
  readonly of: Measure;
  readonly value: number | null | undefined;
  /** Leaves the unit out: the head of the column has it. */
  readonly bare?: boolean;
}

/** A number: three figures, all of them on hover. */
export function Figure({ of, value, bare = false }: FigureProps) {
  const { format, allFigures } = usePage();
  const shown = bare ? format.bare(of, value) : format.with(of, value);
  return (
    <span class="figure" title={shown.full}>
      {allFigures ? shown.full : shown.text}
    </span>
  );
}
