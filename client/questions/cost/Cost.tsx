import { useCallback, useMemo } from 'preact/hooks';
import type { RuleResult } from '../../../server/staging/result.ts';
import { asRun, type Weighed, weigh } from '../../answers.ts';
import { drawBars } from '../../chart/bars.ts';
import { type QuestionProps, usePage } from '../../context.ts';
import { type Format, type Measure, pumps, sentence } from '../../format.ts';
import { Cautions } from '../../parts/Cautions.tsx';
import { Figure } from '../../parts/Figure.tsx';
import { Picture } from '../../parts/Picture.tsx';
import { type Column, Table } from '../../parts/Table.tsx';
import { RULE_TEXT, ruleName } from '../../rules.ts';
import { setText } from '../../runners.ts';
import { type Bars, countsOf } from '../../series.ts';
import { LedgerBars } from './LedgerBars.tsx';
import { LedgerTable } from './LedgerTable.tsx';
import { aboveFloor } from './ledger.ts';
import { RuleDetails } from './RuleDetails.tsx';

/** What it costs: the rules side by side, and what each takes above the least. */
export function Cost({ open }: QuestionProps) {
  const { format, printing } = usePage();
  const weighed = useMemo(() => weigh(open), [open]);
  const { rules, record, inputs } = open.comparison;
  const bars = useMemo(() => (weighed ? barsOf(weighed, format) : null), [weighed, format]);
  const draw = useCallback<Parameters<typeof Picture>[0]['draw']>(
    (canvas, look) => drawBars(canvas, bars!, look),
    [bars],
  );
  if (weighed === null || bars === null) return <p>No rule could be run on this station: the notes say why.</p>;
  const least = weighed.least.rule.rule;
  const columns = columnsOf(rules, format);
  const table = (
    <Table
      caption={`Rules side by side over the record, ${format.whole(record.hours)} hours${inputs.tariff ? `, under ${inputs.tariff}` : ''}`}
      rows={rules}
      keyOf={(rule) => rule.rule}
      name={{ head: 'Rule', cell: (rule) => RULE_TEXT[rule.rule].name }}
      columns={columns}
      mark={(rule) => (rule.rule === least ? 'least' : null)}
      details={(rule) => <RuleDetails rule={rule} columns={columns} />}
    />
  );
  return (
    <>
      <Picture
        title={barsSentence(weighed, format)}
        height={{ rows: rules.length }}
        draw={draw}
        numbers={() => <YearNumbers weighed={weighed} />}
      >
        {table}
      </Picture>
      {/* Paper has room for two sides; the shares of the best count are under its picture. */}
      {!printing && (open.power.alike ? <HoursTable rules={rules} /> : <SetHoursTable rules={rules} />)}
      {printing ? (
        <LedgerTable rules={rules} />
      ) : (
        <LedgerBars rules={rules} today={weighed.today.rule} floorKwh={open.comparison.floor?.energyKwh} />
      )}
      <Cautions ids={['starts', 'suction']} />
    </>
  );
}

/** A smaller share than this is no difference. */
const UNTOLD = 5e-4;

function barsSentence({ weighing, least, today, rules }: Weighed, format: Format): string {
  const measure = weighing === 'money' ? format.money : format.energy;
  const verb = weighing === 'money' ? 'costs' : 'takes';
  if (rules.length === 1) {
    return `${sentence(ruleName(least.rule.rule))} ${verb} ${format.say(measure, least.perYear)} a year`;
  }
  if (today.perYear - least.perYear < UNTOLD * least.perYear) {
    return `${sentence(asRun(today.rule.rule))} it ${verb} as little as under any other rule`;
  }
  const above = format.say(measure, today.perYear - least.perYear);
  return `${sentence(ruleName(least.rule.rule))} ${verb} least; ${asRun(today.rule.rule)} it is ${above} a year more`;
}

function barsOf({ weighing, least, rules }: Weighed, format: Format): Bars {
  const measure = weighing === 'money' ? format.money : format.energy;
  return {
    title: weighing === 'money' ? `Cost a year, ${measure.unit}` : 'Energy a year, kWh',
    bars: rules.map(({ rule, perYear }) => ({
      label: RULE_TEXT[rule.rule].name,
      base: Math.min(perYear, least.perYear),
      above: perYear - least.perYear,
      text:
        perYear === least.perYear ? format.say(measure, perYear) : `+ ${format.say(measure, perYear - least.perYear)}`,
    })),
  };
}

function columnsOf(rules: readonly RuleResult[], format: Format): Column<RuleResult>[] {
  const column = (
    head: string,
    measure: Measure,
    value: (rule: RuleResult) => number | null | undefined,
    wide = false,
  ): Column<RuleResult> => ({
    head,
    ...(measure.unit !== '' && { unit: measure.unit }),
    cell: (rule) => <Figure of={measure} value={value(rule)} bare />,
    wide,
  });
  const money: Column<RuleResult>[] = rules.some((rule) => rule.totalCost !== undefined)
    ? [
        column('Total', format.money, (rule) => rule.totalCost),
        column('Energy cost', format.money, (rule) => rule.energyCost, true),
        column('Demand', format.money, (rule) => rule.demandCost, true),
        column('Fixed', format.money, (rule) => rule.fixedCost, true),
        column('Tax', format.money, (rule) => rule.taxCost, true),
      ]
    : [];
  return [
    column('Energy', format.energy, (rule) => rule.energyKwh),
    column('Per volume', format.specific, (rule) => rule.kwhPerM3, true),
    ...money,
    ...(rules.some((rule) => rule.aboveFloorPercent !== undefined) ? [above(format)] : []),
    column('Peak', format.power, (rule) => rule.peakKw, true),
    column('Shortfall', format.volume, (rule) => rule.shortfallM3, true),
    column('Starts', format.plain, (rule) => rule.starts, true),
  ];
}

/** How far a rule is above the least possible, in the accent for what could be saved. */
function above(format: Format): Column<RuleResult> {
  return {
    head: 'Above least energy',
    unit: format.percent.unit,
    cell: (rule) => (
      <span class="above-floor">
        <Figure of={format.percent} value={aboveFloor(rule)} bare />
      </span>
    ),
  };
}

function HoursTable({ rules }: { readonly rules: readonly RuleResult[] }) {
  const { format } = usePage();
  return (
    <Table
      caption="Hours with each count running"
      rows={rules}
      keyOf={(rule) => rule.rule}
      name={{ head: 'Rule', cell: (rule) => RULE_TEXT[rule.rule].name }}
      columns={countsOf(rules).map(
        (count): Column<RuleResult> => ({
          head: count === 0 ? 'None' : pumps(count),
          unit: 'h',
          cell: (rule) => <Figure of={format.hours} value={rule.hoursByCount[count] ?? 0} bare />,
        }),
      )}
    />
  );
}

/** For pumps that differ: hours of each set, by rule. */
function SetHoursTable({ rules }: { readonly rules: readonly RuleResult[] }) {
  const { format } = usePage();
  const sets = [...new Set(rules.flatMap((rule) => Object.keys(rule.hoursBySet)))].sort(
    (a, b) => (a === 'off' ? 0 : a.split('+').length) - (b === 'off' ? 0 : b.split('+').length),
  );
  return (
    <Table
      caption="Hours with each set running"
      rows={sets}
      keyOf={(set) => set}
      name={{ head: 'Running', cell: (set) => sentence(setText(set)) }}
      columns={rules.map(
        (rule): Column<string> => ({
          head: RULE_TEXT[rule.rule].name,
          unit: 'h',
          cell: (set) => <Figure of={format.hours} value={rule.hoursBySet[set] ?? 0} bare />,
        }),
      )}
    />
  );
}

function YearNumbers({ weighed: { rules, least, weighing } }: { readonly weighed: Weighed }) {
  const { format } = usePage();
  const measure = weighing === 'money' ? format.money : format.energy;
  return (
    <Table
      caption="A year"
      rows={rules}
      keyOf={({ rule }) => rule.rule}
      name={{ head: 'Rule', cell: ({ rule }) => RULE_TEXT[rule.rule].name }}
      columns={[
        { head: 'A year', unit: measure.unit, cell: (each) => format.bare(measure, each.perYear).full },
        {
          head: 'Above the least',
          unit: measure.unit,
          cell: (each) => format.bare(measure, each.perYear - least.perYear).full,
        },
      ]}
    />
  );
}
