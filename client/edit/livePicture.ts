import { systemHead } from '../../server/hydraulics/systemCurve.ts';
import { stagedPumpsOf } from '../../server/staging/stagedPumpsOf.ts';
import { dutyPumpsAreEqual, type Station } from '../../server/station/station.ts';
import { GRAVITY } from '../../server/units.ts';

/** Pumps and system as curves of head over total flow, with the point each count settles at; SI throughout. */
export interface PumpPicture {
  readonly topFlow: number;
  readonly topHead: number;
  /** Whether the pumps are equal, so that a count says who runs. */
  readonly alike: boolean;
  readonly system: readonly Spot[];
  readonly counts: readonly {
    readonly count: number;
    /** Their names in the station's order. */
    readonly pumps: readonly string[];
    /** The first so many pumps at rated speed, behind their branches. */
    readonly curve: readonly Spot[];
    /** null where they cannot lift the static head. */
    readonly point: OperatingPoint | null;
  }[];
}

export interface Spot {
  readonly flow: number;
  readonly head: number;
}

export interface OperatingPoint extends Spot {
  /** Electric, standby not included [W]. */
  readonly power: number;
  /** Least and greatest flow of a pump as a share of its best-efficiency flow. */
  readonly leastShare: number;
  readonly greatestShare: number;
  /** What the water gains of the electric power. */
  readonly wireToWater: number;
  readonly overloaded: boolean;
}

const POINTS = 48;

/** Curves and operating points of 1 to N duty pumps in the station's order, direct on line at rated speed. */
export function pumpPicture(station: Station): PumpPicture {
  const { duty, friction, staticHead } = station;
  const pumps = stagedPumpsOf(station, duty);
  pumps.at(staticHead);
  const shutoff = Math.max(...duty.map((pump) => pump.shutoffHead(1)));
  const counts = duty.map((_, i) => {
    const set = duty.slice(0, i + 1);
    const end = set.reduce((sum, pump) => sum + pump.endFlow(1), 0);
    const lowest = Math.min(
      ...set.map((pump) => pump.head(pump.endFlow(1), 1) - pump.branchLoss * pump.endFlow(1) ** 2),
    );
    const curve: Spot[] = [];
    for (let k = 0; k <= POINTS; k++) {
      const head = shutoff * (1 - k / POINTS);
      // Beyond the end of its curve nothing is known of a pump.
      if (head <= lowest) {
        curve.push({ flow: end, head: lowest });
        break;
      }
      curve.push({ flow: set.reduce((sum, pump) => sum + pump.flowInto(head, 1), 0), head });
    }
    const state = pumps.fixed(i + 1);
    const head = systemHead(friction, staticHead, state.flow);
    const point =
      state.flow > 0
        ? {
            flow: state.flow,
            head,
            power: state.power,
            leastShare: state.leastShareOfBest,
            greatestShare: state.greatestShareOfBest,
            wireToWater: (station.density * GRAVITY * state.flow * head) / state.power,
            overloaded: state.doubts.overloaded,
          }
        : null;
    return { count: i + 1, pumps: set.map((pump) => pump.name), curve, point };
  });
  const farthest = Math.max(...counts.map(({ point }) => point?.flow ?? 0));
  const topFlow =
    farthest > 0 ? farthest * 1.25 : Math.max(...counts.flatMap(({ curve }) => curve.map(({ flow }) => flow)));
  const system = Array.from({ length: POINTS + 1 }, (_, k) => {
    const flow = (topFlow * k) / POINTS;
    return { flow, head: systemHead(friction, staticHead, flow) };
  });
  return { alike: dutyPumpsAreEqual(duty), topFlow, topHead: Math.max(shutoff, staticHead) * 1.08, system, counts };
}
