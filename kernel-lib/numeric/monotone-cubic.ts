/**
 * Cubic through points that does not overshoot: monotone wherever the points are.
 * @param x shape (n), ascending, n >= 2
 * @param y shape (n)
 * @returns function of a place; NaN outside the points
 * @throws RangeError when x does not ascend or lengths differ
 * @example monotoneCubic([0, 1, 2], [0, 1, 4])(1) // => 1
 * Source: Fritsch & Carlson 1980, SIAM J. Numer. Anal. 17, 238; slopes of Fritsch & Butland 1984, SIAM J. Sci. Stat. Comput. 5, 300.
 */
export function monotoneCubic(x: ArrayLike<number>, y: ArrayLike<number>): (at: number) => number {
  const n = x.length;
  if (n < 2 || y.length !== n) throw new RangeError(`monotoneCubic: ${n} x and ${y.length} y; two or more of each.`);
  for (let i = 1; i < n; i++) {
    if (!(x[i] > x[i - 1])) throw new RangeError(`monotoneCubic: x[${i}] = ${x[i]} does not follow ${x[i - 1]}.`);
  }
  const slope = new Float64Array(n);
  const secant = (i: number) => (y[i + 1] - y[i]) / (x[i + 1] - x[i]);
  for (let i = 1; i < n - 1; i++) {
    const a = secant(i - 1);
    const b = secant(i);
    if (a * b <= 0) continue;
    const h0 = x[i] - x[i - 1];
    const h1 = x[i + 1] - x[i];
    const w0 = 2 * h1 + h0;
    const w1 = h1 + 2 * h0;
    slope[i] = (w0 + w1) / (w0 / a + w1 / b);
  }
  slope[0] = secant(0);
  slope[n - 1] = secant(n - 2);
  return (at) => {
    if (!(at >= x[0] && at <= x[n - 1])) return Number.NaN;
    let low = 0;
    let high = n - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (x[middle] <= at) low = middle;
      else high = middle;
    }
    const h = x[low + 1] - x[low];
    const t = (at - x[low]) / h;
    const u = 1 - t;
    return (
      y[low] * (1 + 2 * t) * u * u +
      slope[low] * h * t * u * u +
      y[low + 1] * (3 - 2 * t) * t * t -
      slope[low + 1] * h * t * t * u
    );
  };
}
