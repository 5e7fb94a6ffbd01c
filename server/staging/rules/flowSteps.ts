import type { Decide, Rule } from '../rule.ts';
import type { StagedPumps } from '../stagedPumps.ts';
import { held, shared } from '../state.ts';
import { flatOut } from './trimmedCounts.ts';

/**
 * How most stations run: a count from the operator's own table, with a dead band between bringing a pump on and
 * dropping it. The count is carried from interval to interval; where it cannot meet the flow it is raised for that
 * interval only. With drives on all duty pumps the count is trimmed to the flow, without them it runs at rated speed.
 */
export const flowSteps: Rule = {
  id: 'flow-steps',
  drives: 'none',
  start(pumps): Decide {
    const { bringOn, dropOff } = pumps.station.flowSteps!;
    const top = Math.min(pumps.most, bringOn.length + 1);
    const act = pumps.drivesFitted ? trimmedAt : fixedAt;
    let carried = 1;
    return (flow) => {
      while (carried < top && flow > bringOn[carried - 1]!) carried++;
      while (carried > 1 && flow < dropOff[carried - 2]!) carried--;
      return flow === 0 ? held(pumps.off) : act(pumps, carried, flow);
    };
  },
};

function trimmedAt(pumps: StagedPumps, count: number, flow: number) {
  for (let n = count; n <= pumps.most; n++) {
    const trim = pumps.trim(n, flow);
    if (trim.feasible) return pumps.action(trim, flow);
  }
  return flatOut(pumps, flow);
}

function fixedAt(pumps: StagedPumps, count: number, flow: number) {
  for (let n = count; n <= pumps.most; n++) {
    const state = pumps.fixed(n);
    if (state.flow < flow) continue;
    if (pumps.station.surplus === 'throttle') return held(pumps.throttled(n, flow));
    const below = pumps.fixed(n - 1);
    return shared(flow >= below.flow ? below : pumps.off, state, flow);
  }
  const full = pumps.fixed(pumps.most);
  return held(full, flow - full.flow);
}
