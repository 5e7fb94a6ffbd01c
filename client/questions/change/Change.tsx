import type { CaseResult } from '../../../server/makeCase.ts';
import { type Change as ChangeFound, changesOf, changeText, liftText, unlikeText, weigh } from '../../answers.ts';
import { type QuestionProps, usePage } from '../../context.ts';
import { Cautions } from '../../parts/Cautions.tsx';
import { Figure } from '../../parts/Figure.tsx';
import { StaticHead } from '../../parts/StaticHead.tsx';
import { Table } from '../../parts/Table.tsx';
import { RULE_TEXT } from '../../rules.ts';
import { equipmentOf } from '../../station.ts';
import { isScaled } from '../../yearly.ts';
import { LEDGER_PARTS, partOf, withoutDust } from '../cost/ledger.ts';
import { madeFrom } from '../which/cardText.ts';
import { CaseForm } from './CaseForm.tsx';
import { CaseView } from './CaseView.tsx';
import { isPlaceholder } from './caseTerms.ts';
import type { CaseWork } from './useCase.ts';

/** Whether a change is worth it: the case for it where there is money to weigh, else energy against energy. */
export function Change(props: QuestionProps) {
  return props.work === null ? <EnergyChange {...props} /> : <TheCase {...props} work={props.work} />;
}

function TheCase({ open, record, saved, draft, touch, work }: QuestionProps & { readonly work: CaseWork }) {
  const { format, printing, printSheet } = usePage();
  const { result, start } = work;
  const placeholder = isPlaceholder(work.draft, start);
  const rules = open.comparison.rules;
  const [from, to] = [work.draft.baseline, work.draft.proposed].map((id) => rules.find((rule) => rule.rule === id));
  const unlike = from && to ? unlikeText([{ from, to }], format) : null;
  return (
    <>
      <div aria-busy={work.busy} class={work.busy ? 'stale' : undefined}>
        {result ? (
          <div class="case">
            <CaseView result={result} placeholder={placeholder} />
            {unlike && <p>{unlike}.</p>}
          </div>
        ) : (
          <p role="status">
            {work.busy
              ? 'Working out the case…'
              : work.draft.capital === null
                ? 'Unknown until a price is given: see the terms below.'
                : 'Not answered: see what is marked in the terms.'}
          </p>
        )}
      </div>
      <div class="touches no-print">
        <StaticHead saved={saved} draft={draft} touch={touch} />
        <button
          type="button"
          disabled={result === null}
          onClick={() =>
            result && printSheet('case', <CaseSheet open={open} record={record} work={work} result={result} />)
          }
        >
          Print the case
        </button>
      </div>
      {!printing && <CaseForm work={work} rules={rules.map((rule) => rule.rule)} />}
      {/* On paper the ledger of all rules stands under what it costs. */}
      {!printing && from && to && from !== to && <LedgerDifference change={{ from, to }} />}
      <Cautions ids={['drives', 'surge', 'firm']} />
    </>
  );
}

interface CaseSheetProps extends Pick<QuestionProps, 'open' | 'record'> {
  readonly work: CaseWork;
  readonly result: CaseResult;
}

/** The case on one side of paper, for whoever decides. */
function CaseSheet({ open, record, work, result }: CaseSheetProps) {
  const { format } = usePage();
  return (
    <>
      <p class="sheet-kind">The case for a change</p>
      <h1>{result.station}</h1>
      <CaseView result={result} placeholder={isPlaceholder(work.draft, work.start)} brief />
      <ul class="sheet-cautions">
        {result.cautions.map((text) => (
          <li key={text}>{text}</li>
        ))}
        {result.notes.map((note) => (
          <li key={note.code + note.text}>{note.text}</li>
        ))}
      </ul>
      <p class="made">
        Printed {format.day(Date.now())}. From {madeFrom(open.comparison, record, format)}. Tariff:{' '}
        {open.comparison.inputs.tariff}.
      </p>
    </>
  );
}

/** Each possible change against what the station can do as it is equipped, in energy, for want of a tariff. */
function EnergyChange({ open, saved, draft, touch }: QuestionProps) {
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
        <StaticHead saved={saved} draft={draft} touch={touch} />
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
        What a change costs to make and its payback need a tariff: give one to have the case worked out. Less than a
        year of record has not seen every season.
      </p>
      <Cautions ids={['drives', 'surge', 'firm']} />
    </>
  );
}

function LedgerDifference({ change: { from, to } }: { readonly change: Pick<ChangeFound, 'from' | 'to'> }) {
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
