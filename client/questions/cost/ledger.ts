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

/** A rule's ledger as a bar: every part as a share of the longest bar. */
export interface LedgerBar<Rule> {
  readonly rule: Rule;
  /** Parts that hold nothing are left out. */
  readonly parts: readonly {
    readonly part: keyof LedgerKwh;
    readonly name: string;
    readonly kwh: number;
    readonly share: number;
  }[];
  /** What lies above the floor, at the end of the bar; null where the floor is not known. */
  readonly above: { readonly from: number; readonly share: number } | null;
}

/** Bars on one scale, so that rules can be compared by eye. */
export function ledgerBars<Rule extends Pick<RuleResult, 'ledgerKwh' | 'energyKwh'>>(
  rules: readonly Rule[],
  floorKwh: number | undefined,
): LedgerBar<Rule>[] {
  const longest = Math.max(...rules.map((rule) => rule.energyKwh));
  return rules.map((rule) => ({
    rule,
    parts: LEDGER_PARTS.map(({ part, name }) => ({ part, name, kwh: partOf(rule, part) }))
      .filter(({ kwh }) => kwh > 0)
      .map((each) => ({ ...each, share: each.kwh / longest })),
    above:
      floorKwh === undefined
        ? null
        : { from: floorKwh / longest, share: withoutDust(Math.max(0, rule.energyKwh - floorKwh), longest) / longest },
  }));
}

/** How far a rule's energy is above the least possible [%], rounding left out; undefined where that is not known. */
export function aboveFloor({ aboveFloorPercent }: Pick<RuleResult, 'aboveFloorPercent'>): number | undefined {
  return aboveFloorPercent === undefined ? undefined : withoutDust(aboveFloorPercent, 100);
}
