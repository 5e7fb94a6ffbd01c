import type { Station } from '../../server/station/station.ts';
import { Format, list, pumps } from '../format.ts';
import { Exhibit } from '../parts/Exhibit.tsx';
import { Table } from '../parts/Table.tsx';
import { countShade } from '../questions/which/Ladder.tsx';
import { niceTicks } from '../series.ts';
import { type PumpPicture, pumpPicture, type Spot } from './livePicture.ts';

const WIDTH = 520;
const HEIGHT = 380;
const LEFT = 56;
const RIGHT = 14;
const TOP = 12;
const BOTTOM = 48;

/** Pump curves of 1 to N pumps, the system curve, and where they meet; it moves as one types. */
export function PumpsPicture({ station }: { readonly station: Station }) {
  const { units: file, currency, timeZone } = station;
  const format = new Format({ file, choice: 'file', currency, timeZone });
  const picture = pumpPicture(station);
  const x = (flow: number) => LEFT + ((WIDTH - LEFT - RIGHT) * flow) / picture.topFlow;
  const y = (head: number) => HEIGHT - BOTTOM - ((HEIGHT - BOTTOM - TOP) * head) / picture.topHead;
  const line = (spots: readonly Spot[]) =>
    spots.map(({ flow, head }, i) => `${i === 0 ? 'M' : 'L'}${x(flow).toFixed(1)} ${y(head).toFixed(1)}`).join('');
  const able = picture.counts.filter(({ point }) => point !== null);
  const most = picture.counts.length;
  const last = able.at(-1);
  const title = last
    ? `${whoGives(picture.alike, last)} ${format.say(format.flow, last.point!.flow)} against ${format.say(format.head, last.point!.head)}`
    : 'No pump can lift the static head';
  return (
    <Exhibit
      title={title}
      level={2}
      numbers={() => (
        <Table
          caption="Where pumps and system meet, at rated speed"
          rows={able}
          keyOf={({ count }) => String(count)}
          name={{
            head: 'Running',
            cell: ({ count, pumps: names }) => (picture.alike ? pumps(count) : list(names)),
          }}
          columns={[
            { head: 'Flow', unit: format.flow.unit, cell: ({ point }) => format.bare(format.flow, point!.flow).text },
            { head: 'Head', unit: format.head.unit, cell: ({ point }) => format.bare(format.head, point!.head).text },
            { head: 'Power', unit: 'kW', cell: ({ point }) => format.bare(format.power, point!.power / 1000).text },
            {
              head: 'Of best flow',
              unit: '%',
              cell: ({ point }) => {
                const [least, greatest] = [point!.leastShare, point!.greatestShare].map(
                  (share) => format.bare(format.percent, 100 * share).text,
                );
                return least === greatest ? least : `${least} to ${greatest}`;
              },
            },
            {
              head: 'Wire to water',
              unit: '%',
              cell: ({ point }) => format.bare(format.percent, 100 * point!.wireToWater).text,
            },
            { head: 'Motor', cell: ({ point }) => (point!.overloaded ? 'overloaded' : 'within rating') },
          ]}
        />
      )}
    >
      <svg class="map pumps" viewBox={`0 0 ${WIDTH} ${HEIGHT}`} role="img" aria-label={title}>
        <defs>
          <clipPath id="plot">
            <rect x={LEFT} y={TOP} width={WIDTH - LEFT - RIGHT} height={HEIGHT - TOP - BOTTOM} />
          </clipPath>
        </defs>
        <g clip-path="url(#plot)">
          {picture.counts.map(({ count, curve }) => (
            <path key={count} d={line(curve)} class="curve" style={{ stroke: countShade(count, most) }} />
          ))}
          <path d={line(picture.system)} class="system" />
        </g>
        {able.map(({ count, point }) => (
          <g key={count} transform={`translate(${x(point!.flow).toFixed(1)} ${y(point!.head).toFixed(1)})`}>
            <circle r="11" class="chip" style={{ stroke: countShade(count, most) }} />
            <text text-anchor="middle" dy="0.35em" class="which">
              {count}
            </text>
          </g>
        ))}
        <g class="axis">
          <path d={`M${LEFT} ${TOP}V${HEIGHT - BOTTOM}H${WIDTH - RIGHT}`} />
          {niceTicks(0, picture.topFlow * format.flow.factor, 6).map((tick) => (
            <text key={tick} x={x(tick / format.flow.factor)} y={HEIGHT - BOTTOM + 18} text-anchor="middle">
              {tick}
            </text>
          ))}
          {niceTicks(0, picture.topHead * format.head.factor, 6).map((tick) => (
            <text key={tick} x={LEFT - 8} y={y(tick / format.head.factor)} dy="0.35em" text-anchor="end">
              {tick}
            </text>
          ))}
          <text x={(LEFT + WIDTH) / 2} y={HEIGHT - 8} text-anchor="middle">{`Flow, ${format.flow.unit}`}</text>
          <text transform={`translate(14 ${(HEIGHT - BOTTOM) / 2}) rotate(-90)`} text-anchor="middle">
            {`Head, ${format.head.unit}`}
          </text>
          <text x={WIDTH - RIGHT - 4} y={Math.max(TOP + 12, y(picture.system.at(-1)!.head) - 8)} text-anchor="end">
            system
          </text>
        </g>
      </svg>
      <p class="aside">
        At rated speed, direct on line, behind each pump's branch.{' '}
        {picture.alike
          ? 'Each number is a count of pumps.'
          : `In the station's order: ${picture.counts.map(({ count, pumps: names }) => `${count} ${count === 1 ? 'is' : 'adds'} ${names.at(-1)}`).join(', ')}.`}
      </p>
    </Exhibit>
  );
}

function whoGives(alike: boolean, { count, pumps: names }: PumpPicture['counts'][number]): string {
  if (!alike) return `${list(names)} ${count === 1 ? 'gives' : 'give'}`;
  return count === 1 ? 'One pump gives' : `${count} pumps give`;
}
