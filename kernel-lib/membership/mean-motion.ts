import type { ClusterModel } from './cluster-model';
import { gaussianUpdate } from './field-stars';
import type { Stars } from './stars';

/** How wide the cluster itself may be, before errors. */
export interface DispersionLimits {
  /** mas/yr */
  readonly leastMotion: number;
  readonly mostMotion: number;
  /** mas */
  readonly leastParallax: number;
  readonly mostParallax: number;
}

const NORM = (2 * Math.PI) ** -1.5;

/**
 * A cluster with one mean motion and parallax: a Gaussian with its own spread in motion (with correlation) and in parallax,
 * widened star by star by the errors.
 * @param parameters mean proper motions, mean parallax, variance in ra, covariance, variance in dec, variance in parallax
 * Source of the update: Bovy, Hogg & Roweis 2011, Ann. Appl. Stat. 5, 1657.
 */
export function meanMotion(parameters: Float64Array, limits: DispersionLimits, useParallax: boolean): ClusterModel {
  const [mRa, mDec, mPlx, v00, v01, v11, v22] = parameters;
  return Object.freeze({
    names: [
      'properMotionRa',
      'properMotionDec',
      'parallax',
      'varianceRa',
      'covariance',
      'varianceDec',
      'varianceParallax',
    ],
    parameters,
    steps: steps(parameters, limits, useParallax),
    withParameters: (p: Float64Array) => meanMotion(p, limits, useParallax),
    density(stars: Stars, out: Float64Array): void {
      const { count, values, covariance } = stars;
      for (let i = 0; i < count; i++) {
        const s = 6 * i;
        const d0 = values[3 * i] - mRa;
        const d1 = values[3 * i + 1] - mDec;
        const d2 = values[3 * i + 2] - mPlx;
        const a = v00 + covariance[s];
        const b = v01 + covariance[s + 1];
        const c = covariance[s + 2];
        const e = v11 + covariance[s + 3];
        const f = covariance[s + 4];
        const g = v22 + covariance[s + 5];
        const c00 = e * g - f * f;
        const c01 = c * f - b * g;
        const c02 = b * f - c * e;
        const inverse = 1 / (a * c00 + b * c01 + c * c02);
        const q =
          (d0 * (c00 * d0 + 2 * c01 * d1 + 2 * c02 * d2) +
            d1 * ((a * g - c * c) * d1 + 2 * (b * c - a * f) * d2) +
            d2 * (a * e - b * b) * d2) *
          inverse;
        out[i] = q > 1400 ? 0 : NORM * Math.sqrt(inverse) * Math.exp(-0.5 * q);
      }
    },
    improve(stars: Stars, probability: Float64Array): ClusterModel {
      const { weight, pulls, tightness } = clusterSums(stars, probability, parameters);
      if (!(weight > 1e-3)) return meanMotion(parameters, limits, useParallax);
      const shift = new Float64Array(3);
      const packed = new Float64Array(6);
      gaussianUpdate(Float64Array.of(v00, v01, 0, v11, 0, v22), 0, pulls, 0, tightness, 0, weight, shift, packed);
      const next = Float64Array.of(
        mRa + shift[0],
        mDec + shift[1],
        useParallax ? mPlx + shift[2] : 0,
        packed[0],
        packed[1],
        packed[3],
        packed[5],
      );
      confine(next, limits, useParallax);
      return meanMotion(next, limits, useParallax);
    },
  });
}

function clusterSums(
  stars: Stars,
  probability: Float64Array,
  parameters: Float64Array,
): { weight: number; pulls: Float64Array; tightness: Float64Array } {
  const { count, values, covariance } = stars;
  const [mRa, mDec, mPlx, v00, v01, v11, v22] = parameters;
  const pulls = new Float64Array(3);
  const tightness = new Float64Array(6);
  let weight = 0;
  for (let i = 0; i < count; i++) {
    const r = probability[i];
    if (r < 1e-12) continue;
    const s = 6 * i;
    const d0 = values[3 * i] - mRa;
    const d1 = values[3 * i + 1] - mDec;
    const d2 = values[3 * i + 2] - mPlx;
    const a = v00 + covariance[s];
    const b = v01 + covariance[s + 1];
    const c = covariance[s + 2];
    const e = v11 + covariance[s + 3];
    const f = covariance[s + 4];
    const g = v22 + covariance[s + 5];
    const c00 = e * g - f * f;
    const c01 = c * f - b * g;
    const c02 = b * f - c * e;
    const inverse = 1 / (a * c00 + b * c01 + c * c02);
    const i00 = c00 * inverse;
    const i01 = c01 * inverse;
    const i02 = c02 * inverse;
    const i11 = (a * g - c * c) * inverse;
    const i12 = (b * c - a * f) * inverse;
    const i22 = (a * e - b * b) * inverse;
    const y0 = i00 * d0 + i01 * d1 + i02 * d2;
    const y1 = i01 * d0 + i11 * d1 + i12 * d2;
    const y2 = i02 * d0 + i12 * d1 + i22 * d2;
    weight += r;
    pulls[0] += r * y0;
    pulls[1] += r * y1;
    pulls[2] += r * y2;
    tightness[0] += r * (i00 - y0 * y0);
    tightness[1] += r * (i01 - y0 * y1);
    tightness[2] += r * (i02 - y0 * y2);
    tightness[3] += r * (i11 - y1 * y1);
    tightness[4] += r * (i12 - y1 * y2);
    tightness[5] += r * (i22 - y2 * y2);
  }
  return { weight, pulls, tightness };
}

/** Brings the spreads within their limits, in place; the 2 x 2 block by its principal axes. */
function confine(p: Float64Array, limits: DispersionLimits, useParallax: boolean): void {
  const low = limits.leastMotion ** 2;
  const high = limits.mostMotion ** 2;
  const half = (p[3] + p[5]) / 2;
  const reach = Math.hypot((p[3] - p[5]) / 2, p[4]);
  const wide = Math.min(high, Math.max(low, half + reach));
  const narrow = Math.min(high, Math.max(low, half - reach));
  // Rebuild along the same axes.
  const cos2 = reach > 0 ? (p[3] - p[5]) / 2 / reach : 1;
  const sin2 = reach > 0 ? p[4] / reach : 0;
  p[3] = (wide + narrow) / 2 + ((wide - narrow) / 2) * cos2;
  p[5] = (wide + narrow) / 2 - ((wide - narrow) / 2) * cos2;
  p[4] = ((wide - narrow) / 2) * sin2;
  p[6] = useParallax ? Math.min(limits.mostParallax ** 2, Math.max(limits.leastParallax ** 2, p[6])) : 0;
}

/** Steps of a hundredth of the spread for derivatives; 0 at a limit, where the likelihood has no level top. */
function steps(p: Float64Array, limits: DispersionLimits, useParallax: boolean): Float64Array {
  const out = new Float64Array(7);
  const free = (variance: number, low: number, high: number) =>
    variance > 1.01 * low ** 2 && variance < 0.99 * high ** 2 ? 0.02 * variance : 0;
  out[3] = free(p[3], limits.leastMotion, limits.mostMotion);
  out[5] = free(p[5], limits.leastMotion, limits.mostMotion);
  out[4] = out[3] > 0 && out[5] > 0 && p[4] !== 0 ? 0.02 * Math.sqrt(p[3] * p[5] - p[4] ** 2) : 0;
  if (!(out[4] > 0)) out[4] = 0;
  out[0] = 0.01 * Math.sqrt(p[3]);
  out[1] = 0.01 * Math.sqrt(p[5]);
  if (useParallax) {
    out[2] = 0.01 * Math.sqrt(p[6]);
    out[6] = free(p[6], limits.leastParallax, limits.mostParallax);
  }
  return out;
}
