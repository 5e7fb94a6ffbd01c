import type { ComponentChildren } from 'preact';
import { useEffect, useId, useRef, useState } from 'preact/hooks';
import { api } from '../api.ts';
import { type Given, given, type Imported, type ImportOutcome, importFiles, together } from '../importing.ts';

interface AddFilesProps {
  /** The station that is open; records join it. */
  readonly open: { readonly id: number; readonly name: string; readonly demo: boolean } | null;
  readonly onImported: (imported: Imported) => void;
  /** Nothing is stored yet: say what is wanted. */
  readonly first: boolean;
  /** Other ways to begin, beside the files. */
  readonly children?: ComponentChildren;
}

const KIND_NAMES = { station: 'station', tariff: 'tariff', record: 'record', case: 'case', unknown: 'not known' };

/** Takes files dropped anywhere on the page, or picked: station, record and tariff in any order and number. */
export function AddFiles({ open, onImported, first, children }: AddFilesProps) {
  const [inHand, setInHand] = useState<readonly Given[]>([]);
  const [waitsFor, setWaitsFor] = useState<string | null>(null);
  const [doing, setDoing] = useState<string | null>(null);
  const [over, setOver] = useState(false);
  const inputId = useId();
  const working = useRef(false);

  const store = async (files: readonly Given[], openStationId: number | null) => {
    let outcome: ImportOutcome;
    try {
      outcome = await importFiles(files, { openStationId, storing: api, say: setDoing });
    } finally {
      setDoing(null);
    }
    setInHand(outcome.inHand);
    setWaitsFor(outcome.waitsFor);
    if (outcome.imported) onImported(outcome.imported);
  };
  const take = async (list: readonly File[]) => {
    if (list.length === 0 || working.current) return;
    working.current = true;
    try {
      setDoing(`Looking at ${list.length === 1 ? list[0]!.name : `${list.length} files`}…`);
      const all = together(inHand, await Promise.all(list.map(given)));
      // A record never joins a demo station unasked: its owner's station file may be the next to come.
      await store(all, open && !open.demo ? open.id : null);
    } finally {
      working.current = false;
    }
  };

  const taking = useRef(take);
  taking.current = take;
  useEffect(() => {
    const carriesFiles = (event: DragEvent) => event.dataTransfer?.types.includes('Files') ?? false;
    const dragged = (event: DragEvent) => {
      if (!carriesFiles(event)) return;
      event.preventDefault();
      setOver(true);
    };
    const left = (event: DragEvent) => {
      if (event.relatedTarget === null) setOver(false);
    };
    const dropped = (event: DragEvent) => {
      if (!carriesFiles(event)) return;
      event.preventDefault();
      setOver(false);
      void taking.current([...(event.dataTransfer?.files ?? [])]);
    };
    addEventListener('dragover', dragged);
    addEventListener('dragleave', left);
    addEventListener('drop', dropped);
    return () => {
      removeEventListener('dragover', dragged);
      removeEventListener('dragleave', left);
      removeEventListener('drop', dropped);
    };
  }, []);

  const waitingRecord =
    inHand.some((each) => each.told.kind === 'record') && inHand.every((e) => e.faults.length === 0);
  return (
    <section class={`add-files no-print ${first ? 'first' : ''} ${over ? 'over' : ''}`} aria-label="Add files">
      <p>
        {first && (
          <>
            Give your station (JSON), its flow record (CSV) and your tariff (JSON): drop them anywhere on this page, or{' '}
          </>
        )}
        <label for={inputId} class="pick">
          {first ? 'pick the files' : 'Add files'}
        </label>
        <input
          id={inputId}
          class="unseen"
          type="file"
          multiple
          onChange={(event) => {
            const input = event.currentTarget;
            const files = [...(input.files ?? [])];
            void take(files).then(() => {
              input.value = '';
            });
          }}
        />
        {first ? (
          '. They stay on this machine.'
        ) : (
          <span class="aside"> or drop them on the page: station, record, tariff, case</span>
        )}{' '}
        {children}
      </p>
      {first && (
        <p class="aside">
          The station file has the pumps, motors and the system they pump into; the record has times and flows; the
          tariff may be left out, and the answers are then in kWh. The README shows each of them.
        </p>
      )}
      <div role="status">
        {doing && (
          <p>
            {doing} <progress aria-label="Import" />
          </p>
        )}
        {waitsFor && <p>{waitsFor}</p>}
      </div>
      {inHand.length > 0 && (
        <ul class="in-hand">
          {inHand.map((each) => (
            <li key={each.name}>
              <strong>{each.name}</strong> <span class="aside">({KIND_NAMES[each.told.kind]})</span>
              {each.faults.length > 0 && (
                <ul class="faults" role="alert">
                  {each.faults.map((line) => (
                    <li key={line}>{line}</li>
                  ))}
                </ul>
              )}
            </li>
          ))}
        </ul>
      )}
      {inHand.length > 0 && (
        <p>
          {waitingRecord && open?.demo && (
            <button type="button" onClick={() => store(inHand, open.id)}>
              Use the record with {open.name}
            </button>
          )}{' '}
          <button
            type="button"
            class="quiet"
            onClick={() => {
              setInHand([]);
              setWaitsFor(null);
            }}
          >
            Forget these files
          </button>
        </p>
      )}
    </section>
  );
}
