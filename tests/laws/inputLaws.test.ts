import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { readCase } from '../../server/economics/caseFile.ts';
import { InputError } from '../../server/errors.ts';
import { readRecord } from '../../server/ingest/record.ts';
import { parseJson } from '../../server/readFile.ts';
import { compareRules } from '../../server/staging/compare.ts';
import { readStation } from '../../server/station/readStation.ts';
import { stationFacts } from '../../server/stationFacts.ts';
import { planBill } from '../../server/tariff/plan.ts';
import { readTariff } from '../../server/tariff/tariffFile.ts';
import { aRecordCsv, aStationFile } from '../support/aStation.ts';
import { flowLog } from '../support/comparing.ts';
import { ENDURE, madeStation } from '../support/madeStations.ts';
import { aTariffFile } from '../support/tariffs.ts';

/** Whatever a person sends, what comes back is a result or a list of what to mend; anything else thrown is our bug. */

const RUNS = ENDURE ? 20 : 1;

/** Calls; an InputError with faults that say where and what is an answer too. */
function answered<T>(call: () => T): T | null {
  try {
    return call();
  } catch (error) {
    if (!(error instanceof InputError)) throw error;
    expect(error.faults.length).toBeGreaterThan(0);
    for (const { code, file, found, wanted } of error.faults) {
      for (const text of [code, file, found, wanted]) expect(text).not.toBe('');
    }
    return null;
  }
}

/** What may stand where something else was meant. */
const junk = fc.oneof(
  fc.constantFrom(null, undefined, true, '', 'x', '1', 0, -0, -1, 1e308, 1e-308, 5e-324, [], {}, [[]], 'constructor'),
  fc.double(),
  fc.integer({ min: -3, max: 100 }),
  fc.jsonValue(),
);

type Path = readonly (string | number)[];

function paths(node: unknown, at: Path = []): Path[] {
  if (typeof node !== 'object' || node === null) return [at];
  return [at, ...Object.entries(node).flatMap(([key, inner]) => paths(inner, [...at, key]))];
}

/** A copy with something else at a path; undefined leaves it out. */
function replaced(node: unknown, path: Path, value: unknown): unknown {
  const [key, ...rest] = path;
  if (key === undefined) return value;
  const copy = (Array.isArray(node) ? [...node] : { ...(node as object) }) as Record<string | number, unknown>;
  const inner = replaced(copy[key], rest, value);
  if (inner === undefined && !Array.isArray(copy)) delete copy[key];
  else copy[key] = inner;
  return copy;
}

/** A sound file with one to three things in it replaced by junk. */
function spoilt(files: readonly unknown[]): fc.Arbitrary<unknown> {
  const change = fc.tuple(fc.nat(), junk);
  return fc.tuple(fc.constantFrom(...files), fc.array(change, { minLength: 1, maxLength: 3 })).map(([file, changes]) =>
    changes.reduce((spoiling, [which, value]) => {
      const all = paths(spoiling);
      return replaced(spoiling, all[which % all.length]!, value);
    }, file),
  );
}

const stations = [
  aStationFile({
    allowable: { from: 0.5, to: 1.3 },
    storage: {
      activeVolume: 5,
      points: [
        { level: 0, volume: 0 },
        { level: 2, volume: 20 },
      ],
      levels: [{ start: 1.5, stop: 0.5 }],
    },
  }),
  aStationFile({
    system: { staticHead: 5, friction: { pipes: [{ length: 300, diameter: 300, roughness: 0.1, minorLoss: 3 }] } },
  }),
  ...[0, 1, 2, 3].map((seed) => madeStation(seed, { most: 3 })),
  ...[4, 6].map((seed) => madeStation(seed, { mixed: true, most: 3 })),
];
const tariffs = [
  aTariffFile(),
  aTariffFile({
    seasons: [
      { name: 'winter', from: '11-01', to: '02-28' },
      { name: 'rest', from: '03-01', to: '10-31' },
    ],
    holidays: { dates: ['2025-12-25'], as: 'sun' },
    energy: [
      { name: 'peak', season: 'winter', days: ['mon'], from: '17:00', to: '19:00', rate: 0.3 },
      { name: 'rest', rate: 0.2 },
    ],
    demand: [{ name: 'd', rate: 5, ratchet: { fraction: 0.8, months: 11 }, history: [{ month: '2024-12', kw: 41 }] }],
    fixedPerMonth: 45,
    taxPercent: 9,
  }),
];
const terms = {
  format: 'nth-pump/case/1',
  baseline: 'fixed-speed',
  proposed: 'best-count',
  capital: 100,
  years: 10,
  discountRate: 0.05,
  options: [{ name: 'a', rule: 'one-trimmed', capital: 3 }],
  uncertainty: {
    seed: 1,
    samples: 200,
    pumpGrade: '2B',
    flowMeterPercent: 3,
    frictionPercent: 15,
    energyPricePercent: 10,
  },
};
const profile = {
  format: 'nth-pump/profile/1',
  year: 2025,
  flow: { weekday: new Array(24).fill(20), weekend: new Array(24).fill(10), holiday: new Array(24).fill(5) },
  holidays: ['2025-12-25'],
  seasons: [{ name: 'wet', from: '11-01', to: '02-28', factor: 1.4 }],
};

const reading = (data: string | Uint8Array, fileName = 'record.csv') =>
  readRecord({
    fileName,
    data,
    units: { flow: 'L/s', head: 'm', power: 'kW' },
    timeZone: 'Europe/Dublin',
    pumpNames: ['P-1', 'P-2'],
  });

describe('a file that is not sound', () => {
  it('of a station is refused, or worked with to the end', () => {
    fc.assert(
      fc.property(spoilt(stations), fc.double({ min: 0, max: 1, noNaN: true }), (file, share) => {
        const station = answered(() => readStation(file, 'station.json'));
        if (!station) return;
        answered(() => stationFacts(station));
        const flows = [0, 1e-9, 0.03 * share, 0.1, 30];
        const made = answered(() => compareRules({ station, log: flowLog(flows), tariff: null }));
        for (const { rule, totals } of made?.runs ?? []) {
          expect(Number.isFinite(totals.energyKwh), `${rule.id}: ${totals.energyKwh} kWh`).toBe(true);
        }
      }),
      { seed: 5, numRuns: 150 * RUNS },
    );
  });

  it('of a tariff is refused, or bills', () => {
    const { startMs, seconds } = flowLog([1, 2, 3]);
    fc.assert(
      fc.property(spoilt(tariffs), (file) => {
        const tariff = answered(() => readTariff(file, 'tariff.json'));
        if (tariff) answered(() => planBill(tariff, startMs, seconds));
      }),
      { seed: 5, numRuns: 600 * RUNS },
    );
  });

  it('of a case is refused, or read', () => {
    fc.assert(
      fc.property(spoilt([terms]), (file) => {
        answered(() => readCase(file, 'case.json'));
      }),
      { seed: 5, numRuns: 600 * RUNS },
    );
  });

  it('of a profile is refused, or laid over its year', () => {
    fc.assert(
      fc.property(spoilt([profile]), (file) => {
        answered(() => reading(JSON.stringify(file) ?? '', 'profile.json'));
      }),
      { seed: 5, numRuns: 60 * RUNS },
    );
  });

  it('of any JSON value or text is refused or read', () => {
    fc.assert(
      fc.property(fc.anything(), fc.string(), (value, text) => {
        answered(() => readStation(value, 'station.json'));
        answered(() => readTariff(value, 'tariff.json'));
        answered(() => readCase(value, 'case.json'));
        answered(() => parseJson(text, 'station.json'));
      }),
      { seed: 5, numRuns: 500 * RUNS },
    );
  });
});

describe('a record', () => {
  it('of any bytes is refused or read', () => {
    const bytes = fc.oneof(
      fc.uint8Array({ maxLength: 300 }),
      fc.string({ unit: 'binary', maxLength: 200 }).map((text) => new TextEncoder().encode(text)),
      fc.uint8Array({ maxLength: 60 }).map((tail) => Uint8Array.from([0xef, 0xbb, 0xbf, ...tail])),
    );
    fc.assert(
      fc.property(bytes, (data) => {
        answered(() => reading(data));
      }),
      { seed: 5, numRuns: 600 * RUNS },
    );
  });

  it('that was sound but for a few cells, lines or bytes is refused or read', () => {
    const lines = aRecordCsv().split('\n');
    const cell = fc.constantFrom(
      '',
      '-',
      'NaN',
      '1e400',
      '1,5',
      '12:00',
      '2025-13-45T99:99Z',
      '"',
      '""',
      'a;b',
      '\t',
      '﻿',
      '0x10',
    );
    const change = fc.record({ line: fc.nat(), column: fc.nat(3), cell, drop: fc.boolean() });
    fc.assert(
      fc.property(
        fc.array(change, { minLength: 1, maxLength: 5 }),
        fc.constantFrom('\n', '\r\n', '\r'),
        (changes, end) => {
          const spoiling = [...lines];
          for (const { line, column, cell: text, drop } of changes) {
            const at = line % spoiling.length;
            const cells = (spoiling[at] ?? '').split(',');
            cells[column] = text;
            if (drop) spoiling.splice(at, 1);
            else spoiling[at] = cells.join(',');
          }
          const read = answered(() => reading(spoiling.join(end)));
          for (const flow of read?.log.flow ?? []) expect(flow >= 0 || Number.isNaN(flow)).toBe(true);
        },
      ),
      { seed: 5, numRuns: 400 * RUNS },
    );
  });
});
