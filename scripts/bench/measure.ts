/** One measured thing against something general-purpose, measured in the same run. */
export interface Measured {
  readonly what: string;
  readonly milliseconds: number;
  /** What it is held against, and how long that takes; null for a plain figure. */
  readonly against: string | null;
  readonly againstMilliseconds: number | null;
  readonly ratio: number | null;
  /** The ratio hoped for; null where there is none. */
  readonly aim: number | null;
  /** The time hoped for [ms]; null where there is none. */
  readonly aimMilliseconds: number | null;
}

/** The shortest of some rounds [ms]: what the work takes where nothing else gets in between. */
export function shortest(rounds: number, task: () => void): number {
  let least = Infinity;
  for (let i = 0; i < rounds; i++) {
    const before = performance.now();
    task();
    least = Math.min(least, performance.now() - before);
  }
  return least;
}

export function measured(
  what: string,
  milliseconds: number,
  against?: { readonly what: string; readonly milliseconds: number; readonly aim: number | null },
): Measured {
  return {
    what,
    milliseconds,
    against: against?.what ?? null,
    againstMilliseconds: against?.milliseconds ?? null,
    ratio: against ? milliseconds / against.milliseconds : null,
    aim: against?.aim ?? null,
    aimMilliseconds: null,
  };
}

/** A time held against one hoped for on two cores. */
export function within(what: string, milliseconds: number, aimMilliseconds: number): Measured {
  return { ...measured(what, milliseconds), aimMilliseconds };
}
