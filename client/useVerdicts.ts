import { useEffect, useState } from 'preact/hooks';
import type { StationEntry } from '../server/api.ts';
import { changeAnswer } from './answers.ts';
import { api } from './api.ts';
import { Format, type UnitChoice } from './format.ts';
import { latestRecord, tariffFor } from './opening.ts';
import { caseFileOf, shortVerdict, startingCase } from './questions/change/caseTerms.ts';

/** Stations beyond this number keep their verdict to themselves until they are opened. */
const MOST = 6;

/**
 * Whether a change is worth it, by station, computed one after the other while the reader looks at something else.
 *
 * @param entries  asked about once each, but for the one that is open, whose verdict the page has anyhow
 * @param ready    false holds the questions back
 */
export function useVerdicts(
  entries: readonly StationEntry[],
  { openId, ready, choice }: { openId: number | null; ready: boolean; choice: UnitChoice },
): ReadonlyMap<number, string> {
  const [verdicts, setVerdicts] = useState<ReadonlyMap<number, string>>(new Map());
  const next = ready
    ? entries.slice(0, MOST).find(({ id, records }) => id !== openId && records > 0 && !verdicts.has(id))
    : undefined;
  useEffect(() => {
    if (next === undefined) return;
    const asking = new AbortController();
    verdictOn(next, choice, asking.signal)
      .catch(() => 'not answered: open it to see why')
      .then((verdict) => {
        if (!asking.signal.aborted) setVerdicts((known) => new Map([...known, [next.id, verdict]]));
      });
    return () => asking.abort();
  }, [next?.id, choice]);
  return verdicts;
}

async function verdictOn(entry: StationEntry, choice: UnitChoice, signal: AbortSignal): Promise<string> {
  const [station, records, tariffs] = await Promise.all([
    api.station(entry.id, signal),
    api.records(entry.id, signal),
    api.tariffs(signal),
  ]);
  const record = latestRecord(records);
  if (record === null) return 'no record yet';
  const tariffId = tariffFor(station, entry, tariffs);
  const tariff = tariffId === null ? null : await api.tariff(tariffId, signal);
  const comparison = await api.compare({ stationId: entry.id, recordId: record.id, tariffId }, signal);
  const { timeZone, currency, units: file } = station;
  const open = { station, comparison, fixedPerMonth: tariff?.fixedPerMonth ?? 0 };
  const start = comparison.inputs.tariff === null ? null : startingCase(station, comparison);
  const terms = start && caseFileOf(start.draft);
  const format = new Format({ file, choice, currency, timeZone });
  if (terms) return shortVerdict(await api.makeCase(comparison.id, terms, signal), format);
  return changeAnswer(open, format);
}
