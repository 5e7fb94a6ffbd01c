import {
  BarController,
  BarElement,
  CategoryScale,
  Chart,
  type ChartConfiguration,
  Filler,
  LinearScale,
  LineController,
  LineElement,
  PointElement,
  type ScaleOptionsByType,
  Tooltip,
  type TooltipItem,
} from 'chart.js';
import type { Axis, Point } from '../series.ts';
import type { Look } from './look.ts';

/** What every picture shares: scales, tool tips, and how the library draws on a canvas. */

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

/** The kinds of picture there are, told apart by `type`; one name for both, so that what marks one may mark the other. */
export type Kind = 'line' | 'bar';

/** A picture on its canvas, until it is taken off. */
export interface Drawn {
  destroy(): void;
}

/** Pictures that stand one over the other share their left edge: room for a figure of five digits [CSS px]. */
const AXIS_WIDTH = 70;
/** Room right of a picture [CSS px]. */
export const RIGHT = 18;

/** A picture on a canvas: as large as its box on the screen, of fixed size and fine on paper. */
export function draw(canvas: HTMLCanvasElement, look: Look, config: ChartConfiguration<Kind>): Drawn {
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
  const chart = new Chart(canvas, { ...config, options } as ChartConfiguration<Kind>);
  return { destroy: () => chart.destroy() };
}

/** A gap has y null, which the library draws as a gap though its types do not say so. */
export function plotted(points: readonly Point[]): { x: number; y: number }[] {
  return points as { x: number; y: number }[];
}

type Linear = Partial<ScaleOptionsByType<'linear'>> & { type: 'linear' };

/** A scale of numbers with the title and limits of an axis. */
export function linear(
  axis: Axis,
  look: Look,
  { grid = true, ticks = 8 }: { grid?: boolean; ticks?: number } = {},
): Linear {
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

/** The same, as wide as every other on the left. */
export function fixedWidth(scale: Linear): Linear {
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

/** A tool tip in words: its head from x, a line for each series from y. */
export function tip(look: Look, { title, label }: Tip) {
  type Item = TooltipItem<Kind>;
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

/** Tool tips show four figures in the reader's locale; the table beside the picture has all of them. */
export function figures(value: number): string {
  return value.toLocaleString(undefined, { maximumSignificantDigits: 4 });
}

/** The unit that a title of an axis ends with. */
export function unitOf(title: string): string {
  return title.split(', ').at(-1) ?? '';
}
