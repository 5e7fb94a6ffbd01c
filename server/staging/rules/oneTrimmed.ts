import type { Rule } from '../rule.ts';
import { held, shared } from '../state.ts';

/**
 * The smallest n with Q_n ≥ Q at rated speed: n − 1 direct on line and one on its drive, never above rated speed. Where
 * that one would need less than its minimum speed, storage shares with the state without it; a valve takes the surplus.
 */
export const oneTrimmed: Rule = {
  id: 'one-trimmed',
  drives: 'one',
  start(pumps) {
    const { station, pump } = pumps;
    return (flow) => {
      if (flow === 0) return held(pumps.off);
      for (let n = 1; n <= pumps.most; n++) {
        if (pumps.fixed(n).flow < flow) continue;
        const trimmed = pumps.oneTrimmed(n, flow);
        if (trimmed.speed >= pump.minSpeed) return held(trimmed.state());
        if (station.surplus === 'throttle') return held(pumps.oneThrottled(n, flow));
        return shared(pumps.fixed(n - 1), pumps.oneAtSpeed(n, pump.minSpeed), flow);
      }
      if (pumps.fixed(1).flow === 0) return held(pumps.off, flow);
      const full = pumps.oneAtSpeed(pumps.most, 1);
      return held(full, flow - full.flow);
    };
  },
};
