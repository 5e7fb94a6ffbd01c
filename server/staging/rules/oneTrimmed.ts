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
    const throttle = pumps.station.surplus === 'throttle';
    return (flow) => {
      if (flow === 0) return held(pumps.off);
      for (let n = 1; n <= pumps.most; n++) {
        if (pumps.fixed(n).flow < flow) continue;
        const trimmed = pumps.oneTrimmed(n, flow);
        if (trimmed === null)
          return throttle ? held(pumps.throttled(n, flow)) : shared(pumps.fixed(n - 1), pumps.fixed(n), flow);
        if (trimmed.speed >= trimmed.minSpeed) return held(trimmed.state());
        if (throttle) return held(pumps.oneThrottled(n, flow));
        return shared(pumps.fixed(n - 1), pumps.oneAt(n, 'least'), flow);
      }
      if (pumps.fixed(pumps.most).flow === 0) return held(pumps.off, flow);
      const full = pumps.oneAt(pumps.most, 'rated');
      return held(full, flow - full.flow);
    };
  },
};
