import { checkErrors, checkPoints, type Line } from './line';

/** Line with errors in both axes, and how well it fits. */
export interface YorkLine extends Line {
  /** Weighted sum of squared residuals. */
  readonly chiSquare: number;
  /** n - 2. */
  readonly degreesOfFreedom: number;
}

/** Points with errors in both axes. */
export interface ErrorPoints {
  /** shape (n) */
  readonly x: ArrayLike<number>;
  readonly y: ArrayLike<number>;
  /** standard errors, positive */
  readonly xError: ArrayLike<number>;
  readonly yError: ArrayLike<number>;
  /** correlation of the two errors of a point, -1 < r < 1; none: 0 */
  readonly correlation?: ArrayLike<number>;
}

/**
 * Best straight line with errors in both axes, correlated or not, no intrinsic scatter.
 * @param points shape (n), n >= 3
 * @returns slope, intercept, standard errors (as the errors state, not scaled by chi-square), chi-square
 * @throws RangeError on errors that are not positive or a fit that does not settle
 * @example yorkLine({ x: [0, 1, 2], y: [0, 2, 4], xError: [.1, .1, .1], yError: [.1, .1, .1] }).slope // => 2
 * Source: York, Evensen, Lopez Martinez & De Basabe Delgado 2004, Am. J. Phys. 72, 367, Eqs 13.
 */
export function yorkLine(points: ErrorPoints): YorkLine {
  const { x, y, xError, yError } = points;
  checkPoints('yorkLine', x, y);
  checkErrors('yorkLine', 'xError', xError, x.length);
  checkErrors('yorkLine', 'yError', yError, x.length);
  const n = x.length;
  const r = points.correlation ?? new Float64Array(n);
  if (r.length !== n) throw new RangeError(`yorkLine: ${r.length} correlations for ${n} points.`);
  const out = new Float64Array(6);
  if (!yorkInto(x, y, xError, yError, r, null, n, out)) {
    throw new RangeError('yorkLine: the slope did not settle; the points do not define a line within their errors.');
  }
  return Object.freeze({
    slope: out[0],
    intercept: out[1],
    slopeError: out[2],
    interceptError: out[3],
    covariance: out[4],
    chiSquare: out[5],
    degreesOfFreedom: n - 2,
  });
}

/**
 * The loop of `yorkLine`, without checks or allocation, on chosen rows (for resampling).
 * @param rows indices of the points, or null for the first `count` points
 * @param out  shape (6): slope, intercept, their errors, covariance, chi-square
 * @returns false when it did not settle
 */
export function yorkInto(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  xError: ArrayLike<number>,
  yError: ArrayLike<number>,
  correlation: ArrayLike<number>,
  rows: Uint32Array | null,
  count: number,
  out: Float64Array,
  startSlope: number = Number.NaN,
): boolean {
  let b = Number.isNaN(startSlope) ? ordinarySlope(x, y, rows, count) : startSlope;
  let sumW = 0;
  let meanX = 0;
  let meanY = 0;
  let settled = false;
  for (let round = 0; round < 200; round++) {
    sumW = 0;
    meanX = 0;
    meanY = 0;
    for (let k = 0; k < count; k++) {
      const i = rows === null ? k : rows[k];
      const sx = xError[i];
      const sy = yError[i];
      const w = 1 / (sy * sy + b * b * sx * sx - 2 * b * correlation[i] * sx * sy);
      sumW += w;
      meanX += w * x[i];
      meanY += w * y[i];
    }
    meanX /= sumW;
    meanY /= sumW;
    let above = 0;
    let below = 0;
    for (let k = 0; k < count; k++) {
      const i = rows === null ? k : rows[k];
      const sx = xError[i];
      const sy = yError[i];
      const cross = correlation[i] * sx * sy;
      const w = 1 / (sy * sy + b * b * sx * sx - 2 * b * cross);
      const u = x[i] - meanX;
      const v = y[i] - meanY;
      const beta = w * (u * sy * sy + b * v * sx * sx - (b * u + v) * cross);
      above += w * beta * v;
      below += w * beta * u;
    }
    const next = above / below;
    if (!Number.isFinite(next)) return false;
    const change = Math.abs(next - b);
    b = next;
    if (change <= 1e-14 * Math.max(1, Math.abs(b))) {
      settled = true;
      break;
    }
  }
  let chiSquare = 0;
  let meanFitted = 0;
  const a = meanY - b * meanX;
  for (let k = 0; k < count; k++) {
    const i = rows === null ? k : rows[k];
    const sx = xError[i];
    const sy = yError[i];
    const cross = correlation[i] * sx * sy;
    const w = 1 / (sy * sy + b * b * sx * sx - 2 * b * cross);
    const u = x[i] - meanX;
    const v = y[i] - meanY;
    meanFitted += (w * (meanX + w * (u * sy * sy + b * v * sx * sx - (b * u + v) * cross))) / sumW;
    chiSquare += w * (y[i] - a - b * x[i]) ** 2;
  }
  let spread = 0;
  for (let k = 0; k < count; k++) {
    const i = rows === null ? k : rows[k];
    const sx = xError[i];
    const sy = yError[i];
    const cross = correlation[i] * sx * sy;
    const w = 1 / (sy * sy + b * b * sx * sx - 2 * b * cross);
    const u = x[i] - meanX;
    const v = y[i] - meanY;
    const fitted = meanX + w * (u * sy * sy + b * v * sx * sx - (b * u + v) * cross) - meanFitted;
    spread += w * fitted * fitted;
  }
  out[0] = b;
  out[1] = a;
  out[2] = Math.sqrt(1 / spread);
  out[3] = Math.sqrt(1 / sumW + (meanFitted * meanFitted) / spread);
  out[4] = -meanFitted / spread;
  out[5] = chiSquare;
  return settled;
}

function ordinarySlope(x: ArrayLike<number>, y: ArrayLike<number>, rows: Uint32Array | null, count: number): number {
  let mx = 0;
  let my = 0;
  for (let k = 0; k < count; k++) {
    const i = rows === null ? k : rows[k];
    mx += x[i] / count;
    my += y[i] / count;
  }
  let sxx = 0;
  let sxy = 0;
  for (let k = 0; k < count; k++) {
    const i = rows === null ? k : rows[k];
    sxx += (x[i] - mx) ** 2;
    sxy += (x[i] - mx) * (y[i] - my);
  }
  return sxy / sxx;
}
