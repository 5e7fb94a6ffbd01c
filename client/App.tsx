import { useCallback, useEffect, useMemo, useRef, useState } from 'preact/hooks';
import type { RecordEntry, StationEntry, TariffEntry } from '../server/api.ts';
import type { StationFile } from '../server/station/stationFile.ts';
import type { TariffFile } from '../server/tariff/tariffFile.ts';
import { answersOf, QUESTIONS, type QuestionId } from './answers.ts';
import { api, type ComparisonRequest, linesOf, type StationBody, type TariffBody } from './api.ts';
import { PageContext, type QuestionProps } from './context.ts';
import { newStation, newTariff, placeOfReader } from './edit/newFiles.ts';
import { StationEditor } from './edit/StationEditor.tsx';
import { TariffEditor } from './edit/TariffEditor.tsx';
import { Format, UNIT_CHOICES } from './format.ts';
import { useComparison, useMedia, usePrinting, useRemembered, useSheet } from './hooks.ts';
import type { Imported } from './importing.ts';
import { latestRecord, tariffFor } from './opening.ts';
import { AddFiles } from './parts/AddFiles.tsx';
import { AdviceOnly, AllCautions } from './parts/Cautions.tsx';
import { Draft } from './parts/Draft.tsx';
import { Faults } from './parts/Faults.tsx';
import { Header } from './parts/Header.tsx';
import { Rail } from './parts/Rail.tsx';
import { Sheet } from './parts/Sheet.tsx';
import { Stations } from './parts/Stations.tsx';
import { Basis } from './questions/basis/Basis.tsx';
import { Change } from './questions/change/Change.tsx';
import { type CaseDraft, caseAnswer, isPlaceholder, shortVerdict } from './questions/change/caseTerms.ts';
import { useCase } from './questions/change/useCase.ts';
import { Cost } from './questions/cost/Cost.tsx';
import { Which } from './questions/which/Which.tsx';
import { differences, type Path, stationFileOf, withNumber } from './station.ts';
import { useVerdicts } from './useVerdicts.ts';

const QUESTION_PARTS = { which: Which, cost: Cost, change: Change, basis: Basis };

/** A stored station with what goes with it, as the server has it. */
interface Loaded {
  readonly station: StationBody;
  readonly records: readonly RecordEntry[];
  readonly tariffs: readonly TariffEntry[];
}

/** What is being entered or changed, in place of the answers; `stored` is null for a new one. */
type Editing =
  | { readonly what: 'station'; readonly stored: StationBody | null; readonly first: StationFile }
  | { readonly what: 'tariff'; readonly stored: TariffBody | null; readonly first: TariffFile };

/** What to compare with, where the reader has said so. */
interface Choice {
  readonly recordId?: number;
  readonly tariffId?: number | null;
}

/** The whole page: the stations at hand, and the one that is open with its four questions. */
export function App() {
  const [entries, setEntries] = useState<readonly StationEntry[] | null>(null);
  const [openId, setOpenId] = useState<number | null>(stationInAddress());
  const [loaded, setLoaded] = useState<Loaded | null>(null);
  const [choice, setChoice] = useState<Choice>({});
  const [draft, setDraft] = useState<StationBody | null>(null);
  const [cases, setCases] = useState<ReadonlyMap<number, CaseDraft>>(new Map());
  const [without, setWithout] = useState<readonly string[]>([]);
  const [editing, setEditing] = useState<Editing | null>(null);
  const [question, setQuestion] = useState<QuestionId>(questionInAddress());
  const [faults, setFaults] = useState<readonly string[]>([]);
  const [keepFaults, setKeepFaults] = useState<readonly string[]>([]);
  const [revision, setRevision] = useState(0);
  const [units, setUnits] = useRemembered('units', UNIT_CHOICES, 'file');
  const [digits, setDigits] = useRemembered('figures', ['three', 'all'] as const, 'three');
  const printing = usePrinting();
  const { sheet, printSheet } = useSheet();
  const dark = useMedia('(prefers-color-scheme: dark)');
  const narrow = useMedia('(max-width: 48rem)');

  // A revision asks for everything anew.
  useEffect(() => {
    const asking = new AbortController();
    api.stations(asking.signal).then(
      (list) => {
        setEntries(list);
        setOpenId((id) => (list.some((each) => each.id === id) ? id : (list[0]?.id ?? null)));
      },
      (error) => asking.signal.aborted || setFaults(linesOf(error)),
    );
    return () => asking.abort();
  }, [revision]);

  useEffect(() => {
    if (openId === null) return setLoaded(null);
    const asking = new AbortController();
    const { signal } = asking;
    Promise.all([api.station(openId, signal), api.records(openId, signal), api.tariffs(signal)]).then(
      ([station, records, tariffs]) => {
        setLoaded({ station, records, tariffs });
        setFaults([]);
      },
      (error) => signal.aborted || setFaults(linesOf(error)),
    );
    return () => asking.abort();
  }, [openId, revision]);

  const saved = loaded?.station.id === openId ? loaded.station : null;
  const record = loaded?.records.find((each) => each.id === choice.recordId) ?? latestRecord(loaded?.records ?? []);
  const entry = entries?.find((each) => each.id === openId);
  const tariffId =
    choice.tariffId !== undefined ? choice.tariffId : saved && loaded ? tariffFor(saved, entry, loaded.tariffs) : null;
  const tariff = useTariff(tariffId, revision);
  const changes = useMemo(() => (saved && draft ? differences(saved, draft) : []), [saved, draft]);

  const isWhatIf = changes.length > 0 || without.length > 0;

  const request = useMemo<ComparisonRequest | null>(() => {
    if (saved === null || record === null || record.stationId !== saved.id) return null;
    const whatIf = draft && changes.length > 0 ? { station: stationFileOf(draft) } : {};
    const out = without.length > 0 ? { without } : {};
    return { stationId: saved.id, recordId: record.id, tariffId, ...whatIf, ...out };
  }, [saved, record?.id, tariffId, tariff, draft, changes, without]);
  const compared = useComparison(request);

  const format = useMemo(() => (saved ? formatFor(saved, units) : null), [saved, units]);
  const open = useMemo<QuestionProps['open'] | null>(() => {
    const { made } = compared;
    if (made === null || saved === null || made.request.stationId !== saved.id) return null;
    const { comparison, power } = made;
    const fixedPerMonth = tariff?.id === made.request.tariffId ? (tariff?.fixedPerMonth ?? 0) : 0;
    return { station: made.request.station ?? stationFileOf(saved), comparison, power, fixedPerMonth };
  }, [compared.made, saved, tariff]);
  const writeCase = (stationId: number, terms: CaseDraft | null) =>
    setCases((before) => {
      const next = new Map(before);
      if (terms === null) next.delete(stationId);
      else next.set(stationId, terms);
      return next;
    });
  const work = useCase(open, (openId !== null && cases.get(openId)) || null, (draft) => {
    if (openId !== null) writeCase(openId, draft);
  });
  const made = work?.result ?? null;
  const placeholder = work !== null && isPlaceholder(work.draft, work.start);
  const answers = useMemo(() => {
    if (open === null || format === null) return null;
    const all = answersOf(open, format);
    return made ? { ...all, change: caseAnswer(made, format, { placeholder }) } : all;
  }, [open, format, made, placeholder]);
  const others = useVerdicts(entries ?? [], { openId, ready: answers !== null, choice: units });
  const verdicts = useMemo(
    () =>
      answers && openId !== null
        ? new Map([
            ...others,
            [openId, `${isWhatIf ? 'What if: ' : ''}${made && format ? shortVerdict(made, format) : answers.change}`],
          ])
        : others,
    [others, answers, openId, isWhatIf, made, format],
  );

  const openStation = (id: number) => {
    setOpenId(id);
    setChoice({});
    setDraft(null);
    setWithout([]);
    setKeepFaults([]);
    history.replaceState(null, '', `?station=${id}${location.hash}`);
  };
  const imported = ({ station, tariff, record, caseFile }: Imported) => {
    if (station) openStation(station.id);
    const caseOf = station?.id ?? openId;
    if (caseFile && caseOf !== null) {
      writeCase(caseOf, caseFile);
      openQuestion('change');
    }
    setChoice((before) => ({
      ...(station ? {} : before),
      ...(record && { recordId: record.id }),
      ...(tariff && { tariffId: tariff.id }),
    }));
    setRevision((n) => n + 1);
  };
  const touch = useCallback(
    (path: Path, value: number) => setDraft((before) => (saved ? withNumber(before ?? saved, path, value) : before)),
    [saved],
  );
  const keep = async () => {
    if (saved === null || draft === null) return;
    try {
      const station = await api.keepStation(saved.id, stationFileOf(draft));
      setLoaded((before) => before && { ...before, station });
      setDraft(null);
      setKeepFaults([]);
    } catch (error) {
      setKeepFaults(linesOf(error));
    }
  };
  const stored = (what: 'station' | 'tariff', id: number) => {
    setEditing(null);
    if (what === 'station' && id !== openId) openStation(id);
    if (what === 'station') setDraft(null);
    if (what === 'tariff') setChoice((before) => ({ ...before, tariffId: id }));
    setRevision((n) => n + 1);
  };
  const removed = (what: 'station' | 'record' | 'tariff') => {
    if (what !== 'record') setEditing(null);
    if (what === 'station') setOpenId(null);
    setChoice({});
    setRevision((n) => n + 1);
  };
  const heading = useRef<HTMLHeadingElement>(null);
  const openQuestion = (id: QuestionId) => {
    setQuestion(id);
    history.replaceState(null, '', `${location.search}#${id}`);
    requestAnimationFrame(() => heading.current?.focus());
  };

  const page = format && { format, allFigures: digits === 'all', printing, dark, printSheet };
  const shown = printing ? QUESTIONS : QUESTIONS.filter(({ id }) => id === question);
  const questionProps: QuestionProps | null =
    open && saved && record
      ? { open, record, saved, draft: draft ?? saved, touch, without, onWithout: setWithout, work }
      : null;
  return (
    <>
      <a class="skip" href="#answer">
        Skip to the answer
      </a>
      <Header units={units} onUnits={setUnits} digits={digits} onDigits={setDigits} />
      {editing?.what === 'station' && (
        <StationEditor
          stored={editing.stored}
          first={editing.first}
          records={editing.stored ? (loaded?.records ?? []) : []}
          onSaved={({ id }) => stored('station', id)}
          onLeave={() => setEditing(null)}
          onRemoved={removed}
          onFault={(error) => setFaults(linesOf(error))}
        />
      )}
      {editing?.what === 'tariff' && (
        <TariffEditor
          stored={editing.stored}
          first={editing.first}
          onSaved={({ id }) => stored('tariff', id)}
          onLeave={() => setEditing(null)}
          onRemoved={() => removed('tariff')}
          onFault={(error) => setFaults(linesOf(error))}
        />
      )}
      {!editing && entries && entries.length > 0 && (
        <Stations entries={entries} openId={openId} verdicts={verdicts} folded={narrow} onOpen={openStation} />
      )}
      {!editing && (
        <AddFiles open={saved} onImported={imported} first={entries?.length === 0}>
          <button
            type="button"
            onClick={() => setEditing({ what: 'station', stored: null, first: newStation(placeOfReader()) })}
          >
            Enter a station
          </button>
        </AddFiles>
      )}
      <Faults lines={faults} />
      {!editing && saved && loaded && (
        <section class="subject" aria-label="Station">
          <h1>{saved.name}</h1>
          <p class="with">
            <Choose
              label="Record"
              value={record?.id ?? null}
              options={loaded.records.map(({ id, name }) => ({ id, name }))}
              none={loaded.records.length === 0 ? 'none yet: add a CSV file' : null}
              onChoose={(id) => setChoice((before) => ({ ...before, ...(id !== null && { recordId: id }) }))}
            />
            <Choose
              label="Tariff"
              value={tariffId}
              options={loaded.tariffs.map(({ id, name, currency }) => ({ id, name: `${name} (${currency})` }))}
              none="none: energy only"
              onChoose={(id) => setChoice((before) => ({ ...before, tariffId: id }))}
            />
            <span class="no-print edits">
              <button
                type="button"
                class="quiet"
                onClick={() => setEditing({ what: 'station', stored: saved, first: stationFileOf(draft ?? saved) })}
              >
                Edit the station
              </button>
              {tariff && (
                <button
                  type="button"
                  class="quiet"
                  onClick={() => setEditing({ what: 'tariff', stored: tariff, first: stationFileOf(tariff) })}
                >
                  Edit the tariff
                </button>
              )}
              <button
                type="button"
                class="quiet"
                onClick={() => setEditing({ what: 'tariff', stored: null, first: newTariff(saved, saved.currency) })}
              >
                Enter a tariff
              </button>
            </span>
          </p>
          {format && (
            <Draft
              saved={saved}
              format={format}
              changes={changes}
              onKeep={keep}
              without={without}
              onDrop={() => {
                setDraft(null);
                setWithout([]);
              }}
              faults={keepFaults}
            />
          )}
          {compared.faults.length > 0 && (
            <ul class="faults" role="alert">
              {compared.faults.map((line) => (
                <li key={line}>{line}</li>
              ))}
            </ul>
          )}
        </section>
      )}
      {!editing && saved && record && (
        <div class="columns">
          <Rail answers={answers} current={question} busy={compared.busy} onOpen={openQuestion} />
          <main id="answer" tabIndex={-1} aria-busy={compared.busy} class={compared.busy && open ? 'stale' : undefined}>
            {page && questionProps ? (
              <PageContext.Provider value={page}>
                {shown.map(({ id, title }) => {
                  const Part = QUESTION_PARTS[id];
                  return (
                    <section key={`${id} ${saved.id}`} class={`question-open ${id}`} aria-labelledby={`${id}-title`}>
                      <h2 id={`${id}-title`} tabIndex={-1} ref={id === question ? heading : null}>
                        {title}
                      </h2>
                      <Part {...questionProps} />
                    </section>
                  );
                })}
                {printing && <AllCautions />}
              </PageContext.Provider>
            ) : (
              compared.busy && <p role="status">Comparing the rules over the record…</p>
            )}
          </main>
        </div>
      )}
      <footer>
        <AdviceOnly />
      </footer>
      {sheet && page && (
        <PageContext.Provider value={page}>
          <Sheet kind={sheet.kind} answers={answers}>
            {sheet.content}
          </Sheet>
        </PageContext.Provider>
      )}
    </>
  );
}

function useTariff(id: number | null, revision: number): TariffBody | null {
  const [tariff, setTariff] = useState<TariffBody | null>(null);
  useEffect(() => {
    if (id === null) return setTariff(null);
    const asking = new AbortController();
    // Without it the figures per year lack the fixed charge alone; the comparison itself says if the tariff is gone.
    api.tariff(id, asking.signal).then(setTariff, () => asking.signal.aborted || setTariff(null));
    return () => asking.abort();
  }, [id, revision]);
  return tariff;
}

interface ChooseProps {
  readonly label: string;
  readonly value: number | null;
  readonly options: readonly { readonly id: number; readonly name: string }[];
  /** What no choice is called; null where one must be made. */
  readonly none: string | null;
  readonly onChoose: (id: number | null) => void;
}

function Choose({ label, value, options, none, onChoose }: ChooseProps) {
  return (
    <label>
      <span class="label">{label}</span>
      <select
        value={value ?? ''}
        onChange={(event) => onChoose(event.currentTarget.value === '' ? null : Number(event.currentTarget.value))}
      >
        {none !== null && <option value="">{none}</option>}
        {options.map(({ id, name }) => (
          <option key={id} value={id}>
            {name}
          </option>
        ))}
      </select>
    </label>
  );
}

function formatFor({ units, currency, timeZone }: StationBody, choice: (typeof UNIT_CHOICES)[number]): Format {
  return new Format({ file: units, choice, currency, timeZone });
}

function stationInAddress(): number | null {
  const id = new URLSearchParams(location.search).get('station');
  return id !== null && /^\d+$/.test(id) ? Number(id) : null;
}

function questionInAddress(): QuestionId {
  return QUESTIONS.find(({ id }) => `#${id}` === location.hash)?.id ?? 'which';
}
