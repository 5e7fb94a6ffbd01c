/** Friction of everything the pumps share: head lost [m] at a total flow [m³/s]; 0 at 0, rising. */
export interface Friction {
  /** Set where loss = k·Q²; then operating points have closed forms. */
  readonly squareLaw: number | null;
  at(flow: number): number;
}

/** k·Q^m. */
export class PowerFriction implements Friction {
  readonly squareLaw: number | null;
  constructor(
    readonly k: number,
    readonly exponent: number,
  ) {
    this.squareLaw = exponent === 2 ? k : null;
  }

  at(flow: number): number {
    return this.squareLaw === null ? this.k * flow ** this.exponent : this.squareLaw * flow * flow;
  }
}

/**
 * k from known points of the whole system, by least squares in head: k = Σ(H − H_st)·Q^m / ΣQ^2m. One point gives the
 * usual k = (H* − H_st)/Q*^m.
 */
export function frictionCoefficient(
  points: readonly { readonly flow: number; readonly head: number }[],
  staticHead: number,
  exponent: number,
): number {
  let top = 0;
  let bottom = 0;
  for (const { flow, head } of points) {
    const power = flow ** exponent;
    top += (head - staticHead) * power;
    bottom += power * power;
  }
  return top / bottom;
}

/** H_sys(Q) = H_st + friction(Q) [m]. */
export function systemHead(friction: Friction, staticHead: number, flow: number): number {
  return staticHead + friction.at(flow);
}
