import type { RuleResult } from '../../../server/staging/result.ts';
import type { MonthBill, PeriodBill } from '../../../server/tariff/tariff.ts';
import { usePage } from '../../context.ts';
import { type Measure, sentence } from '../../format.ts';
import { Figure } from '../../parts/Figure.tsx';
import { type Column, Table } from '../../parts/Table.tsx';
import { RULE_TEXT } from '../../rules.ts';
import { setText } from '../../runners.ts';

interface RuleDetailsProps {
  readonly rule: RuleResult;
  readonly columns: readonly Column<RuleResult>[];
}

/** A rule in full: what it does, every figure of its row, and its bill by period and month. */
export function RuleDetails({ rule, columns }: RuleDetailsProps) {
  const { format } = usePage();
  const { hours } = format;
  const energy = {
    head: 'Energy',
    unit: 'kWh',
    cell: (each: { readonly energyKwh: number }) => <Figure of={format.energy} value={each.energyKwh} bare />,
  };
  const money = <Row,>(head: string, cost: (row: Row) => number): Column<Row> => ({
    head,
    unit: format.money.unit,
    cell: (row) => <Figure of={format.money} value={cost(row)} bare />,
  });
  const facts: readonly (readonly [string, Measure, number | null])[] = [
    ['Highest power of any state', format.power, rule.peakStateKw],
    ['Wire to water', format.percent, rule.wireToWaterPercent],
    ['Hours with a shortfall', hours, rule.shortfallHours],
    ['Hours below 0.3 of best flow', hours, rule.nearDeadHeadHours],
    ['Hours outside the preferred range', hours, rule.outsidePreferredHours],
    ...(rule.outsideAllowableHours === null
      ? []
      : [['Hours outside the allowable range', hours, rule.outsideAllowableHours] as const]),
    ['Hours with a motor overloaded', hours, rule.overloadHours],
    ['Hours at the end of a curve', hours, rule.endOfCurveHours],
    ...(rule.carbonKg === undefined ? [] : [['Carbon', format.carbon, rule.carbonKg] as const]),
  ];
  return (
    <div class="rule-details">
      <p>{RULE_TEXT[rule.rule].says}</p>
      <dl class="facts">
        {columns.map((column) => (
          <div key={column.head}>
            <dt>{column.head}</dt>
            <dd>
              {column.cell(rule)} {column.unit === format.money.unit ? '' : column.unit}
            </dd>
          </div>
        ))}
        {facts.map(([name, of, value]) => (
          <div key={name}>
            <dt>{name}</dt>
            <dd>
              <Figure of={of} value={value} />
            </dd>
          </div>
        ))}
      </dl>
      <Table
        caption="Hours of each set of pumps"
        rows={Object.entries(rule.hoursBySet).filter(([, hours]) => hours > 0)}
        keyOf={([set]) => set}
        name={{ head: 'Running', cell: ([set]) => sentence(setText(set)) }}
        columns={[{ head: 'Hours', unit: 'h', cell: ([, hours]) => <Figure of={format.hours} value={hours} bare /> }]}
      />
      {rule.periods && (
        <Table
          caption="By period of the tariff"
          rows={rule.periods}
          keyOf={(period) => period.name}
          name={{ head: 'Period', cell: (period) => period.name }}
          columns={[energy, money('Cost', (period: PeriodBill) => period.energyCost)]}
        />
      )}
      {rule.months && (
        <Table
          caption="By month"
          rows={rule.months}
          keyOf={(month) => month.month}
          name={{ head: 'Month', cell: (month) => month.month }}
          columns={[
            energy,
            money('Energy cost', (month: MonthBill) => month.energyCost),
            money('Demand', (month: MonthBill) => month.demandCost),
            money('Total', (month: MonthBill) => month.totalCost),
          ]}
        />
      )}
    </div>
  );
}
