import { choleskyFactor, invertPositive } from './cholesky';

/**
 * Shape of a peak: the Cholesky factor of the covariance of the Gaussian that bends like the logarithm of a density at its
 * top. The bends are taken over steps at which the logarithm has dropped by about one half, so that small kinks do not count.
 * @param logDensity logarithm of a density at an offset in an array; -Infinity or NaN forbids a place
 * @param top        shape (n): the place of the peak
 * @param steps      shape (n): rough widths, not zero
 * @returns shape (n, n), lower triangular, row by row; null where the peak has no such shape (an edge, a ridge)
 * @example curvatureShape((v) => -0.5 * v[0] ** 2, Float64Array.of(0), Float64Array.of(0.3)) // => [1]
 */
export function curvatureShape(
  logDensity: (values: Float64Array, offset: number) => number,
  top: Float64Array,
  steps: ArrayLike<number>,
): Float64Array | null {
  const n = top.length;
  const at = Float64Array.from(top);
  const height = logDensity(at, 0);
  const value = (a: number, da: number, b: number, db: number): number => {
    at.set(top);
    at[a] += da;
    at[b] += db;
    return logDensity(at, 0);
  };
  const h = new Float64Array(n);
  const bend = new Float64Array(n * n);
  for (let k = 0; k < n; k++) {
    let step = Math.abs(steps[k]);
    let drop = Number.NaN;
    for (let round = 0; round < 40; round++) {
      drop = height - 0.5 * (value(k, step, k, 0) + value(k, -step, k, 0));
      if (drop > 0.2 && drop < 1) break;
      // A drop grows with the square of the step; a forbidden place is too far.
      step *= !Number.isFinite(drop) ? 0.5 : Math.sqrt(Math.min(9, Math.max(0.04, 0.5 / Math.max(drop, 1e-9))));
    }
    if (!(drop > 0.05 && drop < 4)) return null;
    h[k] = step;
    bend[k * n + k] = (2 * drop) / (step * step);
  }
  for (let a = 0; a < n; a++) {
    for (let b = 0; b < a; b++) {
      const same = value(a, h[a], b, h[b]) + value(a, -h[a], b, -h[b]);
      const cross = value(a, h[a], b, -h[b]) + value(a, -h[a], b, h[b]);
      bend[a * n + b] = -(same - cross) / (4 * h[a] * h[b]);
      bend[b * n + a] = bend[a * n + b];
    }
  }
  const covariance = invertPositive(bend, n);
  return covariance === null ? null : choleskyFactor(covariance, n);
}
