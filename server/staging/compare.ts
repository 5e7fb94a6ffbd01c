import { InputError, type Note } from '../errors.ts';
import type { Pump } from '../hydraulics/pump.ts';
import type { Log } from '../ingest/log.ts';
import type { Station } from '../station/station.ts';
import { billOf } from '../tariff/bill.ts';
import { type BillPlan, planBill } from '../tariff/plan.ts';
import type { Bill, Tariff } from '../tariff/tariff.ts';
import { isoUtc } from '../time.ts';
import { energyKwh } from '../units.ts';
import { deadHeadedOverRecord } from './deadHeaded.ts';
import { type DemandRecord, demandRecord } from './demandRecord.ts';
import { firmCapacity } from './firmCapacity.ts';
import { floorPower } from './floorOverRecord.ts';
import { flowOfLog } from './flowOfLog.ts';
import { hoursText } from './hoursText.ts';
import { pumpTestNotes, pumpTests } from './pumpTests.ts';
import { type ComparisonResult, type PumpTestResult, RULE_IDS, type RuleId, type RuleResult } from './result.ts';
import type { Rule } from './rule.ts';
import { RULES } from './rules/all.ts';
import { type OnAction, type Run, runRule } from './run.ts';
import { stagedPumpsOf } from './stagedPumpsOf.ts';
import { watchNotes } from './watchNotes.ts';

/** What to compare. Nothing of it is changed. */
export interface ComparisonRequest {
  readonly station: Station;
  readonly log: Log;
  readonly tariff: Tariff | null;
  /** Rules to run, by default all that the station can. */
  readonly rules?: readonly RuleId[] | undefined;
  /** Names of pumps taken out. */
  readonly without?: readonly string[] | undefined;
  /** Called now and then with the share done, 0 to 1. */
  readonly onProgress?: ((share: number) => void) | undefined;
  /** Called for each interval of each rule. */
  readonly onAction?: ((rule: RuleId, ...rest: Parameters<OnAction>) => void) | undefined;
}

/** Rules side by side on one record: runs with their columns, and the bill of each. */
export interface Comparison {
  readonly station: Station;
  /** The duty pumps that took part, in order. */
  readonly duty: readonly Pump[];
  readonly record: DemandRecord;
  readonly tariff: Tariff | null;
  readonly plan: BillPlan | null;
  readonly runs: readonly Run[];
  readonly bills: readonly (Bill | null)[];
  readonly firmCapacity: number;
  readonly floor: FloorFigures;
  /** null where the record has a flow of its own. */
  readonly pumpTests: readonly PumpTestResult[] | null;
  readonly notes: readonly Note[];
}

/** What no rule can beat, over the record. */
export interface FloorFigures {
  /** At the record's own flow, and at the flow that each run delivers, in the order of the runs [kWh]. */
  readonly energyKwh: number;
  readonly atDeliveredKwh: readonly number[];
}

/** Hashes of what a result was computed from, so that two results can be told to have the same inputs. */
export interface InputHashes {
  readonly station: string;
  readonly record: string;
  readonly tariff: string | null;
}

/**
 * Runs staging rules over a record and bills each.
 *
 * @throws InputError for a pump or rule unknown, a currency that differs, hours without a rate, no pump left
 */
export function compareRules(request: ComparisonRequest): Comparison {
  const { station, log, tariff } = request;
  const duty = dutyWithout(station, request.without ?? []);
  if (tariff && tariff.currency !== station.currency) {
    throw new InputError([
      {
        code: 'currency_mismatch',
        file: 'tariff',
        at: 'currency',
        found: tariff.currency,
        wanted: `${station.currency}, the currency of the station`,
      },
    ]);
  }
  const flowLog = flowOfLog(station, log);
  const record = demandRecord(station, flowLog.log);
  const tests =
    log.flow === null
      ? pumpTests(station, record, {
          drawdowns: flowLog.drawdowns,
          atRatedSpeed: log.pumps.every(({ speed }) => speed === null),
        })
      : null;
  const plan = tariff ? planBill(tariff, record.startMs, record.seconds, 'tariff') : null;
  const { rules, notes } = rulesToRun(station, duty, request.rules);
  const pumps = stagedPumpsOf(station, duty);
  const runs: Run[] = [];
  const bills: (Bill | null)[] = [];
  for (const rule of rules) {
    const { onAction } = request;
    const run = runRule(rule, pumps, record, onAction && ((i, action) => onAction(rule.id, i, action)));
    runs.push(run);
    bills.push(plan ? billOf(plan, run.series) : null);
    request.onProgress?.(runs.length / rules.length);
  }
  return {
    station,
    duty,
    record,
    tariff,
    plan,
    runs,
    bills,
    floor: floorFigures(station, duty, record, runs),
    firmCapacity: firmCapacity(station, duty),
    pumpTests: tests,
    notes: [
      ...station.notes,
      ...flowLog.notes,
      ...record.notes,
      ...pumpTestNotes(station, tests ?? []),
      ...notes,
      ...recordNotes(record),
      ...runNotes(runs, bills),
      ...deadHeadedOverRecord(station, duty, record, runs),
      ...watchNotes(station, record, runs),
    ],
  };
}

/** Each modelled rule is one of the ways the floor looks at, so where one is found lower by a rounding, it holds. */
function floorFigures(
  station: Station,
  duty: readonly Pump[],
  record: DemandRecord,
  runs: readonly Run[],
): FloorFigures {
  const power = floorPower(station, duty, record);
  const atDelivered = new Float64Array(runs.length);
  let atRecord = 0;
  for (let i = 0; i < record.flow.length; i++) {
    const flow = record.flow[i]!;
    const seconds = record.seconds[i]!;
    const head = typeof record.staticHead === 'number' ? record.staticHead : record.staticHead[i]!;
    let least = power(flow, head) + station.standbyPower;
    for (const { series } of runs) if (series.flow[i]! >= flow) least = Math.min(least, series.mean[i]!);
    atRecord += least * seconds;
    runs.forEach(({ series }, r) => {
      const delivered = series.flow[i]!;
      const floor = delivered >= flow ? least : power(delivered, head) + station.standbyPower;
      atDelivered[r]! += Math.min(floor, series.mean[i]!) * seconds;
    });
  }
  return {
    energyKwh: energyKwh(atRecord, 1),
    atDeliveredKwh: Array.from(atDelivered, (joules) => energyKwh(joules, 1)),
  };
}

/**
 * The duty pumps without those taken out by name.
 *
 * @throws InputError for a name unknown, or where no pump is left
 */
export function dutyWithout(station: Station, without: readonly string[]): readonly Pump[] {
  const names = new Set([...station.duty, ...station.standby].map((pump) => pump.name));
  for (const name of without) {
    if (!names.has(name)) {
      throw new InputError([
        {
          code: 'unknown_name',
          file: 'without',
          at: '',
          found: `'${name}'`,
          wanted: `one of ${[...names].join(', ')}`,
        },
      ]);
    }
  }
  const duty = station.duty.filter((pump) => !without.includes(pump.name));
  if (duty.length === 0) {
    throw new InputError([
      { code: 'no_duty_pump', file: 'without', at: '', found: 'no duty pump left', wanted: 'at least one left to run' },
    ]);
  }
  return duty;
}

/** Rules that the station can run, of those asked for; what is left out is said. */
export function rulesToRun(
  station: Station,
  duty: readonly Pump[],
  asked: readonly RuleId[] | undefined,
): { rules: Rule[]; notes: Note[] } {
  const rules: Rule[] = [];
  const notes: Note[] = [];
  const wanted = asked ?? RULES.map((rule) => rule.id);
  for (const id of wanted) {
    const rule = RULES.find((known) => known.id === id);
    if (!rule) {
      if (!RULE_IDS.includes(id)) {
        throw new InputError([
          { code: 'unknown_rule', file: 'rules', at: '', found: `'${id}'`, wanted: `one of ${RULE_IDS.join(', ')}` },
        ]);
      }
      notes.push({ code: 'rule-left-out', text: `${id} is left out: this version does not run it.` });
      continue;
    }
    const reason = whyNot(rule, station, duty);
    if (reason) notes.push({ code: 'rule-left-out', text: `${id} is left out: ${reason}.` });
    else if (!rules.includes(rule)) rules.push(rule);
  }
  return { rules, notes };
}

function whyNot(rule: Rule, station: Station, duty: readonly Pump[]): string | null {
  const driven = duty.filter((pump) => pump.hasDrive).length;
  if (rule.drives !== 'none' && driven === 0) return 'no duty pump has a drive, fitted or proposed';
  if (rule.id === 'flow-steps' && !station.flowSteps) return 'the station file has no table of steps';
  if (rule.storageOnly && station.surplus !== 'storage') return 'the station has no storage to rest on';
  return null;
}

function recordNotes(record: DemandRecord): Note[] {
  const days = (record.toMs - record.fromMs) / 86_400_000;
  // A year of any zone has at least 364.9 days between the starts of its first and last hour.
  if (days >= 364.9) return [];
  return [
    {
      code: 'short-record',
      text: `The record spans ${days < 2 ? `${(days * 24).toFixed(0)} hours` : `${days.toFixed(0)} days`}, not a year: seasons it has not seen are not in these figures.`,
    },
  ];
}

function runNotes(runs: readonly Run[], bills: readonly (Bill | null)[]): Note[] {
  const notes: Note[] = [];
  const tell = (code: string, hours: (run: Run) => number, text: (list: string) => string) => {
    const met = runs.filter((run) => hours(run) > 0);
    if (met.length === 0) return;
    notes.push({ code, text: text(met.map((run) => `${run.rule.id} ${hoursText(hours(run))}`).join(', ')) });
  };
  tell(
    'shortfall',
    (run) => run.totals.shortfallHours,
    (list) => `The pumps cannot meet the flow in some hours: ${list}. What they do not deliver is in the shortfall.`,
  );
  tell(
    'motor-overload',
    (run) => run.totals.overloadHours,
    (list) => `Motors carry more than rating × service factor: ${list}. Check the ratings before running so.`,
  );
  tell(
    'end-of-curve',
    (run) => run.totals.endOfCurveHours,
    (list) =>
      `Pumps would run off the end of their curves: ${list}. Their flow is held at the end; expect cavitation and ` +
      'check NPSH.',
  );
  tell(
    'near-dead-head',
    (run) => run.totals.nearDeadHeadHours,
    (list) =>
      `Pumps run below 0.3 of their best-efficiency flow: ${list}. Near dead-head they heat, shake and wear; the ` +
      "maker's minimum flow decides.",
  );
  const seen = new Set<string>();
  for (const bill of bills) {
    for (const note of bill?.notes ?? []) {
      if (seen.has(note.code)) continue;
      seen.add(note.code);
      notes.push(note);
    }
  }
  return notes;
}

/** The comparison as `nth-pump/result/1`. */
export function resultOf(comparison: Comparison, sha256: InputHashes): ComparisonResult {
  const { station, record, tariff, runs, bills, duty } = comparison;
  return {
    format: 'nth-pump/result/1',
    record: {
      from: isoUtc(record.fromMs),
      to: isoUtc(record.toMs),
      intervals: record.flow.length,
      hours: record.coveredSeconds / 3600,
      gapHours: record.gapSeconds / 3600,
      volumeM3: record.volume,
    },
    inputs: { station: station.name, tariff: tariff?.name ?? null, currency: station.currency, sha256 },
    firmCapacityM3s: comparison.firmCapacity,
    floor: { energyKwh: comparison.floor.energyKwh },
    rules: runs.map((run, i) => ruleResult(run, bills[i] ?? null, duty, comparison.floor.atDeliveredKwh[i]!)),
    ...(comparison.pumpTests && { pumpTests: comparison.pumpTests }),
    notes: comparison.notes,
  };
}

function ruleResult(run: Run, bill: Bill | null, duty: readonly Pump[], floorKwh: number): RuleResult {
  const { rule, totals: t } = run;
  return {
    rule: rule.id,
    needsDrives: drivesNeeded(rule, duty),
    energyKwh: t.energyKwh,
    kwhPerM3: t.deliveredM3 > 0 ? t.energyKwh / t.deliveredM3 : null,
    ...(floorKwh > 0 && { aboveFloorPercent: 100 * (t.energyKwh / floorKwh - 1) }),
    ...(bill && {
      energyCost: bill.energyCost,
      demandCost: bill.demandCost,
      fixedCost: bill.fixedCost,
      taxCost: bill.taxCost,
      totalCost: bill.totalCost,
      carbonKg: bill.carbonKg,
    }),
    peakKw: t.peakW / 1000,
    peakStateKw: t.peakStateW / 1000,
    wireToWaterPercent: t.energyKwh > 0 ? (100 * (t.ledgerKwh.lift + t.ledgerKwh.pipeFriction)) / t.energyKwh : null,
    deliveredM3: t.deliveredM3,
    shortfallM3: t.shortfallM3,
    shortfallHours: t.shortfallHours,
    hoursByCount: Object.fromEntries(t.secondsByCount.map((seconds, n) => [String(n), seconds / 3600])),
    hoursBySet: hoursBySet(t.secondsBySet, duty),
    outsidePreferredHours: t.outsidePreferredHours,
    outsidePreferredHoursByPump: Object.fromEntries(
      duty.map((pump, i) => [pump.name, t.watched.outsidePreferredSeconds[i]! / 3600]),
    ),
    outsideAllowableHours: t.outsideAllowableHours,
    nearDeadHeadHours: t.nearDeadHeadHours,
    overloadHours: t.overloadHours,
    endOfCurveHours: t.endOfCurveHours,
    ...(t.watched.main && { main: t.watched.main }),
    ...(t.watched.npsh && { npsh: t.watched.npsh }),
    starts: t.starts,
    ledgerKwh: t.ledgerKwh,
    ...(bill && { months: bill.months, periods: bill.periods }),
  };
}

/** Drives a rule needs: none, one, or one on every pump that can have one. */
export function drivesNeeded(rule: Rule, duty: readonly Pump[]): number {
  if (rule.drives === 'none') return 0;
  return rule.drives === 'one' ? 1 : duty.filter((pump) => pump.hasDrive).length;
}

/** Names of the pumps of a set, `P-1+P-2`; `off` for none. */
export function setName(set: number, duty: readonly Pump[]): string {
  const names = duty.flatMap((pump, i) => (Math.floor(set / 2 ** i) % 2 === 1 ? [pump.name] : []));
  return names.length === 0 ? 'off' : names.join('+');
}

function hoursBySet(secondsBySet: ReadonlyMap<number, number>, duty: readonly Pump[]): Record<string, number> {
  const sets = [...secondsBySet].filter(([, seconds]) => seconds > 0).sort(([a], [b]) => a - b);
  return Object.fromEntries(sets.map(([set, seconds]) => [setName(set, duty), seconds / 3600]));
}
