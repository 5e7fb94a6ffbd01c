import type { PlainPump, PlainStation } from './plainModel.ts';

/** Rules of equal pumps worked out a second time from model.md, on the plain model: what one interval takes. */
export interface PlainAnswer {
  /** Mean electric power, standby included [W], and the mean flow delivered [m³/s]. */
  readonly power: number;
  readonly flow: number;
  readonly low: number;
  readonly high: number;
  /** Time share of the higher count, and the speed of the trimmed pumps. */
  readonly share: number;
  readonly speed: number;
  /** How much dearer the next best choice is, as a share; rounding may decide below 1e-9. */
  readonly margin: number;
}

interface Way {
  readonly count: number;
  readonly flow: number;
  readonly power: number;
  readonly speed: number;
}

const OFF: Way = { count: 0, flow: 0, power: 0, speed: 1 };

export class PlainRules {
  private readonly station: PlainStation;
  private readonly pump: PlainPump;
  private readonly most: number;
  private readonly points = new Map<string, Way>();
  private readonly candidatesAt = new Map<number, ReturnType<PlainRules['trims']>>();

  constructor(station: PlainStation) {
    this.station = station;
    this.pump = station.pumps[0]!;
    this.most = station.pumps.length;
  }

  /** n pumps at one speed where they meet the system. */
  point(count: number, speed: number, onDrive: boolean): Way {
    if (count === 0) return OFF;
    const key = `${count} ${speed} ${onDrive}`;
    let way = this.points.get(key);
    if (!way) {
      const { flow, each } = this.station.point(Array.from({ length: count }, () => ({ pump: this.pump, speed })));
      way = flow > 0 ? { count, flow, power: count * this.pump.electric(each[0]!, speed, onDrive), speed } : OFF;
      this.points.set(key, way);
    }
    return way;
  }

  /** n − 1 direct on line and one on its drive. */
  private oneAt(count: number, speed: number): Way {
    if (count === 1) return this.point(1, speed, true);
    const { pump, station } = this;
    const running = Array.from({ length: count }, (_, i) => ({ pump, speed: i === 0 ? speed : 1 }));
    const { flow, each } = station.point(running);
    const trimmed = each[0]! > 0 ? pump.electric(each[0]!, speed, true) : Number.NaN;
    return { count, flow, power: (count - 1) * pump.electric(each[1]!, 1, false) + trimmed, speed };
  }

  private hold(way: Way, margin = Infinity): PlainAnswer {
    const { count, flow, speed } = way;
    return { power: way.power + this.station.standby, flow, low: count, high: count, share: 0, speed, margin };
  }

  private share(low: Way, high: Way, flow: number, margin = Infinity): PlainAnswer {
    const share = (flow - low.flow) / (high.flow - low.flow);
    return {
      power: (1 - share) * low.power + share * high.power + this.station.standby,
      flow,
      low: low.count,
      high: high.count,
      share,
      speed: high.speed,
      margin,
    };
  }

  fixedSpeed(flow: number): PlainAnswer {
    for (let n = 1; n <= this.most; n++) {
      const high = this.point(n, 1, false);
      if (high.flow < flow) continue;
      if (this.station.storage) return this.share(this.point(n - 1, 1, false), high, flow);
      return this.hold({ count: n, flow, power: n * this.pump.electric(flow / n, 1, false), speed: 1 });
    }
    return this.hold(this.point(this.most, 1, false));
  }

  oneTrimmed(flow: number): PlainAnswer {
    const { pump, station } = this;
    const count = Array.from({ length: this.most }, (_, i) => i + 1).find((n) => this.point(n, 1, false).flow >= flow);
    if (count === undefined) return this.hold(this.oneAt(this.most, 1));
    const header = station.system(flow);
    const others = (h: number) => (count - 1) * (count > 1 ? pump.into(h, 1) : 0);
    const q = flow - others(header);
    const speed = pump.speed(q, header + pump.branch * q * q);
    if (speed !== null && speed >= pump.minSpeed) {
      const each = count > 1 ? pump.into(header, 1) : 0;
      const fixed = count > 1 ? (count - 1) * pump.electric(each, 1, false) : 0;
      return this.hold({ count, flow, power: fixed + pump.electric(q, speed, true), speed });
    }
    if (station.storage) return this.share(this.point(count - 1, 1, false), this.oneAt(count, pump.minSpeed), flow);
    let [low, high] = [header, pump.head(0, 1)];
    for (let i = 0; i < 200; i++) {
      const middle = (low + high) / 2;
      if (others(middle) + pump.into(middle, pump.minSpeed) > flow) low = middle;
      else high = middle;
    }
    // Where the trimmed pump's curve is flat, its flow is what the others leave.
    const each = count > 1 ? pump.into(low, 1) : 0;
    const own = flow - (count - 1) * each;
    const fixed = count > 1 ? (count - 1) * pump.electric(each, 1, false) : 0;
    const trimmed = own > 0 ? pump.electric(own, pump.minSpeed, true) : Number.NaN;
    return this.hold({ count, flow, power: fixed + trimmed, speed: pump.minSpeed });
  }

  /** What each count takes trimmed to a flow, with what an engineer asks of it; counts that cannot are left out. */
  private trims(flow: number) {
    const { pump, station } = this;
    const { allowable } = station;
    return Array.from({ length: this.most }, (_, i) => i + 1).flatMap((count) => {
      const q = flow / count;
      const needed = pump.speed(q, station.system(flow) + pump.branch * q * q);
      if (needed === null || needed > pump.maxSpeed * (1 + 1e-12)) return [];
      const speed = Math.min(Math.max(needed, pump.minSpeed), pump.maxSpeed);
      let way: Way = { count, flow, power: count * pump.electric(q, speed, true), speed };
      if (station.storage) {
        const inside = allowable && pump.shares(q, speed).least < allowable.from ? this.lowestInside(count) : null;
        if (inside && inside.flow > flow) way = inside;
        else if (needed < pump.minSpeed) way = this.point(count, pump.minSpeed, true);
      }
      const shares = pump.shares(way.flow / count, way.speed);
      return [
        {
          way,
          mean: (way.power * flow) / Math.max(way.flow, flow),
          overloaded: pump.overloaded(way.flow / count, way.speed, true),
          inside:
            !allowable || (shares.least >= allowable.from * (1 - 1e-9) && shares.most <= allowable.to * (1 + 1e-9)),
        },
      ];
    });
  }

  /** The slowest speed whose operating point is not below the range; null where none is. */
  private lowestInside(count: number): Way | null {
    const { pump } = this;
    const share = (speed: number) => {
      const q = this.station.point(Array.from({ length: count }, () => ({ pump, speed }))).flow / count;
      return pump.shares(q, speed).least - this.station.allowable!.from;
    };
    if (share(pump.minSpeed) >= 0) return this.point(count, pump.minSpeed, true);
    if (share(pump.maxSpeed) < 0) return null;
    let [low, high] = [pump.minSpeed, pump.maxSpeed];
    for (let i = 0; i < 60; i++) {
      const middle = (low + high) / 2;
      if (share(middle) < 0) low = middle;
      else high = middle;
    }
    return this.point(count, high, true);
  }

  private candidates(flow: number) {
    let trims = this.candidatesAt.get(flow);
    if (trims) return trims;
    trims = this.trims(flow);
    if (trims.some((t) => !t.overloaded)) trims = trims.filter((t) => !t.overloaded);
    if (trims.some((t) => t.inside)) trims = trims.filter((t) => t.inside);
    this.candidatesAt.set(flow, trims);
    return trims;
  }

  /** What `steady` may choose from: the mean power of each count, and the flow of the state that rests, if one does. */
  ways(flow: number): { count: number; power: number; resting: number | null }[] {
    const ways = this.candidates(flow).map(({ way, mean }) => ({
      count: way.count,
      power: mean,
      resting: way.flow > flow ? way.flow : null,
    }));
    if (ways.length > 0) return ways;
    return [{ count: this.most, power: this.point(this.most, this.pump.maxSpeed, true).power, resting: null }];
  }

  private answer(way: Way, flow: number, margin = Infinity): PlainAnswer {
    return way.flow > flow ? this.share(OFF, way, flow, margin) : this.hold(way, margin);
  }

  lateStaging(flow: number): PlainAnswer {
    const [first] = this.candidates(flow);
    return first ? this.answer(first.way, flow) : this.hold(this.point(this.most, this.pump.maxSpeed, true));
  }

  bestCount(flow: number): PlainAnswer {
    const sorted = [...this.candidates(flow)].sort((a, b) => a.mean - b.mean);
    const [best, next] = sorted;
    if (!best) return this.hold(this.point(this.most, this.pump.maxSpeed, true));
    return this.answer(best.way, flow, next ? next.mean / best.mean - 1 : Infinity);
  }
}
