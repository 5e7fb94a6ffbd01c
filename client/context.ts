import { type ComponentChildren, createContext } from 'preact';
import { useContext } from 'preact/hooks';
import type { ComparisonBody, RecordEntry } from '../server/api.ts';
import type { Opened } from './answers.ts';
import type { StationBody } from './api.ts';
import type { Format } from './format.ts';
import type { CaseWork } from './questions/change/useCase.ts';
import type { Path } from './station.ts';

/** What is open on the page, for all that shows a part of it. */
export interface Page {
  readonly format: Format;
  /** Whether every number shows all its figures. */
  readonly allFigures: boolean;
  readonly printing: boolean;
  readonly dark: boolean;
  /** Prints one sheet of its own instead of the page. */
  readonly printSheet: (kind: SheetKind, content: ComponentChildren) => void;
}

/** What can be printed on a sheet of its own. */
export type SheetKind = 'card' | 'case';

export const PageContext = createContext<Page | null>(null);

export function usePage(): Page {
  const page = useContext(PageContext);
  if (page === null) throw new Error('a part of the page was rendered outside it');
  return page;
}

/** What a question is given. */
export interface QuestionProps {
  readonly open: Opened & { readonly comparison: ComparisonBody };
  readonly record: RecordEntry;
  /** As stored, and as the reader has changed it. */
  readonly saved: StationBody;
  readonly touch: (path: Path, value: number) => void;
  /** Pumps taken out, to see how the others manage. */
  readonly without: readonly string[];
  readonly onWithout: (names: readonly string[]) => void;
  /** The draft the reader is looking at: `open.station` is the one that is computed. */
  readonly draft: StationBody;
  /** The case for a change; null where there is no tariff or nothing to propose. */
  readonly work: CaseWork | null;
}
