import { billOf } from '../../server/tariff/bill.ts';
import { type BillPlan, planBill } from '../../server/tariff/plan.ts';
import type { Bill, PowerSeries, SharedIntervals, Tariff } from '../../server/tariff/tariff.ts';
import { readTariff, type TariffFile } from '../../server/tariff/tariffFile.ts';
import { JOULES_PER_KWH } from '../../server/units.ts';

/** A tariff file with one rate, in a zone of the test's choice; any field may be replaced. */
export function aTariffFile(fields: Partial<TariffFile> = {}): TariffFile {
  return {
    format: 'nth-pump/tariff/1',
    name: 'test tariff',
    currency: 'EUR',
    timeZone: 'Europe/Dublin',
    energy: [{ name: 'all', rate: 0.2 }],
    ...fields,
  };
}

export function aTariff(fields: Partial<TariffFile> = {}): Tariff {
  return readTariff(aTariffFile(fields), 'tariff.json');
}

/** A record of equal steps; power in kW by interval. */
export interface EvenRecord {
  /** ISO 8601 with offset. */
  readonly from: string;
  readonly stepMinutes: number;
  readonly kw: readonly number[];
}

/** No interval shared between two states. */
export const NOT_SHARED: SharedIntervals = {
  interval: Uint32Array.of(),
  low: Float64Array.of(),
  high: Float64Array.of(),
  lowFlow: Float64Array.of(),
  highFlow: Float64Array.of(),
};

/** Power that is not shared between two states, so that its mean is all there is to know. */
export function powerOf({ from, stepMinutes, kw }: EvenRecord): PowerSeries {
  const start = Date.parse(from);
  const mean = Float64Array.from(kw, (value) => value * 1000);
  return {
    startMs: Float64Array.from(kw, (_, i) => start + i * stepMinutes * 60_000),
    seconds: new Float64Array(kw.length).fill(stepMinutes * 60),
    mean,
    flow: new Float64Array(kw.length),
    shared: NOT_SHARED,
    activeVolume: null,
  };
}

export function billFor(tariff: Tariff, series: PowerSeries): Bill {
  return billOf(planBill(tariff, series.startMs, series.seconds), series);
}

/** The same power over so many hours. */
export function steady(from: string, hours: number, kw = 1, stepMinutes = 60): EvenRecord {
  return { from, stepMinutes, kw: new Array<number>((hours * 60) / stepMinutes).fill(kw) };
}

/** Energy cost by interval as a plan has it, in the tariff's currency; one that straddles two rates pays each for its part. */
export function energyCosts(plan: BillPlan, mean: Float64Array): Float64Array {
  const costs = new Float64Array(plan.intervals);
  const { cellStart, cellRate, segmentInterval, segmentSeconds } = plan;
  for (let c = 0; c < cellRate.length; c++) {
    const pricePerJoule = plan.tariff.energy[cellRate[c]!]!.rate / JOULES_PER_KWH;
    for (let s = cellStart[c]!; s < cellStart[c + 1]!; s++) {
      const i = segmentInterval[s]!;
      costs[i]! += mean[i]! * segmentSeconds[s]! * pricePerJoule;
    }
  }
  return costs;
}
