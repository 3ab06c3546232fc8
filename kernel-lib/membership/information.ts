import { invertPositive } from '../numeric/cholesky';
import type { Mixture } from './mixture';
import type { Stars } from './stars';

/** How well a fit knows its numbers. */
export interface FitErrors {
  /** Covariance of the cluster's parameters, shape (m, m); rows and columns of a number held at a limit are NaN. */
  readonly covariance: Float64Array;
  /** Standard error of the number of members among these stars. */
  readonly countError: number;
}

/**
 * Errors from the empirical information: the sum over stars of the outer product of each star's derivative of the
 * log-likelihood by the cluster's numbers and by its share. The field's shape is taken as known.
 * Source: McLachlan & Peel 2000, Finite Mixture Models, Section 2.15.3 (from memory).
 */
export function fitErrors(stars: Stars, mixture: Mixture): FitErrors {
  const { cluster, field, probability } = mixture;
  if (cluster === null) throw new Error('fitErrors: the mixture has no cluster.');
  const m = cluster.parameters.length;
  const free = Array.from({ length: m }, (_, j) => j).filter((j) => cluster.steps[j] > 0);
  const width = free.length + 1;
  const n = stars.count;
  const scores = new Float64Array(n * width);
  const up = new Float64Array(n);
  const down = new Float64Array(n);
  free.forEach((j, column) => {
    const shifted = (sign: number) => {
      const p = Float64Array.from(cluster.parameters);
      p[j] += sign * cluster.steps[j];
      return cluster.withParameters(p);
    };
    shifted(1).density(stars, up);
    shifted(-1).density(stars, down);
    for (let i = 0; i < n; i++) {
      if (probability[i] < 1e-8 || !(up[i] > 0 && down[i] > 0)) continue;
      scores[i * width + column] = (probability[i] * Math.log(up[i] / down[i])) / (2 * cluster.steps[j]);
    }
  });
  const shareColumn = field.components + 1;
  let binomial = 0;
  let doubt = 0;
  for (let i = 0; i < n; i++) {
    const share = field.shares[stars.errorClass[i] * (field.components + 2) + shareColumn];
    // By the logarithm of the odds, moved alike in all classes.
    scores[i * width + width - 1] = probability[i] - share;
    binomial += share * (1 - share);
    doubt += probability[i] * (1 - probability[i]);
  }
  const information = new Float64Array(width * width);
  for (let i = 0; i < n; i++) {
    const at = i * width;
    for (let a = 0; a < width; a++) {
      const s = scores[at + a];
      if (s === 0) continue;
      for (let b = 0; b <= a; b++) information[a * width + b] += s * scores[at + b];
    }
  }
  const covariance = new Float64Array(m * m).fill(Number.NaN);
  const inverse = invertScaled(information, width);
  if (inverse === null) return { covariance, countError: Math.sqrt(doubt) };
  free.forEach((a, i) => {
    free.forEach((b, j) => {
      covariance[a * m + b] = inverse[i * width + j];
    });
  });
  // Of the variance of the estimated share, the part that is not the chance of how many members there happen to be.
  const ofCount = binomial * binomial * inverse[width * width - 1] - binomial;
  return { covariance, countError: Math.sqrt(Math.max(ofCount, doubt)) };
}

/** Inverse after scaling to a unit diagonal: the numbers have very different units. */
function invertScaled(matrix: Float64Array, n: number): Float64Array | null {
  const scale = Float64Array.from({ length: n }, (_, i) => 1 / Math.sqrt(matrix[i * n + i]));
  const scaled = new Float64Array(n * n);
  for (let i = 0; i < n; i++) for (let j = 0; j <= i; j++) scaled[i * n + j] = matrix[i * n + j] * scale[i] * scale[j];
  const inverse = invertPositive(scaled, n);
  if (inverse === null) return null;
  for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) inverse[i * n + j] *= scale[i] * scale[j];
  return inverse;
}
