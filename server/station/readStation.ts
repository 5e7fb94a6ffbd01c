import { type Fault, InputError } from '../errors.ts';
import type { Pump } from '../hydraulics/pump.ts';
import { type Friction, frictionCoefficient, PowerFriction } from '../hydraulics/systemCurve.ts';
import { waterDensity } from '../hydraulics/water.ts';
import { readAs, shown } from '../readFile.ts';
import { isTimeZone } from '../time.ts';
import { FLOW_UNITS, HEAD_UNITS, POWER_UNITS } from '../units.ts';
import { leastPowerOrder } from './leastPowerOrder.ts';
import { readFlowSteps } from './readFlowSteps.ts';
import { DIFFERS, type Reading, scaled } from './reading.ts';
import { readPipes } from './readPipes.ts';
import { readPumps } from './readPumps.ts';
import { readStorage } from './readStorage.ts';
import { readSuction } from './readSuction.ts';
import type { Main, Station } from './station.ts';
import { STATION_FORMAT, type StationFile, stationFile } from './stationFile.ts';

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
  const flowSteps = readFlowSteps(file, duty.length, reading);
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
