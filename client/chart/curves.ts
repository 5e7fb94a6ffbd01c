import type { Plugin } from 'chart.js';
import { type Box, overlap, placeNames, raiseClear } from '../labels.ts';
import type { Curves, HoursByFlow } from '../series.ts';
import { type Drawn, draw, figures, fixedWidth, type Kind, linear, plotted, RIGHT, tip, unitOf } from './drawing.ts';
import { countColour, type Look } from './look.ts';

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

/** Vertical lines where one gives way to another; with `labels`, the flow is written at the foot and its box noted. */
function crossingMarks(curves: Curves, most: number, look: Look, labels: Box[] | null): Plugin<Kind> {
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
function lineNames(curves: Curves, look: Look, labels: readonly Box[]): Plugin<Kind> {
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
