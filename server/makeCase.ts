import { type AnnualFigures, annualFigures } from './economics/annual.ts';
import type { Case, CaseOption } from './economics/caseFile.ts';
import { type InvestmentTerms, worthOf } from './economics/investment.ts';
import { lifeCycleCost } from './economics/lifeCycle.ts';
import { escalatedPresentValue, uniformPresentValue } from './economics/presentValue.ts';
import { type Note, refuse } from './errors.ts';
import type { Log } from './ingest/log.ts';
import { type Comparison, compareRules, drivesNeeded } from './staging/compare.ts';
import type { LedgerKwh, RuleId } from './staging/result.ts';
import { RULES } from './staging/rules/all.ts';
import type { Station } from './station/station.ts';
import type { Tariff } from './tariff/tariff.ts';

/** `nth-pump/case-result/1`: whether a change of staging is worth its money, as the contract has it, and why. */
export interface CaseResult extends OptionResult {
  readonly format: 'nth-pump/case-result/1';
  readonly station: string;
  readonly currency: string;
  readonly baseline: { readonly rule: RuleId; readonly annual: AnnualFigures; readonly lifeCycleCost: number };
  /** Changes side by side: leaving it as it is, the one proposed, the others of the file. */
  readonly options: readonly OptionResult[];
  readonly years: number;
  readonly discountRate: number;
  readonly energyEscalation: number;
  readonly rates: 'real' | 'nominal' | null;
  readonly record: { readonly hours: number; readonly monthsBilled: number };
  readonly cautions: readonly string[];
}

export interface OptionResult {
  readonly name: string;
  readonly rule: RuleId;
  readonly needsDrives: number;
  readonly capital: number;
  readonly incentive: number;
  readonly maintenanceSavingPerYear: number;
  readonly residualValue: number;
  readonly annual: AnnualFigures;
  readonly annualEnergySavingKwh: number;
  readonly annualCostSaving: number;
  readonly annualCarbonSavingKg: number;
  readonly simplePaybackYears: number | null;
  readonly discountedPaybackYears: number | null;
  readonly npv: number;
  readonly irr: number | null;
  readonly savingsToInvestment: number | null;
  readonly lifeCycleCost: number;
  readonly verdict: 'pays' | 'does-not-pay' | 'depends';
  /** The verdict with what the same pumps could do without drives taken into account. */
  readonly advice: 'pays' | 'does-not-pay' | 'restage-first' | 'leave';
  /** The verdict in words, its reason from the ledger, and what would change it. */
  readonly sentence: string;
  readonly reason: string;
  readonly wouldChange: readonly string[];
  readonly shortfallHours: number;
  readonly notes: readonly Note[];
}

/** What stands on every case (model.md §10). */
const CASE_CAUTIONS: readonly string[] = [
  'Advice only. Savings are worked out from curves, a record and a tariff; a licensed engineer must design the change.',
  'A drive needs a look at motor cooling and minimum speed, critical speeds, harmonics and bearing currents.',
  'Minimum flow, surge on speed changes and power cuts, and velocity in a rising main that carries solids still bind.',
  'No uncertainty is worked out yet: curves, meters and prices may each move these figures.',
];

/**
 * The case for a change: its rules compared on one record, scaled to a year and put through the terms of the file.
 *
 * @throws InputError rule_cannot_run for a rule that the station cannot run, and what `compareRules` throws
 */
export function makeCase(
  input: { station: Station; log: Log; tariff: Tariff; without?: readonly string[] },
  terms: Case,
  fileName = 'case.json',
): CaseResult {
  const options: CaseOption[] = [
    { ...terms, name: terms.name ?? terms.proposed, rule: terms.proposed },
    ...terms.options,
  ];
  // Rules that need no drives are run too: what the same pumps could do, staged better, is the first thing to know.
  const drivesFree = RULES.filter((rule) => rule.drives === 'none').map((rule) => rule.id);
  const asked = [...new Set([terms.baseline, ...options.map((option) => option.rule), ...drivesFree])];
  const comparison = compareRules({ ...input, rules: asked });
  requireRun(comparison, terms.baseline, 'baseline', fileName);
  requireRun(comparison, terms.proposed, 'proposed', fileName);
  for (const [i, option] of terms.options.entries()) {
    requireRun(comparison, option.rule, `options[${i}].rule`, fileName);
  }

  const baseline = annualOf(comparison, terms.baseline);
  const results = options.map((option) => optionResult(comparison, terms, option, baseline));
  const leave = optionResult(
    comparison,
    terms,
    {
      name: 'leave as it is',
      rule: terms.baseline,
      capital: 0,
      incentive: 0,
      maintenanceSavingPerYear: 0,
      residualValue: 0,
    },
    baseline,
  );
  const monthsBilled = comparison.bills[0]!.months.length;
  return {
    format: 'nth-pump/case-result/1',
    ...results[0]!,
    sentence: `${results[0]!.sentence}${worthMore(results, input.tariff.currency)}`,
    station: input.station.name,
    currency: input.tariff.currency,
    baseline: { rule: terms.baseline, annual: baseline, lifeCycleCost: leave.lifeCycleCost },
    options: [leave, ...results],
    years: terms.years,
    discountRate: terms.discountRate,
    energyEscalation: terms.energyEscalation,
    rates: terms.rates,
    record: { hours: comparison.record.coveredSeconds / 3600, monthsBilled },
    notes: [...results[0]!.notes, ...comparison.notes.filter((note) => note.code !== 'rule-left-out')],
    cautions: CASE_CAUTIONS,
  };
}

/** A word for another option that is worth more than the one proposed; nothing where none is. */
function worthMore([proposed, ...others]: readonly OptionResult[], currency: string): string {
  const best = others.reduce((most, one) => (one.npv > most.npv ? one : most), proposed!);
  if (best.npv <= 0 || best.npv <= proposed!.npv + 0.01 * Math.abs(proposed!.npv)) return '';
  const worth = moneyText(best.npv, currency);
  return ` Of the options, ${withinSentence(best.name)} has the highest net present value: ${worth}.`;
}

function requireRun(comparison: Comparison, rule: RuleId, at: string, file: string): void {
  if (comparison.runs.some((run) => run.rule.id === rule)) return;
  const why = comparison.notes.find((note) => note.code === 'rule-left-out' && note.text.startsWith(`${rule} `));
  const wanted = `a rule that the station can run: ${comparison.runs.map((run) => run.rule.id).join(', ')}`;
  refuse({ code: 'rule_cannot_run', file, at, found: why?.text ?? rule, wanted });
}

function annualOf(comparison: Comparison, rule: RuleId): AnnualFigures {
  const at = comparison.runs.findIndex((run) => run.rule.id === rule);
  const { totals } = comparison.runs[at]!;
  return annualFigures(totals, comparison.bills[at]!, comparison.tariff!, comparison.record.coveredSeconds / 3600);
}

function optionResult(comparison: Comparison, terms: Case, option: CaseOption, baseline: AnnualFigures): OptionResult {
  const run = comparison.runs.find((one) => one.rule.id === option.rule)!;
  const annual = annualOf(comparison, option.rule);
  const investment: InvestmentTerms = { ...terms, ...option };
  const saving = baseline.totalCost - annual.totalCost;
  const { notes, ...worth } = worthOf(investment, saving);
  const unchanged = option.rule === terms.baseline && option.capital === 0;
  const restaged = bestWithoutDrives(comparison, terms.baseline);
  const beyondRestaging = restaged ? worthBeyond(investment, restaged.annual.totalCost - annual.totalCost) : null;
  const restageSaves = restaged !== null && baseline.totalCost - restaged.annual.totalCost > 0.005 * baseline.totalCost;
  const verdict = worth.npv > 0 ? 'pays' : 'does-not-pay';
  const advice = unchanged
    ? restageSaves
      ? 'restage-first'
      : 'leave'
    : run.rule.drives !== 'none' && restageSaves && beyondRestaging!.npv <= 0
      ? 'restage-first'
      : verdict;
  const money = (value: number) => moneyText(value, comparison.tariff!.currency);
  return {
    name: option.name,
    rule: option.rule,
    needsDrives: drivesNeeded(run.rule, comparison.duty),
    capital: option.capital,
    incentive: option.incentive,
    maintenanceSavingPerYear: option.maintenanceSavingPerYear,
    residualValue: option.residualValue,
    annual,
    annualEnergySavingKwh: baseline.energyKwh - annual.energyKwh,
    annualCostSaving: saving,
    annualCarbonSavingKg: baseline.carbonKg - annual.carbonKg,
    ...worth,
    lifeCycleCost: lifeCycleCost(
      {
        initial: option.capital - option.incentive,
        energyPerYear: annual.totalCost,
        maintenancePerYear: -option.maintenanceSavingPerYear,
        residualValue: option.residualValue,
      },
      terms,
    ),
    verdict,
    advice,
    sentence: sentenceOf({ advice, unchanged, saving, worth, option, restaged, baseline, money }),
    reason: reasonOf(baseline, annual, unchanged),
    wouldChange: unchanged
      ? []
      : advice === 'restage-first'
        ? whatWouldChange(terms, option, beyondRestaging!, money, 'Beyond restaging, it')
        : whatWouldChange(terms, option, { saving, npv: worth.npv }, money, 'It'),
    shortfallHours: run.totals.shortfallHours,
    // What stays as it is asks for no return.
    notes: unchanged ? [] : notes,
  };
}

/** A change on its own, or on top of the best that the same pumps can do without it. */
interface Gain {
  /** Of energy and demand, a year. */
  readonly saving: number;
  readonly npv: number;
}

function worthBeyond(investment: InvestmentTerms, saving: number): Gain {
  return { saving, npv: worthOf(investment, saving).npv };
}

/** The cheapest other way to run the same pumps direct on line; null where there is none. */
function bestWithoutDrives(comparison: Comparison, baseline: RuleId): { rule: RuleId; annual: AnnualFigures } | null {
  const standing = comparison.runs.find((run) => run.rule.id === baseline)!;
  const others = comparison.runs
    .filter(
      (run) =>
        run.rule.drives === 'none' && run !== standing && run.totals.shortfallM3 <= standing.totals.shortfallM3 + 1e-6,
    )
    .map((run) => ({ rule: run.rule.id, annual: annualOf(comparison, run.rule.id) }));
  return others.reduce<(typeof others)[number] | null>(
    (best, one) => (best === null || one.annual.totalCost < best.annual.totalCost ? one : best),
    null,
  );
}

function sentenceOf({
  advice,
  unchanged,
  saving,
  worth,
  option,
  restaged,
  baseline,
  money,
}: {
  advice: OptionResult['advice'];
  unchanged: boolean;
  saving: number;
  worth: { npv: number; simplePaybackYears: number | null };
  option: CaseOption;
  restaged: { rule: RuleId; annual: AnnualFigures } | null;
  baseline: AnnualFigures;
  money: (value: number) => string;
}): string {
  const restageSaving = restaged ? baseline.totalCost - restaged.annual.totalCost : 0;
  const outlay = money(option.capital - option.incentive);
  // A name may be one thing or several, so that the station is what saves.
  const runs = `with ${withinSentence(option.name)} the station`;
  if (advice === 'restage-first') {
    const first = `Restage first: the same pumps under ${restaged!.rule} save ${money(restageSaving)} a year for nothing.`;
    if (unchanged) return first;
    const beyond = saving - restageSaving;
    const change =
      beyond > 0
        ? `saves ${money(beyond)} a year, which does not repay ${outlay}`
        : `costs ${money(-beyond)} a year more to run`;
    return `${first} Beyond that, ${runs} ${change}.`;
  }
  if (advice === 'leave')
    return 'Leaving it as it is costs nothing now; no better staging of the same pumps was found.';
  if (advice === 'pays') {
    const years = worth.simplePaybackYears;
    const back = years === null || years <= 0 ? '' : ` and pays back in ${yearsText(years)}`;
    return `It pays: ${runs} saves ${money(saving)} a year${back}; net present value ${money(worth.npv)}.`;
  }
  if (saving < 0) return `It does not pay: ${runs} costs ${money(-saving)} a year more to run.`;
  return `It does not pay: ${runs} saves ${money(saving)} a year, not enough for ${outlay}; net present value ${money(worth.npv)}.`;
}

/** A name as it stands within a sentence: `A drive on each pump` begins small there, a name proper does not. */
function withinSentence(name: string): string {
  return name.replace(/^(An?|The|All|Both|One|Two|Three|Four|Five|Six|Seven|Eight|Drives?)(?= )/, (word) =>
    word.toLowerCase(),
  );
}

/** `4.2 years`, `1 year`, `5 months` */
function yearsText(years: number): string {
  const months = Math.round(years * 12);
  if (months < 1) return 'less than a month';
  if (months < 12) return months === 1 ? '1 month' : `${months} months`;
  const text = String(Number(years.toPrecision(2)));
  return text === '1' ? '1 year' : `${text} years`;
}

/** Why, from the ledger: what no drive can save, what it can, and what changes. */
function reasonOf(baseline: AnnualFigures, annual: AnnualFigures, unchanged: boolean): string {
  const kwh = baseline.ledgerKwh;
  const share = (part: number) => `${Math.round((100 * part) / baseline.energyKwh)} %`;
  const stands =
    `As it runs, ${share(kwh.lift)} of the energy lifts the water, which no drive can save; ${share(kwh.pipeFriction)} is ` +
    `pipe friction and ${share(kwh.valve + kwh.branch)} is lost in valves, which slower pumping can reduce; ` +
    `${share(kwh.pump)} is lost in the pumps.`;
  if (unchanged) return stands;
  const names: Record<keyof LedgerKwh, string> = {
    lift: 'lift',
    pipeFriction: 'pipe friction',
    branch: 'branch loss',
    valve: 'valve loss',
    pump: 'pump loss',
    motor: 'motor loss',
    drive: 'drive loss',
    standby: 'standby',
  };
  const changes = (Object.keys(names) as (keyof LedgerKwh)[])
    .map((part) => ({ part, kwh: annual.ledgerKwh[part] - kwh[part] }))
    .filter((change) => Math.abs(change.kwh) >= 0.005 * baseline.energyKwh)
    .sort((a, b) => a.kwh - b.kwh)
    .map((change) => `${names[change.part]} ${signedKwh(change.kwh)}`);
  return changes.length === 0
    ? `${stands} The change moves no part of it by half a percent.`
    : `${stands} The change makes ${changes.join(', ')} a year.`;
}

function signedKwh(value: number): string {
  const rounded = Number(value.toPrecision(3));
  return `${rounded < 0 ? '−' : '+'}${Math.abs(rounded).toLocaleString('en-US').replaceAll(',', ' ')} kWh`;
}

/** The capital, the yearly saving and the price of energy at which the verdict turns. */
function whatWouldChange(
  terms: Case,
  option: CaseOption,
  { saving, npv }: Gain,
  money: (value: number) => string,
  it: 'It' | 'Beyond restaging, it',
): string[] {
  const found: string[] = [];
  const outlay = option.capital - option.incentive;
  const { years, discountRate } = terms;
  if (outlay > 0 && outlay + npv > 0) {
    found.push(`${it} breaks even where it costs ${money(outlay + npv)} after incentives (now ${money(outlay)}).`);
  }
  const factor = escalatedPresentValue({ discountRate, escalation: terms.energyEscalation }, years);
  const others =
    option.maintenanceSavingPerYear * uniformPresentValue(discountRate, years) +
    option.residualValue / (1 + discountRate) ** years;
  const needed = (outlay - others) / factor;
  if (needed > 0) {
    const now = saving < 0 ? `now it costs ${money(-saving)} more` : `now ${money(saving)}`;
    found.push(`${it} breaks even where it saves ${money(needed)} of energy and demand a year (${now}).`);
    if (saving > 0) {
      const price = needed / saving;
      const change = Math.round(Math.abs(price - 1) * 100);
      found.push(`With all prices ${change} % ${price > 1 ? 'higher' : 'lower'} it would break even.`);
    }
  }
  if (saving < 0) found.push('A lower static head, or more hours at low flow, would let slower pumping save friction.');
  return found;
}

function moneyText(value: number, currency: string): string {
  const rounded = Number(value.toPrecision(3));
  return `${rounded.toLocaleString('en-US').replaceAll(',', ' ')} ${currency}`;
}
