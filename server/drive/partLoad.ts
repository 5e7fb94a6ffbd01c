/** Efficiency of a motor or a drive: one number, or rising loads with the efficiency at each. */
export type PartLoad = number | readonly LoadPoint[];

export interface LoadPoint {
  /** Shaft power as a share of the motor's rating. */
  readonly load: number;
  readonly efficiency: number;
}

/**
 * Efficiency at a load: linear between points, held above the last; below the first load L1 the loss in kW is held,
 * η(L) = L/(L + L1·(1/η1 − 1)), so that an idling motor still draws its losses.
 */
export function efficiencyAt(partLoad: PartLoad, load: number): number {
  if (typeof partLoad === 'number') return partLoad;
  const first = partLoad[0]!;
  if (load < first.load) return load / (load + first.load * (1 / first.efficiency - 1));
  for (let i = 1; i < partLoad.length; i++) {
    const b = partLoad[i]!;
    if (load > b.load) continue;
    const a = partLoad[i - 1]!;
    return a.efficiency + ((b.efficiency - a.efficiency) * (load - a.load)) / (b.load - a.load);
  }
  return partLoad[partLoad.length - 1]!.efficiency;
}

/**
 * Power [W] lost in a motor or a drive that passes on `output`, at a shaft power that is the load: output·(1/η − 1).
 * At no load, where η(L) reads 0, the loss of the first point stands: a share of the rating.
 */
export function lossAt(partLoad: PartLoad, output: number, shaft: number, rated: number): number {
  if (typeof partLoad === 'number') return output * (1 / partLoad - 1);
  if (shaft > 0) return output * (1 / efficiencyAt(partLoad, shaft / rated) - 1);
  const first = partLoad[0]!;
  return rated * first.load * (1 / first.efficiency - 1);
}
