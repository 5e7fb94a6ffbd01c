import { ParabolaCurve, type PumpCurve, TableCurve } from '../hydraulics/pumpCurve.ts';
import { GRAVITY } from '../units.ts';
import { type Reading, scaled } from './reading.ts';
import type { CurveEntry } from './stationFile.ts';

/** The curve of a pump at rated speed (model.md §1); null where it is at fault. */
export function readCurve(entry: CurveEntry, at: string, reading: Reading): PumpCurve | null {
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
      (p) => reading.density * GRAVITY * p.flow * reading.flow * p.head * reading.head > p.power! * reading.power,
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
