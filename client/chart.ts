import {
  BarController,
  BarElement,
  CategoryScale,
  Chart,
  type ChartConfiguration,
  type ChartType,
  Filler,
  LinearScale,
  LineController,
  LineElement,
  type Plugin,
  PointElement,
  type ScaleOptionsByType,
  Tooltip,
  type TooltipItem,
} from 'chart.js';
import { type Box, overlap, placeNames, raiseClear } from './labels.ts';
import type { Axis, Bars, Curves, HoursByFlow, Point, RecordSteps, Ticks } from './series.ts';

/** The one file that knows the chart library: a picture's data in, a drawn canvas out. */

Chart.register(
  BarController,
  BarElement,
  CategoryScale,
  Filler,
  LinearScale,
  LineController,
  LineElement,
  PointElement,
  Tooltip,
);

/** Colours and type of a picture, taken from the style sheet so that light, dark and print have one source. */
export interface Look {
  readonly ink: string;
  readonly faint: string;
  readonly line: string;
  readonly paper: string;
  readonly warm: string;
  readonly plain: string;
  readonly countFirst: string;
  readonly countLast: string;
  readonly font: string;
  /** Fixed size for paper; on the screen a picture follows its box. */
  readonly size: { readonly width: number; readonly height: number } | null;
}

export interface Drawn {
  destroy(): void;
}

/** The look of the page where an element stands. */
export function lookOf(element: Element, size: Look['size']): Look {
  const style = getComputedStyle(element);
  const colour = (name: string) => style.getPropertyValue(`--${name}`).trim();
  return {
    ink: colour('ink'),
    faint: colour('faint'),
    line: colour('line'),
    paper: colour('paper'),
    warm: colour('warm'),
    plain: colour('plain'),
    countFirst: colour('count-first'),
    countLast: colour('count-last'),
    font: style.fontFamily,
    size,
  };
}

/** The shade of a pump count among `most`: one hue, and more pumps are darker. */
export function countColour(count: number, most: number, { countFirst, countLast }: Look): string {
  const share = most < 2 ? 0.5 : Math.min(1, Math.max(0, (count - 1) / (most - 1)));
  const [a, b] = [channels(countFirst), channels(countLast)];
  return `rgb(${a.map((from, i) => Math.round(from + (b[i]! - from) * share)).join(' ')})`;
}

function channels(hex: string): [number, number, number] {
  const value = Number.parseInt(hex.slice(1), 16);
  return [(value >> 16) & 255, (value >> 8) & 255, value & 255];
}

/** Pictures that stand one over the other share their left edge: room for a figure of five digits. */
const AXIS_WIDTH = 70;
const RIGHT = 18;

/** Room behind the longest bar for what it comes to: so much a letter, and before the first. */
const BAR_LETTER = 7.5;
const BAR_GAP = 12;

/** Power over flow: each who may run a line, heavy where it draws least, named where it ends; crossings stand on the axis. */
export function drawCurves(canvas: HTMLCanvasElement, curves: Curves, look: Look): Drawn {
  const most = curves.lines.at(-1)?.id ?? 1;
  const labels: Box[] = [];
  return draw(canvas, look, {
    type: 'line',
    data: {
      datasets: curves.lines.map(({ id, name, points, least }) => {
        const colour = countColour(id, most, look);
        return {
          label: name,
          data: plotted(points),
          borderColor: colour,
          backgroundColor: colour,
          borderWidth: 1.5,
          pointRadius: 0,
          segment: { borderWidth: ({ p1DataIndex }: { p1DataIndex: number }) => (least[p1DataIndex] ? 4 : 1.5) },
        };
      }),
    },
    options: {
      parsing: false,
      layout: { padding: { top: 18, right: RIGHT } },
      interaction: { mode: 'index', intersect: false, axis: 'x' },
      scales: { x: linear(curves.x, look, { grid: false }), y: fixedWidth(linear(curves.y, look)) },
      plugins: {
        tooltip: tip(look, {
          title: (x) => `${figures(x)} ${unitOf(curves.x.title)}`,
          label: (name, y) => `${name}: ${figures(y)} ${unitOf(curves.y.title)}`,
        }),
      },
    },
    plugins: [crossingMarks(curves, most, look, labels), lineNames(curves, look, labels)],
  });
}

/** Hours at each flow, in the shade of who draws least there. */
export function drawHours(canvas: HTMLCanvasElement, hours: HoursByFlow, curves: Curves, look: Look): Drawn {
  const most = curves.lines.at(-1)?.id ?? 1;
  return draw(canvas, look, {
    type: 'bar',
    data: {
      datasets: [
        {
          data: hours.bars.map((bar) => ({ x: (bar.from + bar.to) / 2, y: bar.hours })),
          backgroundColor: hours.bars.map(({ who }) => (who === null ? look.warm : countColour(who, most, look))),
          barPercentage: 0.92,
          categoryPercentage: 1,
          grouped: false,
        },
      ],
    },
    options: {
      parsing: false,
      layout: { padding: { top: 6, right: RIGHT } },
      interaction: { mode: 'nearest', intersect: false, axis: 'x' },
      scales: {
        x: { ...linear(hours.x, look, { grid: false }), offset: false },
        y: fixedWidth(linear(hours.y, look, { ticks: 4 })),
      },
      plugins: {
        tooltip: tip(look, {
          title: (x) => `About ${figures(x)} ${unitOf(hours.x.title)}`,
          label: (_name, y) => `${figures(y)} h`,
        }),
      },
    },
    plugins: [crossingMarks(curves, most, look, null)],
  });
}

/** Rules as bars from one base; what lies above the least is in the accent for what could be saved. */
export function drawBars(canvas: HTMLCanvasElement, bars: Bars, look: Look): Drawn {
  const longest = Math.max(...bars.bars.map((bar) => bar.base + bar.above), 0);
  return draw(canvas, look, {
    type: 'bar',
    data: {
      labels: bars.bars.map((bar) => bar.label),
      datasets: [
        {
          label: 'least',
          data: bars.bars.map((bar) => bar.base),
          backgroundColor: look.plain,
          maxBarThickness: 18,
          categoryPercentage: 0.8,
          barPercentage: 0.9,
        },
        {
          label: 'above',
          data: bars.bars.map((bar) => bar.above),
          backgroundColor: look.warm,
          maxBarThickness: 18,
          categoryPercentage: 0.8,
          barPercentage: 0.9,
        },
      ],
    },
    options: {
      indexAxis: 'y',
      layout: { padding: { right: BAR_GAP + BAR_LETTER * Math.max(...bars.bars.map(({ text }) => text.length)) } },
      scales: {
        x: {
          ...linear({ title: bars.title, min: 0, max: longest || 1 }, look),
          stacked: true,
        },
        y: {
          stacked: true,
          grid: { display: false },
          border: { color: look.ink },
          ticks: { color: look.ink, autoSkip: false, font: { family: look.font, size: look.size ? 11 : 13 } },
        },
      },
      plugins: { tooltip: { enabled: false } },
    },
    plugins: [barTexts(bars, look)],
  });
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

/** What the record's picture says in words and local time. */
export interface RecordTexts {
  readonly ticks: Ticks;
  readonly tickText: (ms: number) => string;
  readonly instantText: (ms: number) => string;
}

function draw<T extends ChartType>(canvas: HTMLCanvasElement, look: Look, config: ChartConfiguration<T>): Drawn {
  const options = {
    ...config.options,
    animation: false,
    maintainAspectRatio: false,
    responsive: look.size === null,
    ...(look.size && { devicePixelRatio: 3 }),
  };
  if (look.size) {
    canvas.width = look.size.width;
    canvas.height = look.size.height;
  }
  const chart = new Chart(canvas, { ...config, options } as ChartConfiguration<T>);
  return { destroy: () => chart.destroy() };
}

/** A gap has y null, which the library draws as a gap though its types do not say so. */
function plotted(points: readonly Point[]): { x: number; y: number }[] {
  return points as { x: number; y: number }[];
}

type Linear = Partial<ScaleOptionsByType<'linear'>> & { type: 'linear' };

function linear(axis: Axis, look: Look, { grid = true, ticks = 8 }: { grid?: boolean; ticks?: number } = {}): Linear {
  return {
    type: 'linear',
    min: axis.min,
    max: axis.max,
    title: { display: true, text: axis.title, color: look.ink, font: { family: look.font, size: 12 } },
    grid: { display: grid, color: look.line, drawTicks: true },
    border: { color: look.ink },
    ticks: {
      color: look.ink,
      maxTicksLimit: ticks,
      maxRotation: 0,
      includeBounds: false,
      font: { family: look.font, size: 12 },
    },
  } as unknown as Linear;
}

function fixedWidth(scale: Linear): Linear {
  return {
    ...scale,
    afterFit: (axis) => {
      axis.width = AXIS_WIDTH;
    },
  };
}

interface Tip {
  readonly title: (x: number) => string;
  readonly label: (name: string, y: number) => string;
}

function tip(look: Look, { title, label }: Tip) {
  type Item = TooltipItem<'line'> | TooltipItem<'bar'>;
  return {
    backgroundColor: look.paper,
    titleColor: look.ink,
    bodyColor: look.ink,
    borderColor: look.ink,
    borderWidth: 1,
    cornerRadius: 0,
    displayColors: false,
    callbacks: {
      title: (items: Item[]) => title(items[0]?.parsed.x ?? Number.NaN),
      label: ({ dataset, parsed }: Item) => (parsed.y === null ? '' : label(dataset.label ?? '', parsed.y)),
    },
  };
}

/** Vertical lines where one gives way to another; with `labels`, the flow is written at the foot and its box noted. */
function crossingMarks(curves: Curves, most: number, look: Look, labels: Box[] | null): Plugin<'line' | 'bar'> {
  const named = labels !== null;
  return {
    id: 'crossings',
    afterDatasetsDraw({ ctx, scales, chartArea }) {
      const { x, y } = scales;
      if (!x || !y) return;
      ctx.save();
      const marks = curves.crossings.map((crossing) => ({
        ...crossing,
        at: x.getPixelForValue(crossing.x),
        top: named ? y.getPixelForValue(crossing.y) : chartArea.top,
      }));
      ctx.strokeStyle = look.ink;
      ctx.lineWidth = 1;
      ctx.setLineDash([3, 3]);
      for (const { at, top } of marks) {
        ctx.beginPath();
        ctx.moveTo(at, top);
        ctx.lineTo(at, chartArea.bottom);
        ctx.stroke();
      }
      ctx.setLineDash([]);
      ctx.lineWidth = 3;
      ctx.fillStyle = look.paper;
      for (const { at, top, to } of named ? marks : []) {
        ctx.strokeStyle = countColour(to, most, look);
        ctx.beginPath();
        ctx.arc(at, top, 5, 0, 2 * Math.PI);
        ctx.fill();
        ctx.stroke();
      }
      const taken = labels ?? [];
      taken.length = 0;
      ctx.font = `600 12px ${look.font}`;
      ctx.textBaseline = 'top';
      for (const { at, label } of named ? marks : []) {
        const { width } = ctx.measureText(label);
        const left = Math.min(at + 6, chartArea.right + RIGHT - width);
        const foot = { left, right: left + width, top: chartArea.bottom - 18, bottom: chartArea.bottom - 3 };
        const box = raiseClear(foot, taken);
        taken.push(box);
        // On a ground of paper, so that what it covers does not blur it.
        ctx.fillStyle = look.paper;
        ctx.fillRect(box.left - 2, box.top, width + 4, box.bottom - box.top);
        ctx.fillStyle = look.ink;
        ctx.fillText(label, box.left, box.top + 2);
      }
      ctx.restore();
    },
  };
}

/** The name of each line beside it, where it covers no other. */
function lineNames(curves: Curves, look: Look, labels: readonly Box[]): Plugin<'line'> {
  return {
    id: 'names',
    afterDatasetsDraw({ ctx, scales, chartArea }) {
      const { x, y } = scales;
      if (!x || !y) return;
      const spot = (at: { x: number; y: number }) => ({ x: x.getPixelForValue(at.x), y: y.getPixelForValue(at.y) });
      ctx.save();
      ctx.font = `600 12px ${look.font}`;
      ctx.fillStyle = look.ink;
      ctx.textBaseline = 'top';
      const names = curves.lines.map(({ name }) => name);
      const boxes = placeNames({
        lines: curves.lines.map(({ points }) => plotted(points.filter((point) => point.y !== null)).map(spot)),
        sizes: names.map((name) => ({ width: ctx.measureText(name).width, height: 12 })),
        // A mark stands from its crossing down to the axis, where its flow is written.
        marks: curves.crossings.map((crossing) => [spot(crossing), spot({ x: crossing.x, y: curves.y.min })]),
        area: { ...chartArea, top: 0, right: chartArea.right + RIGHT },
      });
      const taken = [...labels, ...boxes.filter((box) => box !== null)];
      boxes.forEach((box, i) => {
        if (box) ctx.fillText(names[i]!, box.left, box.top);
        else shortOnLine(ctx, curves.lines[i]!, { spot, look, taken });
      });
      ctx.restore();
    },
  };
}

/**
 * Where a name has no room beside its line, its short form stands on the line where that is heavy; none stands where it
 * would cover another.
 */
function shortOnLine(
  ctx: CanvasRenderingContext2D,
  { short, points, least }: Curves['lines'][number],
  { spot, look, taken }: { spot: (at: { x: number; y: number }) => { x: number; y: number }; look: Look; taken: Box[] },
): void {
  const drawn = points.filter((point, i) => point.y !== null && least[i]);
  const middle = drawn[Math.floor(drawn.length / 2)] ?? points.findLast((point) => point.y !== null);
  if (middle?.y == null) return;
  const { x, y } = spot({ x: middle.x, y: middle.y });
  const text = short;
  const { width } = ctx.measureText(text);
  const box = { left: x - width / 2 - 2, right: x + width / 2 + 2, top: y - 7, bottom: y + 7 };
  if (taken.some((other) => overlap(box, other))) return;
  taken.push(box);
  ctx.fillStyle = look.paper;
  ctx.fillRect(box.left, box.top, width + 4, 14);
  ctx.fillStyle = look.ink;
  ctx.fillText(text, x - width / 2, y - 5);
}

/** What each bar comes to, behind its end. */
function barTexts(bars: Bars, look: Look): Plugin<'bar'> {
  return {
    id: 'texts',
    afterDatasetsDraw({ ctx, scales }) {
      const { x, y } = scales;
      if (!x || !y) return;
      ctx.save();
      ctx.font = `12px ${look.font}`;
      ctx.fillStyle = look.ink;
      ctx.textBaseline = 'middle';
      bars.bars.forEach((bar, i) => {
        ctx.fillText(bar.text, x.getPixelForValue(bar.base + bar.above) + 6, y.getPixelForValue(i));
      });
      ctx.restore();
    },
  };
}

/** Tool tips show four figures in the reader's locale; the table beside the picture has all of them. */
function figures(value: number): string {
  return value.toLocaleString(undefined, { maximumSignificantDigits: 4 });
}

function unitOf(title: string): string {
  return title.split(', ').at(-1) ?? '';
}
