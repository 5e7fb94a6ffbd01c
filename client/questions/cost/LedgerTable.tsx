import type { RuleResult } from '../../../server/staging/result.ts';
import { usePage } from '../../context.ts';
import { Figure } from '../../parts/Figure.tsx';
import { type Column, Table } from '../../parts/Table.tsx';
import { RULE_TEXT } from '../../rules.ts';
import { LEDGER_PARTS, partOf } from './ledger.ts';

/** Where the kWh of each rule go; the parts add up to its energy. */
export function LedgerTable({ rules }: { readonly rules: readonly RuleResult[] }) {
  const { format } = usePage();
  return (
    <Table
      caption="Where the energy goes"
      rows={rules}
      keyOf={(rule) => rule.rule}
      name={{ head: 'Rule', cell: (rule) => RULE_TEXT[rule.rule].name }}
      columns={LEDGER_PARTS.map(
        ({ part, name }): Column<RuleResult> => ({
          head: name,
          unit: format.energy.unit,
          cell: (rule) => <Figure of={format.energy} value={partOf(rule, part)} bare />,
        }),
      )}
    />
  );
}
