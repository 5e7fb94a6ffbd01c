import type { Pump } from '../hydraulics/pump.ts';
import type { Station } from '../station/station.ts';
import { isInside, type State } from './state.ts';

/** What is watched beside energy while pumps run: the velocity in the main, the suction, and each pump's range. */
export interface Watched {
  /** null where the station file has no pipes. */
  readonly main: MainVelocity | null;
  /** null where what is needed for it is not all known. */
  readonly npsh: NpshMargin | null;
  /** Seconds outside the preferred range, by place in the station's order. */
  readonly outsidePreferredSeconds: readonly number[];
}

/** Velocities [m/s] over all states entered, the least in the widest pipe and the greatest in the narrowest. */
export interface MainVelocity {
  /** null where no pump ever ran. */
  readonly minVelocityMs: number | null;
  readonly maxVelocityMs: number | null;
  readonly hoursBelowScouring: number;
  readonly hoursAboveMaximum: number;
}

/** How the suction of the pumps fared over a record. */
export interface NpshMargin {
  /** Hours in which a pump has less than margin × NPSH required. */
  readonly hoursBelowMargin: number;
  /** Least NPSH available over NPSH required; null where no pump ran whose NPSH required is known. */
  readonly leastRatio: number | null;
}

/** NPSH available over NPSH required, the least of the pumps that run; null where no running pump says what it needs. */
export function npshRatio(station: Station, state: State, suctionLevel: number): number | null {
  const { suction } = station;
  if (suction === null || Number.isNaN(suctionLevel)) return null;
  let least: number | null = null;
  for (const { pump, flow, speed, onDrive } of state.running) {
    const required = pump.npshRequired(flow, speed, onDrive);
    if (required === null) continue;
    const available = suction.airHead + suctionLevel - suction.pumpLevel - suction.loss * flow * flow;
    const ratio = available / required;
    if (least === null || ratio < least) least = ratio;
  }
  return least;
}

/** Adds up what is watched, state by state. */
export class Watch {
  private least = Infinity;
  private most = 0;
  private slow = 0;
  private fast = 0;
  private short = 0;
  private worstRatio: number | null = null;
  private readonly outside: number[];
  private readonly slowFlow: number;
  private readonly fastFlow: number;
  private readonly station: Station;
  private readonly suction: boolean;

  /** @param suction  whether the level at the suction is known */
  constructor(station: Station, duty: readonly Pump[], suction: boolean) {
    this.station = station;
    this.suction = suction && station.suction !== null && duty.some((pump) => pump.npshRequired(0, 1, false) !== null);
    this.outside = new Array(duty.length).fill(0);
    const { main } = station;
    this.slowFlow = main ? main.leastVelocity * main.widestArea * (1 - 1e-9) : 0;
    this.fastFlow = main ? main.mostVelocity * main.narrowestArea * (1 + 1e-9) : Infinity;
  }

  /** @param suctionLevel  of the interval [m]; NaN where unknown */
  add(state: State, seconds: number, suctionLevel: number): void {
    const { flow } = state;
    if (flow < this.least) this.least = flow;
    if (flow > this.most) this.most = flow;
    if (flow < this.slowFlow) this.slow += seconds;
    if (flow > this.fastFlow) this.fast += seconds;
    if (state.doubts.outsidePreferred) this.addOutside(state, seconds);
    if (!this.suction) return;
    const ratio = npshRatio(this.station, state, suctionLevel);
    if (ratio === null) return;
    if (this.worstRatio === null || ratio < this.worstRatio) this.worstRatio = ratio;
    if (ratio < this.station.suction!.margin * (1 - 1e-9)) this.short += seconds;
  }

  /** The pumps of a state stand in the station's order, as the bits of its set do. */
  private addOutside(state: State, seconds: number): void {
    const { preferred } = this.station;
    let place = -1;
    for (const { pump, count, flow, speed, onDrive } of state.running) {
      const least = pump.leastShareOfBest(flow, speed, onDrive);
      const most = pump.greatestShareOfBest(flow, speed, onDrive);
      const inside = isInside(preferred, least, most);
      for (let k = 0; k < count; k++) {
        do place++;
        while (Math.floor(state.set / 2 ** place) % 2 === 0);
        if (!inside) this.outside[place]! += seconds;
      }
    }
  }

  watched(): Watched {
    const { main } = this.station;
    const ran = this.most > 0;
    return {
      main: main && {
        minVelocityMs: ran ? this.least / main.widestArea : null,
        maxVelocityMs: ran ? this.most / main.narrowestArea : null,
        hoursBelowScouring: this.slow / 3600,
        hoursAboveMaximum: this.fast / 3600,
      },
      npsh: this.suction ? { hoursBelowMargin: this.short / 3600, leastRatio: this.worstRatio } : null,
      outsidePreferredSeconds: this.outside,
    };
  }
}
