import type { Plugin } from 'chart.js';
import type { Bars } from '../series.ts';
import { type Drawn, draw, type Kind, linear } from './drawing.ts';
import type { Look } from './look.ts';

/** Room behind the longest bar for what it comes to: so much a letter, and before the first. */
const BAR_LETTER = 7.5;
const BAR_GAP = 12;

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

/** What each bar comes to, behind its end. */
function barTexts(bars: Bars, look: Look): Plugin<Kind> {
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
