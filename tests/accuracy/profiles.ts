import { readRecord } from '../../server/ingest/record.ts';
import { halfDigit, type OutsideCheck } from './check.ts';
import { CUBIC_METRES, once } from './stations.ts';

/** Flows of the 24 hours of a day, drawn as a year by the program and read back as the first day's readings [m³/h]. */
const dayOf = (hours: readonly number[]) => once(() => drawn(hours));

function drawn(hours: readonly number[]): number[] {
  const { log } = readRecord({
    fileName: 'profile.json',
    data: JSON.stringify({ format: 'nth-pump/profile/1', year: 2025, flow: { weekday: hours, weekend: hours } }),
    units: CUBIC_METRES,
    timeZone: 'Etc/UTC',
    pumpNames: [],
  });
  const day: number[] = [];
  for (let i = 0; log.startMs[i]! < Date.UTC(2025, 0, 2); i++) {
    // A flow that lasts longer than an hour counts as often.
    for (let h = 0; h < log.seconds[i]! / 3600; h++) day.push(3600 * log.flow![i]!);
  }
  return day;
}

const sum = (day: readonly number[]) => day.reduce((total, flow) => total + flow, 0);

const WELLINGTON =
  'Wellington Water, Wastewater Regional Modelling Specifications, v11 draft, June 2020, appendix F (commit d988411)';
const RESIDENTIAL = dayOf([
  0.25, 0.08, 0.07, 0.08, 0.11, 0.58, 1.63, 2.12, 1.83, 1.68, 1.51, 1.23, 1.14, 1.12, 0.92, 0.95, 1.16, 1.26, 1.44,
  1.16, 1.05, 1.11, 0.96, 0.56,
]);
const COMMERCIAL = dayOf([
  0.31, 0.3, 0.3, 0.3, 0.28, 0.29, 0.33, 0.43, 0.96, 1.42, 1.96, 2.02, 2.1, 2.14, 1.91, 1.69, 1.78, 1.7, 0.99, 0.68,
  0.68, 0.6, 0.45, 0.38,
]);
const ADAMS = 'H. C. Adams, The Sewerage of Sea Coast Towns, table 4 (Project Gutenberg 7980)';
const OF_4000 = dayOf([
  1.3, 0.8, 0, 0, 0, 0, 0.5, 1.5, 2.5, 4.8, 7, 10, 10.3, 6.7, 7, 6.5, 7, 6.3, 4.8, 5.8, 5.5, 4.5, 4, 3.2,
]);
const OF_8000 = dayOf([1.8, 1, 0.3, 0, 0, 0, 0.7, 2, 4, 6, 8, 9, 9.2, 7.3, 6.2, 6.3, 6.2, 6, 5, 5.5, 5, 4.5, 3, 3]);

const exact = { kind: 'published', allowed: 1e-9, why: 'a sum of printed figures, exact but for rounding' } as const;

/** The largest or least sum of so many hours on end, through midnight. */
const block = (day: readonly number[], hours: number, pick: (...sums: number[]) => number) =>
  pick(...day.map((_, i) => sum(Array.from({ length: hours }, (_, k) => day[(i + k) % 24]!))));

const blocks = (
  people: string,
  day: () => readonly number[],
  most: readonly (readonly [number, number])[],
  least: readonly (readonly [number, number])[],
): OutsideCheck[] =>
  (
    [
      ['Most', most, Math.max],
      ['Least', least, Math.min],
    ] as const
  ).flatMap(([word, rows, pick]) =>
    rows.map(
      ([length, printed]): OutsideCheck => ({
        ...exact,
        what: `${word} of a day's flow within ${length === 1 ? 'an hour' : `${length} hours`}, ${people} people`,
        source: ADAMS,
        printed,
        unit: '%',
        ours: () => block(day(), length, pick),
      }),
    ),
  );

/** Days of flow that others have published, put in as profiles. */
export const PROFILES: readonly OutsideCheck[] = [
  {
    ...exact,
    what: 'Sum of the hourly multipliers of a residential day',
    source: WELLINGTON,
    printed: 24,
    unit: '–',
    ours: () => sum(RESIDENTIAL()),
  },
  {
    ...exact,
    what: 'Largest of them',
    source: WELLINGTON,
    printed: 2.12,
    unit: '–',
    ours: () => Math.max(...RESIDENTIAL()),
  },
  {
    ...exact,
    what: 'Least of them',
    source: WELLINGTON,
    printed: 0.07,
    unit: '–',
    ours: () => Math.min(...RESIDENTIAL()),
  },
  {
    ...exact,
    what: 'Sum of the hourly multipliers of a commercial working day',
    source: WELLINGTON,
    printed: 24,
    unit: '–',
    ours: () => sum(COMMERCIAL()),
  },
  ...(
    [
      ['4000', OF_4000, 2.472],
      ['8000', OF_8000, 2.208],
    ] as const
  ).flatMap(([people, day, peak]): OutsideCheck[] => [
    {
      ...exact,
      what: `Sum of the hourly percentages of a day, ${people} people`,
      source: ADAMS,
      printed: 100,
      unit: '%',
      ours: () => sum(day()),
    },
    {
      kind: 'closed form',
      what: `Largest hour over the mean, ${people} people`,
      source: `${ADAMS}; worked by hand`,
      printed: peak,
      unit: '–',
      ours: () => (24 * Math.max(...day())) / sum(day()),
      allowed: halfDigit(3),
      why: 'half of the last digit worked out',
    },
  ]),
  ...blocks(
    '8000',
    OF_8000,
    [
      [12, 79.7],
      [10, 69.2],
      [9, 64.2],
      [8, 58.2],
      [6, 46],
      [3, 26.2],
      [2, 18.2],
      [1, 9.2],
    ],
    [
      [9, 8.8],
      [10, 11.8],
    ],
  ),
  ...blocks(
    '4000',
    OF_4000,
    [
      [12, 81.7],
      [10, 71.4],
      [9, 65.6],
      [8, 60.8],
      [6, 47.5],
      [3, 27.3],
      [2, 20.3],
      [1, 10.3],
    ],
    [
      [9, 6.6],
      [10, 9.8],
    ],
  ),
];
