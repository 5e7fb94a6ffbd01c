/**
 * Root of f between a and b by Brent's method (R. P. Brent, *Algorithms for Minimization without Derivatives*, 1973,
 * ch. 4): bisection that never loses its bracket, hurried by secants and inverse quadratics.
 *
 * @param f          continuous, with f(a) and f(b) of opposite sign or one of them 0
 * @param tolerance  relative width of the final bracket, 1e-14 by default
 * @throws           Error (a bug of the caller's) where the ends have one sign
 */
export function root(f: (x: number) => number, a: number, b: number, tolerance = 1e-14): number {
  let fa = f(a);
  let fb = f(b);
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (fa > 0 === fb > 0) throw new Error(`root not bracketed: f(${a}) = ${fa}, f(${b}) = ${fb}`);
  let c = a;
  let fc = fa;
  let step = b - a;
  let before = step;
  for (let i = 0; i < 200; i++) {
    if (Math.abs(fc) < Math.abs(fb)) {
      a = b;
      b = c;
      c = a;
      fa = fb;
      fb = fc;
      fc = fa;
    }
    const narrow = tolerance * Math.abs(b) + Number.MIN_VALUE;
    const half = (c - b) / 2;
    if (fb === 0 || Math.abs(half) <= narrow) return b;
    if (Math.abs(before) >= narrow && Math.abs(fa) > Math.abs(fb)) {
      const s = fb / fa;
      let p: number;
      let q: number;
      if (a === c) {
        p = 2 * half * s;
        q = 1 - s;
      } else {
        const r = fb / fc;
        const t = fa / fc;
        p = s * (2 * half * t * (t - r) - (b - a) * (r - 1));
        q = (t - 1) * (r - 1) * (s - 1);
      }
      if (p > 0) q = -q;
      else p = -p;
      if (2 * p < Math.min(3 * half * q - Math.abs(narrow * q), Math.abs(before * q))) {
        before = step;
        step = p / q;
      } else {
        step = half;
        before = half;
      }
    } else {
      step = half;
      before = half;
    }
    a = b;
    fa = fb;
    b += Math.abs(step) > narrow ? step : half > 0 ? narrow : -narrow;
    fb = f(b);
    if (fb > 0 === fc > 0) {
      c = a;
      fc = fa;
      step = b - a;
      before = step;
    }
  }
  return b;
}

/**
 * Where f is least on [a, b], by golden sections; f has one minimum there.
 *
 * @returns  the place, to about 1e-9 of the interval (a minimum is flat, so its value is then good to 1e-15)
 */
export function leastOn(f: (x: number) => number, a: number, b: number): number {
  const ratio = (Math.sqrt(5) - 1) / 2;
  let low = a;
  let high = b;
  let x1 = high - ratio * (high - low);
  let x2 = low + ratio * (high - low);
  let f1 = f(x1);
  let f2 = f(x2);
  for (let i = 0; i < 44; i++) {
    if (f1 <= f2) {
      high = x2;
      x2 = x1;
      f2 = f1;
      x1 = high - ratio * (high - low);
      f1 = f(x1);
    } else {
      low = x1;
      x1 = x2;
      f1 = f2;
      x2 = low + ratio * (high - low);
      f2 = f(x2);
    }
  }
  const middle = (low + high) / 2;
  const fa = f(a);
  const fb = f(b);
  const fm = f(middle);
  if (fa <= fm && fa <= fb) return a;
  return fb < fm ? b : middle;
}
