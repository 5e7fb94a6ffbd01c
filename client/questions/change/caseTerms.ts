import type { CaseFile } from '../../../server/economics/caseFile.ts';
import type { CaseResult, OptionResult } from '../../../server/makeCase.ts';
import { type ComparisonResult, RULE_IDS, type RuleId, type RuleResult } from '../../../server/staging/result.ts';
import type { PumpEntry, StationFile } from '../../../server/station/stationFile.ts';
import { POWER_UNITS } from '../../../server/units.ts';
import type { Format } from '../../format.ts';
import { ruleName } from '../../rules.ts';
import { equipmentOf } from '../../station.ts';

/** A case as it is being written: null is a number that must be given and is not there yet. */
export type CaseDraft = Omit<CaseFile, 'capital' | 'years' | 'discountRate'> & {
  readonly capital: number | null;
  readonly years: number | null;
  readonly discountRate: number | null;
};

/** A case to begin with, and what in it a quotation must replace. */
export interface CaseStart {
  readonly draft: CaseDraft;
  /** Why the price is what it is, in a sentence; null where it is 0 because nothing is bought. */
  readonly placeholder: string | null;
}

/**
 * What a drive costs before anyone has asked: so much each, and so much per kW of motor. Ours, and rough: it stands for
 * a quotation that is still to come.
 */
const EACH = 2000;
const PER_KW = 500;

/** Currencies whose unit is worth about as much as those the placeholder was made in. */
const PRICED = ['EUR', 'USD', 'GBP', 'CHF', 'CAD', 'AUD', 'NZD', 'SGD'];

const YEARS = 15;
const DISCOUNT_RATE = 0.05;

/** The placeholder for each duty pump whose drive is still to be bought, in order; null where a rating is unknown. */
export function drivePrices({ pumps, units }: StationFile): (number | null)[] {
  return pumps
    .filter((entry) => entry.role !== 'standby')
    .flatMap((entry) => {
      const parts = toBuy(entry);
      if (parts.length === 0) return [];
      const prices = parts.map(({ ratedPower, inSeries }) =>
        ratedPower === undefined ? null : inSeries * (EACH + (PER_KW * ratedPower * POWER_UNITS[units.power]) / 1000),
      );
      const price = prices.some((each) => each === null) ? null : prices.reduce<number>((sum, each) => sum + each!, 0);
      return Array.from({ length: entry.count ?? 1 }, () => (price === null ? null : Math.round(price / 100) * 100));
    });
}

function toBuy(entry: PumpEntry): { ratedPower: number | undefined; inSeries: number }[] {
  const machines = 'train' in entry ? entry.train : [entry];
  return machines
    .filter(({ drive }) => drive && drive.fitted === false)
    .map(({ motor, inSeries = 1 }) => ({ ratedPower: motor.ratedPower, inSeries }));
}

/**
 * A case to begin with: from how the station runs today (its own steps where it has them, else fixed speed) to the best
 * count; beside it one drive, and the best that can be had without any. Null where there is nothing to propose.
 */
export function startingCase(
  station: StationFile,
  { rules, inputs }: Pick<ComparisonResult, 'rules' | 'inputs'>,
): CaseStart | null {
  const byId = (id: RuleId) => rules.find((rule) => rule.rule === id);
  const today = byId('flow-steps') ?? byId('fixed-speed') ?? rules[0];
  if (today === undefined) return null;
  const baseline = today.rule;
  const { duty } = equipmentOf(station);
  const prices = drivePrices(station);
  const currency = inputs.currency;
  const price = (count: number): number | null => {
    const asked = prices.slice(0, count);
    if (asked.some((each) => each === null)) return null;
    if (asked.length > 0 && !PRICED.includes(currency)) return null;
    return asked.reduce<number>((sum, each) => sum + each!, 0);
  };
  const restaged = cheapest(rules.filter((rule) => rule.needsDrives === 0 && rule.rule !== baseline));
  const restage =
    restaged && saves(today, restaged)
      ? [{ name: `restaging to ${ruleName(restaged.rule)}`, rule: restaged.rule, capital: 0 }]
      : [];
  const one = byId('one-trimmed');
  const onePrice = price(1);
  const oneDrive =
    one && duty > 1 && prices.length > 0 && onePrice !== null
      ? [{ name: 'one drive', rule: one.rule, capital: onePrice }]
      : [];
  const common = {
    format: 'nth-pump/case/1' as const,
    baseline,
    rates: 'real' as const,
    years: YEARS,
    discountRate: DISCOUNT_RATE,
  };
  if (!byId('best-count') || prices.length === 0) {
    const proposed = byId('best-count') && baseline !== 'best-count' ? 'best-count' : restaged?.rule;
    if (proposed === undefined) return null;
    return {
      draft: { ...common, name: `restaging to ${ruleName(proposed)}`, proposed, capital: 0, incentive: 0 },
      placeholder: null,
    };
  }
  const capital = price(prices.length);
  return {
    draft: {
      ...common,
      name: prices.length === 1 ? 'a drive' : `a drive on each of ${prices.length} pumps`,
      proposed: 'best-count',
      capital,
      incentive: 0,
      options: [...restage, ...oneDrive],
    },
    placeholder:
      capital === null
        ? `No placeholder price is known in ${currency}, or for motors without a rating: give a quotation.`
        : `Prices are placeholders, ${currency} ${EACH} a drive and ${PER_KW} per kW of motor. Replace them by a quotation.`,
  };
}

/** What a rule is weighed by: its bill, or without one its energy. */
const weight = (rule: RuleResult) => rule.totalCost ?? rule.energyKwh;

/** A smaller share of the baseline than this is no reason to restage; the server has the same. */
const TELLING = 0.005;

function saves(baseline: RuleResult, other: RuleResult): boolean {
  return weight(other) < (1 - TELLING) * weight(baseline);
}

function cheapest(rules: readonly RuleResult[]): RuleResult | null {
  // A rule that leaves flow unmet is no fair way to run.
  const met = rules.filter((rule) => rule.shortfallHours === 0);
  return (met.length > 0 ? met : rules).reduce<RuleResult | null>(
    (best, rule) => (best === null || weight(rule) < weight(best) ? rule : best),
    null,
  );
}

/** The draft as a file, or null while a number is missing. */
export function caseFileOf({ capital, years, discountRate, ...rest }: CaseDraft): CaseFile | null {
  if (capital === null || years === null || discountRate === null) return null;
  return { ...rest, capital, years, discountRate };
}

/** Whether any price is still the placeholder. */
export function isPlaceholder(draft: CaseDraft, start: CaseStart | null): boolean {
  return (
    start?.placeholder != null && draft.capital !== null && draft.capital === start.draft.capital && draft.capital > 0
  );
}

export const ADVICE_TEXT: Readonly<Record<OptionResult['advice'], string>> = {
  pays: 'pays',
  'does-not-pay': 'does not pay',
  'restage-first': 'restage first',
  leave: 'leave',
};

/** A sentence of the server as the page writes it: rules by their names here, money and figures as everywhere on it. */
export function readable(text: string, format: Format): string {
  const named = RULE_IDS.reduce((said, id) => said.replaceAll(id, ruleName(id)), text);
  const amounts = new RegExp(`(-?\\d[\\d ]*(?:\\.\\d+)?) ${format.money.unit}\\b`, 'g');
  const priced = named.replace(amounts, (_, amount: string) =>
    format.say(format.money, Number(amount.replaceAll(' ', ''))),
  );
  const metered = priced.replace(/(\d[\d ]*) kWh/g, (_, amount: string) =>
    format.say(format.energy, Number(amount.replaceAll(' ', ''))),
  );
  return metered.replace(/(\d) (?=\d{3}\b|%|kWh)/g, '$1\u00a0');
}

/** The one line of the answer: the verdict and the last word on it, with a word where its price is not yet one. */
export function caseAnswer(
  result: Pick<CaseResult, 'sentence'>,
  format: Format,
  { placeholder }: { readonly placeholder: boolean },
): string {
  const sentences = readable(result.sentence, format)
    .replace(/\.$/, '')
    .split(/\. (?=[A-Z])/);
  const said = sentences.length < 3 ? sentences : [sentences[0]!, sentences[sentences.length - 1]!];
  return [...said, ...(placeholder ? ['The price is a placeholder'] : [])].join('. ');
}

/** The first sentence of a case: `Restage first: the same pumps under batch save 4 190 EUR a year for nothing` */
export function shortVerdict(result: Pick<CaseResult, 'sentence'>, format: Format): string {
  return readable(result.sentence, format)
    .split(/\.\s|;/)[0]!
    .replace(/\.$/, '');
}
