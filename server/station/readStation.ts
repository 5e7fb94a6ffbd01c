import { type Fault, InputError } from '../errors.ts';
import { type Drive, type Machine, type Motor, Pump } from '../hydraulics/pump.ts';
import { ParabolaCurve, type PumpCurve, TableCurve } from '../hydraulics/pumpCurve.ts';
import { type Friction, frictionCoefficient, PowerFriction } from '../hydraulics/systemCurve.ts';
import { waterDensity } from '../hydraulics/water.ts';
import { readAs, shown } from '../readFile.ts';
import { isTimeZone } from '../time.ts';
import { FLOW_UNITS, HEAD_UNITS, isUsFlow, POWER_UNITS, US_GALLON } from '../units.ts';
import { leastPowerOrder } from './leastPowerOrder.ts';
import type { Reading } from './reading.ts';
import { readDriveEfficiency, readMotorEfficiency } from './readPartLoad.ts';
import { readPipes } from './readPipes.ts';
import { readNpshCurve, readSuction } from './readSuction.ts';
import type { Main, Station } from './station.ts';
import {
  type CurveEntry,
  type PartLoadEntry,
  type PumpEntry,
  STATION_FORMAT,
  type StationFile,
  stationFile,
} from './stationFile.ts';
import { type Storage, volumeAt } from './storage.ts';

/**
 * Preferred range where the file has none, as shares of best-efficiency flow: ANSI/HI 9.6.3-2012 as the trade quotes it
 * for pumps that are not of high specific speed. The allowable range is the maker's, so it has no default.
 */
const USUAL_PREFERRED = { from: 0.7, to: 1.2 };

/**
 * A station file, checked and turned into SI.
 *
 * @param value     the parsed JSON
 * @param fileName  what a person calls it, for the faults
 * @throws          InputError with every fault found, each with its field path
 */
export function readStation(value: unknown, fileName: string): Station {
  refuseOtherFormat(value, fileName);
  const file = readAs(stationFile, value, fileName);
  const faults: Fault[] = [];
  const temperature = file.liquid?.temperature ?? (file.liquid?.density === undefined ? 15 : null);
  const reading: Reading = {
    flow: FLOW_UNITS[file.units.flow],
    head: HEAD_UNITS[file.units.head],
    power: POWER_UNITS[file.units.power],
    density: file.liquid?.density ?? waterDensity(temperature ?? 15),
    temperature,
    notes: [],
    fault: (code, at, found, wanted) => faults.push({ code, file: fileName, at, found, wanted }),
  };
  if (!isTimeZone(file.timeZone)) {
    reading.fault('unknown_zone', 'timeZone', shown(file.timeZone), "a zone of the IANA list, such as 'Europe/Dublin'");
  }
  const { friction, main } = readFriction(file, reading);
  const pumps = readPumps(file.pumps, reading);
  const ranked = file.order === 'least-power' && faults.length === 0;
  const duty = ranked
    ? leastPowerOrder(pumps.duty, friction, file.system.staticHead * reading.head)
    : inOrder(file.order, pumps.duty, reading);
  const flowSteps = readSteps(file, duty.length, reading);
  const storage = readStorage(file, reading);
  const suction = readSuction(file, storage, reading);
  compareLevels(file, reading);
  if (faults.length > 0) throw new InputError(faults);
  return {
    name: file.name,
    timeZone: file.timeZone,
    currency: file.currency,
    units: file.units,
    density: reading.density,
    temperature,
    surplus: file.surplus,
    standbyPower: (file.standbyPower ?? 0) * reading.power,
    allowable: file.allowable ?? null,
    preferred: file.preferred ?? USUAL_PREFERRED,
    staticHead: file.system.staticHead * reading.head,
    dischargeLevel: scaled(file.system.dischargeLevel, reading.head),
    suctionLevel: scaled(file.system.suctionLevel, reading.head),
    friction,
    main,
    suction,
    storage,
    duty,
    standby: pumps.standby,
    flowSteps,
    steady: {
      minRun: (file.rules?.steady?.minRunMinutes ?? 60) * 60,
      startPenalty: (file.rules?.steady?.startPenaltyKwh ?? 0) * 3.6e6,
    },
    notes: reading.notes,
  };
}

/** A file of another kind has one fault, not one for each of its fields. */
function refuseOtherFormat(value: unknown, file: string): void {
  const format = typeof value === 'object' && value !== null && 'format' in value ? value.format : undefined;
  if (format === undefined || format === STATION_FORMAT) return;
  throw new InputError([
    { code: 'unknown_format', file, at: 'format', found: shown(format), wanted: shown(STATION_FORMAT) },
  ]);
}

/** The static head of the file stands; where its two levels give another, that is said. */
function compareLevels({ system, units }: StationFile, reading: Reading): void {
  const { staticHead, dischargeLevel, suctionLevel } = system;
  if (dischargeLevel === undefined || suctionLevel === undefined) return;
  const rise = dischargeLevel - suctionLevel;
  if (Math.abs(rise - staticHead) <= DIFFERS * Math.max(staticHead, Math.abs(rise))) return;
  reading.notes.push({
    code: 'static-head-differs',
    text: `system.staticHead is ${staticHead} ${units.head}, and dischargeLevel less suctionLevel is ${Number(rise.toPrecision(4))} ${units.head}: staticHead is taken where the record has neither levels nor static heads. A delivery pressure explains a difference.`,
  });
}

function scaled(value: number | undefined, unit: number): number | null {
  return value === undefined ? null : value * unit;
}

function readFriction(file: StationFile, reading: Reading): { friction: Friction; main: Main | null } {
  const { friction, staticHead, velocity } = file.system;
  if ('pipes' in friction) return readPipes(friction.pipes, velocity, reading);
  if (velocity) {
    reading.fault('unknown_field', 'system.velocity', 'limits of velocity', 'friction.pipes, which give a diameter');
  }
  const exponent = friction.exponent ?? 2;
  if ('coefficient' in friction) {
    const k = (friction.coefficient * reading.head) / reading.flow ** exponent;
    return { friction: new PowerFriction(k, exponent), main: null };
  }
  friction.points.forEach((point, i) => {
    if (point.head < staticHead) {
      reading.fault(
        'out_of_range',
        `system.friction.points[${i}].head`,
        `${point.head} ${file.units.head}`,
        `the total head, at least the static head of ${staticHead} ${file.units.head}`,
      );
    }
  });
  const points = friction.points.map((p) => ({ flow: p.flow * reading.flow, head: p.head * reading.head }));
  const k = frictionCoefficient(points, staticHead * reading.head, exponent);
  return { friction: new PowerFriction(k, exponent), main: null };
}

function readPumps(entries: readonly PumpEntry[], reading: Reading): { duty: Pump[]; standby: Pump[] } {
  const pumps = { duty: [] as Pump[], standby: [] as Pump[] };
  const names = new Set<string>();
  entries.forEach((entry, i) => {
    const at = `pumps[${i}]`;
    const machines = readMachines(entry, at, reading);
    const { name, count = 1, role = 'duty' } = entry;
    for (let k = 1; k <= count; k++) {
      const full = count === 1 ? name : `${name}-${k}`;
      if (names.has(full)) reading.fault('duplicate_name', `${at}.name`, shown(full), 'a name that no other pump has');
      if (/[+@,;"\s]/.test(full)) {
        reading.fault(
          'out_of_range',
          `${at}.name`,
          shown(full),
          'a name without spaces, +, @, comma, semicolon, quotes',
        );
      }
      names.add(full);
      if (machines === null) continue;
      const { name: _name, count: _count, role: _role, ...make } = entry;
      pumps[role].push(
        new Pump({
          name: full,
          make: JSON.stringify(make),
          ratedSpeed: entry.ratedSpeed ?? null,
          machines,
          branchLoss: ((entry.branchLoss ?? 0) * reading.head) / reading.flow ** 2,
          density: reading.density,
        }),
      );
    }
  });
  const dutyEntries = entries.filter((entry) => (entry.role ?? 'duty') === 'duty');
  if (dutyEntries.length === 0) reading.fault('no_duty_pump', 'pumps', 'no pump on duty', "a pump with role 'duty'");
  const dutyCount = dutyEntries.reduce((sum, entry) => sum + (entry.count ?? 1), 0);
  if (dutyCount > 20) reading.fault('out_of_range', 'pumps', `${dutyCount} duty pumps`, 'at most 20');
  return pumps;
}

function readMachines(entry: PumpEntry, at: string, reading: Reading): Machine[] | null {
  const parts =
    'train' in entry ? entry.train.map((part, i) => ({ part, at: `${at}.train[${i}]` })) : [{ part: entry, at }];
  const machines: Machine[] = [];
  for (const { part, at: place } of parts) {
    const curve = readCurve(part.curve, `${place}.curve`, reading);
    const motor = readMotor(part.motor, `${place}.motor`, reading);
    const drive = part.drive ? readDrive(part.drive, motor.ratedPower, `${place}.drive`, reading) : null;
    const npshr = readNpshCurve(part.curve.npshr, `${place}.curve.npshr`, reading);
    if (curve) machines.push({ curve, inSeries: part.inSeries ?? 1, motor, drive, npshr });
  }
  return machines.length === parts.length ? machines : null;
}

function readMotor(entry: MotorEntry, at: string, reading: Reading): Motor {
  const rated = entry.ratedPower === undefined ? null : entry.ratedPower * reading.power;
  return {
    ratedPower: rated,
    serviceFactor: entry.serviceFactor ?? 1,
    efficiency: readMotorEfficiency(entry.efficiency, rated, `${at}.efficiency`, reading),
  };
}

type MotorEntry = { ratedPower?: number | undefined; serviceFactor?: number | undefined; efficiency: PartLoadEntry };
type DriveEntry = {
  fitted?: boolean | undefined;
  minSpeed: number;
  maxSpeed?: number | undefined;
  efficiency: PartLoadEntry;
};

function readDrive(entry: DriveEntry, ratedPower: number | null, at: string, reading: Reading): Drive {
  return {
    fitted: entry.fitted ?? true,
    minSpeed: entry.minSpeed,
    maxSpeed: entry.maxSpeed ?? 1,
    efficiency: readDriveEfficiency(entry.efficiency, ratedPower, `${at}.efficiency`, reading),
  };
}

function readCurve(entry: CurveEntry, at: string, reading: Reading): PumpCurve | null {
  const common = {
    maxFlow: scaled(entry.maxFlow, reading.flow),
    speedCorrection: entry.speedCorrection ?? false,
    density: reading.density,
  };
  if ('points' in entry) return readTable(entry.points, common, at, reading);
  let shape: number;
  if ('operatingPoint' in entry) {
    const { flow, head } = entry.operatingPoint;
    if (head > entry.shutoffHead) {
      reading.fault(
        'rising_curve',
        `${at}.operatingPoint.head`,
        `${head}`,
        `at most shutoffHead, ${entry.shutoffHead}`,
      );
      return null;
    }
    shape = (entry.shutoffHead - head) / flow ** 2;
  } else shape = entry.shape;
  // A pump is never at its best where it makes no head at all.
  const noHead = Math.sqrt(entry.shutoffHead / shape);
  if (entry.bestFlow >= noHead) {
    const wanted = `less than ${Number(noHead.toPrecision(4))}, the flow at which this curve has no head left`;
    reading.fault('out_of_range', `${at}.bestFlow`, `${entry.bestFlow}`, wanted);
    return null;
  }
  return new ParabolaCurve({
    shutoffHead: entry.shutoffHead * reading.head,
    shape: (shape * reading.head) / reading.flow ** 2,
    bestFlow: entry.bestFlow * reading.flow,
    bestEfficiency: entry.bestEfficiency,
    ...common,
  });
}

type TablePoint = Extract<CurveEntry, { points: unknown }>['points'][number];

function readTable(
  points: readonly TablePoint[],
  common: { maxFlow: number | null; speedCorrection: boolean; density: number },
  at: string,
  reading: Reading,
): PumpCurve | null {
  const place = (i: number, field: string) => `${at}.points[${i}].${field}`;
  const withPower = points[0]!.power !== undefined;
  let sound = true;
  const fault = (...words: Parameters<Reading['fault']>) => {
    sound = false;
    reading.fault(...words);
  };
  let top = 0;
  points.forEach((p, i) => {
    if (p.head >= points[top]!.head) top = i;
  });
  points.forEach((p, i) => {
    const before = points[i - 1];
    if (before && p.flow <= before.flow)
      fault('out_of_range', place(i, 'flow'), `${p.flow}`, `more than ${before.flow}`);
    if (before && i > top && p.head > before.head) {
      fault('rising_curve', place(i, 'head'), `${p.head} after ${before.head}`, 'a head that falls as flow grows');
    }
    if (withPower) {
      if (p.power === undefined)
        fault('missing_field', place(i, 'power'), 'no power', 'a power in every row, as in the first');
      if (p.efficiency !== undefined) {
        fault('unknown_field', place(i, 'efficiency'), 'efficiency beside power', 'one of the two in every row');
      }
      return;
    }
    if (p.power !== undefined)
      fault('unknown_field', place(i, 'power'), 'a power', 'efficiency in every row, as in the first');
    else if (p.efficiency === undefined)
      fault('missing_field', place(i, 'efficiency'), 'neither', 'efficiency or power');
    else if (p.flow > 0 && p.efficiency <= 0) {
      fault('efficiency_out_of_range', place(i, 'efficiency'), `${p.efficiency}`, 'more than 0 and at most 1');
    }
  });
  if (points[points.length - 1]!.flow <= points[top]!.flow && points.length - 1 === top) {
    fault(
      'rising_curve',
      place(points.length - 1, 'head'),
      'a head that rises to the last row',
      'a head that falls as flow grows',
    );
  }
  if (!sound) return null;
  const table = new TableCurve({
    flows: points.map((p) => p.flow * reading.flow),
    heads: points.map((p) => p.head * reading.head),
    efficiencies: withPower ? null : points.map((p) => p.efficiency!),
    powers: withPower ? points.map((p) => p.power! * reading.power) : null,
    ...common,
  });
  if (table.bestEfficiency > 1) {
    const worst = points.findIndex(
      (p) => reading.density * 9.80665 * p.flow * reading.flow * p.head * reading.head > p.power! * reading.power,
    );
    reading.fault(
      'efficiency_out_of_range',
      place(worst, 'power'),
      `${points[worst]!.power}`,
      'more than the power of the water',
    );
    return null;
  }
  if (top > 0) {
    reading.notes.push({
      code: 'drooping-curve',
      text: `${at}: the head rises up to row ${top + 1}; left of it the head is held at its highest, since one head would have two flows there and pumps in parallel hunt.`,
    });
  }
  return table;
}

function inOrder(order: StationFile['order'], duty: readonly Pump[], reading: Reading): Pump[] {
  if (order === undefined || order === 'least-power') return [...duty];
  const byName = new Map(duty.map((pump) => [pump.name, pump]));
  const ordered: Pump[] = [];
  order.forEach((name, i) => {
    const pump = byName.get(name);
    if (!pump)
      reading.fault('unknown_name', `order[${i}]`, shown(name), `a duty pump: ${[...byName.keys()].join(', ')}`);
    else if (ordered.includes(pump)) reading.fault('duplicate_name', `order[${i}]`, shown(name), 'each duty pump once');
    else ordered.push(pump);
  });
  for (const pump of duty) {
    if (!ordered.includes(pump)) reading.fault('missing_field', 'order', `no ${pump.name}`, 'every duty pump once');
  }
  return ordered;
}

function entries(list: readonly unknown[]): string {
  return list.length === 1 ? '1 entry' : `${list.length} entries`;
}

function readSteps(file: StationFile, dutyCount: number, reading: Reading): Station['flowSteps'] {
  const steps = file.rules?.['flow-steps'];
  if (!steps) return null;
  const at = 'rules.flow-steps';
  const { bringOn, dropOff } = steps;
  const most = Math.max(dutyCount - 1, 0);
  if (bringOn.length !== dropOff.length) {
    reading.fault('steps_fall', `${at}.dropOff`, entries(dropOff), `${bringOn.length}, one for each bringOn`);
  }
  if (bringOn.length > most) {
    reading.fault('steps_fall', `${at}.bringOn`, entries(bringOn), `at most ${most} for ${dutyCount} duty pumps`);
  }
  for (const [name, list] of [
    ['bringOn', bringOn],
    ['dropOff', dropOff],
  ] as const) {
    list.forEach((flow, i) => {
      if (i > 0 && flow <= list[i - 1]!) {
        reading.fault(
          'steps_fall',
          `${at}.${name}[${i}]`,
          `${flow} after ${list[i - 1]}`,
          'flows that rise from step to step',
        );
      }
    });
  }
  dropOff.forEach((flow, i) => {
    const on = bringOn[i];
    if (on !== undefined && flow >= on) {
      reading.fault('steps_fall', `${at}.dropOff[${i}]`, `${flow}`, `less than bringOn[${i}], ${on}`);
    }
  });
  return { bringOn: bringOn.map((q) => q * reading.flow), dropOff: dropOff.map((q) => q * reading.flow) };
}

function readStorage(file: StationFile, reading: Reading): Storage {
  const entry = file.storage ?? {};
  if (entry.area !== undefined && entry.points) {
    reading.fault('unknown_field', 'storage.area', 'area beside points', 'one of the two');
  }
  const side = entry.side ?? 'suction';
  const us = isUsFlow(file.units.flow);
  const volume = us ? US_GALLON : 1;
  const levels = (entry.levels ?? []).map((l) => ({ start: l.start * reading.head, stop: l.stop * reading.head }));
  let table: Storage['table'] = null;
  if (entry.points) {
    entry.points.forEach((p, i) => {
      const before = entry.points![i - 1];
      if (before && (p.level <= before.level || p.volume <= before.volume)) {
        reading.fault(
          'levels_contradict',
          `storage.points[${i}]`,
          shown(p),
          'level and volume above those of the row before',
        );
      }
    });
    table = {
      levels: entry.points.map((p) => p.level * reading.head),
      volumes: entry.points.map((p) => p.volume * volume),
    };
  } else if (entry.area !== undefined) {
    const area = entry.area * reading.head ** 2;
    table = { levels: [0, 1], volumes: [0, area] };
  }
  checkLevels(entry, side, reading);
  const lead = levels[0];
  const fromLevels = table && lead ? Math.abs(volumeBetween(table, lead.start, lead.stop)) : null;
  const given = scaled(entry.activeVolume, volume);
  if (given !== null && fromLevels !== null && Math.abs(given / fromLevels - 1) > DIFFERS) {
    const text = Number((fromLevels / volume).toPrecision(3));
    reading.notes.push({
      code: 'volume-differs',
      text: `storage.activeVolume is ${entry.activeVolume}, and ${entry.points ? 'points' : 'area'} and levels of the first pump give ${text} ${us ? 'US gallons' : 'm³'}: activeVolume is taken.`,
    });
  }
  return { side, activeVolume: given ?? fromLevels, table, levels };
}

/** Two fields that say the same by different numbers are told apart from one that is rounded. */
const DIFFERS = 0.05;

function volumeBetween(table: NonNullable<Storage['table']>, a: number, b: number): number {
  return volumeAt(table, a) - volumeAt(table, b);
}

/** A wet well starts pumps as it fills and stops them as it empties; a tower the other way round. */
function checkLevels(
  { levels = [], points }: NonNullable<StationFile['storage']>,
  side: Storage['side'],
  reading: Reading,
): void {
  const rises = side === 'suction';
  const [lowest, highest] = points ? [points[0]!.level, points.at(-1)!.level] : [-Infinity, Infinity];
  levels.forEach((level, i) => {
    const at = `storage.levels[${i}]`;
    for (const field of ['start', 'stop'] as const) {
      if (level[field] >= lowest && level[field] <= highest) continue;
      const wanted = `a level of storage.points, ${lowest} to ${highest}`;
      reading.fault('levels_contradict', `${at}.${field}`, `${level[field]}`, wanted);
    }
    if (rises ? level.stop >= level.start : level.stop <= level.start) {
      reading.fault(
        'levels_contradict',
        `${at}.stop`,
        `${level.stop}`,
        `${rises ? 'below' : 'above'} start, ${level.start}`,
      );
    }
    const before = levels[i - 1];
    if (before && (rises ? level.start < before.start : level.start > before.start)) {
      reading.fault(
        'levels_contradict',
        `${at}.start`,
        `${level.start}`,
        `${rises ? 'not below' : 'not above'} ${before.start}, that of the pump before`,
      );
    }
  });
}
