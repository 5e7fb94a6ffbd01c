import { createContext } from 'preact';
import { useContext } from 'preact/hooks';
import type { FaultsByPath } from '../faults.ts';
import type { Path } from '../station.ts';

/** The file that is being edited, for every field of its form. */
export interface Editing {
  readonly file: unknown;
  readonly faults: FaultsByPath;
  /** undefined takes the field away. */
  readonly set: (path: Path, value: unknown) => void;
}

export const EditingContext = createContext<Editing | null>(null);

export function useEditing(): Editing {
  const editing = useContext(EditingContext);
  if (editing === null) throw new Error('a field was rendered outside a form');
  return editing;
}
