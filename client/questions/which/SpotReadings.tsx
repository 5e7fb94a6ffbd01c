import { useEffect, useState } from 'preact/hooks';
import { FLOW_UNITS, HEAD_UNITS } from '../../../server/units.ts';
import { api, type LaidReading, linesOf, type SpotReading, type StationBody } from '../../api.ts';
import { usePage } from '../../context.ts';
import { type Format, list, type Measure } from '../../format.ts';
import { Faults } from '../../parts/Faults.tsx';
import { NumberField } from '../../parts/Field.tsx';
import { type Column, Table } from '../../parts/Table.tsx';
import { dutyNames } from '../../station.ts';

interface SpotReadingsProps {
  readonly saved: StationBody;
  readonly without: readonly string[];
  /** Whether a count says who ran. */
  readonly alike: boolean;
}

const UNREAD = { flow: null, head: null, powerKw: null };
const SETTLE_MS = 300;

/** A handful of gauge readings beside the curves: a first look at whether the curves are those of the pumps. */
export function SpotReadings({ saved, without, alike }: SpotReadingsProps) {
  const { format } = usePage();
  const names = dutyNames(saved).filter((name) => !without.includes(name));
  const [rows, setRows] = useState<readonly SpotReading[]>(() => [
    { ...UNREAD, ...(alike ? { pumpsOn: 1 } : { pumps: names.slice(0, 1) }) },
  ]);
  const [laid, setLaid] = useState<readonly LaidReading[]>([]);
  const [faults, setFaults] = useState<readonly string[]>([]);
  const flow = FLOW_UNITS[saved.units.flow];
  const head = HEAD_UNITS[saved.units.head];
  useEffect(() => {
    const read = rows.filter((row) => row.flow !== null || row.head !== null || row.powerKw !== null);
    if (read.length === 0) return setLaid([]);
    const asking = new AbortController();
    const timer = setTimeout(
      () =>
        api.spotReadings(saved.id, read, without, asking.signal).then(
          ({ readings }) => {
            setLaid(readings);
            setFaults([]);
          },
          (error) => asking.signal.aborted || setFaults(linesOf(error)),
        ),
      SETTLE_MS,
    );
    return () => {
      clearTimeout(timer);
      asking.abort();
    };
  }, [rows, saved, without]);
  const change = (i: number, fields: Partial<SpotReading>) =>
    setRows(rows.map((row, k) => (k === i ? { ...row, ...fields } : row)));
  // What is typed is in the unit of the reader; what is asked, in that of the station.
  const field = (i: number, name: 'flow' | 'head', measure: Measure, unit: number) => (
    <NumberField
      label={name === 'flow' ? 'Total flow' : 'Head across the pumps'}
      unit={measure.unit}
      scale={unit * measure.factor}
      value={rows[i]![name]}
      onChange={(value) => change(i, { [name]: value })}
    />
  );
  return (
    <details class="more">
      <summary>Lay gauge readings on the curves</summary>
      <form aria-label="Gauge readings" onSubmit={(event) => event.preventDefault()}>
        {rows.map((row, i) => (
          <fieldset key={i} class="reading">
            <legend>Reading {i + 1}</legend>
            {row.pumps ? (
              <PumpsOn names={names} on={row.pumps} onChange={(pumps) => change(i, { pumps })} />
            ) : (
              <NumberField
                label="Pumps on"
                step={1}
                value={row.pumpsOn ?? 1}
                onChange={(pumpsOn) => change(i, { pumpsOn: pumpsOn ?? 1 })}
              />
            )}
            {field(i, 'flow', format.flow, flow)}
            {field(i, 'head', format.head, head)}
            <NumberField label="Power" unit="kW" value={row.powerKw} onChange={(powerKw) => change(i, { powerKw })} />
            {rows.length > 1 && (
              <button
                type="button"
                class="quiet"
                aria-label={`Remove reading ${i + 1}`}
                onClick={() => setRows(rows.filter((_, k) => k !== i))}
              >
                Remove
              </button>
            )}
          </fieldset>
        ))}
        <button type="button" class="quiet" onClick={() => setRows([...rows, rows.at(-1)!])}>
          Add a reading
        </button>
      </form>
      <Faults lines={faults} />
      {laid.length > 0 && (
        <>
          <Table
            caption="Readings beside the curves"
            rows={laid.map((reading, i) => ({ ...reading, i }))}
            keyOf={({ i }) => String(i)}
            name={{ head: 'Reading', cell: ({ i, pumps }) => (alike ? String(i + 1) : `${i + 1}, ${list(pumps)}`) }}
            columns={columnsOf(format, { flow, head })}
          />
          <p class="aside">
            Curves of the saved station, pumps direct on line. Some percent are within what gauges and makers'
            tolerances leave open; more asks for a test of the pump.
          </p>
        </>
      )}
    </details>
  );
}

interface PumpsOnProps {
  readonly names: readonly string[];
  readonly on: readonly string[];
  readonly onChange: (on: readonly string[]) => void;
}

/** Which of the pumps ran; the last one stays. */
function PumpsOn({ names, on, onChange }: PumpsOnProps) {
  return (
    <fieldset class="out">
      <legend class="label">Pumps on</legend>
      {names.map((name) => (
        <label key={name}>
          <input
            type="checkbox"
            checked={on.includes(name)}
            disabled={on.length === 1 && on[0] === name}
            onChange={() => onChange(names.filter((each) => (each === name) !== on.includes(each)))}
          />{' '}
          {name}
        </label>
      ))}
    </fieldset>
  );
}

function columnsOf(format: Format, { flow, head }: { flow: number; head: number }): Column<LaidReading>[] {
  const off = (read: number | null, said: number | null) =>
    read === null || said === null || said === 0 ? 'not read' : format.say(format.percent, 100 * (read / said - 1));
  const bare = (measure: Measure, value: number | null, unit: number) =>
    value === null ? 'not read' : format.bare(measure, value * unit).text;
  return [
    { head: 'Flow', unit: format.flow.unit, cell: (row) => bare(format.flow, row.flow, flow) },
    { head: 'where curves meet', unit: format.flow.unit, cell: (row) => bare(format.flow, row.curveFlow, flow) },
    { head: 'off by', cell: (row) => off(row.flow, row.curveFlow) },
    { head: 'Head', unit: format.head.unit, cell: (row) => bare(format.head, row.head, head) },
    {
      head: 'pumps at that flow',
      unit: format.head.unit,
      cell: (row) => (row.curveHead === null ? 'unknown' : bare(format.head, row.curveHead, head)),
    },
    {
      head: 'system at that flow',
      unit: format.head.unit,
      cell: (row) => (row.systemHead === null ? 'unknown' : bare(format.head, row.systemHead, head)),
    },
    { head: 'Power', unit: 'kW', cell: (row) => bare(format.power, row.powerKw, 1) },
    { head: 'by the curves', unit: 'kW', cell: (row) => bare(format.power, row.curvePowerKw, 1) },
    { head: 'power off by', cell: (row) => off(row.powerKw, row.curvePowerKw) },
  ];
}
