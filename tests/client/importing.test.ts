import { beforeEach, describe, expect, it } from 'vitest';
import { ApiError, problemLines } from '../../client/api.ts';
import { tellFile } from '../../client/files.ts';
import { given, importFiles, type Storing, together } from '../../client/importing.ts';

const STATION = '{"format":"nth-pump/station/1"}';
const TARIFF = '{"format":"nth-pump/tariff/1"}';
const CSV = 'time,flow\n2025-01-01T00:00:00Z,12\n';
const file = (name: string, text: string) => new File([text], name);
const all = (...files: [string, string][]) => Promise.all(files.map(([name, text]) => given(file(name, text))));

describe('telling files apart', () => {
  it.each([
    ['anything.txt', STATION, 'station'],
    ['station.json', TARIFF, 'tariff'],
    ['x', `\uFEFF ${STATION}`, 'station'],
    ['flow.csv', CSV, 'record'],
    ['profile.json', '{"format":"nth-pump/profile/1"}', 'record'],
    ['case.json', '{"format":"nth-pump/case/1"}', 'case'],
  ])('goes by content: %s', (name, text, kind) => {
    expect(tellFile(name, text).kind).toBe(kind);
  });

  it.each([
    ['', 'found an empty file'],
    ['{"format": ', 'found JSON that cannot be read'],
    ['{"name":"x"}', 'a.json format: found no format'],
    ['{"format":"other/1"}', "found 'other/1'"],
  ])('says what was found and wanted: %s', (text, said) => {
    const told = tellFile('a.json', text);
    expect(told).toMatchObject({ kind: 'unknown', line: expect.stringContaining(said) });
    expect(told.kind === 'unknown' && told.line).toContain('; wanted a station, tariff, case or profile');
  });
});

describe('an import', () => {
  let stored: string[];
  let refuse: string | null;
  let storing: Storing;
  const put = (what: string) => {
    if (refuse === what) throw new ApiError(422, [`${what} has a fault`]);
    stored.push(what);
  };

  beforeEach(() => {
    stored = [];
    refuse = null;
    storing = {
      addStation: async () => {
        put('station');
        return { id: 7 } as Awaited<ReturnType<Storing['addStation']>>;
      },
      removeStation: async () => {
        stored = stored.filter((each) => each !== 'station' && each !== 'record of 7');
        return null;
      },
      addTariff: async () => {
        put('tariff');
        return { id: 8 } as Awaited<ReturnType<Storing['addTariff']>>;
      },
      removeTariff: async () => {
        stored = stored.filter((each) => each !== 'tariff');
        return null;
      },
      addRecord: async (stationId) => {
        put(`record of ${stationId}`);
        return { id: 9 } as Awaited<ReturnType<Storing['addRecord']>>;
      },
    };
  });
  const run = async (files: Parameters<typeof importFiles>[0], openStationId: number | null = null) =>
    importFiles(files, { openStationId, storing, say: () => undefined });

  it('takes files in any order, the station first', async () => {
    const outcome = await run(await all(['r.csv', CSV], ['t.json', TARIFF], ['s.json', STATION]));
    expect(stored).toEqual(['station', 'tariff', 'record of 7']);
    expect(outcome).toMatchObject({
      imported: { station: { id: 7 }, tariff: { id: 8 }, record: { id: 9 } },
      inHand: [],
    });
  });

  it('gives a record alone to the open station, and holds it where there is none', async () => {
    await run(await all(['r.csv', CSV]), 3);
    expect(stored).toEqual(['record of 3']);
    const held = await run(await all(['r.csv', CSV]));
    expect(held.waitsFor).toMatch(/waits for the station/);
    const both = await run(together(held.inHand, await all(['s.json', STATION])));
    expect(both.imported?.record).toEqual({ id: 9 });
    expect(stored).toEqual(['record of 3', 'station', 'record of 7']);
  });

  it.each([
    ['station', 's.json', STATION],
    ['tariff', 't.json', TARIFF],
    ['record of 7', 'r.csv', CSV],
  ])('keeps nothing where the %s has a fault, and takes the mended file with the rest', async (part, name, text) => {
    refuse = part;
    const outcome = await run(await all(['s.json', STATION], ['t.json', TARIFF], ['r.csv', CSV]));
    expect(stored).toEqual([]);
    expect(outcome.imported).toBeNull();
    expect(outcome.inHand.flatMap((each) => each.faults.map((fault) => [each.name, fault]))).toEqual([
      [name, `${part} has a fault`],
    ]);

    refuse = null;
    const again = await run(together(outcome.inHand, await all([name, text])));
    expect(again.inHand).toEqual([]);
    expect(stored).toEqual(['station', 'tariff', 'record of 7']);
  });

  it('refuses two station files at once, and a file that is none of ours', async () => {
    const two = await run(await all(['a.json', STATION], ['b.json', STATION]));
    expect(two.inHand.map(({ faults }) => faults.length)).toEqual([0, 1]);
    const odd = await run(await all(['s.json', STATION], ['x.json', '{}']));
    expect(odd.imported).toBeNull();
    expect(stored).toEqual([]);
  });
});

it('a problem document becomes one line a fault, the file called as its owner calls it', () => {
  const fault = { code: 'unknown_unit', file: 'station.json', at: 'units.flow', found: "'cups'", wanted: 'a unit' };
  expect(problemLines({ faults: [fault] }, 422, 'mine.json')).toEqual([
    "mine.json units.flow: found 'cups'; wanted a unit",
  ]);
  expect(problemLines({ detail: 'no such thing', faults: [] }, 404)).toEqual(['no such thing']);
  expect(problemLines('<html>', 502)).toEqual(['The server answered with status 502 and no reason.']);
});
