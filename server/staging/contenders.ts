import type { StagedPumps } from './stagedPumps.ts';

const CELLS = 1024;

/** Far more than power can bend between two neighbouring flows of the table. */
const MARGIN = 1e-3;

/**
 * Which counts of pumps may be the best at a flow, at one static head. Power over flow of each count is looked at once,
 * at even flows; a count whose least about a flow is above another's most need not be worked out there. Who is the best is
 * still decided by the power at the flow itself.
 */
export class Contenders {
  private readonly all: readonly number[];
  private readonly cells: readonly (readonly number[])[];
  private readonly perFlow: number;

  constructor(pumps: StagedPumps) {
    this.all = Array.from({ length: pumps.most }, (_, i) => i + 1);
    const capacity = Math.max(...this.all.map((count) => pumps.flatOut(count).flow));
    this.perFlow = capacity > 0 ? CELLS / capacity : 0;
    const powers = this.all.map((count) =>
      Float64Array.from({ length: CELLS + 1 }, (_, j) => {
        const trim = pumps.trim(count, Math.max(j, 1e-6) / this.perFlow);
        return trim.feasible ? trim.power : Number.NaN;
      }),
    );
    this.cells = Array.from({ length: CELLS }, (_, cell) => this.within(cell, powers));
  }

  /** Counts of pumps, rising, among them every one that may be the best at a flow [m³/s]. */
  at(flow: number): readonly number[] {
    return this.cells[Math.floor(flow * this.perFlow)] ?? this.all;
  }

  private within(cell: number, powers: readonly Float64Array[]): readonly number[] {
    // One flow more on either side: where power has a kink, its slopes about it tell how far it may dip.
    const from = Math.max(cell - 1, 0);
    const to = Math.min(cell + 3, CELLS + 1);
    const ranges = powers.map((power) => {
      let least = Infinity;
      let most = 0;
      let feasible = 0;
      for (let j = from; j < to; j++) {
        if (Number.isNaN(power[j]!)) continue;
        feasible++;
        least = Math.min(least, power[j]!);
        most = Math.max(most, power[j]!);
      }
      // At the end of what a count can do nothing is left out on its account, nor is it.
      return feasible === to - from ? { least, most } : { least: feasible > 0 ? 0 : Infinity, most: Infinity };
    });
    const sure = Math.min(...ranges.map(({ most }) => most)) * (1 + MARGIN);
    return this.all.filter((_, i) => ranges[i]!.least * (1 - MARGIN) <= sure && ranges[i]!.least < Infinity);
  }
}
