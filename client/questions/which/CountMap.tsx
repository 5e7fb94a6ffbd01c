import { useEffect, useMemo, useState } from 'preact/hooks';
import type { BestCountMap } from '../../../server/staging/bestCountMap.ts';
import { api, linesOf } from '../../api.ts';
import { usePage } from '../../context.ts';
import { useMedia } from '../../hooks.ts';
import { Exhibit } from '../../parts/Exhibit.tsx';
import { Table } from '../../parts/Table.tsx';
import { niceTicks } from '../../series.ts';
import { cellOf, mapSentence, namesOf, rowText, runsOf } from './countMap.ts';
import { countShade } from './Ladder.tsx';

interface CountMapProps {
  readonly comparisonId: number;
  readonly most: number;
  /** Whether a count says who runs. */
  readonly alike: boolean;
}

/** Which count is best over flow and static head, with the hours that the record spends there; asked for when opened. */
export function CountMap({ comparisonId, most, alike }: CountMapProps) {
  const [open, setOpen] = useState(false);
  return (
    <details class="more" open={open} onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary>Map of the best {alike ? 'count' : 'set'} over flow and static head</summary>
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

const WIDTH = { wide: 760, narrow: 420 };
const HEIGHT = 380;
const LEFT = 64;
const BOTTOM = 48;
const TOP = 10;
const RIGHT = 12;
/** Height of the ground of a name, and width of a letter in it. */
const CHIP = 26;
const LETTER = 10;
/** Radius of the dot for the cell with most hours. */
const LARGEST_DOT = 8;

function MapPicture({ map, most: pumpsThere }: { readonly map: BestCountMap; readonly most: number }) {
  const most = map.sets.length > 0 ? map.sets.length : pumpsThere;
  const { format } = usePage();
  const narrow = useMedia('(max-width: 48rem)');
  const width = WIDTH[narrow ? 'narrow' : 'wide'];
  const title = mapSentence(map, format);
  const drawn = useMemo(() => {
    const cell = cellOf(map);
    const rows = map.staticHeadM.length;
    const top = map.flowM3s.at(-1)! + cell.flow / 2;
    const lowest = map.staticHeadM[0]! - cell.head / 2;
    const highest = map.staticHeadM.at(-1)! + cell.head / 2;
    const x = (flow: number) => LEFT + ((width - LEFT - RIGHT) * flow) / top;
    const y = (head: number) => HEIGHT - BOTTOM - ((HEIGHT - BOTTOM - TOP) * (head - lowest)) / (highest - lowest);
    const runs = runsOf(map);
    const mostHours = Math.max(0, ...map.hours.flat());
    const dots = map.hours.flatMap((hours, row) =>
      hours.flatMap((each, column) =>
        each > 0 ? [{ row, column, hours: each, r: Math.max(0.7, LARGEST_DOT * Math.sqrt(each / mostHours)) }] : [],
      ),
    );
    return {
      cell,
      rows,
      top,
      lowest,
      highest,
      x,
      y,
      runs,
      chips: chipsOf(map, namesOf(runs), { x, y, right: width - RIGHT }),
      dots,
    };
  }, [map, width]);
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
          caption={map.sets.length > 0 ? 'Best set by static head' : 'Best count by static head'}
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
            { head: 'Best as flow rises', words: true, cell: ({ row }) => rowText(map, row, format) },
          ]}
        />
      )}
    >
      <svg class="map" viewBox={`0 0 ${width} ${HEIGHT}`} role="img" aria-label={title}>
        {drawn.runs.map(({ row, who, fromM3s, toM3s }) => (
          <rect
            key={`${row} ${fromM3s}`}
            x={x(fromM3s)}
            width={x(toM3s) - x(fromM3s) + 0.5}
            y={y(map.staticHeadM[row]! + cell.head / 2)}
            height={y(0) - y(cell.head) + 0.5}
            style={{ fill: who === 0 ? 'var(--line)' : countShade(who, most) }}
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
        {drawn.chips.map(({ who, left, top, width, text }) => (
          <g key={who} transform={`translate(${left} ${top})`}>
            <rect class="chip" width={width} height={CHIP} />
            <text x={width / 2} y={CHIP / 2} text-anchor="middle" dy="0.35em" class="which">
              {text}
            </text>
          </g>
        ))}
        <g class="axis">
          <path d={`M${LEFT} ${TOP}V${HEIGHT - BOTTOM}H${width - RIGHT}`} />
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
          <text x={(LEFT + width) / 2} y={HEIGHT - 8} text-anchor="middle">
            {`Flow, ${format.flow.unit}`}
          </text>
          <text transform={`translate(14 ${(HEIGHT - BOTTOM) / 2}) rotate(-90)`} text-anchor="middle">
            {`Static head, ${format.head.unit}`}
          </text>
        </g>
      </svg>
      <p class="aside">
        {map.sets.length > 0
          ? 'Names are the pumps that run; dots are hours of the record, by their area.'
          : 'Numbers are counts of pumps; dots are hours of the record, by their area.'}
      </p>
    </Exhibit>
  );
}

interface Chip {
  readonly who: number;
  readonly left: number;
  readonly top: number;
  readonly width: number;
  readonly text: string;
}

/** The names on their grounds, moved up or down until they clear one another; one that finds no room is left to the table. */
function chipsOf(
  map: BestCountMap,
  names: ReturnType<typeof namesOf>,
  { x, y, right }: { x: (flow: number) => number; y: (head: number) => number; right: number },
): Chip[] {
  const taken: Chip[] = [];
  for (const { who, row, flowM3s } of names) {
    const text = who === 0 ? 'none can' : map.sets.length > 0 ? map.sets[who - 1]!.join(' + ') : String(who);
    const width = Math.max(CHIP, text.length * LETTER + 12);
    const left = Math.min(Math.max(x(flowM3s) - width / 2, LEFT + 2), right - width);
    const at = y(map.staticHeadM[row]!) - CHIP / 2;
    const clear = (top: number) =>
      top >= TOP &&
      top + CHIP <= HEIGHT - BOTTOM &&
      taken.every(
        (other) =>
          left > other.left + other.width + 2 || left + width + 2 < other.left || Math.abs(top - other.top) > CHIP + 2,
      );
    const top = [0, 1, -1, 2, -2, 3, -3, 4, -4].map((k) => at + k * (CHIP + 4)).find(clear);
    if (top !== undefined) taken.push({ who, left, top, width, text });
  }
  return taken;
}
