import { InputError } from '../../server/errors.ts';
import { readStation } from '../../server/station/readStation.ts';
import type { Station } from '../../server/station/station.ts';
import type { CurveEntry, PumpEntry, StationFile } from '../../server/station/stationFile.ts';
import { FLOW_UNITS, HEAD_UNITS } from '../../server/units.ts';
import { valueAt } from './paths.ts';

/** What is asked for in another form, said so that the curve behind it changes as little as that form allows. */

/** The station, or null where its file has faults: then there is no curve to keep. */
function stationOf(file: StationFile): Station | null {
  try {
    return readStation(file, 'station.json');
  } catch (error) {
    if (error instanceof InputError) return null;
    throw error;
  }
}

/** The friction said another way, as near to the same curve as that way can come. */
export function frictionAs(file: StationFile, kind: string): StationFile['system']['friction'] {
  const { head, flow } = file.units;
  const exponent = (valueAt(file, ['system', 'friction', 'exponent']) as number | undefined) ?? 2;
  const station = stationOf(file);
  const loss = (q: number) => (station ? station.friction.at(q * FLOW_UNITS[flow]) / HEAD_UNITS[head] : 0.001 * q ** 2);
  const halfway = (station?.duty.reduce((sum, pump) => sum + pump.endFlow(1), 0) ?? 0) / 2 / FLOW_UNITS[flow];
  const at = halfway > 0 ? Number(halfway.toPrecision(3)) : 1;
  const round = (value: number) => Number(value.toPrecision(5));
  if (kind === 'points') return { points: [{ flow: at, head: round(file.system.staticHead + loss(at)) }], exponent };
  if (kind === 'pipes') {
    return {
      pipes: [
        {
          length: head === 'ft' ? 300 : 100,
          diameter: head === 'ft' ? 12 : 300,
          roughness: head === 'ft' ? 0.006 : 0.15,
        },
      ],
    };
  }
  return { coefficient: round(loss(at) / at ** exponent), exponent };
}

/** A table to begin with: one more pump for each best-efficiency flow of the first. */
export function firstSteps(file: StationFile, steps: number): { bringOn: number[]; dropOff: number[] } {
  const { rules: _rules, ...plain } = file;
  const curve = stationOf(plain)?.duty[0]?.machines[0]?.curve;
  const best = curve ? curve.bestFlow / FLOW_UNITS[file.units.flow] : 1;
  const round = (value: number) => Number(value.toPrecision(2));
  const bringOn = Array.from({ length: steps }, (_, i) => round(best * (i + 1)));
  return { bringOn, dropOff: bringOn.map((flow) => round(flow * 0.85)) };
}

export type TrainEntry = Extract<PumpEntry, { readonly train: unknown }>;
type SingleEntry = Exclude<PumpEntry, TrainEntry>;

/** A pump, or so many of it in series, as a train of two to begin with: itself and one like it. */
export function asTrain({ curve, motor, drive, inSeries, ...shared }: SingleEntry): TrainEntry {
  const part = { curve, motor, ...(drive !== undefined && { drive }) };
  return { ...shared, train: [{ ...part, ...(inSeries !== undefined && inSeries > 1 && { inSeries }) }, part] };
}

/** One more in series, like the last. */
export function withPart(entry: TrainEntry): TrainEntry {
  const { name: _name, ...like } = entry.train.at(-1)!;
  return { ...entry, train: [...entry.train, like] };
}

/** The series without one of it: a pump by itself where one is left. */
export function withoutPart(entry: TrainEntry, at: number): PumpEntry {
  const left = entry.train.filter((_, i) => i !== at);
  const [only] = left;
  if (left.length > 1 || only === undefined) return { ...entry, train: left };
  const { train: _train, ...shared } = entry;
  const { name: _name, ...machine } = only;
  return { ...shared, ...machine };
}

export type CurveKind = 'point' | 'shape' | 'points';

export function kindOf(curve: CurveEntry): CurveKind {
  return 'points' in curve ? 'points' : 'shape' in curve ? 'shape' : 'point';
}

/** The curve said another way: the same one where it is a parabola, else a parabola through its ends. */
export function curveAs(curve: CurveEntry, kind: CurveKind): CurveEntry {
  if (kindOf(curve) === kind) return curve;
  const round = (value: number) => Number(value.toPrecision(5));
  const extras = 'npshr' in curve && curve.npshr ? { npshr: curve.npshr } : {};
  const parabola = parabolaOf(curve);
  const { shutoffHead, shape, bestFlow, bestEfficiency } = parabola;
  if (kind === 'shape')
    return { shutoffHead, shape: Number(shape.toPrecision(6)), bestFlow, bestEfficiency, ...extras };
  if (kind === 'point') {
    const head = round(shutoffHead - shape * bestFlow ** 2);
    return { shutoffHead, operatingPoint: { flow: bestFlow, head }, bestFlow, bestEfficiency, ...extras };
  }
  const points = [0, 0.5, 0.8, 1, 1.2, 1.4].map((share) => {
    const flow = share * bestFlow;
    return {
      flow: round(flow),
      head: round(shutoffHead - shape * flow ** 2),
      efficiency: round(bestEfficiency * share * (2 - share)),
    };
  });
  return { points: points.filter(({ head }) => head > 0), ...extras };
}

function parabolaOf(curve: CurveEntry) {
  if ('points' in curve) {
    const sorted = [...curve.points].sort((a, b) => a.flow - b.flow);
    const best = sorted.reduce((top, point) => ((point.efficiency ?? 0) > (top.efficiency ?? 0) ? point : top));
    const shutoffHead = sorted[0]!.head;
    const shape = best.flow > 0 ? Math.max(0, (shutoffHead - best.head) / best.flow ** 2) : 0;
    return { shutoffHead, shape, bestFlow: best.flow || 1, bestEfficiency: best.efficiency || 0.75 };
  }
  const { shutoffHead, bestFlow, bestEfficiency } = curve;
  if ('shape' in curve) return { shutoffHead, shape: curve.shape, bestFlow, bestEfficiency };
  const { flow, head } = curve.operatingPoint;
  return { shutoffHead, shape: (shutoffHead - head) / flow ** 2, bestFlow, bestEfficiency };
}
