import type { Pump } from '../hydraulics/pump.ts';
import { root } from '../hydraulics/roots.ts';
import { type Friction, systemHead } from '../hydraulics/systemCurve.ts';

/**
 * Pumps in the order of least power: first the one that alone takes the least power for each m³, then each time the one
 * that does so beside those already running, all at rated speed where their curves meet the system. Pumps that cannot
 * open their check valves beside the others come last; ties keep the order given.
 *
 * @param staticHead  at which they are ranked [m]
 */
export function leastPowerOrder(pumps: readonly Pump[], friction: Friction, staticHead: number): Pump[] {
  const left = [...pumps];
  const ordered: Pump[] = [];
  while (left.length > 0) {
    const powers = left.map((pump) => powerPerFlow([...ordered, pump], friction, staticHead));
    const next = powers.indexOf(Math.min(...powers));
    ordered.push(...left.splice(next, 1));
  }
  return ordered;
}

/** Electric power over flow [J/m³] of pumps direct on line; Infinity where the last of them delivers nothing. */
function powerPerFlow(pumps: readonly Pump[], friction: Friction, staticHead: number): number {
  const header = (flow: number) => systemHead(friction, staticHead, flow);
  const sent = (flow: number) => pumps.reduce((sum, pump) => sum + pump.flowInto(header(flow), 1), 0);
  const most = pumps.reduce((sum, pump) => sum + pump.endFlow(1), 0);
  if (sent(0) <= 0) return Infinity;
  const flow = sent(most) >= most ? most : root((q) => sent(q) - q, 0, most);
  const flows = pumps.map((pump) => pump.flowInto(header(flow), 1));
  if (flows[flows.length - 1]! <= 0) return Infinity;
  const power = pumps.reduce((sum, pump, i) => sum + (flows[i]! > 0 ? pump.electric(flows[i]!, 1, false) : 0), 0);
  return power / flow;
}
