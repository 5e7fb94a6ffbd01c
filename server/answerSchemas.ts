import { z } from 'zod';
import { RULE_IDS } from './staging/result.ts';
import { stationFile } from './station/stationFile.ts';
import { tariffFileSchema } from './tariff/tariffFile.ts';

/**
 * Schemas of what the HTTP interface answers, for its description. The types that the program works with stand beside
 * what makes them; a test holds real answers against these.
 */

const number = z.number();
const orNull = z.number().nullable();
const text = z.string();
const whole = z.int();
const numbers = z.array(number);
const ruleId = z.enum(RULE_IDS);
const hours = z.record(text, number);

const note = z.strictObject({ code: text, text });
const notes = z.array(note);
const cautions = z.array(text);
const units = stationFile.shape.units;

const fault = z.strictObject({ code: text, file: text, at: text, found: text, wanted: text });

/** RFC 9457, with every fault of the input beside it. */
export const problem = z.strictObject({
  type: text,
  title: text,
  status: whole,
  detail: text,
  errors: z.array(text),
  faults: z.array(fault),
});

export const health = z.strictObject({ status: z.literal('ok'), version: text });

export const stationEntry = z.strictObject({
  id: whole,
  name: text,
  demo: z.boolean(),
  records: whole,
  tariffId: whole.nullable(),
});
export const stationBody = stationFile.extend({ id: whole, demo: z.boolean() });

export const tariffEntry = z.strictObject({
  id: whole,
  name: text,
  demo: z.boolean(),
  currency: text,
  timeZone: text,
});
export const tariffBody = tariffFileSchema.extend({ id: whole, demo: z.boolean() });

const qualityReport = z.strictObject({
  from: text,
  to: text,
  intervals: whole,
  stepSeconds: number,
  hours: number,
  gapHours: number,
  gaps: z.array(z.strictObject({ from: text, to: text, hours: number })),
  minFlowM3s: orNull,
  maxFlowM3s: orNull,
  meanFlowM3s: orNull,
  volumeM3: orNull,
  notes,
});

export const recordEntry = z.strictObject({
  id: whole,
  stationId: whole,
  name: text,
  fileName: text,
  sha256: text,
  createdAt: text,
  report: qualityReport,
});

const ledgerKwh = z.strictObject({
  lift: number,
  pipeFriction: number,
  branch: number,
  valve: number,
  pump: number,
  motor: number,
  drive: number,
  standby: number,
});

const demandCharge = z.strictObject({ name: text, measuredKw: orNull, billedKw: number, cost: number });
const monthBill = z.strictObject({
  month: text,
  energyKwh: number,
  energyCost: number,
  demand: z.array(demandCharge),
  demandCost: number,
  fixedCost: number,
  taxCost: number,
  totalCost: number,
});

const ruleResult = z.strictObject({
  rule: ruleId,
  needsDrives: whole,
  energyKwh: number,
  kwhPerM3: orNull,
  aboveFloorPercent: number.optional(),
  energyCost: number.optional(),
  demandCost: number.optional(),
  fixedCost: number.optional(),
  taxCost: number.optional(),
  totalCost: number.optional(),
  carbonKg: number.optional(),
  peakKw: number,
  peakStateKw: number,
  wireToWaterPercent: orNull,
  deliveredM3: number,
  shortfallM3: number,
  shortfallHours: number,
  hoursByCount: hours,
  hoursBySet: hours,
  outsidePreferredHours: orNull,
  outsidePreferredHoursByPump: hours.optional(),
  outsideAllowableHours: orNull,
  nearDeadHeadHours: number,
  overloadHours: number,
  endOfCurveHours: number,
  main: z
    .strictObject({
      minVelocityMs: orNull,
      maxVelocityMs: orNull,
      hoursBelowScouring: number,
      hoursAboveMaximum: number,
    })
    .optional(),
  npsh: z.strictObject({ hoursBelowMargin: number, leastRatio: orNull }).optional(),
  starts: orNull,
  ledgerKwh,
  months: z.array(monthBill).optional(),
  periods: z.array(z.strictObject({ name: text, energyKwh: number, energyCost: number })).optional(),
});

const comparisonFields = {
  id: whole,
  stationId: whole,
  recordId: whole,
  tariffId: whole.nullable(),
  createdAt: text,
};
export const comparisonEntry = z.strictObject(comparisonFields);
export const comparisonBody = z.strictObject({
  ...comparisonFields,
  without: z.array(text),
  format: z.literal('nth-pump/result/1'),
  record: z.strictObject({
    from: text,
    to: text,
    intervals: whole,
    hours: number,
    gapHours: number,
    volumeM3: number,
  }),
  inputs: z.strictObject({
    station: text,
    tariff: text.nullable(),
    currency: text,
    sha256: z.strictObject({ station: text, record: text, tariff: text.nullable() }),
  }),
  firmCapacityM3s: number,
  floor: z.strictObject({ energyKwh: number }).optional(),
  rules: z.array(ruleResult),
  pumpTests: z
    .array(
      z.strictObject({
        pumps: z.array(text).nullable(),
        pumpsOn: whole,
        runs: whole,
        hours: number,
        pumpedM3s: number,
        curveM3s: orNull,
      }),
    )
    .optional(),
  notes,
});

export const powerOverFlow = z.strictObject({
  staticHeadM: number,
  onDrives: z.boolean(),
  alike: z.boolean(),
  flowM3s: numbers,
  counts: z.array(
    z.strictObject({ count: whole, pumps: z.array(text), capacityM3s: number, powerKw: z.array(orNull) }),
  ),
  sets: z.array(z.strictObject({ pumps: z.array(text), powerKw: z.array(orNull) })),
  stretches: z.array(z.strictObject({ set: whole, fromM3s: number, toM3s: number, fromKw: orNull })),
  crossings: z.array(z.strictObject({ from: whole, to: whole, flowM3s: number, powerKw: number, rising: z.boolean() })),
  hours: z.array(z.strictObject({ fromM3s: number, toM3s: number, hours: number })),
});

export const ruleSeries = z.strictObject({
  rule: ruleId,
  exact: z.boolean(),
  startMs: numbers,
  endMs: numbers,
  flowM3s: numbers,
  leastFlowM3s: numbers,
  mostFlowM3s: numbers,
  powerKw: numbers,
  count: numbers,
  mostCount: numbers,
  pumps: z.array(z.strictObject({ name: text, share: numbers })),
  shortfallM3: numbers,
});

const cardPoint = z.strictObject({ speedBefore: number, speedAfter: number, headerHead: number, headerKpa: number });
const cardSpeed = z.strictObject({ pump: text, speed: number, rpm: orNull, onDrive: z.boolean() });
const cardMove = z.strictObject({ staticHead: number, flows: z.array(orNull) });
export const card = z.strictObject({
  format: z.literal('nth-pump/card/1'),
  station: text,
  units,
  staticHead: number,
  bandPercent: number,
  basis: z.enum(['drives', 'proposed-drives', 'direct-on-line']),
  pumps: z.array(text),
  alike: z.boolean(),
  ratedSpeedRpm: orNull,
  steps: z.array(
    z.strictObject({
      from: whole,
      to: whole,
      pump: text,
      flow: number,
      bringOn: number,
      dropOff: number,
      speedBefore: number,
      speedAfter: number,
      atBringOn: cardPoint,
      atDropOff: cardPoint,
      reason: text,
      text,
      crossings: numbers,
    }),
  ),
  sets: z.array(
    z.strictObject({
      from: number,
      to: number,
      pumps: z.array(text),
      add: z.array(text),
      drop: z.array(text),
      rests: z.boolean(),
      savedKw: orNull,
      text,
      change: z
        .strictObject({
          bringOn: number,
          dropOff: number,
          headerHead: number,
          headerKpa: number,
          before: z.array(cardSpeed),
          after: z.array(cardSpeed),
        })
        .nullable(),
    }),
  ),
  capacities: numbers,
  levels: z.array(z.strictObject({ start: number, stop: number })),
  moves: z.strictObject({ low: cardMove, high: cardMove }).nullable(),
  notes,
  cautions,
});
export const comparisonCard = card.extend({
  lateStaging: z.strictObject({ energyKwh: number, cost: orNull, hours: number }).nullable(),
  ownOrder: z.strictObject({ energyKwh: number, cost: orNull, hours: number }).nullable(),
});

export const bestCountMap = z.strictObject({
  flowM3s: numbers,
  staticHeadM: numbers,
  count: z.array(z.array(whole)),
  sets: z.array(z.array(text)),
  set: z.array(z.array(whole.nullable())),
  hours: z.array(numbers),
});

const way = z.strictObject({
  pumps: z.array(z.strictObject({ name: text, speed: number, flow: number, onDrive: z.boolean() })),
  restsWith: z.array(text).nullable(),
  share: number,
  powerKw: number,
  kwhPerM3: orNull,
});
export const advice = z.strictObject({
  format: z.literal('nth-pump/advice/1'),
  station: text,
  units,
  flow: number,
  staticHead: number,
  headerHead: number,
  best: way.nullable(),
  nextBest: way.extend({ extraKw: number }).nullable(),
  shortfall: number,
  notes,
  cautions,
});

const partLoad = z.union([number, z.array(z.strictObject({ load: number, efficiency: number }))]);
const curveFit = z.strictObject({
  shutoffHead: number,
  shape: number,
  rSquared: orNull,
  largestMiss: number,
  largestMissPercent: number,
  row: whole,
});
const machine = z.strictObject({
  inSeries: whole,
  shutoffHead: number,
  endFlow: number,
  bestFlow: number,
  bestEfficiency: number,
  headAtBest: number,
  npshRequiredAtBest: orNull,
  motorEfficiency: partLoad,
  driveEfficiency: partLoad.nullable(),
  fit: curveFit.nullable(),
});
export const facts = z.strictObject({
  format: z.literal('nth-pump/facts/1'),
  station: text,
  units,
  liquid: z.strictObject({
    densityKgM3: number,
    temperatureC: orNull,
    kinematicViscosityMm2s: orNull,
    vapourPressureKpa: orNull,
  }),
  pumps: z.array(z.strictObject({ names: z.array(text), machines: z.array(machine) })),
  points: z.array(
    z.strictObject({
      count: whole,
      pumps: text,
      flow: number,
      systemHead: number,
      powerKw: number,
      kwhPerM3: orNull,
      leastShareOfBest: orNull,
      greatestShareOfBest: orNull,
      slowestMs: orNull,
      fastestMs: orNull,
      npshRatio: orNull,
    }),
  ),
  staticHead: number,
  firmCapacity: number,
  notes,
});

export const spotReadings = z.strictObject({
  units,
  readings: z.array(
    z.strictObject({
      flow: orNull,
      head: orNull,
      powerKw: orNull,
      pumpsOn: whole,
      pumps: z.array(text),
      curveHead: orNull,
      systemHead: orNull,
      curveFlow: number,
      curvePowerKw: number,
    }),
  ),
});

const annual = z.strictObject({
  energyKwh: number,
  energyCost: number,
  demandCost: number,
  fixedCost: number,
  taxCost: number,
  totalCost: number,
  carbonKg: number,
  ledgerKwh,
});
const optionResult = z.strictObject({
  name: text,
  rule: ruleId,
  needsDrives: whole,
  capital: number,
  incentive: number,
  maintenanceSavingPerYear: number,
  residualValue: number,
  annual,
  annualEnergySavingKwh: number,
  annualCostSaving: number,
  annualCarbonSavingKg: number,
  simplePaybackYears: orNull,
  discountedPaybackYears: orNull,
  npv: number,
  irr: orNull,
  savingsToInvestment: orNull,
  lifeCycleCost: number,
  verdict: z.enum(['pays', 'does-not-pay', 'depends']),
  advice: z.enum(['pays', 'does-not-pay', 'restage-first', 'leave']),
  sentence: text,
  reason: text,
  wouldChange: z.array(text),
  shortfallHours: number,
  notes,
});
export const caseResult = optionResult.extend({
  format: z.literal('nth-pump/case-result/1'),
  station: text,
  currency: text,
  baseline: z.strictObject({ rule: ruleId, annual, lifeCycleCost: number }),
  options: z.array(optionResult),
  years: whole,
  discountRate: number,
  energyEscalation: number,
  rates: z.enum(['real', 'nominal']).nullable(),
  record: z.strictObject({ hours: number, monthsBilled: number }),
  cautions,
});

/** A JSON Schema, or a description of the interface: its own format says the rest. */
export const document = z.record(text, z.unknown());
