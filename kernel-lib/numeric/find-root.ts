/**
 * A root of a continuous function between two points where its signs differ (Brent's method).
 * @param f     function of one number
 * @param low   one end of the bracket
 * @param high  the other end
 * @param options tolerance: absolute width of the bracket at which to stop (default 1e-12); maxSteps (default 100)
 * @returns the root; NaN when the signs at the ends do not differ or a value is NaN
 * @example findRoot((x) => x * x - 2, 0, 2) // => 1.4142135623730951
 * Source: Brent 1973, Algorithms for Minimization without Derivatives, chapter 4.
 */
export function findRoot(
  f: (x: number) => number,
  low: number,
  high: number,
  options: { tolerance?: number; maxSteps?: number } = {},
): number {
  const { tolerance = 1e-12, maxSteps = 100 } = options;
  let a = low;
  let b = high;
  let fa = f(a);
  let fb = f(b);
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (!(fa * fb < 0)) return Number.NaN;
  let c = a;
  let fc = fa;
  let d = b - a;
  let e = d;
  for (let step = 0; step < maxSteps; step++) {
    if (fb * fc > 0) {
      c = a;
      fc = fa;
      d = b - a;
      e = d;
    }
    if (Math.abs(fc) < Math.abs(fb)) {
      a = b;
      b = c;
      c = a;
      fa = fb;
      fb = fc;
      fc = fa;
    }
    const small = 2 * Number.EPSILON * Math.abs(b) + tolerance / 2;
    const half = (c - b) / 2;
    if (Math.abs(half) <= small || fb === 0) return b;
    if (Math.abs(e) >= small && Math.abs(fa) > Math.abs(fb)) {
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
      if (2 * p < Math.min(3 * half * q - Math.abs(small * q), Math.abs(e * q))) {
        e = d;
        d = p / q;
      } else {
        d = half;
        e = half;
      }
    } else {
      d = half;
      e = half;
    }
    a = b;
    fa = fb;
    b += Math.abs(d) > small ? d : Math.sign(half) * small;
    fb = f(b);
  }
  return b;
}
