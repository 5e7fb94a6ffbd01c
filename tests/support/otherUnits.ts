import type { StationFile } from '../../server/station/stationFile.ts';

/** A station file written again in other units, by the factors that NIST SP 811 (2008) prints as exact. */

const LITRES: Record<StationFile['units']['flow'], number> = {
  'm3/s': 1000,
  'm3/h': 1000 / 3600,
  'L/s': 1,
  'ML/d': 1e6 / 86400,
  gpm: 3.785411784 / 60,
  MGD: 3785411.784 / 86400,
};
/** m³ in the volume unit beside a flow unit: US gallons beside gpm and MGD. */
const cubicMetres = (flow: StationFile['units']['flow']) => (flow === 'gpm' || flow === 'MGD' ? 3.785411784e-3 : 1);
const METRES = { m: 1, ft: 0.3048 };
const KILOWATTS = { kW: 1, hp: 0.7456998715822702 };

const FLOWS = new Set(['flow', 'bestFlow', 'maxFlow']);
const HEADS = new Set(['head', 'shutoffHead', 'staticHead', 'npshr', 'dischargeLevel', 'suctionLevel']);
const POWERS = new Set(['ratedPower', 'power', 'standbyPower']);

export function inUnits(file: StationFile, units: StationFile['units']): StationFile {
  const flow = LITRES[file.units.flow] / LITRES[units.flow];
  const head = METRES[file.units.head] / METRES[units.head];
  const volume = cubicMetres(file.units.flow) / cubicMetres(units.flow);
  const power = KILOWATTS[file.units.power] / KILOWATTS[units.power];
  const exponent = 'exponent' in file.system.friction ? (file.system.friction.exponent ?? 2) : 2;
  const factorOf = (key: string): number => {
    if (FLOWS.has(key)) return flow;
    if (HEADS.has(key)) return head;
    if (POWERS.has(key)) return power;
    if (key === 'activeVolume') return volume;
    if (key === 'coefficient') return head / flow ** exponent;
    return key === 'shape' || key === 'branchLoss' ? head / flow ** 2 : 1;
  };
  const converted = (value: unknown, key: string): unknown => {
    if (typeof value === 'number') return value * factorOf(key);
    if (Array.isArray(value)) return value.map((each) => converted(each, ''));
    if (typeof value !== 'object' || value === null) return value;
    return Object.fromEntries(Object.entries(value).map(([name, inner]) => [name, converted(inner, name)]));
  };
  return { ...(converted(file, '') as StationFile), units };
}
