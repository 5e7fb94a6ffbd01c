import { type ComponentChildren, options } from 'preact';
import { useCallback, useEffect, useState } from 'preact/hooks';
import type { ComparisonBody } from '../server/api.ts';
import type { PowerOverFlow } from '../server/staging/pictures.ts';
import { api, type ComparisonRequest, linesOf } from './api.ts';
import type { SheetKind } from './context.ts';

/** What the server made of a request, and whether it is still at work on a newer one. */
export interface Compared {
  readonly made: {
    readonly request: ComparisonRequest;
    readonly comparison: ComparisonBody;
    readonly power: PowerOverFlow;
  } | null;
  readonly busy: boolean;
  readonly faults: readonly string[];
}

/** A person who types is let finish before the server is asked. */
const SETTLE_MS = 250;

/**
 * The comparison for a request, with its picture, so that table and curves change together. What was made before stays
 * until the next is there; answers that come too late are dropped.
 *
 * @param request  its identity says whether it is a new one; null asks for nothing
 */
export function useComparison(request: ComparisonRequest | null): Compared {
  const [state, setState] = useState<Compared>({ made: null, busy: false, faults: [] });
  useEffect(() => {
    if (request === null) {
      setState({ made: null, busy: false, faults: [] });
      return;
    }
    const asking = new AbortController();
    const ask = async () => {
      try {
        const comparison = await api.compare(request, asking.signal);
        const power = await api.powerOverFlow(comparison.id, asking.signal);
        setState({ made: { request, comparison, power }, busy: false, faults: [] });
      } catch (error) {
        if (!asking.signal.aborted) setState(({ made }) => ({ made, busy: false, faults: linesOf(error) }));
      }
    };
    setState(({ made }) => ({
      made: made?.request.stationId === request.stationId ? made : null,
      busy: true,
      faults: [],
    }));
    const timer = setTimeout(ask, request.station ? SETTLE_MS : 0);
    return () => {
      clearTimeout(timer);
      asking.abort();
    };
  }, [request]);
  return state;
}

/** Whether the page is being printed. While it is, the root bears `data-printing` and everything is drawn for paper. */
export function usePrinting(): boolean {
  const [printing, setPrinting] = useState(false);
  useEffect(() => {
    const turn = (on: boolean) => () => {
      const root = document.documentElement;
      root.toggleAttribute('data-printing', on);
      // A sheet of its own is printed as it stands; the page behind it need not be drawn for paper.
      if (!on || !root.hasAttribute('data-sheet')) atOnce(() => setPrinting(on));
    };
    const [before, after] = [turn(true), turn(false)];
    addEventListener('beforeprint', before);
    addEventListener('afterprint', after);
    return () => {
      removeEventListener('beforeprint', before);
      removeEventListener('afterprint', after);
    };
  }, []);
  return printing;
}

/** Renders within the call: the browser lays out the paper as soon as `beforeprint` returns. */
function atOnce(change: () => void): void {
  const waiting = options.debounceRendering;
  options.debounceRendering = (render) => render();
  change();
  if (waiting) options.debounceRendering = waiting;
  else delete options.debounceRendering;
}

/** A sheet that is printed by itself: it is rendered, printed, and gone when the browser has done with it. */
export function useSheet(): {
  readonly sheet: { readonly kind: SheetKind; readonly content: ComponentChildren } | null;
  readonly printSheet: (kind: SheetKind, content: ComponentChildren) => void;
} {
  const [sheet, setSheet] = useState<{ kind: SheetKind; content: ComponentChildren } | null>(null);
  useEffect(() => {
    if (sheet === null) return;
    const root = document.documentElement;
    const done = () => setSheet(null);
    root.setAttribute('data-sheet', sheet.kind);
    addEventListener('afterprint', done);
    print();
    return () => {
      root.removeAttribute('data-sheet');
      removeEventListener('afterprint', done);
    };
  }, [sheet]);
  const printSheet = useCallback((kind: SheetKind, content: ComponentChildren) => setSheet({ kind, content }), []);
  return { sheet, printSheet };
}

/** Whether a media query holds, followed as it changes. */
export function useMedia(text: string): boolean {
  const [query] = useState(() => matchMedia(text));
  const [holds, setHolds] = useState(query.matches);
  useEffect(() => {
    const changed = () => setHolds(query.matches);
    query.addEventListener('change', changed);
    return () => query.removeEventListener('change', changed);
  }, [query]);
  return holds;
}

/** A choice that this browser remembers. */
export function useRemembered<T extends string>(key: string, known: readonly T[], first: T): [T, (value: T) => void] {
  const [value, setValue] = useState<T>(() => {
    const kept = localStorage.getItem(`nth-pump.${key}`);
    return known.find((each) => each === kept) ?? first;
  });
  const keep = (next: T) => {
    localStorage.setItem(`nth-pump.${key}`, next);
    setValue(next);
  };
  return [value, keep];
}
