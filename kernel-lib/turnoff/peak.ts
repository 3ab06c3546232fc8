import { choleskyFactor, invertPositive } from '../numeric/cholesky';

/** A peak of a log-density in a few variables, as a Gaussian. */
export interface Peak {
  /** Shape (n). */
  readonly at: Float64Array;
  /** Covariance, shape (n, n); null where the density does not curve down on every side. */
  readonly covariance: Float64Array | null;
  /** Log of the height. */
  readonly top: number;
  /** Log of the integral of the Gaussian over all variables. */
  readonly logIntegral: number;
  /** Steps that suit the peak's width, shape (n): good first steps for a peak like it. */
  readonly steps: Float64Array;
}

const ROUNDS = 14;
/** A step that would gain less than this ends the search. */
const SMALL_GAIN = 0.002;
/** A fall of the log-density by half is one standard deviation; steps of such a length see the curvature of the peak itself. */
const GOOD_FALL = 0.5;

/**
 * Climbs to the peak of a smooth log-density by Newton steps with finite differences, and measures its width (Laplace's method).
 * @param f      log-density of a point, shape (n); -Infinity outside its range
 * @param start  shape (n)
 * @param first  first step in each variable, shape (n), positive
 * @returns the peak; top -Infinity when f is nowhere finite near the start
 */
export function findPeak(f: (x: Float64Array) => number, start: ArrayLike<number>, first: ArrayLike<number>): Peak {
  const n = start.length;
  const x = Float64Array.from(start);
  const h = Float64Array.from(first);
  let top = f(x);
  if (n === 0) return { at: x, covariance: new Float64Array(0), top, logIntegral: top, steps: h };
  const trial = new Float64Array(n);
  const low = new Float64Array(n);
  const high = new Float64Array(n);
  const slope = new Float64Array(n);
  const bend = new Float64Array(n * n);
  let covariance: Float64Array | null = null;
  for (let round = 0; round < ROUNDS; round++) {
    let best = top;
    let bestAxis = -1;
    let bestSign = 0;
    for (let i = 0; i < n; i++) {
      trial.set(x);
      trial[i] = x[i] - h[i];
      low[i] = f(trial);
      trial[i] = x[i] + h[i];
      high[i] = f(trial);
      for (const [value, sign] of [
        [low[i], -1],
        [high[i], 1],
      ]) {
        if (value > best) {
          best = value;
          bestAxis = i;
          bestSign = sign;
        }
      }
      slope[i] = (high[i] - low[i]) / (2 * h[i]);
      bend[i * n + i] = (2 * top - high[i] - low[i]) / (h[i] * h[i]);
    }
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < i; j++) {
        trial.set(x);
        trial[i] = x[i] + h[i];
        trial[j] = x[j] + h[j];
        const both = f(trial);
        trial[i] = x[i] - h[i];
        trial[j] = x[j] - h[j];
        const neither = f(trial);
        const mixed = (high[i] + low[i] + high[j] + low[j] - 2 * top - both - neither) / (2 * h[i] * h[j]);
        bend[i * n + j] = mixed;
        bend[j * n + i] = mixed;
      }
    }
    covariance = bend.every(Number.isFinite) ? invertPositive(bend, n) : null;
    if (covariance === null) {
      // Not yet in the bowl of the peak: walk, with longer steps where that helps and shorter ones where not.
      if (bestAxis >= 0) {
        x[bestAxis] += bestSign * h[bestAxis];
        top = best;
        h[bestAxis] *= 1.5;
      } else {
        for (let i = 0; i < n; i++) h[i] *= 0.4;
      }
      continue;
    }
    // Newton's step, held to a few steps of the differences that it was worked out from.
    let gain = 0;
    let longest = 1;
    for (let i = 0; i < n; i++) {
      let step = 0;
      for (let j = 0; j < n; j++) step += covariance[i * n + j] * slope[j];
      trial[i] = step;
      gain += 0.5 * step * slope[i];
      longest = Math.max(longest, Math.abs(step) / (4 * h[i]));
    }
    const step = Float64Array.from(trial, (s) => s / longest);
    const before = top;
    for (let half = 0; half < 4; half++) {
      for (let i = 0; i < n; i++) trial[i] = x[i] + step[i] / 2 ** half;
      const value = f(trial);
      if (value > top) {
        x.set(trial);
        top = value;
        break;
      }
    }
    let steady = true;
    for (let i = 0; i < n; i++) {
      const fit = Math.sqrt((2 * GOOD_FALL) / bend[i * n + i]);
      const next = Math.min(Math.max(fit, h[i] / 5), h[i] * 5);
      if (next > 1.6 * h[i] || next < h[i] / 1.6) steady = false;
      h[i] = next;
    }
    if (steady && gain < SMALL_GAIN && top - before < SMALL_GAIN) break;
  }
  const factor = covariance === null ? null : choleskyFactor(covariance, n);
  let logIntegral = top;
  for (let i = 0; i < n; i++) {
    logIntegral += 0.5 * Math.log(2 * Math.PI) + Math.log(factor === null ? h[i] : factor[i * n + i]);
  }
  return {
    at: x,
    covariance,
    top,
    logIntegral: Number.isFinite(top) ? logIntegral : Number.NEGATIVE_INFINITY,
    steps: h,
  };
}
