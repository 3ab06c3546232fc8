import { checkErrors, checkPoints, type Line } from './line';

/**
 * Straight line with Student-t residuals: a robust fit whose long tails give outliers little say.
 * @param x      shape (n), n >= 3
 * @param y      shape (n)
 * @param yError standard errors of y (x errors may be folded in by the caller), positive
 * @param options degrees of freedom of the residuals (3 by default; smaller is more robust)
 * @returns slope, intercept and errors from the observed information, with the scale that multiplies the errors, and the weight each
 *   point was given (1 at the centre, small for outliers)
 * Source: Lange, Little & Taylor 1989, J. Am. Stat. Assoc. 84, 881, Section 3 (iterated weights).
 */
export function studentLine(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  yError: ArrayLike<number>,
  options: { degreesOfFreedom?: number } = {},
): Line & { readonly scale: number; readonly weights: Float64Array } {
  checkPoints('studentLine', x, y);
  checkErrors('studentLine', 'yError', yError, x.length);
  const nu = options.degreesOfFreedom ?? 3;
  const n = x.length;
  const weights = new Float64Array(n).fill(1);
  let slope = 0;
  let intercept = 0;
  let scale = 1;
  for (let round = 0; round < 500; round++) {
    let s = 0;
    let sx = 0;
    let sy = 0;
    for (let i = 0; i < n; i++) {
      const w = weights[i] / yError[i] ** 2;
      s += w;
      sx += w * x[i];
      sy += w * y[i];
    }
    const mx = sx / s;
    const my = sy / s;
    let sxx = 0;
    let sxy = 0;
    for (let i = 0; i < n; i++) {
      const w = weights[i] / yError[i] ** 2;
      sxx += w * (x[i] - mx) ** 2;
      sxy += w * (x[i] - mx) * (y[i] - my);
    }
    const before = slope;
    slope = sxy / sxx;
    intercept = my - slope * mx;
    let sum = 0;
    for (let i = 0; i < n; i++) sum += weights[i] * ((y[i] - intercept - slope * x[i]) / yError[i]) ** 2;
    scale = Math.sqrt(Math.max(sum / n, 1e-300));
    for (let i = 0; i < n; i++) {
      const z = (y[i] - intercept - slope * x[i]) / (yError[i] * scale);
      weights[i] = (nu + 1) / (nu + z * z);
    }
    if (round > 3 && Math.abs(slope - before) <= 1e-13 * Math.max(1, Math.abs(slope))) break;
  }
  // Expected information of a t location family: (nu + 1) / (nu + 3) per unit weight.
  const information = (nu + 1) / (nu + 3) / scale ** 2;
  let s = 0;
  let sx = 0;
  let sxx = 0;
  for (let i = 0; i < n; i++) {
    const w = information / yError[i] ** 2;
    s += w;
    sx += w * x[i];
    sxx += w * x[i] * x[i];
  }
  const determinant = s * sxx - sx * sx;
  return Object.freeze({
    slope,
    intercept,
    slopeError: Math.sqrt(s / determinant),
    interceptError: Math.sqrt(sxx / determinant),
    covariance: -sx / determinant,
    scale,
    weights,
  });
}
