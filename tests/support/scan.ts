import { bisect } from 'simple-statistics';

/**
 * The slow and obvious solvers of the independent side: a dense scan finds where something happens; a library's bisection
 * or ever finer scans find it exactly. They share no code with the program's own.
 */

const CELLS = 64;

/** A place where f changes sign on [a, b], to the last digit of the cell it is in; null for none. */
export function scanRoot(f: (x: number) => number, a: number, b: number): number | null {
  let left = a;
  let signLeft = Math.sign(f(a));
  if (signLeft === 0) return a;
  for (let i = 1; i <= CELLS; i++) {
    const right = a + ((b - a) * i) / CELLS;
    const signRight = Math.sign(f(right));
    if (signRight === 0) return right;
    if (signRight !== signLeft) return bisect(remembered(f), left, right, 200, 2e-16 * Math.abs(right));
    left = right;
    signLeft = signRight;
  }
  return null;
}

/** The same function, each value worked out once: the library asks for it several times. */
export function remembered(f: (x: number) => number): (x: number) => number {
  const values = new Map<number, number>();
  return (x) => {
    let value = values.get(x);
    if (value === undefined) {
      value = f(x);
      values.set(x, value);
    }
    return value;
  };
}

/**
 * The least value of f on [a, b] and where it is: a scan, then ever finer scans about the best place. Good to about
 * 1e-9 of the width, so that a smooth minimum is good to the rounding of f.
 */
export function scanLeast(f: (x: number) => number, a: number, b: number, cells = 40): { x: number; value: number } {
  let low = a;
  let high = b;
  let best = { x: a, value: f(a) };
  for (let round = 0; round < 9 && high > low; round++) {
    for (let i = 0; i <= cells; i++) {
      const x = i === cells ? high : low + ((high - low) * i) / cells;
      const value = f(x);
      if (value < best.value) best = { x, value };
    }
    const cell = (high - low) / cells;
    low = Math.max(a, best.x - cell);
    high = Math.min(b, best.x + cell);
  }
  return best;
}
