import type { RuleResult } from '../../../server/staging/result.ts';
import { usePage } from '../../context.ts';
import { sentence } from '../../format.ts';
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
        <div>
          <dt>Highest power of any state</dt>
          <dd>
            <Figure of={format.power} value={rule.peakStateKw} />
          </dd>
        </div>
        <div>
          <dt>Wire to water</dt>
          <dd>
            <Figure of={format.percent} value={rule.wireToWaterPercent} />
          </dd>
        </div>
        <div>
          <dt>Hours with a shortfall</dt>
          <dd>
            <Figure of={format.hours} value={rule.shortfallHours} />
          </dd>
        </div>
        <div>
          <dt>Hours below 0.3 of best flow</dt>
          <dd>
            <Figure of={format.hours} value={rule.nearDeadHeadHours} />
          </dd>
        </div>
        <div>
          <dt>Hours outside the preferred range</dt>
          <dd>
            <Figure of={format.hours} value={rule.outsidePreferredHours} />
          </dd>
        </div>
        {rule.outsideAllowableHours !== null && (
          <div>
            <dt>Hours outside the allowable range</dt>
            <dd>
              <Figure of={format.hours} value={rule.outsideAllowableHours} />
            </dd>
          </div>
        )}
        <div>
          <dt>Hours with a motor overloaded</dt>
          <dd>
            <Figure of={format.hours} value={rule.overloadHours} />
          </dd>
        </div>
        <div>
          <dt>Hours at the end of a curve</dt>
          <dd>
            <Figure of={format.hours} value={rule.endOfCurveHours} />
          </dd>
        </div>
        {rule.carbonKg !== undefined && (
          <div>
            <dt>Carbon</dt>
            <dd>
              <Figure of={format.carbon} value={rule.carbonKg} />
            </dd>
          </div>
        )}
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
          columns={[
            { head: 'Energy', unit: 'kWh', cell: (each) => <Figure of={format.energy} value={each.energyKwh} bare /> },
            {
              head: 'Cost',
              unit: format.money.unit,
              cell: (each) => <Figure of={format.money} value={each.energyCost} bare />,
            },
          ]}
        />
      )}
      {rule.months && (
        <Table
          caption="By month"
          rows={rule.months}
          keyOf={(month) => month.month}
          name={{ head: 'Month', cell: (month) => month.month }}
          columns={[
            { head: 'Energy', unit: 'kWh', cell: (each) => <Figure of={format.energy} value={each.energyKwh} bare /> },
            {
              head: 'Energy cost',
              unit: format.money.unit,
              cell: (each) => <Figure of={format.money} value={each.energyCost} bare />,
            },
            {
              head: 'Demand',
              unit: format.money.unit,
              cell: (each) => <Figure of={format.money} value={each.demandCost} bare />,
            },
            {
              head: 'Total',
              unit: format.money.unit,
              cell: (each) => <Figure of={format.money} value={each.totalCost} bare />,
            },
          ]}
        />
      )}
    </div>
  );
}
