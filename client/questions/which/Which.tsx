import { useCallback, useMemo } from 'preact/hooks';
import type { PowerOverFlow } from '../../../server/staging/pictures.ts';
import { stepsText } from '../../answers.ts';
import { drawCurves, drawHours } from '../../chart/curves.ts';
import { type QuestionProps, usePage } from '../../context.ts';
import { Cautions } from '../../parts/Cautions.tsx';
import { Figure } from '../../parts/Figure.tsx';
import { Picture } from '../../parts/Picture.tsx';
import { StaticHead } from '../../parts/StaticHead.tsx';
import { Table } from '../../parts/Table.tsx';
import { runnersOf } from '../../runners.ts';
import { crossingsOf, curvesOf, hoursByFlow, leastRunners } from '../../series.ts';
import { dutyNames } from '../../station.ts';
import { Card } from './Card.tsx';
import { CountMap } from './CountMap.tsx';
import { hoursSentence } from './hoursSentence.ts';
import { SpotReadings } from './SpotReadings.tsx';

/** Which pump, when: power over flow for each count or set of pumps, and under it the hours that the record spends at each flow. */
export function Which({ open, record, saved, draft, touch, without, onWithout }: QuestionProps) {
  const { format, printing } = usePage();
  const { power, comparison } = open;
  const curves = useMemo(() => curvesOf(power, format), [power, format]);
  const hours = useMemo(() => hoursByFlow(power, format), [power, format]);
  const varies = comparison.notes.find((note) => note.code.startsWith('static-head-from'));
  return (
    <>
      <div class="touches no-print">
        <StaticHead saved={saved} draft={draft} touch={touch} />
        <TakenOut names={dutyNames(saved)} without={without} onWithout={onWithout} />
        <p class="aside">{varies ? varies.text : 'Curves, crossings, table and bill follow.'}</p>
      </div>
      <Picture
        title={stepsText(power, format)}
        height="tall"
        draw={useCallback((canvas, look) => drawCurves(canvas, curves, look), [curves])}
        numbers={() => <PowerNumbers power={power} />}
      />
      <Picture
        title={hoursSentence(comparison, format, power)}
        height="low"
        draw={useCallback((canvas, look) => drawHours(canvas, hours, curves, look), [hours, curves])}
        numbers={() => <HoursNumbers power={power} />}
      />
      <p class="aside">{howDrawn(power, draft.surplus)}</p>
      {/* The card has a sheet of its own. */}
      {!printing && <Card open={open} record={record} />}
      {!printing && <CountMap comparisonId={comparison.id} most={power.counts.length} alike={power.alike} />}
      {!printing && <SpotReadings saved={saved} without={without} alike={power.alike} />}
      <Cautions ids={['minimumFlow', 'minimumSpeed', 'surge', 'solids']} />
    </>
  );
}

interface TakenOutProps extends Pick<QuestionProps, 'without' | 'onWithout'> {
  readonly names: readonly string[];
}

/** Pumps that can be taken out, one after the other; the last one stays. */
function TakenOut({ names, without, onWithout }: TakenOutProps) {
  if (names.length < 2) return null;
  const left = names.length - without.length;
  return (
    <fieldset class="out">
      <legend class="label">Taken out</legend>
      {names.map((name) => {
        const out = without.includes(name);
        return (
          <label key={name}>
            <input
              type="checkbox"
              checked={out}
              disabled={!out && left === 1}
              onChange={() => onWithout(out ? without.filter((each) => each !== name) : [...without, name])}
            />{' '}
            {name}
          </label>
        );
      })}
    </fieldset>
  );
}

/** How power is reckoned in the picture, in words. */
function howDrawn({ onDrives, alike, sets }: PowerOverFlow, surplus: 'storage' | 'throttle'): string {
  const standby = 'Standby power is included.';
  if (sets.length > 0)
    return `Sets that are the best somewhere, each at the speeds and the split of flow that draw least; pumps without a drive run at full speed. ${standby}`;
  const order = alike ? '' : "Pumps come on in the station's own order. ";
  if (onDrives) return `${order}All running pumps turn at one speed, trimmed to the flow. ${standby}`;
  if (surplus === 'throttle') return `${order}Pumps at full speed; a valve takes up the rest. ${standby}`;
  return `${order}Pumps at full speed, sharing time with one pump fewer. ${standby}`;
}

function PowerNumbers({ power }: { readonly power: PowerOverFlow }) {
  const { format } = usePage();
  const least = useMemo(() => leastRunners(power), [power]);
  const runners = useMemo(() => runnersOf(power), [power]);
  const nameOf = (id: number) => runners.find((each) => each.id === id)?.name ?? 'none';
  return (
    <>
      <Table
        caption="Where one gives way to another"
        rows={crossingsOf(power)}
        keyOf={(row) => `${row.from}-${row.flowM3s}`}
        name={{ head: 'Below', cell: (row) => nameOf(row.from) }}
        columns={[
          { head: 'Flow', unit: format.flow.unit, cell: (row) => format.bare(format.flow, row.flowM3s).full },
          { head: 'Mean power', unit: 'kW', cell: (row) => format.bare(format.power, row.powerKw).full },
          { head: 'Cheaper above', words: true, cell: (row) => nameOf(row.to) },
        ]}
      />
      <Table
        caption="Mean power over flow"
        tall
        rows={power.flowM3s.map((flow, i) => ({ flow, i }))}
        keyOf={(row) => String(row.i)}
        name={{
          head: 'Flow',
          unit: format.flow.unit,
          cell: (row) => format.bare(format.flow, row.flow).full,
        }}
        columns={[
          ...runners.map(({ name, powerKw }) => ({
            head: name,
            unit: 'kW',
            cell: ({ i }: { i: number }) =>
              powerKw[i] == null ? 'cannot' : format.bare(format.power, powerKw[i]).full,
          })),
          { head: 'Draws least', words: true, cell: ({ i }) => (least[i] === null ? 'none' : nameOf(least[i]!)) },
        ]}
      />
    </>
  );
}

function HoursNumbers({ power }: { readonly power: PowerOverFlow }) {
  const { format } = usePage();
  return (
    <Table
      caption="Hours of the record by flow"
      tall
      rows={power.hours}
      keyOf={(row) => String(row.fromM3s)}
      name={{ head: 'From', unit: format.flow.unit, cell: (row) => format.bare(format.flow, row.fromM3s).full }}
      columns={[
        { head: 'To', unit: format.flow.unit, cell: (row) => format.bare(format.flow, row.toM3s).full },
        { head: 'Hours', unit: 'h', cell: (row) => <Figure of={format.hours} value={row.hours} bare /> },
      ]}
    />
  );
}
