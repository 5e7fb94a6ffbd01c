import type { MixedPumps } from './mixedPumps.ts';

/** Which states may be used: such as overload a motor, and only such as lie inside the allowable range. */
export interface Strictness {
  readonly overload: boolean;
  readonly ranged: boolean;
}

/** From strict to lax: the strictest that can meet a flow holds (model.md §4 and §5). */
const CHOICES: readonly Strictness[] = [
  { overload: false, ranged: true },
  { overload: false, ranged: false },
  { overload: true, ranged: true },
  { overload: true, ranged: false },
];

/** Those that say something at a station: where no range or no rating is given, there is nothing to keep to. */
export function choicesOf(pumps: MixedPumps): readonly Strictness[] {
  const { allowable } = pumps.station;
  const rated = pumps.duty.some((pump) => pump.machines.some((m) => m.motor.ratedPower !== null));
  return CHOICES.filter((c) => (c.ranged ? allowable !== null : true) && (rated || c.overload));
}
