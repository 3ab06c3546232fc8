import { normalBetween } from '../numeric/normal-distribution';
import type { ErrorPoints } from '../numeric/regression/york';
import type { SpreadOfX } from './spread-of-x';

/**
 * Prepares the log-likelihood of points about a broken line with errors in both axes and Gaussian intrinsic scatter in y. The
 * true x of every point is integrated out in closed form, piece by piece, so a point near a break belongs to both sides.
 * @param points shape (n); errors may be zero in x, not in y unless there is scatter
 * @param spread where the true x lie
 * @returns function of breaks (ascending), slopes, intercepts and intrinsic scatter; it allocates nothing
 * Source: the integral of Kelly 2007, ApJ 665, 1489, Eqs 14-17, cut at the breaks.
 */
export function brokenLineLikelihood(
  points: ErrorPoints,
  spread: SpreadOfX,
): (breaks: Float64Array, slopes: Float64Array, intercepts: Float64Array, scatter: number) => number {
  const n = points.x.length;
  const x = Float64Array.from(points.x);
  const y = Float64Array.from(points.y);
  const correlation = points.correlation ? Float64Array.from(points.correlation) : new Float64Array(n);
  // A tiny x error stands for none, so that one formula serves all points.
  const sx = Float64Array.from(points.xError, (e) => Math.max(e, 1e-6));
  const sy = Float64Array.from(points.yError);
  const { weights, means, deviations } = spread;
  const terms = new Float64Array(64);

  return (breaks, slopes, intercepts, scatter) => {
    const pieces = slopes.length;
    const scatter2 = scatter * scatter;
    let sum = 0;
    for (let i = 0; i < n; i++) {
      const xx = sx[i] * sx[i];
      const yy = sy[i] * sy[i] + scatter2;
      const xy = correlation[i] * sx[i] * sy[i];
      const determinant = xx * yy - xy * xy;
      let count = 0;
      let top = Number.NEGATIVE_INFINITY;
      for (let k = 0; k < pieces; k++) {
        const a = slopes[k];
        const dy = y[i] - intercepts[k];
        const low = k === 0 ? Number.NEGATIVE_INFINITY : breaks[k - 1];
        const high = k === pieces - 1 ? Number.POSITIVE_INFINITY : breaks[k];
        // Quadratic form in the true x: curvature, linear and constant term of the data part.
        const curve = (yy - 2 * a * xy + a * a * xx) / determinant;
        const linear = (yy * x[i] - xy * (dy + a * x[i]) + a * xx * dy) / determinant;
        const constant = (yy * x[i] * x[i] - 2 * xy * x[i] * dy + xx * dy * dy) / determinant;
        for (let j = 0; j < weights.length; j++) {
          const inverse = 1 / (deviations[j] * deviations[j]);
          const A = curve + inverse;
          const centre = (linear + means[j] * inverse) / A;
          const root = Math.sqrt(A);
          const below = (low - centre) * root;
          const above = (high - centre) * root;
          if (below > 8.5 || above < -8.5) continue;
          const share = below < -8.5 && above > 8.5 ? 1 : normalBetween(below, above);
          if (!(share > 0)) continue;
          const C = constant + means[j] * means[j] * inverse - A * centre * centre;
          const term = -0.5 * C + Math.log((weights[j] * share) / (deviations[j] * root)) - 0.5 * Math.log(determinant);
          terms[count++] = term;
          if (term > top) top = term;
        }
      }
      if (count === 0) return Number.NEGATIVE_INFINITY;
      let total = 0;
      for (let t = 0; t < count; t++) total += Math.exp(terms[t] - top);
      sum += top + Math.log(total) - LOG_TWO_PI;
    }
    return sum;
  };
}

const LOG_TWO_PI = Math.log(2 * Math.PI);
