import type { RecordSteps, Ticks } from '../series.ts';
import { type Drawn, draw, figures, fixedWidth, linear, plotted, RIGHT, tip, unitOf } from './drawing.ts';
import { countColour, type Look } from './look.ts';

/** What the record's picture says in words and local time. */
export interface RecordTexts {
  readonly ticks: Ticks;
  readonly tickText: (ms: number) => string;
  readonly instantText: (ms: number) => string;
}

/** The record over time: flow above, the count of pumps below, both as steps. */
export function drawRecord(
  canvas: HTMLCanvasElement,
  record: RecordSteps,
  { ticks, tickText, instantText }: RecordTexts,
  look: Look,
): Drawn {
  const stepped = { stepped: 'before', pointRadius: 0, spanGaps: false, borderWidth: 1.25 } as const;
  const { band, counts, mostCount, lanes } = record;
  const rows = lanes.length > 0 ? lanes.length : mostCount;
  const bandSets = band
    ? [
        { ...stepped, data: plotted(band.least), yAxisID: 'flow', borderWidth: 0, label: '' },
        {
          ...stepped,
          data: plotted(band.most),
          yAxisID: 'flow',
          borderWidth: 0,
          fill: '-1',
          backgroundColor: look.line,
          label: '',
        },
      ]
    : [];
  return draw(canvas, look, {
    type: 'line',
    data: {
      datasets: [
        ...bandSets,
        { ...stepped, data: plotted(record.flow), yAxisID: 'flow', borderColor: look.ink, label: 'Flow' },
        ...lanes.map(({ name, share }, k) => ({
          ...stepped,
          data: plotted(share.map(({ x, y }) => ({ x, y: y === null ? null : laneFoot(k, rows) + LANE_HEIGHT * y }))),
          yAxisID: 'count',
          borderWidth: 0,
          backgroundColor: countColour(k + 1, rows, look),
          fill: { value: laneFoot(k, rows) },
          label: name,
        })),
        ...(lanes.length > 0 ? [] : counts).map((points, k) => {
          const colour = countColour(k + 1, mostCount, look);
          return {
            ...stepped,
            data: plotted(points),
            yAxisID: 'count',
            borderWidth: k === mostCount - 1 ? 1.25 : 0,
            borderColor: look.ink,
            backgroundColor: colour,
            fill: k === 0 ? 'origin' : '-1',
            label: k === mostCount - 1 ? 'Pumps' : '',
          } as const;
        }),
      ],
    },
    options: {
      parsing: false,
      normalized: true,
      layout: { padding: { top: 6, right: RIGHT } },
      interaction: { mode: 'nearest', intersect: false, axis: 'x' },
      scales: {
        x: {
          type: 'linear',
          min: record.fromMs,
          max: record.toMs,
          grid: { color: look.line },
          border: { color: look.ink },
          afterBuildTicks: (axis) => {
            axis.ticks = ticks.atMs.map((value) => ({ value }));
          },
          ticks: {
            color: look.ink,
            font: { family: look.font, size: 12 },
            maxRotation: 0,
            autoSkip: true,
            callback: (value) => tickText(Number(value)),
          },
        },
        count: {
          ...fixedWidth(linear({ title: lanes.length > 0 ? '' : 'Pumps', min: 0, max: rows + 0.4 }, look)),
          stack: 'both',
          stackWeight: 2,
          position: 'left',
          afterBuildTicks: (axis: { ticks: { value: number }[] }) => {
            axis.ticks =
              lanes.length > 0
                ? lanes.map((_, k) => ({ value: laneFoot(k, rows) + LANE_HEIGHT / 2 }))
                : Array.from({ length: mostCount + 1 }, (_, value) => ({ value }));
          },
          ticks: {
            color: look.ink,
            stepSize: 1,
            precision: 0,
            autoSkip: false,
            font: { family: look.font, size: 12 },
            ...(lanes.length > 0 && { callback: (_: unknown, i: number) => clipped(lanes[i]?.name ?? '') }),
          },
        },
        flow: {
          ...fixedWidth(linear(record.flowAxis, look, { ticks: 4 })),
          stack: 'both',
          stackWeight: 3,
          position: 'left',
        },
      },
      plugins: {
        tooltip: {
          ...tip(look, {
            title: (x) => instantText(x),
            label: (name, y) => {
              if (name === 'Flow') return `${figures(y)} ${unitOf(record.flowAxis.title)}`;
              const lane = lanes.findIndex((each) => each.name === name);
              if (lane < 0) return `${figures(y)} pumps`;
              return `${name}: ${figures((100 * (y - laneFoot(lane, rows))) / LANE_HEIGHT)} % of the time`;
            },
          }),
          filter: (item) => item.dataset.label !== '',
        },
      },
    },
  });
}

/** Height of a full lane; the rest of its row keeps it clear of the next. */
const LANE_HEIGHT = 0.8;

/** Where the lane of a pump stands: the first on top. */
function laneFoot(k: number, rows: number): number {
  return rows - 1 - k + 0.1;
}

/** As much of a name as fits beside an axis. */
function clipped(name: string): string {
  return name.length > 9 ? `${name.slice(0, 8)}…` : name;
}
