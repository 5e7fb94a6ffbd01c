import type { QuestionProps } from '../../context.ts';
import { usePage } from '../../context.ts';
import { stepText, typeset } from '../../format.ts';
import { Cautions } from '../../parts/Cautions.tsx';
import { Figure } from '../../parts/Figure.tsx';
import { Table } from '../../parts/Table.tsx';
import { equipmentOf } from '../../station.ts';
import { RecordPicture } from './RecordPicture.tsx';
import { StationNumbers } from './StationNumbers.tsx';

/** A longer list of gaps stays off the paper; their hours are in the facts. */
const PRINTED_GAPS = 6;

/** What the answers are based on: the record, its gaps and doubts, the station's numbers, the exact inputs. */
export function Basis({ open, record, saved, draft, touch }: QuestionProps) {
  const { format, printing } = usePage();
  const { comparison } = open;
  const { report } = record;
  const equipment = equipmentOf(open.station);
  const span = { fromMs: Date.parse(comparison.record.from), toMs: Date.parse(comparison.record.to) };
  return (
    <>
      {!printing && <RecordPicture comparison={comparison} whole={span} duty={equipment.duty} />}
      <dl class="facts">
        <Fact name="Record">
          {record.name}, {format.day(span.fromMs)} to {format.day(span.toMs)}
        </Fact>
        <Fact name="Intervals">
          {format.whole(comparison.record.intervals)}, mostly of {stepText(report.stepSeconds)}
        </Fact>
        <Fact name="Hours with a value">{format.whole(comparison.record.hours)} h</Fact>
        <Fact name="Hours without">
          <Figure of={format.hours} value={comparison.record.gapHours} />
        </Fact>
        <Fact name="Volume">
          <Figure of={format.volume} value={comparison.record.volumeM3} />
        </Fact>
        <Fact name="Flow, least, mean, most">
          <Figure of={format.flow} value={report.minFlowM3s} bare />,{' '}
          <Figure of={format.flow} value={report.meanFlowM3s} bare />,{' '}
          <Figure of={format.flow} value={report.maxFlowM3s} />
        </Fact>
        <Fact name="Firm capacity">
          <Figure of={format.flow} value={comparison.firmCapacityM3s} />, without the largest pump
        </Fact>
        <Fact name="Pumps">
          {equipment.duty} on duty, {equipment.standby} standby; drives fitted on {equipment.fitted}, proposed on{' '}
          {equipment.driven - equipment.fitted}
        </Fact>
        <Fact name="Times">{format.timeZone}</Fact>
      </dl>
      <h3>Notes</h3>
      <Notes notes={[...comparison.notes, ...report.notes]} />
      {report.gaps.length > 0 && !(printing && report.gaps.length > PRINTED_GAPS) && (
        <Table
          caption="Gaps: left out of every figure, never filled"
          tall={report.gaps.length > 12}
          rows={report.gaps}
          keyOf={(gap) => gap.from}
          name={{ head: 'From', cell: (gap) => format.instant(Date.parse(gap.from)) }}
          columns={[
            { head: 'To', cell: (gap) => format.instant(Date.parse(gap.to)) },
            { head: 'Hours', unit: 'h', cell: (gap) => <Figure of={format.hours} value={gap.hours} bare /> },
          ]}
        />
      )}
      <StationNumbers saved={saved} draft={draft} touch={touch} />
      <h3>Exact inputs</h3>
      <dl class="facts hashes">
        <Fact name="Comparison">
          {comparison.id}, {format.instant(Date.parse(comparison.createdAt))}
        </Fact>
        <Fact name={`Station: ${comparison.inputs.station}`}>
          <code>{comparison.inputs.sha256.station}</code>
        </Fact>
        <Fact name={`Record: ${record.fileName}`}>
          <code>{comparison.inputs.sha256.record}</code>
        </Fact>
        <Fact name={`Tariff: ${comparison.inputs.tariff ?? 'none'}`}>
          <code>{comparison.inputs.sha256.tariff ?? 'none'}</code>
        </Fact>
      </dl>
      <Cautions ids={['siteWork']} />
    </>
  );
}

function Fact({ name, children }: { readonly name: string; readonly children: preact.ComponentChildren }) {
  return (
    <div>
      <dt>{name}</dt>
      <dd>{children}</dd>
    </div>
  );
}

function Notes({ notes }: { readonly notes: readonly { readonly code: string; readonly text: string }[] }) {
  if (notes.length === 0) return <p>Nothing was doubted.</p>;
  return (
    <ul class="notes">
      {notes.map((note) => (
        <li key={`${note.code} ${note.text}`}>{typeset(note.text)}</li>
      ))}
    </ul>
  );
}
