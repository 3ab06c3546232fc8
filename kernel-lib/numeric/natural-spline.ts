/**
 * Cubic spline through points, without curvature at the ends.
 * @param x strictly rising, shape (n), n >= 2
 * @param y shape (n)
 * @returns function of a place; NaN outside the points
 * @throws RangeError when x does not rise, lengths differ or n < 2
 * @example naturalSpline([0, 1, 2], [0, 1, 0])(0.5) // => 0.6875
 * Source: de Boor 1978, A Practical Guide to Splines, chapter 4.
 */
export function naturalSpline(x: ArrayLike<number>, y: ArrayLike<number>): (at: number) => number {
  const n = x.length;
  if (n < 2 || y.length !== n) throw new RangeError(`naturalSpline: ${n} x and ${y.length} y; two or more of each.`);
  for (let i = 1; i < n; i++) {
    if (!(x[i] > x[i - 1])) throw new RangeError(`naturalSpline: x[${i}] = ${x[i]} does not follow ${x[i - 1]}.`);
  }
  const second = new Float64Array(n);
  const ratio = new Float64Array(n);
  for (let i = 1; i < n - 1; i++) {
    const before = x[i] - x[i - 1];
    const after = x[i + 1] - x[i];
    const bend = 6 * ((y[i + 1] - y[i]) / after - (y[i] - y[i - 1]) / before);
    const pivot = 2 * (before + after) - before * ratio[i - 1];
    ratio[i] = after / pivot;
    second[i] = (bend - before * second[i - 1]) / pivot;
  }
  for (let i = n - 2; i > 0; i--) second[i] -= ratio[i] * second[i + 1];
  return (at) => {
    if (!(at >= x[0] && at <= x[n - 1])) return Number.NaN;
    let low = 0;
    let high = n - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (x[middle] <= at) low = middle;
      else high = middle;
    }
    const h = x[high] - x[low];
    const a = (x[high] - at) / h;
    const b = (at - x[low]) / h;
    return a * y[low] + b * y[high] + (((a * a - 1) * a * second[low] + (b * b - 1) * b * second[high]) * h * h) / 6;
  };
}
