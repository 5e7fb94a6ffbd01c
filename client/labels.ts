/** Where names of lines fit, in pixels: beside their line, clear of every line, mark and other name. */

export interface Spot {
  readonly x: number;
  readonly y: number;
}

export interface Box {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

interface Placing {
  /** By line, its points from left to right. */
  readonly lines: readonly (readonly Spot[])[];
  /** By line, the size of its name. */
  readonly sizes: readonly { readonly width: number; readonly height: number }[];
  /** Other strokes that a name must not cover. */
  readonly marks: readonly (readonly Spot[])[];
  /** Names stay within. */
  readonly area: Box;
}

/** Between a name and what it must not touch. */
const CLEAR = 5;

/** How far from its line a name may stand, nearest first: a steep line needs more. */
const AWAY = [CLEAR + 1, CLEAR + 5, CLEAR + 10];

/** A name at the foot of a mark, raised by as many rows as it takes to clear those before it. */
export function raiseClear(box: Box, taken: readonly Box[]): Box {
  const height = box.bottom - box.top;
  let raised = box;
  while (taken.some((other) => overlap(raised, other))) {
    raised = { ...raised, top: raised.top - height, bottom: raised.bottom - height };
  }
  return raised;
}

/**
 * The box of each name: above its line or below it, as near the line's end as there is room. Null where there is none.
 */
export function placeNames({ lines, sizes, marks, area }: Placing): (Box | null)[] {
  const obstacles: Spot[] = [...lines, ...marks].flatMap(dense);
  const taken: Box[] = [];
  return lines.map((line, i) => {
    const { width, height } = sizes[i]!;
    for (const at of [...dense(line)].reverse()) {
      for (const top of AWAY.flatMap((away) => [at.y - height - away, at.y + away])) {
        const left = Math.min(at.x - width / 2, area.right - width);
        const box = { left, top, right: left + width, bottom: top + height };
        const inside = box.left >= area.left && box.top >= area.top && box.bottom <= area.bottom;
        if (!inside || obstacles.some((spot) => within(spot, box)) || taken.some((other) => overlap(box, other)))
          continue;
        taken.push(box);
        return box;
      }
    }
    return null;
  });
}

/** Points of a line no further apart than a name is high. */
function dense(line: readonly Spot[]): Spot[] {
  return line.flatMap((spot, i) => {
    const next = line[i + 1];
    if (next === undefined) return [spot];
    const parts = Math.max(1, Math.ceil(Math.hypot(next.x - spot.x, next.y - spot.y) / CLEAR));
    return Array.from({ length: parts }, (_, k) => ({
      x: spot.x + ((next.x - spot.x) * k) / parts,
      y: spot.y + ((next.y - spot.y) * k) / parts,
    }));
  });
}

function within({ x, y }: Spot, { left, top, right, bottom }: Box): boolean {
  return x > left - CLEAR && x < right + CLEAR && y > top - CLEAR && y < bottom + CLEAR;
}

/** Whether two names touch. */
export function overlap(a: Box, b: Box): boolean {
  return a.left < b.right + CLEAR && b.left < a.right + CLEAR && a.top < b.bottom && b.top < a.bottom;
}
