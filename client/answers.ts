import type { PowerOverFlow } from '../server/staging/pictures.ts';
import type { ComparisonResult, RuleId, RuleResult } from '../server/staging/result.ts';
import type { StationFile } from '../server/station/stationFile.ts';
import { type Format, inWords, list, ordinal, pumps, sentence } from './format.ts';
import { aboveFloor } from './questions/cost/ledger.ts';
import { ruleName } from './rules.ts';
import { equipmentOf } from './station.ts';
import { isScaled, type Weighing, weighingOf, yearCost, yearEnergy } from './yearly.ts';

/** The four questions, in the order of the page. */
export const QUESTIONS = [
  { id: 'which', title: 'Which pump, when?' },
  { id: 'cost', title: 'What does it cost?' },
  { id: 'change', title: 'Is a change worth it?' },
  { id: 'basis', title: 'What is this based on?' },
] as const;

export type QuestionId = (typeof QUESTIONS)[number]['id'];

/** What answers are made from. */
export interface Subject {
  /** The station as compared: what is saved, or the draft. */
  readonly station: StationFile;
  readonly comparison: ComparisonResult;
  /** Of the tariff, before tax; 0 without a tariff. */
  readonly fixedPerMonth: number;
}

/** A comparison that is open on the page, with its picture. */
export interface Opened extends Subject {
  readonly power: PowerOverFlow;
}

/** The one-line answer to each question. */
export function answersOf(open: Opened, format: Format): Record<QuestionId, string> {
  return {
    which: whichAnswer(open, format),
    cost: costAnswer(open, format),
    change: changeAnswer(open, format),
    basis: basisAnswer(open, format),
  };
}

// Which pump, when?

/** From what flow each further pump pays: `Second pump from 52 L/s, third from 98 L/s (at 14 m static head)`. */
export function whichAnswer({ power, comparison }: Opened, format: Format): string {
  const varies = comparison.notes.some((note) => note.code.startsWith('static-head-from'));
  const head = format.say(format.head, power.staticHeadM);
  const at = varies ? `at ${head} static head; the record's own varies` : `at ${head} static head`;
  return `${stepsText(power, format)} (${at})`;
}

/** Where each further pump comes on, without the static head. */
export function stepsText(power: PowerOverFlow, format: Format): string {
  if (power.stretches.length > 0) return setsText(power, format);
  const able = power.counts.filter((each) => each.capacityM3s > 0);
  const last = able.at(-1);
  if (last === undefined) return 'No pump can lift the static head';
  const who = power.alike ? 'One pump' : last.pumps[0];
  if (able.length === 1) return `${who}, up to ${format.say(format.flow, last.capacityM3s)}`;
  const steps = able.slice(1).map(({ count, pumps: names }) => {
    const joins = power.alike ? ordinal(count) : names.at(-1);
    return `${joins} ${stepText(power, count, format)}`;
  });
  return power.alike ? sentence(steps.join(', ').replace(/^(\S+) /, '$1 pump ')) : steps.join(', ');
}

/** More sets than this in a row are counted. */
const NAMED_SETS = 3;

/** `Jockey to 94 L/s, Beck to 249 L/s, Jockey and Beck to 261 L/s, then 4 more sets to 420 L/s` */
function setsText({ sets, stretches }: PowerOverFlow, format: Format): string {
  const few = stretches.length <= NAMED_SETS + 1;
  const named = few ? stretches : stretches.slice(0, NAMED_SETS);
  const texts = named.map(({ set, toM3s }) => `${list(sets[set]!.pumps)} to ${format.say(format.flow, toM3s)}`);
  if (!few) {
    const top = format.say(format.flow, stretches.at(-1)!.toM3s);
    texts.push(`then ${stretches.length - NAMED_SETS} more sets to ${top}`);
  }
  return texts.join(', ');
}

function stepText(power: PowerOverFlow, count: number, format: Format): string {
  const crossings = power.crossings.filter((each) => each.to === count);
  const before = power.counts.find((each) => each.count === count - 1);
  const capacity = before?.capacityM3s ?? 0;
  if (crossings.length === 0) {
    const short = power.alike || !before ? fallsShort(count - 1) : namedShort(before.pumps);
    return `beyond ${format.say(format.flow, capacity)}, where ${short}`;
  }
  const parts: string[] = [];
  for (const [i, crossing] of crossings.entries()) {
    if (!crossing.rising) continue;
    const until = crossings[i + 1];
    const from = format.say(format.flow, crossing.flowM3s);
    parts.push(until ? `from ${from} to ${format.say(format.flow, until.flowM3s)}` : `from ${from}`);
  }
  const first = crossings[0]!;
  if (!first.rising) parts.unshift(`up to ${format.say(format.flow, first.flowM3s)}`);
  if (!crossings.at(-1)!.rising) parts.push(`beyond ${format.say(format.flow, capacity)}`);
  return list(parts);
}

function namedShort(names: readonly string[]): string {
  return `${list(names)} ${names.length === 1 ? 'falls' : 'fall'} short`;
}

function fallsShort(count: number): string {
  return count === 1 ? 'one falls short' : `${inWords(count)} fall short`;
}

// What does it cost?

/** The rules of a comparison weighed in one coin, per year. */
export interface Weighed {
  readonly weighing: Weighing;
  readonly rules: readonly { readonly rule: RuleResult; readonly perYear: number }[];
  readonly least: { readonly rule: RuleResult; readonly perYear: number };
  /** The rule that stands for how the station runs today. */
  readonly today: { readonly rule: RuleResult; readonly perYear: number };
}

/** Null where no rule was run. */
export function weigh({ comparison, station, fixedPerMonth }: Subject): Weighed | null {
  const weighing = weighingOf(comparison);
  const { hours } = comparison.record;
  const rules = comparison.rules.map((rule) => ({
    rule,
    perYear: weighing === 'money' ? yearCost(rule, hours, fixedPerMonth)! : yearEnergy(rule, hours),
  }));
  const least = leastOf(rules);
  if (least === null) return null;
  const byId = (id: RuleId) => rules.find((each) => each.rule.rule === id);
  const habit = equipmentOf(station).fitted > 0 ? byId('late-staging') : undefined;
  return { weighing, rules, least, today: byId('flow-steps') ?? habit ?? byId('fixed-speed') ?? rules[0]! };
}

function leastOf<T extends { readonly perYear: number }>(rules: readonly T[]): T | null {
  let least: T | null = null;
  for (const each of rules) if (least === null || each.perYear < least.perYear) least = each;
  return least;
}

/** An amount a year in the coin of the weighing: `€41,200 a year`. */
function perYearText(weighing: Weighing, amount: number, format: Format): string {
  return `${format.say(weighing === 'money' ? format.money : format.energy, amount)} a year`;
}

/** How a rule is spoken of as the way a station runs. */
export function asRun(rule: RuleId): string {
  if (rule === 'flow-steps') return 'by its own steps';
  if (rule === 'fixed-speed') return 'at fixed speed';
  return `with ${ruleName(rule)}`;
}

/** `€41,200 a year at fixed speed; best count costs 9 % less` */
export function costAnswer(open: Subject, format: Format): string {
  const weighed = weigh(open);
  if (weighed === null) return 'No rule could be run: see the notes';
  const { today, weighing } = weighed;
  const amount = `${perYearText(weighing, today.perYear, format)} ${asRun(today.rule.rule)}`;
  const scaled = isScaled(open.comparison.record.hours) ? ' (scaled to a year)' : '';
  const tariff = weighing === 'energy' ? ', no tariff given' : '';
  const { shortfallM3 } = today.rule;
  const unmet = shortfallM3 > 0 ? `. ${format.say(format.volume, shortfallM3)} of the flow is not met` : '';
  return `${amount}${scaled}${tariff}; ${besideLeast(weighed, format)}${unmet}`;
}

function besideLeast({ today, least, weighing, rules }: Weighed, format: Format): string {
  const above = aboveFloor(today.rule);
  if (above === 0) return 'the least possible energy';
  if (above !== undefined) return `${format.say(format.percent, above)} above the least possible energy`;
  if (least === today) return `the least of ${rules.length} rules`;
  const less = format.say(format.percent, (100 * (today.perYear - least.perYear)) / today.perYear);
  return `${ruleName(least.rule.rule)} ${weighing === 'money' ? 'costs' : 'takes'} ${less} less`;
}

// Is a change worth it?

/** One change set against what the station can do as it is equipped. */
export interface Change {
  readonly kind: 'restage' | 'drives' | 'one-drive';
  readonly from: RuleResult;
  readonly to: RuleResult;
  /** Saved a year; negative where the change loses. */
  readonly gainPerYear: number;
  /** Share of what the baseline takes. */
  readonly gainPercent: number;
}

/** A difference below this share of the baseline is not told from none. */
const TELLING_PERCENT = 0.1;

/**
 * Restaging is weighed against how the station runs today; drives against the best that can be had without them, so
 * that what restaging brings for nothing is not credited to them.
 */
export function changesOf(open: Subject): { weighing: Weighing; changes: Change[] } | null {
  const weighed = weigh(open);
  if (weighed === null) return null;
  const { rules, today, weighing } = weighed;
  const { fitted, duty } = equipmentOf(open.station);
  const changes: Change[] = [];
  const add = (kind: Change['kind'], from: (typeof rules)[number], to: (typeof rules)[number]) => {
    const gainPerYear = from.perYear - to.perYear;
    changes.push({ kind, from: from.rule, to: to.rule, gainPerYear, gainPercent: (100 * gainPerYear) / from.perYear });
  };
  const possible = rules.filter((each) => each.rule.needsDrives <= fitted);
  const bestNow = leastOf(possible);
  if (bestNow && bestNow !== today && possible.includes(today)) add('restage', today, bestNow);
  const undriven = leastOf(rules.filter((each) => each.rule.needsDrives === 0));
  const driven = leastOf(rules.filter((each) => each.rule.needsDrives >= duty));
  if (undriven && driven) add('drives', undriven, driven);
  const one = rules.find((each) => each.rule.needsDrives === 1 && duty > 1);
  if (undriven && one && fitted === 0) add('one-drive', undriven, one);
  return { weighing, changes };
}

/** A change in one sentence, its sign said in words. */
export function changeText(change: Change, weighing: Weighing, { fitted, duty }: Drives, format: Format): string {
  const { kind, from, to, gainPerYear, gainPercent } = change;
  const amount = perYearText(weighing, Math.abs(gainPerYear), format);
  const telling = Math.abs(gainPercent) >= TELLING_PERCENT;
  const little = gainPerYear === 0 ? '' : ` (${amount})`;
  const against = `against ${ruleName(from.rule)}`;
  if (kind === 'restage') {
    if (!telling) return `Restaging to ${ruleName(to.rule)} changes next to nothing${little}`;
    return `Restaging to ${ruleName(to.rule)} saves ${amount} for nothing`;
  }
  const who = kind === 'one-drive' ? 'One drive' : duty === 1 ? 'A drive' : 'Drives';
  const there = kind === 'drives' && fitted >= duty;
  const several = who === 'Drives';
  if (!telling)
    return `${who} ${there ? verb('make', several) : 'would make'} next to no difference ${against}${little}`;
  const word = gainPerYear > 0 ? 'save' : 'lose';
  const said = `${who} ${there ? verb(word, several) : `would ${word}`} ${amount} ${against}`;
  return gainPerYear > 0 && !there
    ? `${said}, before what they cost`.replace('they cost', several ? 'they cost' : 'it costs')
    : said;
}

/** How many duty pumps there are, and how many have their drive already. */
export interface Drives {
  readonly fitted: number;
  readonly duty: number;
}

function verb(word: string, several: boolean): string {
  return several ? word : `${word}s`;
}

/** `Drives would lose €1,230 a year against fixed speed` */
export function changeAnswer(open: Subject, format: Format): string {
  const found = changesOf(open);
  const drives = equipmentOf(open.station);
  const told = (found?.changes ?? []).filter((change) => change.kind !== 'one-drive');
  if (found === null || told.length === 0) {
    return drives.driven < drives.duty
      ? 'Unknown: the station file proposes no drives and has no steps to restage'
      : 'Unknown: only one rule could be run';
  }
  const unlike = unlikeText(told, format);
  const texts = told.map((change) => changeText(change, found.weighing, drives, format));
  return [...texts, ...(unlike === null ? [] : [unlike])].join('. ');
}

/** Volumes that differ by less than this share are taken for the same. */
const ALIKE = 1e-3;

/** Warns where rules that are set against each other do not deliver the same; null where they do. */
export function unlikeText(changes: readonly Pick<Change, 'from' | 'to'>[], format: Format): string | null {
  const differs = ({ from, to }: Pick<Change, 'from' | 'to'>) =>
    Math.abs(from.deliveredM3 - to.deliveredM3) > ALIKE * Math.max(from.deliveredM3, to.deliveredM3);
  const change = changes.find(differs);
  if (change === undefined) return null;
  const unmet = ({ rule, shortfallM3 }: RuleResult) =>
    `${ruleName(rule)} leaves ${shortfallM3 > 0 ? format.say(format.volume, shortfallM3) : 'nothing'} unmet`;
  return `Not like for like: ${unmet(change.from)}, ${unmet(change.to)}`;
}

/** What decides it, from the ledger: how much is lift that no drive can save. */
export function liftText(rule: RuleResult, format: Format): string {
  const share = (part: number) => format.say(format.percent, (100 * part) / rule.energyKwh);
  const { lift, pipeFriction, branch, valve } = rule.ledgerKwh;
  return (
    `${share(lift)} of the energy ${asRun(rule.rule)} lifts the water, which no drive can save. ` +
    `${share(pipeFriction + branch + valve)} goes into friction and valves, which slower running can cut.`
  );
}

// What is this based on?

/** `8,736 of 8,760 hours, 3 pumps, winter/summer tariff. 24 hours have no value` */
export function basisAnswer({ comparison, station }: Subject, format: Format): string {
  const { hours, gapHours } = comparison.record;
  const { duty } = equipmentOf(station);
  const tariff = comparison.inputs.tariff ?? 'no tariff';
  const covered =
    gapHours > 0 ? `${format.whole(hours)} of ${format.whole(hours + gapHours)} hours` : `${format.whole(hours)} hours`;
  const missing = format.bare(format.hours, gapHours).text;
  const gaps = gapHours > 0 ? `. ${missing} ${missing === '1' ? 'hour has' : 'hours have'} no value, left out` : '';
  return `${covered}, ${pumps(duty)}, ${tariff}${gaps}`;
}
