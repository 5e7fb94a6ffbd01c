import { useEffect, useMemo, useState } from 'preact/hooks';
import { readCase } from '../../../server/economics/caseFile.ts';
import type { CaseResult } from '../../../server/makeCase.ts';
import type { Opened } from '../../answers.ts';
import { api, linesOf } from '../../api.ts';
import { type FaultsByPath, faultsOf } from '../../faults.ts';
import { type CaseDraft, type CaseStart, caseFileOf, startingCase } from './caseTerms.ts';

/** The case for a change of the open station, as it is written and as the server answers it. */
export interface CaseWork {
  readonly start: CaseStart;
  readonly draft: CaseDraft;
  readonly write: (draft: CaseDraft) => void;
  /** Back to what the program begins with. */
  readonly reset: () => void;
  readonly result: CaseResult | null;
  readonly busy: boolean;
  readonly faults: FaultsByPath;
  /** What the server says that belongs to no field. */
  readonly lines: readonly string[];
}

/** A person who types is let finish before the server is asked. */
const SETTLE_MS = 250;

/**
 * @param open     null where nothing is compared yet
 * @param written  the case as the reader has written it; null where they have not
 */
export function useCase(
  open: (Opened & { readonly comparison: { readonly id: number } }) | null,
  written: CaseDraft | null,
  write: (draft: CaseDraft | null) => void,
): CaseWork | null {
  const start = useMemo(
    () => (open && open.comparison.inputs.tariff !== null ? startingCase(open.station, open.comparison) : null),
    [open],
  );
  const draft = written ?? start?.draft ?? null;
  const faults = useMemo(
    () => (draft === null ? new Map<string, string>() : faultsOf(() => readCase(draft, 'case.json'))),
    [draft],
  );
  const id = open?.comparison.id ?? null;
  const [state, setState] = useState<{
    id: number | null;
    result: CaseResult | null;
    busy: boolean;
    lines: readonly string[];
  }>({ id: null, result: null, busy: false, lines: [] });
  useEffect(() => {
    const file = draft === null ? null : caseFileOf(draft);
    if (id === null || file === null || faults.size > 0) {
      setState((before) => ({ ...before, result: before.id === id ? before.result : null, id, busy: false }));
      return;
    }
    const asking = new AbortController();
    setState((before) => ({ id, result: before.result, busy: true, lines: [] }));
    const timer = setTimeout(
      () =>
        api.makeCase(id, file, asking.signal).then(
          (result) => setState({ id, result, busy: false, lines: [] }),
          (error) => asking.signal.aborted || setState({ id, result: null, busy: false, lines: linesOf(error) }),
        ),
      written === null ? 0 : SETTLE_MS,
    );
    return () => {
      clearTimeout(timer);
      asking.abort();
    };
  }, [id, draft, faults]);
  if (start === null || draft === null) return null;
  return { start, draft, write, reset: () => write(null), faults, ...state };
}
