import type { LedgerKwh } from '../../../server/staging/result.ts';

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
