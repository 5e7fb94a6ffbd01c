import { HEAD_UNITS } from '../../../server/units.ts';
import { type Change as ChangeFound, changesOf, changeText, liftText, unlikeText, weigh } from '../../answers.ts';
import { type QuestionProps, usePage } from '../../context.ts';
import { Cautions } from '../../parts/Cautions.tsx';
import { Figure } from '../../parts/Figure.tsx';
import { Table } from '../../parts/Table.tsx';
import { Touch } from '../../parts/Touch.tsx';
import { RULE_TEXT } from '../../rules.ts';
import { equipmentOf } from '../../station.ts';
import { isScaled } from '../../yearly.ts';
import { LEDGER_PARTS, partOf, withoutDust } from '../cost/ledger.ts';

/** Whether a change is worth it: each possible change against what the station can do as it is equipped. */
export function Change({ open, saved, draft, touch }: QuestionProps) {
  const { format, printing } = usePage();
  const found = changesOf(open);
  const weighed = weigh(open);
  if (found === null || weighed === null || found.changes.length === 0) {
    return <p>With one rule alone there is nothing to set against it: see the notes for the rules left out.</p>;
  }
  const { changes, weighing } = found;
  const drives = equipmentOf(open.station);
  const measure = weighing === 'money' ? format.money : format.energy;
  const perYear = (rule: ChangeFound['from']) => weighed.rules.find((each) => each.rule === rule)!.perYear;
  const deciding = changes.find((change) => change.kind === 'drives') ?? changes[0]!;
  const { hours } = open.comparison.record;
  const unlike = unlikeText(changes, format);
  return (
    <>
      <ul class="verdicts">
        {changes.map((change) => (
          <li key={change.kind} class={change.gainPerYear > 0 ? 'gains' : 'loses'}>
            {changeText(change, weighing, drives, format)}.
          </li>
        ))}
      </ul>
      {unlike && <p>{unlike}.</p>}
      <p>{liftText(deciding.from, format)}</p>
      <div class="touches no-print">
        <Touch
          label="Static head"
          measure={format.head}
          fileFactor={HEAD_UNITS[draft.units.head]}
          value={draft.system.staticHead}
          saved={saved.system.staticHead}
          onChange={(value) => touch(['system', 'staticHead'], value)}
        />
        <p class="aside">It decides most of what drives can do: try another.</p>
      </div>
      <Table
        caption={isScaled(hours) ? `A year, scaled from ${format.whole(hours)} hours of record` : 'A year'}
        rows={changes}
        keyOf={(change) => change.kind}
        name={{
          head: 'Change',
          cell: ({ from, to }) => `${RULE_TEXT[from.rule].name} to ${RULE_TEXT[to.rule].name.toLowerCase()}`,
        }}
        columns={[
          {
            head: 'Before',
            unit: measure.unit,
            cell: ({ from }) => <Figure of={measure} value={perYear(from)} bare />,
          },
          { head: 'After', unit: measure.unit, cell: ({ to }) => <Figure of={measure} value={perYear(to)} bare /> },
          {
            head: 'Saved',
            unit: measure.unit,
            cell: ({ gainPerYear }) => <Figure of={measure} value={gainPerYear} bare />,
          },
          {
            head: 'Saved',
            unit: '%',
            cell: ({ gainPercent }) => <Figure of={format.percent} value={gainPercent} bare />,
          },
          { head: 'Drives needed', cell: ({ to }) => String(to.needsDrives) },
        ]}
      />
      {/* On paper the ledger of all rules stands under what it costs. */}
      {!printing && <LedgerDifference change={deciding} />}
      <p class="aside">
        What a change costs to make, its payback and how sure it is are not in these figures. Less than a year of record
        has not seen every season.
      </p>
      <Cautions ids={['drives', 'surge', 'firm']} />
    </>
  );
}

function LedgerDifference({ change: { from, to } }: { readonly change: ChangeFound }) {
  const { format } = usePage();
  const rows = LEDGER_PARTS.map(({ part, name }) => ({
    name,
    before: partOf(from, part),
    after: partOf(to, part),
  }));
  const total = { name: 'Total', before: from.energyKwh, after: to.energyKwh };
  const column = (head: string, value: (row: typeof total) => number) => ({
    head,
    unit: format.energy.unit,
    cell: (row: typeof total) => <Figure of={format.energy} value={withoutDust(value(row), total.before)} bare />,
  });
  return (
    <Table
      caption={`Why: where the energy goes over the record, ${RULE_TEXT[from.rule].name.toLowerCase()} and ${RULE_TEXT[to.rule].name.toLowerCase()}`}
      rows={[...rows, total]}
      keyOf={(row) => row.name}
      name={{ head: 'Part', cell: (row) => row.name }}
      columns={[
        column(RULE_TEXT[from.rule].name, (row) => row.before),
        column(RULE_TEXT[to.rule].name, (row) => row.after),
        column('Saved', (row) => row.before - row.after),
      ]}
    />
  );
}
