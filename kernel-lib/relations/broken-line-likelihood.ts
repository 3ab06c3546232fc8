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
  const known = withoutLine(points, spread);
  const { n, logEvidence, from, share, mean, deviation, y, tilt, variance } = known;

  return (breaks, slopes, intercepts, scatter) => {
    const last = slopes.length - 1;
    const scatter2 = scatter * scatter;
    let sum = logEvidence;
    for (let i = 0; i < n; i++) {
      const V = variance[i] + scatter2;
      let density = 0;
      let highest = Number.NEGATIVE_INFINITY;
      // Far outliers underflow: a second round then measures from the highest exponent.
      for (let round = 0; round < 2; round++) {
        const offset = round === 0 ? 0 : highest;
        for (let t = from[i]; t < from[i + 1]; t++) {
          const m = mean[t];
          const s = deviation[t];
          for (let k = 0; k <= last; k++) {
            const a = slopes[k] - tilt[i];
            const T = V + a * a * s * s;
            const miss = y[i] - intercepts[k] - a * m;
            // Where the true x lies, given x and y, if the line went on as piece k.
            const centre = m + (a * s * s * miss) / T;
            const width2 = (s * s * V) / T;
            const low = k === 0 ? Number.NEGATIVE_INFINITY : breaks[k - 1] - centre;
            const high = k === last ? Number.POSITIVE_INFINITY : breaks[k] - centre;
            const far2 = FAR2 * width2;
            if ((low > 0 && low * low > far2) || (high < 0 && high * high > far2)) continue;
            const exponent = (-0.5 * miss * miss) / T;
            if (exponent > highest) highest = exponent;
            let part = (share[t] * Math.exp(exponent - offset)) / Math.sqrt(T);
            if (!(low < 0 && low * low > far2 && high > 0 && high * high > far2)) {
              const width = Math.sqrt(width2);
              part *= normalBetween(low / width, high / width);
            }
            density += part;
          }
        }
        if (density > 1e-280) {
          sum += offset + Math.log(density);
          break;
        }
        if (round === 1 || highest === Number.NEGATIVE_INFINITY) return Number.NEGATIVE_INFINITY;
        density = 0;
      }
    }
    return sum;
  };
}

/** Square of the standard deviations beyond which a Gaussian has nothing left that counts (1e-12). */
const FAR2 = 49;
/** Components of the spread of x that hold less of a point than this are left out. */
const NO_SHARE = 1e-12;

/**
 * What does not depend on the line: for each point and each component of the spread of x the share, mean and deviation of the
 * true x given the observed one, and y freed of the part of its error that goes with the error of x.
 */
function withoutLine(points: ErrorPoints, spread: SpreadOfX) {
  const n = points.x.length;
  const components = spread.weights.length;
  const from = new Uint32Array(n + 1);
  const share = new Float64Array(n * components);
  const mean = new Float64Array(n * components);
  const deviation = new Float64Array(n * components);
  const y = new Float64Array(n);
  const tilt = new Float64Array(n);
  const variance = new Float64Array(n);
  const density = new Float64Array(components);
  let logEvidence = -n * Math.log(2 * Math.PI);
  let stored = 0;
  for (let i = 0; i < n; i++) {
    // A tiny x error stands for none, so that one formula serves all points.
    const sx = Math.max(points.xError[i], 1e-6);
    const sy = points.yError[i];
    const r = points.correlation ? points.correlation[i] : 0;
    const x = points.x[i];
    tilt[i] = (r * sy) / sx;
    y[i] = points.y[i] - tilt[i] * x;
    variance[i] = sy * sy * (1 - r * r);
    let top = Number.NEGATIVE_INFINITY;
    for (let j = 0; j < components; j++) {
      const v = spread.deviations[j] ** 2 + sx * sx;
      density[j] = Math.log(spread.weights[j]) - 0.5 * Math.log(v) - (0.5 * (x - spread.means[j]) ** 2) / v;
      top = Math.max(top, density[j]);
    }
    logEvidence += top;
    from[i] = stored;
    for (let j = 0; j < components; j++) {
      const q = Math.exp(density[j] - top);
      if (!(q > NO_SHARE)) continue;
      const v = spread.deviations[j] ** 2;
      const gain = v / (v + sx * sx);
      share[stored] = q;
      mean[stored] = spread.means[j] + gain * (x - spread.means[j]);
      deviation[stored++] = sx * Math.sqrt(gain);
    }
  }
  from[n] = stored;
  return { n, logEvidence, from, share, mean, deviation, y, tilt, variance };
}
