import { type Inflow, runningCount } from './inflow.ts';

/** One run of an unchanged set of pumps, taken as a volumetric pump test. */
export interface DrawdownTest {
  /** Start of the run [UTC ms] and its length [s]. */
  readonly startMs: number;
  readonly seconds: number;
  /** Names of the running pumps; null where the log only counts them. */
  readonly pumps: readonly string[] | null;
  readonly pumpsOn: number;
  /** Volume drawn from the store (put into it, on the discharge side) [m³]. */
  readonly drawnM3: number;
  /** Mean inflow during the run [m³/s], from the fills before and after. */
  readonly inflowM3s: number;
  /** Mean pumped flow [m³/s]: inflow + drawn volume / time. */
  readonly pumpedM3s: number;
}

/**
 * Every run of the log as a drawdown test: what the pumps really deliver, to be held against their curves. Runs with a
 * pump on for part of an interval, or with no fill to tell the inflow, are no tests and are left out.
 */
export function drawdownTests({ log, stretches }: Inflow): DrawdownTest[] {
  const tests: DrawdownTest[] = [];
  const named = log.pumps.filter((pump) => pump.on !== null);
  const running = runningCount(log);
  for (const { from, end, seconds, gain } of stretches) {
    const pumpsOn = running[from]!;
    const whole =
      named.length > 0 ? named.every(({ on }) => on![from] === 0 || on![from] === 1) : Number.isInteger(pumpsOn);
    if (!(pumpsOn > 0) || !whole) continue;
    let volume = 0;
    for (let i = from; i < end; i++) volume += log.flow![i]! * log.seconds[i]!;
    if (Number.isNaN(volume)) continue;
    tests.push({
      startMs: log.startMs[from]!,
      seconds,
      pumps: named.length > 0 ? named.filter(({ on }) => on![from] === 1).map(({ name }) => name) : null,
      pumpsOn,
      drawnM3: -gain,
      inflowM3s: volume / seconds,
      pumpedM3s: (volume - gain) / seconds,
    });
  }
  return tests;
}
