import { checkPoints, type Line } from './line';

/**
 * Theil-Sen line: the median of all pair slopes, and the median of y - slope x; stands against up to 29 % wrong points.
 * @param x shape (n), n >= 3; the work grows as n^2
 * @param y shape (n)
 * @returns slope and intercept; the errors are half the 68 % interval of Sen's rank argument, covariance NaN
 * @throws RangeError on points that are not finite or all at one x
 * @example theilSenLine([0, 1, 2, 3, 4], [0, 1, 2, 30, 4]).slope // => 1
 * Source: Sen 1968, J. Am. Stat. Assoc. 63, 1379, Sections 2 and 4.
 */
export function theilSenLine(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
): Line & { readonly slopeInterval: readonly [number, number] } {
  checkPoints('theilSenLine', x, y);
  const n = x.length;
  const slopes = new Float64Array((n * (n - 1)) / 2);
  let count = 0;
  for (let i = 0; i < n; i++) {
    for (let j = i + 1; j < n; j++) {
      const dx = x[j] - x[i];
      if (dx !== 0) slopes[count++] = (y[j] - y[i]) / dx;
    }
  }
  const sorted = slopes.subarray(0, count).sort();
  const slope = median(sorted);
  const offsets = new Float64Array(n);
  for (let i = 0; i < n; i++) offsets[i] = y[i] - slope * x[i];
  const intercept = median(offsets.sort());
  // Kendall's statistic has this variance when there is no slope left; z = 1 bounds 68 %.
  const sigma = Math.sqrt((n * (n - 1) * (2 * n + 5)) / 18 - tieTerm(x) / 18);
  const low = sorted[Math.max(0, Math.round((count - sigma) / 2) - 1)];
  const high = sorted[Math.min(count - 1, Math.round((count + sigma) / 2))];
  const slopeError = (high - low) / 2;
  let meanX = 0;
  for (let i = 0; i < n; i++) meanX += x[i] / n;
  const spread = 1.4826 * median(offsets.map((o) => Math.abs(o - intercept)).sort());
  return Object.freeze({
    slope,
    intercept,
    slopeError,
    interceptError: Math.hypot((1.2533 * spread) / Math.sqrt(n), meanX * slopeError),
    covariance: Number.NaN,
    slopeInterval: Object.freeze([low, high] as const),
  });
}

function tieTerm(x: ArrayLike<number>): number {
  const sorted = Float64Array.from(x).sort();
  let sum = 0;
  for (let i = 0; i < sorted.length; ) {
    let j = i;
    while (j < sorted.length && sorted[j] === sorted[i]) j++;
    const t = j - i;
    sum += t * (t - 1) * (2 * t + 5);
    i = j;
  }
  return sum;
}

function median(sorted: ArrayLike<number>): number {
  const half = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
}
