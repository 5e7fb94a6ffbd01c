import { GRAVITY } from '../../server/units.ts';
import { PLAIN } from './made.ts';

/**
 * The least a comparison could do: best-count for equal parabola pumps in closed form, straight over the columns, with
 * nothing kept but the energy and the count of each interval. Station and rules of `made.ts`, written out.
 *
 * @returns energy [J]
 */
export function bareBestCount(flows: Float64Array, seconds: Float64Array, pumps: number, counts: Uint8Array): number {
  const p = PLAIN;
  const wires = p.motor * p.drive;
  const weight = p.density * GRAVITY;
  // At minimum speed n pumps and the pipe meet in one flow; below it they run and rest.
  const leastFlow = new Float64Array(pumps + 1);
  const leastPower = new Float64Array(pumps + 1);
  const power = (q: number, speed: number) => {
    const x = q / (speed * p.bestFlow);
    const head = p.shutoffHead * speed * speed - p.shape * q * q;
    return (weight * q * head) / (p.bestEfficiency * x * (2 - x) * wires);
  };
  for (let n = 1; n <= pumps; n++) {
    const spare = p.shutoffHead * p.minSpeed * p.minSpeed - p.staticHead;
    if (spare <= 0) continue;
    const q = Math.sqrt(spare / (p.shape + p.branchLoss + p.friction * n * n));
    leastFlow[n] = n * q;
    leastPower[n] = n * power(q, p.minSpeed);
  }
  const end = Math.min(Math.sqrt(p.shutoffHead / p.shape), (1 + Math.SQRT1_2) * p.bestFlow);
  let energy = 0;
  for (let i = 0; i < flows.length; i++) {
    const flow = flows[i]!;
    const header = p.staticHead + p.friction * flow * flow;
    let best = Infinity;
    let count = 0;
    for (let n = 1; n <= pumps; n++) {
      const q = flow / n;
      const speed = Math.max(Math.sqrt((header + (p.branchLoss + p.shape) * q * q) / p.shutoffHead), q / end);
      if (speed > 1) continue;
      const watts = flow < leastFlow[n]! ? (flow / leastFlow[n]!) * leastPower[n]! : n * power(q, speed);
      if (watts < best) {
        best = watts;
        count = n;
      }
    }
    counts[i] = count;
    if (count > 0) energy += best * seconds[i]!;
  }
  return energy;
}
