import { useEffect, useMemo, useState } from 'preact/hooks';
import type { BestCountMap } from '../../../server/staging/bestCountMap.ts';
import { api, linesOf } from '../../api.ts';
import { usePage } from '../../context.ts';
import { Exhibit } from '../../parts/Exhibit.tsx';
import { Table } from '../../parts/Table.tsx';
import { niceTicks } from '../../series.ts';
import { cellOf, mapSentence, namesOf, rowText, runsOf } from './countMap.ts';
import { countShade } from './Ladder.tsx';

/** The map, asked for when it is opened. */
export function CountMap({ comparisonId, most }: { readonly comparisonId: number; readonly most: number }) {
  const [open, setOpen] = useState(false);
  return (
    <details class="more" open={open} onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary>Map of the best count over flow and static head</summary>
      {open && <Loaded comparisonId={comparisonId} most={most} />}
    </details>
  );
}

function Loaded({ comparisonId, most }: { readonly comparisonId: number; readonly most: number }) {
  const [map, setMap] = useState<BestCountMap | null>(null);
  const [faults, setFaults] = useState<readonly string[]>([]);
  useEffect(() => {
    const asking = new AbortController();
    api.map(comparisonId, asking.signal).then(
      (found) => {
        setMap(found);
        setFaults([]);
      },
      (error) => asking.signal.aborted || setFaults(linesOf(error)),
    );
    return () => asking.abort();
  }, [comparisonId]);
  if (faults.length > 0) return <p class="faults">{faults.join(' ')}</p>;
  return map ? <MapPicture map={map} most={most} /> : <p role="status">Drawing the map…</p>;
}

const WIDTH = 760;
const HEIGHT = 380;
const LEFT = 64;
const BOTTOM = 48;
const TOP = 10;
const RIGHT = 12;
/** Radius of the dot for the cell with most hours. */
const LARGEST_DOT = 8;

function MapPicture({ map, most }: { readonly map: BestCountMap; readonly most: number }) {
  const { format } = usePage();
  const title = mapSentence(map, format);
  const drawn = useMemo(() => {
    const cell = cellOf(map);
    const rows = map.staticHeadM.length;
    const top = map.flowM3s.at(-1)! + cell.flow / 2;
    const lowest = map.staticHeadM[0]! - cell.head / 2;
    const highest = map.staticHeadM.at(-1)! + cell.head / 2;
    const x = (flow: number) => LEFT + ((WIDTH - LEFT - RIGHT) * flow) / top;
    const y = (head: number) => HEIGHT - BOTTOM - ((HEIGHT - BOTTOM - TOP) * (head - lowest)) / (highest - lowest);
    const runs = runsOf(map);
    const mostHours = Math.max(0, ...map.hours.flat());
    const dots = map.hours.flatMap((hours, row) =>
      hours.flatMap((each, column) =>
        each > 0 ? [{ row, column, hours: each, r: Math.max(0.7, LARGEST_DOT * Math.sqrt(each / mostHours)) }] : [],
      ),
    );
    return { cell, rows, top, lowest, highest, x, y, runs, names: namesOf(runs), dots };
  }, [map]);
  const { cell, x, y } = drawn;
  const ticks = {
    x: niceTicks(0, drawn.top * format.flow.factor, 7),
    y: niceTicks(drawn.lowest * format.head.factor, drawn.highest * format.head.factor, 6),
  };
  return (
    <Exhibit
      title={title}
      numbers={() => (
        <Table
          caption="Best count by static head"
          tall
          rows={map.staticHeadM.map((head, row) => ({ head, row }))}
          keyOf={({ row }) => String(row)}
          name={{
            head: 'Static head',
            unit: format.head.unit,
            cell: ({ head }) => format.bare(format.head, head).text,
          }}
          columns={[
            {
              head: 'Hours of the record',
              unit: 'h',
              cell: ({ row }) =>
                format.bare(
                  format.hours,
                  map.hours[row]!.reduce((a, b) => a + b, 0),
                ).text,
            },
            { head: 'Best count as flow rises', cell: ({ row }) => rowText(map, row, format) },
          ]}
        />
      )}
    >
      <svg class="map" viewBox={`0 0 ${WIDTH} ${HEIGHT}`} role="img" aria-label={title}>
        {drawn.runs.map(({ row, count, fromM3s, toM3s }) => (
          <rect
            key={`${row} ${fromM3s}`}
            x={x(fromM3s)}
            width={x(toM3s) - x(fromM3s) + 0.5}
            y={y(map.staticHeadM[row]! + cell.head / 2)}
            height={y(0) - y(cell.head) + 0.5}
            style={{ fill: count === 0 ? 'var(--line)' : countShade(count, most) }}
          />
        ))}
        {drawn.dots.map(({ row, column, hours, r }) => (
          <circle
            key={`${row} ${column}`}
            class="hours"
            cx={x(map.flowM3s[column]!)}
            cy={y(map.staticHeadM[row]!)}
            r={r}
          >
            <title>{`${format.say(format.hours, hours)} near ${format.say(format.flow, map.flowM3s[column])}`}</title>
          </circle>
        ))}
        {drawn.names.map(({ count, row, flowM3s }) => (
          <g
            key={count}
            transform={`translate(${Math.min(x(flowM3s), WIDTH - RIGHT - (count === 0 ? 44 : 13))} ${y(map.staticHeadM[row]!)})`}
          >
            <rect class="chip" x={count === 0 ? -44 : -13} y="-13" width={count === 0 ? 88 : 26} height="26" />
            <text text-anchor="middle" dy="0.35em" class="which">
              {count === 0 ? 'none can' : count}
            </text>
          </g>
        ))}
        <g class="axis">
          <path d={`M${LEFT} ${TOP}V${HEIGHT - BOTTOM}H${WIDTH - RIGHT}`} />
          {ticks.x.map((tick) => (
            <text key={tick} x={x(tick / format.flow.factor)} y={HEIGHT - BOTTOM + 18} text-anchor="middle">
              {tick}
            </text>
          ))}
          {ticks.y.map((tick) => (
            <text key={tick} x={LEFT - 8} y={y(tick / format.head.factor)} dy="0.35em" text-anchor="end">
              {tick}
            </text>
          ))}
          <text x={(LEFT + WIDTH) / 2} y={HEIGHT - 8} text-anchor="middle">
            {`Flow, ${format.flow.unit}`}
          </text>
          <text transform={`translate(14 ${(HEIGHT - BOTTOM) / 2}) rotate(-90)`} text-anchor="middle">
            {`Static head, ${format.head.unit}`}
          </text>
        </g>
      </svg>
      <p class="aside">Numbers are counts of pumps; dots are hours of the record, by their area.</p>
    </Exhibit>
  );
}
