import type { CaseResult, OptionResult } from '../../../server/makeCase.ts';
import type { RuleId } from '../../../server/staging/result.ts';
import { usePage } from '../../context.ts';
import type { Format, Measure } from '../../format.ts';
import { Figure } from '../../parts/Figure.tsx';
import { type Column, Table } from '../../parts/Table.tsx';
import { RULE_TEXT } from '../../rules.ts';
import { isScaled } from '../../yearly.ts';
import { ADVICE_TEXT, readable } from './caseTerms.ts';

interface CaseViewProps {
  readonly result: CaseResult;
  readonly placeholder: boolean;
  /** For the one page: the figures that decide, and no others. */
  readonly brief?: boolean;
}

/** The verdict in words, why, what would change it, and the options side by side. */
export function CaseView({ result, placeholder, brief = false }: CaseViewProps) {
  const { format, printing } = usePage();
  return (
    <>
      <p class={`judgement ${result.advice}`}>{readable(result.sentence, format)}</p>
      {placeholder && (
        <p class="aside">
          <span class="mark">placeholder</span> The price is ours, not a quotation: the verdict stands or falls with it.
        </p>
      )}
      <p>{readable(result.reason, format)}</p>
      {/* The page of all four questions has two sides; the case printed by itself has room. */}
      {result.wouldChange.length > 0 && !printing && (
        <>
          <h3>What would change it</h3>
          <ul class="notes">
            {result.wouldChange.map((line) => (
              <li key={line}>{readable(line, format)}</li>
            ))}
          </ul>
        </>
      )}
      <OptionsTable result={result} brief={brief} />
      <p class="aside">{termsText(result, format)}</p>
    </>
  );
}

/** `Over 15 years at 5 % a year, prices rising 0 %; real rates. A year, scaled from 2,000 hours.` */
function termsText({ years, discountRate, energyEscalation, rates, record }: CaseResult, format: Format): string {
  const percent = (rate: number) => format.say(format.percent, 100 * rate);
  const kind = rates === null ? '' : `, ${rates === 'real' ? 'both above inflation' : 'both with inflation'}`;
  const scaled = isScaled(record.hours)
    ? ` Figures a year are scaled from ${format.whole(record.hours)} hours of record.`
    : '';
  return `Over ${years} years at ${percent(discountRate)} a year, energy prices rising ${percent(energyEscalation)} a year${kind}.${scaled}`;
}

interface Line {
  readonly name: string;
  readonly unit?: string;
  readonly cell: (option: OptionResult) => ReturnType<Column<OptionResult>['cell']>;
  /** Left out on the one page for management. */
  readonly detail?: true;
}

const IN_A_LINE = ['Verdict', 'Capital', 'Cost', 'Saved', 'Simple payback', 'Net present value', 'Rate of return'];

function OptionsTable({ result, brief }: { readonly result: CaseResult; readonly brief: boolean }) {
  const { format, printing } = usePage();
  const lines = linesOf(result, format).filter((line) => !((printing || brief) && line.detail));
  if (printing) {
    // Among the other questions on paper it takes a line for each option.
    return (
      <Table
        caption="Side by side"
        rows={result.options}
        keyOf={(option) => option.name}
        name={{ head: 'Option', cell: (option) => option.name }}
        columns={lines
          .filter((line) => IN_A_LINE.includes(line.name))
          .map(
            (line): Column<OptionResult> => ({
              head: line.name,
              ...(line.unit !== undefined && { unit: line.unit }),
              cell: line.cell,
            }),
          )}
      />
    );
  }
  return (
    <Table
      caption="Side by side"
      rows={lines}
      keyOf={(line) => line.name}
      name={{
        head: 'A year, and over its life',
        cell: (line) => (
          <>
            {line.name} {line.unit && <span class="unit">{line.unit}</span>}
          </>
        ),
      }}
      columns={result.options.map(
        (option, i): Column<Line> => ({
          head: `${i === 0 ? 'Leave as it is' : option.name}`,
          cell: (line) => line.cell(option),
        }),
      )}
    />
  );
}

function linesOf({ years, options }: CaseResult, format: Format): Line[] {
  const figure = (name: string, of: Measure, value: (option: OptionResult) => number, detail?: true): Line => ({
    name,
    unit: of.unit,
    cell: (option) => <Figure of={of} value={value(option)} bare />,
    ...(detail && { detail }),
  });
  const or = (of: Measure, value: number | null, otherwise: string) =>
    value === null ? otherwise : <Figure of={of} value={value} bare />;
  const time: Measure = { unit: 'years', factor: 1 };
  const bought = (option: OptionResult) => option.capital - option.incentive > 0;
  return [
    {
      name: 'Verdict',
      cell: (option) => <b>{option === options[0] ? 'as it is' : ADVICE_TEXT[option.advice]}</b>,
    },
    { name: 'Runs by', cell: (option) => RULE_TEXT[option.rule as RuleId].name.toLowerCase() },
    { name: 'Drives needed', cell: (option) => String(option.needsDrives), detail: true },
    figure('Capital', format.money, (option) => option.capital),
    figure('Incentive', format.money, (option) => option.incentive, true),
    figure('Energy', format.energy, (option) => option.annual.energyKwh),
    figure('Cost', format.money, (option) => option.annual.totalCost),
    figure('Saved', format.money, (option) => option.annualCostSaving),
    figure('Energy saved', format.energy, (option) => option.annualEnergySavingKwh, true),
    figure('CO₂ saved', { unit: 'kg', factor: 1 }, (option) => option.annualCarbonSavingKg),
    {
      name: 'Simple payback',
      unit: 'years',
      cell: (option) => (bought(option) ? or(time, option.simplePaybackYears, 'never') : 'no outlay'),
    },
    {
      name: 'Discounted payback',
      unit: 'years',
      cell: (option) => (bought(option) ? or(time, option.discountedPaybackYears, `not in ${years}`) : 'no outlay'),
    },
    figure('Net present value', format.money, (option) => option.npv),
    {
      name: 'Rate of return',
      unit: '%',
      cell: (option) => or(format.percent, option.irr === null ? null : 100 * option.irr, 'none'),
    },
    {
      name: 'Savings to investment',
      cell: (option) => or(format.plain, option.savingsToInvestment, 'no outlay'),
      detail: true,
    },
    figure('Life-cycle cost', format.money, (option) => option.lifeCycleCost),
    figure('Hours with flow unmet', format.hours, (option) => option.shortfallHours, true),
  ];
}
