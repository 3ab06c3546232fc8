/**
 * Coefficients of the cubic B-spline through values at equally spaced nodes, with no curvature at the ends.
 * Between node i and i + 1, at the fraction u, the value is the sum of four of them, starting at coefficient i, with the
 * weights (1-u)^3/6, (3u^3-6u^2+4)/6, (-3u^3+3u^2+3u+1)/6 and u^3/6. Two derivatives are continuous.
 * @param values shape (n), n >= 3
 * @returns shape (n + 2)
 * @throws RangeError when n < 3
 * @example uniformSpline([0, 1, 2]) // => [-1, 0, 1, 2, 3]
 * Source: de Boor 1978, A Practical Guide to Splines, chapters 9 and 11.
 */
export function uniformSpline(values: ArrayLike<number>): Float64Array {
  const n = values.length;
  if (n < 3) throw new RangeError(`uniformSpline: needs at least 3 values, got ${n}.`);
  const c = new Float64Array(n + 2);
  // No curvature at the ends makes the end coefficients the values themselves; inside, (1 4 1)/6 is solved by elimination.
  c[1] = values[0];
  c[n] = values[n - 1];
  const pivot = new Float64Array(n);
  for (let i = 1; i < n - 1; i++) {
    const right = 6 * values[i] - (i === 1 ? c[1] : 0) - (i === n - 2 ? c[n] : 0);
    pivot[i] = 1 / (4 - (i === 1 ? 0 : pivot[i - 1]));
    c[i + 1] = (right - (i === 1 ? 0 : c[i])) * pivot[i];
  }
  for (let i = n - 3; i >= 1; i--) c[i + 1] -= pivot[i] * c[i + 2];
  c[0] = 2 * c[1] - c[2];
  c[n + 1] = 2 * c[n] - c[n - 1];
  return c;
}
