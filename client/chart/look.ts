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
