import type { Rule } from '../rule.ts';
import { held, shared } from '../state.ts';

/**
 * Pumps direct on line. With storage, n − 1 and n share the interval, where Q_{n−1} < Q ≤ Q_n; against a valve, the
 * smallest n with Q_n ≥ Q gives exactly Q.
 */
export const fixedSpeed: Rule = {
  id: 'fixed-speed',
  drives: 'none',
  start(pumps) {
    const throttle = pumps.station.surplus === 'throttle';
    return (flow) => {
      if (flow === 0) return held(pumps.off);
      for (let n = 1; n <= pumps.most; n++) {
        const state = pumps.fixed(n);
        if (state.flow < flow) continue;
        return throttle ? held(pumps.throttled(n, flow)) : shared(pumps.fixed(n - 1), state, flow);
      }
      const full = pumps.fixed(pumps.most);
      return held(full, flow - full.flow);
    };
  },
};
