import { z } from 'zod';
import { InputError } from '../errors.ts';
import { readAs, shown } from '../readFile.ts';
import { RULE_IDS, type RuleId } from '../staging/result.ts';
import type { InvestmentTerms } from './investment.ts';

const CASE_FORMAT = 'nth-pump/case/1';

/** Grades of ISO 9906:2012, table 8. */
const PUMP_GRADES = ['1U', '1E', '1B', '2B', '2U', '3B'] as const;

const rule = z
  .string()
  .refine((id) => (RULE_IDS as readonly string[]).includes(id), {
    error: `one of ${RULE_IDS.join(', ')}`,
    params: { code: 'unknown_rule' },
  })
  .meta({ enum: RULE_IDS });
/** Fractions per year: 5 instead of 0.05 is caught here. */
const perYear = z.number().gt(-1).lt(1);
const percent = z.number().min(0).max(100);

/** Schema of the case file: a change from one rule to another, its price and its terms. */
export const caseFileSchema = z.strictObject({
  format: z.literal(CASE_FORMAT),
  name: z.string().min(1).optional(),
  baseline: rule,
  proposed: rule,
  /** Whether the two rates and the prices leave inflation out; the file's author has to keep to one. */
  rates: z.enum(['real', 'nominal']).optional(),
  capital: z.number().min(0),
  incentive: z.number().min(0).optional(),
  maintenanceSavingPerYear: z.number().optional(),
  residualValue: z.number().optional(),
  years: z.int().min(1).max(100),
  discountRate: perYear,
  energyEscalation: perYear.optional(),
  targetPaybackYears: z.number().gt(0).optional(),
  /** Other changes to look at beside `proposed`, under the same years and rates. */
  options: z
    .array(
      z.strictObject({
        name: z.string().min(1),
        rule,
        capital: z.number().min(0).optional(),
        incentive: z.number().min(0).optional(),
        maintenanceSavingPerYear: z.number().optional(),
        residualValue: z.number().optional(),
      }),
    )
    .optional(),
  uncertainty: z
    .strictObject({
      seed: z.int().min(0),
      samples: z.int().min(1).max(1_000_000),
      pumpGrade: z.enum(PUMP_GRADES),
      flowMeterPercent: percent,
      frictionPercent: percent,
      energyPricePercent: percent,
    })
    .optional(),
});

export type CaseFile = z.infer<typeof caseFileSchema>;

/** A case, read and checked. */
export interface Case extends InvestmentTerms {
  readonly name: string | null;
  readonly baseline: RuleId;
  readonly proposed: RuleId;
  readonly rates: 'real' | 'nominal' | null;
  readonly targetPaybackYears: number | null;
  readonly options: readonly CaseOption[];
  readonly uncertainty: NonNullable<CaseFile['uncertainty']> | null;
}

/** One change among those looked at side by side: a rule, what it asks for and what it brings beside energy. */
export interface CaseOption {
  readonly name: string;
  readonly rule: RuleId;
  readonly capital: number;
  readonly incentive: number;
  readonly maintenanceSavingPerYear: number;
  readonly residualValue: number;
}

/**
 * A case file as a case; money in the currency of the tariff, 0 for incentive, maintenance, residual value and
 * escalation where the file does not say.
 *
 * @param value     the file's JSON
 * @param fileName  the name a person knows it by, for the faults
 * @throws          InputError with every fault found
 */
export function readCase(value: unknown, fileName: string): Case {
  const format = typeof value === 'object' && value !== null && 'format' in value ? value.format : undefined;
  if (format !== undefined && format !== CASE_FORMAT) {
    throw new InputError([
      { code: 'unknown_format', file: fileName, at: 'format', found: shown(format), wanted: shown(CASE_FORMAT) },
    ]);
  }
  const file = readAs(caseFileSchema, value, fileName);
  return {
    name: file.name ?? null,
    baseline: file.baseline as RuleId,
    proposed: file.proposed as RuleId,
    rates: file.rates ?? null,
    capital: file.capital,
    incentive: file.incentive ?? 0,
    maintenanceSavingPerYear: file.maintenanceSavingPerYear ?? 0,
    residualValue: file.residualValue ?? 0,
    years: file.years,
    discountRate: file.discountRate,
    energyEscalation: file.energyEscalation ?? 0,
    targetPaybackYears: file.targetPaybackYears ?? null,
    options: (file.options ?? []).map((option) => ({
      name: option.name,
      rule: option.rule as RuleId,
      capital: option.capital ?? 0,
      incentive: option.incentive ?? 0,
      maintenanceSavingPerYear: option.maintenanceSavingPerYear ?? 0,
      residualValue: option.residualValue ?? 0,
    })),
    uncertainty: file.uncertainty ?? null,
  };
}
