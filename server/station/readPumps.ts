import { type Drive, type Machine, type Motor, Pump } from '../hydraulics/pump.ts';
import { shown } from '../readFile.ts';
import { readCurve } from './readCurve.ts';
import type { Reading } from './reading.ts';
import { readDriveEfficiency, readMotorEfficiency } from './readPartLoad.ts';
import { readNpshCurve } from './readSuction.ts';
import type { PartLoadEntry, PumpEntry } from './stationFile.ts';

/** More pumps on duty than stations of this kind have; every set of them is gone through. */
const MOST_DUTY = 20;

/** The pumps of a file, each by a name of its own: an entry with a count stands for several. */
export function readPumps(entries: readonly PumpEntry[], reading: Reading): { duty: Pump[]; standby: Pump[] } {
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
  if (dutyCount > MOST_DUTY) {
    reading.fault('out_of_range', 'pumps', `${dutyCount} duty pumps`, `at most ${MOST_DUTY}`);
  }
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
