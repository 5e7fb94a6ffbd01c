import type { LedgerKwh, RuleResult } from '../../../server/staging/result.ts';

/** Parts of the ledger, in the order in which energy leaves the supply's far end. */
export const LEDGER_PARTS: readonly { readonly part: keyof LedgerKwh; readonly name: string }[] = [
  { part: 'lift', name: 'Lift' },
  { part: 'pipeFriction', name: 'Pipe friction' },
  { part: 'branch', name: 'Branch' },
  { part: 'valve', name: 'Valve' },
  { part: 'pump', name: 'Pumps' },
  { part: 'motor', name: 'Motors' },
  { part: 'drive', name: 'Drives' },
  { part: 'standby', name: 'Standby' },
];

/** The parts add up to the total within this share of it; a part below it is the dust of sums and not energy. */
const DUST = 1e-9;

/** A part of a rule's ledger [kWh]. */
export function partOf(
  { ledgerKwh, energyKwh }: Pick<RuleResult, 'ledgerKwh' | 'energyKwh'>,
  part: keyof LedgerKwh,
): number {
  return withoutDust(ledgerKwh[part], energyKwh);
}

/** 0 for what is too small beside a total to mean anything. */
export function withoutDust(value: number, total: number): number {
  return Math.abs(value) < DUST * total ? 0 : value;
}
