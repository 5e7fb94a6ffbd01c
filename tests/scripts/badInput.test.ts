import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { type Fault, faultLine } from '../../server/errors.ts';
import { rowCounts, type Served, served } from '../http/support.ts';
import { aRecordCsv, aStationFile } from '../support/aStation.ts';
import { aTariffFile } from '../support/tariffs.ts';
import { commandHere } from './support.ts';

/** Files of an auditor, each sound until a case spoils one of them. */
interface Files {
  station: Record<string, unknown>;
  record: string;
  tariff: Record<string, unknown>;
  case: Record<string, unknown>;
}

const sound = (): Files => ({
  station: aStationFile(),
  record: aRecordCsv(),
  tariff: { ...aTariffFile() },
  case: {
    format: 'nth-pump/case/1',
    baseline: 'fixed-speed',
    proposed: 'best-count',
    capital: 20_000,
    years: 15,
    discountRate: 0.05,
  },
});

/** Sets fields by their paths, `pumps[0].curve.shape`; undefined takes one away. */
function put(file: Record<string, unknown>, fields: Readonly<Record<string, unknown>>): Record<string, unknown> {
  for (const [path, value] of Object.entries(fields)) {
    const steps = path.split(/[.[\]]+/).filter((step) => step !== '');
    const last = steps.pop()!;
    let here = file;
    for (const step of steps) {
      here[step] ??= {};
      here = here[step] as Record<string, unknown>;
    }
    if (value === undefined) delete here[last];
    else here[last] = value;
  }
  return file;
}

const station = (fields: Readonly<Record<string, unknown>>) => (files: Files) => void put(files.station, fields);
const tariff = (fields: Readonly<Record<string, unknown>>) => (files: Files) => void put(files.tariff, fields);
const terms = (fields: Readonly<Record<string, unknown>>) => (files: Files) => void put(files.case, fields);
/** Line 2 is the first under the header, at 20 L/s. */
const record = (change: (text: string) => string) => (files: Files) => {
  files.record = change(files.record);
};

const table = (points: readonly (readonly [number, number, number])[]) =>
  points.map(([flow, head, efficiency]) => ({ flow, head, efficiency }));
const SOUND_TABLE = [
  [0, 30, 0],
  [20, 29, 0.5],
  [50, 24, 0.78],
  [80, 12, 0.6],
] as const;
const withRow = (row: number, cells: readonly [number, number, number]) =>
  table(SOUND_TABLE.map((each, i) => (i === row ? cells : each)));

/** What is spoilt, how, and the line that says so: place, what was found, what was wanted. */
const SPOILT: readonly (readonly [string, (files: Files) => void, ...string[]])[] = [
  // A
  [
    'a missing column',
    record((text) => text.replace('time,flow', 'time,fluw')),
    "record.csv line 1: found columns time, fluw; wanted a column 'flow'",
  ],
  [
    'an unknown unit of the station',
    station({ 'units.flow': 'buckets' }),
    'station.json units.flow: found "buckets"; wanted one of "m3/s", "m3/h", "L/s", "ML/d", "gpm", "MGD"',
  ],
  [
    'an unknown unit of a column',
    record((text) => text.replace('flow', 'flow (buckets)')),
    "record.csv line 1: found 'buckets' in column flow (buckets); wanted ",
  ],
  [
    'a rising curve',
    station({ 'pumps[0].curve': { points: withRow(3, [80, 25, 0.6]) } }),
    'station.json pumps[0].curve.points[3].head: found 25 after 24; wanted a head that falls as flow grows',
  ],
  [
    'an efficiency above 1',
    station({ 'pumps[0].curve.bestEfficiency': 1.2 }),
    'station.json pumps[0].curve.bestEfficiency: found 1.2; wanted ',
  ],
  [
    'minSpeed > maxSpeed',
    station({ 'pumps[0].drive': { minSpeed: 1.2, maxSpeed: 0.9, efficiency: 0.97 } }),
    'station.json pumps[0].drive.minSpeed: found 1.2; wanted 1 or less',
    'station.json pumps[0].drive.maxSpeed: found 0.9; wanted 1 or more',
  ],
  [
    'minSpeed above the highest where none is given',
    station({ 'pumps[0].drive.minSpeed': 1.1 }),
    'station.json pumps[0].drive.minSpeed: found 1.1; wanted 1 or less',
  ],
  [
    'a negative flow',
    record((text) => text.replace(',20\n', ',-20\n')),
    "record.csv line 2: found flow '-20'; wanted ",
  ],
  [
    'text in a number',
    record((text) => text.replace(',20\n', ',2O\n')),
    "record.csv line 2: found flow '2O'; wanted a number",
  ],
  [
    'two different values at one instant',
    record((text) => `${text}\n2025-01-06T00:00:00.000Z,21`),
    'record.csv line 49: found flow 21 beside 20 at 2025-01-06T00:00:00Z (first in line 2); wanted one value at one instant',
  ],
  [
    'an unknown zone of the station',
    station({ timeZone: 'Mars/Base' }),
    'station.json timeZone: found "Mars/Base"; wanted a zone',
  ],
  [
    'an unknown zone of the tariff',
    tariff({ timeZone: 'Mars/Base' }),
    'tariff.json timeZone: found "Mars/Base"; wanted a zone',
  ],
  [
    'hours that no rate covers',
    tariff({ energy: [{ name: 'night', from: '23:00', to: '07:00', rate: 0.1 }] }),
    'tariff.json energy: found no rate from 2025-01-06 07:00 (mon); 32 h of the record in all; wanted a rate for every hour',
  ],
  [
    'a file that is not CSV',
    record(() => '\u0000\u0001\u0002PK\u0003\u0004'),
    'record.csv: found bytes that are not text; wanted a CSV text file',
  ],
  ['an empty record', record(() => ''), 'record.csv: found an empty file; wanted a header row and rows'],
  [
    'two faults of one file',
    station({ timeZone: 'Mars/Base', 'pumps[0].curve.bestFlow': 120 }),
    'station.json timeZone: found',
    'station.json pumps[0].curve.bestFlow: found',
  ],
  [
    'a file of another kind',
    station({ format: 'nth-pump/tariff/1' }),
    'station.json format: found "nth-pump/tariff/1"; wanted "nth-pump/station/1"',
  ],
  [
    'a profile that is cut off',
    record(() => '{\n"format": "nth-pump/profile/1",'),
    'record.csv line 2: found text that is not JSON; wanted JSON',
  ],
  // B
  [
    'a start below a stop',
    station({ storage: { area: 5, levels: [{ start: 1, stop: 2 }] } }),
    'station.json storage.levels[0].stop: found 2; wanted below start, 1',
  ],
  [
    'a lag pump that starts below the lead',
    station({
      storage: {
        area: 5,
        levels: [
          { start: 3, stop: 1 },
          { start: 2.5, stop: 1 },
        ],
      },
    }),
    'station.json storage.levels[1].start: found 2.5; wanted not below 3, that of the pump before',
  ],
  [
    'volumes that fall',
    station({
      storage: {
        points: [
          { level: 0, volume: 5 },
          { level: 1, volume: 4 },
        ],
      },
    }),
    'station.json storage.points[1]: found {"level":1,"volume":4}; wanted level and volume above those of the row before',
  ],
  [
    'levels outside the table of volumes',
    station({
      storage: {
        points: [
          { level: 0, volume: 0 },
          { level: 1, volume: 4 },
        ],
        levels: [{ start: 1.5, stop: 0.5 }],
      },
    }),
    'station.json storage.levels[0].start: found 1.5; wanted a level of storage.points, 0 to 1',
  ],
  [
    'a step table that falls',
    station({ 'pumps[0].count': 3, rules: { 'flow-steps': { bringOn: [60, 50], dropOff: [40, 45] } } }),
    'station.json rules.flow-steps.bringOn[1]: found 50 after 60; wanted flows that rise from step to step',
  ],
  [
    'a drop-off above its bring-on',
    station({ rules: { 'flow-steps': { bringOn: [60], dropOff: [70] } } }),
    'station.json rules.flow-steps.dropOff[0]: found 70; wanted less than bringOn[0], 60',
  ],
  [
    'more steps than pumps',
    station({ rules: { 'flow-steps': { bringOn: [60, 70], dropOff: [50, 60] } } }),
    'station.json rules.flow-steps.bringOn: found 2 entries; wanted at most 1 for 2 duty pumps',
  ],
  [
    'an allowable range the wrong way round',
    station({ allowable: { from: 1.2, to: 0.5 } }),
    'station.json allowable: found {"from":1.2,"to":0.5}; wanted from less than to',
  ],
  ['a case with zero years', terms({ years: 0 }), 'case.json years: found 0; wanted 1 or more'],
  ['a case without capital', terms({ capital: undefined }), 'case.json capital: found nothing; wanted a number'],
  ['a rate in percent', terms({ discountRate: 5 }), 'case.json discountRate: found 5; wanted less than 1'],
  [
    'an option naming a rule that is none',
    terms({ options: [{ name: 'x', rule: 'best-cuont' }] }),
    'case.json options[0].rule: found "best-cuont"; wanted one of ',
  ],
  [
    'an option naming a rule the station cannot run',
    terms({ options: [{ name: 'x', rule: 'flow-steps' }] }),
    'case.json options[0].rule: found flow-steps ',
  ],
  [
    'a proposal the station cannot run',
    (files) => {
      station({ 'pumps[0].drive': undefined })(files);
    },
    'case.json proposed: found best-count ',
  ],
  [
    'a ratchet above 1',
    tariff({ demand: [{ name: 'd', rate: 5, ratchet: { fraction: 80, months: 11 } }] }),
    'tariff.json demand[0].ratchet.fraction: found 80; wanted 1 or less',
  ],
  [
    'a history of a month that is none',
    tariff({ demand: [{ name: 'd', rate: 5, history: [{ month: '2024-13', kw: 41 }] }] }),
    'tariff.json demand[0].history[0].month: found "2024-13"; wanted a month such as 2024-12',
  ],
  [
    'a season that is none',
    tariff({ energy: [{ name: 'x', season: 'monsoon', rate: 0.1 }] }),
    'tariff.json energy[0].season: found "monsoon"; wanted ',
  ],
  [
    'holidays of no country',
    tariff({ holidays: { country: 'ZZ' } }),
    'tariff.json holidays.country: found "ZZ"; wanted ',
  ],
  [
    'another currency',
    tariff({ currency: 'USD' }),
    'tariff.json currency: found USD; wanted EUR, the currency of the station',
  ],
  // D
  [
    'no pump on duty',
    station({ 'pumps[0].role': 'standby' }),
    "station.json pumps: found no pump on duty; wanted a pump with role 'duty'",
  ],
  [
    'two pumps of one name',
    station({
      'pumps[1]': {
        name: 'P-1',
        curve: { shutoffHead: 30, shape: 0.003, bestFlow: 50, bestEfficiency: 0.78 },
        motor: { efficiency: 0.9 },
      },
    }),
    'station.json pumps[1].name: found "P-1"; wanted a name that no other pump has',
  ],
  [
    'an order that names no pump',
    station({ order: ['P-1', 'P-3'] }),
    'station.json order[1]: found "P-3"; wanted a duty pump: P-1, P-2',
    'station.json order: found no P-2; wanted every duty pump once',
  ],
  [
    'a pump at its best where it has no head',
    station({ 'pumps[0].curve.bestFlow': 120 }),
    'station.json pumps[0].curve.bestFlow: found 120; wanted less than 100, the flow at which this curve has no head left',
  ],
  [
    'an operating point above the shut-off head',
    station({
      'pumps[0].curve': { shutoffHead: 30, operatingPoint: { flow: 50, head: 31 }, bestFlow: 50, bestEfficiency: 0.78 },
    }),
    'station.json pumps[0].curve.operatingPoint.head: found 31; wanted at most shutoffHead, 30',
  ],
  [
    'a shaft power below that of the water',
    station({
      'pumps[0].curve': { points: SOUND_TABLE.map(([flow, head]) => ({ flow, head, power: flow === 50 ? 5 : 25 })) },
    }),
    'station.json pumps[0].curve.points[2].power: found 5; wanted more than the power of the water',
  ],
  [
    'an efficiency of 0 with flow',
    station({ 'pumps[0].curve': { points: withRow(2, [50, 24, 0]) } }),
    'station.json pumps[0].curve.points[2].efficiency: found 0; wanted more than 0 and at most 1',
  ],
  [
    'flows that do not rise',
    station({ 'pumps[0].curve': { points: withRow(2, [20, 24, 0.78]) } }),
    'station.json pumps[0].curve.points[2].flow: found 20; wanted more than 20',
  ],
  [
    'a curve of three points',
    station({ 'pumps[0].curve': { points: table(SOUND_TABLE).slice(1) } }),
    'station.json pumps[0].curve.points: found ',
  ],
  [
    'friction below the static head',
    station({ 'system.friction': { points: [{ flow: 50, head: 10 }] } }),
    'station.json system.friction.points[0].head: found 10 m; wanted the total head, at least the static head of 12 m',
  ],
  [
    'a negative static head',
    station({ 'system.staticHead': -3 }),
    'station.json system.staticHead: found -3; wanted 0 or more',
  ],
  [
    'a pipe of two kinds of wall',
    station({ 'system.friction': { pipes: [{ length: 100, diameter: 200, roughness: 0.1, hazenWilliamsC: 130 }] } }),
    'station.json system.friction.pipes[0].hazenWilliamsC: found hazenWilliamsC beside roughness; wanted one of the two',
  ],
  [
    'a fitting that no table has',
    station({
      'system.friction': { pipes: [{ length: 100, diameter: 200, roughness: 0.1, fittings: [{ type: 'gizmo' }] }] },
    }),
    'station.json system.friction.pipes[0].fittings[0].type: found "gizmo"; wanted one of ',
  ],
  [
    'a motor that no table has',
    station({ 'pumps[0].motor.efficiency': 'IE9' }),
    'station.json pumps[0].motor.efficiency: found "IE9"; wanted ',
  ],
  [
    'a table over load without a rating',
    station({
      'pumps[0].motor': {
        efficiency: [
          { load: 0.5, efficiency: 0.9 },
          { load: 1, efficiency: 0.92 },
        ],
      },
    }),
    'station.json pumps[0].motor.efficiency: found a table over load, with no motor.ratedPower; wanted motor.ratedPower',
  ],
  [
    'an area beside a table of volumes',
    station({
      storage: {
        area: 5,
        points: [
          { level: 0, volume: 0 },
          { level: 1, volume: 4 },
        ],
      },
    }),
    'station.json storage.area: found area beside points; wanted one of the two',
  ],
  [
    'a field that the format does not have',
    station({ 'system.statickHead': 3 }),
    "station.json system.statickHead: found a field 'statickHead'; wanted only fields that the format has",
  ],
  [
    'a static head that turns negative with the level',
    (files) => {
      station({ 'system.suctionLevel': undefined, 'system.dischargeLevel': 5 })(files);
      files.record = files.record.replaceAll('\n', ',4\n').replace('time,flow,4', 'time,flow,level').replace(/$/, ',6');
    },
    'record.csv 2025-01-07T23:00:00Z: found a static head of -1.00 m; wanted 0 or more: water would run by itself',
  ],
  [
    'a record with levels and no run states',
    record((text) => text.replace('flow', 'level')),
    'record.csv line 1: found ',
  ],
  [
    'a date that does not exist',
    record((text) => text.replace('2025-01-06T01:00:00.000Z', '2025-02-30T01:00:00Z')),
    'record.csv line 3: found ',
  ],
  [
    'a row with too many cells',
    record((text) => text.replace(',20\n', ',20,7\n')),
    'record.csv line 2: found 3 cells; wanted 2, as in the header',
  ],
  ['steps of more than a day', record(() => 'time,flow\n2025-01-01,5\n2025-01-08,6\n2025-01-15,7'), 'record.csv line '],
];

const CASES = SPOILT.map(([what, change, ...lines]) => ({ what, change, lines }));

let folder: string;
let api: Served;
beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'nth-pump-bad-'));
  api = served();
});
afterAll(() => {
  rmSync(folder, { recursive: true });
  expect(api.bugs).toEqual([]);
});

function spoilt(change: (files: Files) => void): Files {
  const files = sound();
  change(files);
  return files;
}

const startsWith = (lines: readonly string[]) =>
  lines.map((line) => expect.stringMatching(new RegExp(`^${line.replace(/[.*+?^${}()|[\]\\]/g, '\\$&')}`)));

/** Over HTTP a stored file that does not go with another has no name any more but what it is: `tariff`. */
const APART = new Set([
  'hours that no rate covers',
  'another currency',
  'a static head that turns negative with the level',
]);

it('the files are sound before they are spoilt', async () => {
  expect(await inTerminal(sound(), 'compare')).toMatchObject({ code: 0 });
  expect(await inTerminal(sound(), 'case')).toMatchObject({ code: 0 });
  expect((await overHttp(sound())).status).toBe(200);
});

async function inTerminal(files: Files, command: 'compare' | 'case') {
  const path = (name: string, text: string) => {
    writeFileSync(join(folder, name), text);
    return join(folder, name);
  };
  return commandHere(command, [
    ...['--station', path('station.json', JSON.stringify(files.station))],
    ...['--record', path('record.csv', files.record)],
    ...['--tariff', path('tariff.json', JSON.stringify(files.tariff))],
    ...(command === 'case' ? ['--case', path('case.json', JSON.stringify(files.case))] : []),
  ]);
}

/** Sends the files one after another, then asks for the case: the first answer that is no success, or the last. */
async function overHttp(files: Files) {
  const { http, db } = api;
  let before = rowCounts(db);
  const send = async (path: string, type: string, body: string) => {
    before = rowCounts(db);
    return http.post(path).set('Content-Type', type).send(body);
  };
  const json = 'application/json';
  const made = await send('/api/stations', json, JSON.stringify(files.station));
  if (made.status !== 201) return { ...told(made), before };
  const stationId = made.body.id;
  const imported = await send(`/api/stations/${stationId}/records`, 'text/csv', files.record);
  if (imported.status !== 201) return { ...told(imported), before };
  const priced = await send('/api/tariffs', json, JSON.stringify(files.tariff));
  if (priced.status !== 201) return { ...told(priced), before };
  const ids = { stationId, recordId: imported.body.id, tariffId: priced.body.id };
  return { ...told(await send('/api/cases', json, JSON.stringify({ ...ids, case: files.case }))), before };
}

function told({ status, type, body }: { status: number; type: string; body: { faults?: readonly Fault[] } }) {
  return { status, type, lines: (body.faults ?? []).map(faultLine) };
}

it.each(CASES)('$what: a line each in the terminal, with exit code 2', async ({ change, lines }) => {
  const ended = await inTerminal(spoilt(change), lines[0]!.startsWith('case.json') ? 'case' : 'compare');
  expect(ended.stderr.trimEnd().split('\n')).toEqual(startsWith(lines));
  expect([ended.code, ended.stdout]).toEqual([2, '']);
});

it.each(CASES)('$what: the same lines over HTTP, with nothing stored', async ({ what, change, lines }) => {
  const { status, type, lines: found, before } = await overHttp(spoilt(change));
  expect(found).toEqual(startsWith(APART.has(what) ? lines.map((line) => line.replace(/\.\w+/, '')) : lines));
  // Text that is no JSON cannot be read at all, which is a fault of the request.
  expect([status, type]).toEqual([lines[0]!.includes('not JSON') ? 400 : 422, 'application/problem+json']);
  expect(rowCounts(api.db)).toEqual(before);
});

it.each([
  ['a comma too many', '{\n  "name": "x",\n}', 'line 3'],
  ['a word that is none', '{\n  "name": "x",\n  "count": NaN\n}', 'line 3'],
  ['an end too early', '{\n  "name": "x",\n  "pumps": [\n', 'line 3'],
  ['a quote left open', '{\n  "name": "x\n}', 'line 2'],
  ['something after the end', '{}\n\n{}', 'line 3'],
])('JSON with %s is refused with its line', async (_, text, line) => {
  writeFileSync(join(folder, 'broken.json'), text);
  const ended = await commandHere('staging', ['--station', join(folder, 'broken.json')]);
  expect(ended).toMatchObject({ code: 2, stderr: `broken.json ${line}: found text that is not JSON; wanted JSON\n` });
  const { status, body } = await api.http.post('/api/stations').set('Content-Type', 'application/json').send(text);
  expect([status, body.errors]).toEqual([400, [line]]);
});

it.each([
  [['--flow', '-5'], 'request flow: found -5; wanted 0 or more'],
  [['--flow', '50', '--static-head', '-2'], 'request staticHead: found a static head of -2.000; wanted 0 or more'],
  [['--flow', '50', '--level', '-2'], 'request level: found a level; wanted system.dischargeLevel in the station'],
  [
    ['--flow', '50', '--level', '2', '--static-head', '12'],
    'request level: found a level beside staticHead; wanted one of the two',
  ],
  [['--flow', 'much'], "arguments --flow: found 'much'; wanted a number"],
  [['--flow', '50', '--without', 'P-3'], "without: found 'P-3'; wanted one of P-1, P-2"],
])('advice %j is refused in one line', async (args, line) => {
  writeFileSync(join(folder, 'station.json'), JSON.stringify(aStationFile()));
  const ended = await commandHere('advice', ['--station', join(folder, 'station.json'), ...args]);
  expect(ended.stderr.trimEnd().split('\n')).toEqual(startsWith([line]));
  expect([ended.code, ended.stdout]).toEqual([2, '']);
});
