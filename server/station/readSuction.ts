import { NpshCurve } from '../hydraulics/npsh.ts';
import { airPressure, vapourPressure } from '../hydraulics/water.ts';
import { GRAVITY } from '../units.ts';
import type { Reading } from './reading.ts';
import type { Suction } from './station.ts';
import type { StationFile } from './stationFile.ts';
import type { Storage } from './storage.ts';

/**
 * NPSH available over NPSH required where the file asks for no other margin: that of Crane TP-410 example 7.32. The trade
 * quotes 1.1 to 1.5 for water.
 */
const USUAL_MARGIN = 1.3;

/**
 * The suction of the pumps; null where something is missing, and then it is said what, once, if the file says anything of
 * NPSH at all.
 */
export function readSuction(file: StationFile, storage: Storage, reading: Reading): Suction | null {
  const { pumpLevel, suctionLoss, altitude, suctionLevel } = file.system;
  const { head, temperature, density } = reading;
  const curves = file.pumps.map((pump) => ('train' in pump ? pump.train[0]! : pump).curve.npshr);
  const without = file.pumps.filter((_, i) => curves[i] === undefined).map((pump) => pump.name);
  const all = without.length === file.pumps.length;
  const asked = pumpLevel !== undefined || !all;
  const missing: string[] = [];
  if (all) missing.push('curve.npshr of any pump');
  if (pumpLevel === undefined) missing.push('system.pumpLevel');
  if (suctionLoss === undefined) missing.push('system.suctionLoss');
  if (temperature === null) missing.push('liquid.temperature');
  if (pumpLevel === undefined || suctionLoss === undefined || temperature === null || all) {
    if (asked) {
      reading.notes.push({
        code: 'npsh-unknown',
        text: `NPSH is not checked: the station file has no ${missing.join(', no ')}.`,
      });
    }
    return null;
  }
  if (without.length > 0) {
    reading.notes.push({
      code: 'npsh-unknown',
      text: `NPSH is not checked for ${without.join(', ')}: no curve.npshr.`,
    });
  }
  const lowestStop = storage.side === 'suction' ? Math.min(...storage.levels.map(({ stop }) => stop)) : Infinity;
  return {
    airHead: (airPressure((altitude ?? 0) * head) - vapourPressure(temperature)) / (density * GRAVITY),
    pumpLevel: pumpLevel * head,
    loss: (suctionLoss.head * head) / (suctionLoss.flow * reading.flow) ** 2,
    margin: file.npshMargin ?? USUAL_MARGIN,
    level: suctionLevel !== undefined ? suctionLevel * head : Number.isFinite(lowestStop) ? lowestStop : null,
  };
}

/** NPSH required over flow; null where the file has none. */
export function readNpshCurve(
  points: readonly { flow: number; npshr: number }[] | undefined,
  at: string,
  reading: Reading,
): NpshCurve | null {
  if (points === undefined) return null;
  points.forEach((point, i) => {
    const before = points[i - 1];
    if (before && point.flow <= before.flow) {
      reading.fault('out_of_range', `${at}[${i}].flow`, `${point.flow}`, `more than ${before.flow}, the flow before`);
    }
  });
  return new NpshCurve(
    points.map((point) => point.flow * reading.flow),
    points.map((point) => point.npshr * reading.head),
  );
}
