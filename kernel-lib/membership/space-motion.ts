import { invertPositive } from '../numeric/cholesky';
import { KMS_PER_AU_PER_YEAR } from '../quantity/constants';
import type { ClusterModel } from './cluster-model';
import type { Stars } from './stars';

/** How wide the cluster itself may be. */
export interface SpaceLimits {
  /** Velocity dispersion in one direction, km/s. */
  readonly leastDispersion: number;
  readonly mostDispersion: number;
  /** Spread of parallax as a share of the mean parallax. */
  readonly leastDepth: number;
  readonly mostDepth: number;
}

/** Limits that fit open clusters; the upper ones only keep a stray fit from swallowing the field. */
export const SPACE_LIMITS: SpaceLimits = Object.freeze({
  leastDispersion: 0.02,
  mostDispersion: 3,
  leastDepth: 1e-4,
  mostDepth: 0.4,
});

/** Weak prior on each component of the velocity, km/s: fixes the radial part where the sky area is too small to. */
const VELOCITY_PRIOR = 200;
/** Share of stars whose radial velocity an unseen companion moves, and by how much, km/s (common practice, no source). */
const BINARY_SHARE = 0.2;
const BINARY_VELOCITY = 10;
const KAPPA = KMS_PER_AU_PER_YEAR;

/**
 * A cluster whose stars share one velocity in space; each star is compared with that velocity as seen at its own place and
 * distance, so that motions fan out toward the convergent point. The star's true parallax is not assumed known: it is
 * integrated over, given the measured one, its error and the cluster's own spread of parallax.
 * @param parameters velocity x, y, z, km/s, equatorial axes (x to ra 0, dec 0; z to the north pole), barycentric; velocity
 *                   variance in one direction, (km/s)^2; mean parallax, mas; variance of parallax, mas^2
 * Source: the model of Lindegren, Madsen & Dravins 2000, A&A 356, 1119, with the distances integrated over.
 */
export function spaceMotion(parameters: Float64Array, limits: SpaceLimits = SPACE_LIMITS): ClusterModel {
  const [vx, vy, vz, variance, mean, depth] = parameters;
  return Object.freeze({
    names: ['vx', 'vy', 'vz', 'velocityVariance', 'parallax', 'parallaxVariance'],
    parameters,
    steps: derivativeSteps(parameters, limits),
    withParameters: (p: Float64Array) => spaceMotion(p, limits),
    density(stars: Stars, out: Float64Array): void {
      const scratch = new Float64Array(12);
      const { radialVelocity } = stars;
      for (let i = 0; i < stars.count; i++) {
        prepare(stars, i, vx, vy, vz, variance, mean, depth, scratch);
        const det = scratch[4] * scratch[6] - scratch[5] * scratch[5];
        const r0 = scratch[2];
        const r1 = scratch[3];
        const q = (scratch[6] * r0 * r0 - 2 * scratch[5] * r0 * r1 + scratch[4] * r1 * r1) / det + scratch[7];
        if (q > 1400) {
          out[i] = 0;
          continue;
        }
        let value = Math.exp(-0.5 * q) / (2 * Math.PI * Math.sqrt(det)) / Math.sqrt(2 * Math.PI * scratch[8]);
        if (radialVelocity !== null && !Number.isNaN(radialVelocity.value[i])) {
          value *= radialRatio(stars, i, vx, vy, vz, variance);
        }
        out[i] = value;
      }
    },
    improve: (stars: Stars, probability: Float64Array) => improveMotion(stars, probability, parameters, limits),
  });
}

/**
 * What follows for one star: 0-1 slope of motion in parallax A' (mas/yr per mas), 2-3 residual, 4-6 its covariance 00 01 11,
 * 7 chi-square of the parallax, 8 variance of the measured parallax, 9 expected true parallax, 10 its variance, 11 own
 * motion variance.
 */
function prepare(
  stars: Stars,
  i: number,
  vx: number,
  vy: number,
  vz: number,
  variance: number,
  mean: number,
  depth: number,
  out: Float64Array,
): void {
  const { values, covariance } = stars;
  const basis = stars.basis as Float64Array;
  const b = 9 * i;
  const s = 6 * i;
  const a0 = (basis[b] * vx + basis[b + 1] * vy + basis[b + 2] * vz) / KAPPA;
  const a1 = (basis[b + 3] * vx + basis[b + 4] * vy + basis[b + 5] * vz) / KAPPA;
  const e = covariance[s + 5];
  const plx = values[3 * i + 2];
  const total = depth + e;
  const known = (plx * depth + mean * e) / total;
  const tau = (depth * e) / total;
  // Part of the motion's error that goes with the parallax's.
  const g0 = e > 0 ? covariance[s + 2] / e : 0;
  const g1 = e > 0 ? covariance[s + 4] / e : 0;
  const s0 = a0 - g0;
  const s1 = a1 - g1;
  const scale = Math.max(known, 0.05 * mean) / KAPPA;
  const own = variance * scale * scale;
  out[0] = s0;
  out[1] = s1;
  out[2] = values[3 * i] - g0 * plx - known * s0;
  out[3] = values[3 * i + 1] - g1 * plx - known * s1;
  out[4] = covariance[s] - g0 * g0 * e + tau * s0 * s0 + own;
  out[5] = covariance[s + 1] - g0 * g1 * e + tau * s0 * s1;
  out[6] = covariance[s + 3] - g1 * g1 * e + tau * s1 * s1 + own;
  out[7] = (plx - mean) ** 2 / total;
  out[8] = total;
  out[9] = known;
  out[10] = tau;
  out[11] = own;
}

/** How much likelier the radial velocity is in the cluster than in the field. */
function radialRatio(stars: Stars, i: number, vx: number, vy: number, vz: number, variance: number): number {
  const { value, error, fieldMean, fieldSpread } = stars.radialVelocity as NonNullable<Stars['radialVelocity']>;
  const basis = stars.basis as Float64Array;
  const b = 9 * i;
  const off = value[i] - (basis[b + 6] * vx + basis[b + 7] * vy + basis[b + 8] * vz);
  const e2 = error[i] * error[i];
  const single = gaussian(off, e2 + variance);
  const binary = gaussian(off, e2 + variance + BINARY_VELOCITY ** 2);
  const field = gaussian(value[i] - fieldMean, e2 + fieldSpread * fieldSpread);
  // A wild velocity is unlikely in the field's Gaussian too: a floor keeps the ratio finite.
  return ((1 - BINARY_SHARE) * single + BINARY_SHARE * binary) / Math.max(field, 1e-6);
}

function gaussian(x: number, variance: number): number {
  return Math.exp((-0.5 * x * x) / variance) / Math.sqrt(2 * Math.PI * variance);
}

function improveMotion(
  stars: Stars,
  probability: Float64Array,
  parameters: Float64Array,
  limits: SpaceLimits,
): ClusterModel {
  const [vx, vy, vz, variance, mean, depth] = parameters;
  const basis = stars.basis as Float64Array;
  const { radialVelocity } = stars;
  const scratch = new Float64Array(12);
  const h = new Float64Array(9);
  const rhs = new Float64Array(3);
  for (let d = 0; d < 3; d++) h[4 * d] = 1 / VELOCITY_PRIOR ** 2;
  let weight = 0;
  let ownSum = 0;
  let plxSum = 0;
  let plxSquares = 0;
  for (let i = 0; i < stars.count; i++) {
    const p = probability[i];
    if (p < 1e-10) continue;
    weight += p;
    prepare(stars, i, vx, vy, vz, variance, mean, depth, scratch);
    const [s0, s1, r0, r1, c00, c01, c11, , , known, tau, own] = scratch;
    const det = c00 * c11 - c01 * c01;
    const w00 = c11 / det;
    const w01 = -c01 / det;
    const w11 = c00 / det;
    // Velocity: weighted least squares, linear in it at fixed weights.
    const f = known / KAPPA;
    const b = 9 * i;
    const wr0 = w00 * r0 + w01 * r1;
    const wr1 = w01 * r0 + w11 * r1;
    for (let j = 0; j < 3; j++) {
      const e = basis[b + j] * f;
      const n = basis[b + 3 + j] * f;
      rhs[j] += p * (e * wr0 + n * wr1);
      for (let k = 0; k <= j; k++) {
        const e2 = basis[b + k] * f;
        const n2 = basis[b + 3 + k] * f;
        h[3 * j + k] += p * (e * (w00 * e2 + w01 * n2) + n * (w01 * e2 + w11 * n2));
      }
    }
    if (radialVelocity !== null && !Number.isNaN(radialVelocity.value[i])) {
      addRadial(stars, i, p, parameters, h, rhs);
    }
    // Dispersion: the part of the residual that is the star's own motion, in km/s.
    const scale = (variance > 0 ? own / variance : 0) ** 0.5;
    if (scale > 0) {
      const share = own * own * (wr0 * wr0 + wr1 * wr1) + 2 * own - own * own * (w00 + w11);
      ownSum += (p * share) / (2 * scale * scale);
    }
    // True parallax given the motion as well: the motion is a second measurement of it.
    const b00 = c00 - tau * s0 * s0;
    const b01 = c01 - tau * s0 * s1;
    const b11 = c11 - tau * s1 * s1;
    const d = b00 * b11 - b01 * b01;
    const info = (b11 * s0 * s0 - 2 * b01 * s0 * s1 + b00 * s1 * s1) / d;
    const pull = (b11 * s0 * r0 - b01 * (s0 * r1 + s1 * r0) + b00 * s1 * r1) / d;
    const left = tau / (1 + tau * info);
    const better = known + left * pull;
    plxSum += p * better;
    plxSquares += p * (better * better + left);
  }
  if (!(weight > 1e-3)) return spaceMotion(parameters, limits);
  const inverse = invertPositive(h, 3);
  const next = Float64Array.from(parameters);
  if (inverse !== null) {
    // The right-hand side holds residuals: the step, with the prior's pull toward rest.
    for (let k = 0; k < 3; k++) rhs[k] -= parameters[k] / VELOCITY_PRIOR ** 2;
    for (let j = 0; j < 3; j++) for (let k = 0; k < 3; k++) next[j] += inverse[3 * j + k] * rhs[k];
  }
  next[3] = clamp(ownSum / weight, limits.leastDispersion ** 2, limits.mostDispersion ** 2);
  next[4] = plxSum / weight;
  const m = Math.abs(next[4]);
  next[5] = clamp(plxSquares / weight - next[4] ** 2, (limits.leastDepth * m) ** 2, (limits.mostDepth * m) ** 2);
  return spaceMotion(next, limits);
}

/** Adds a radial velocity to the normal equations, with the chance that it is a single star's. */
function addRadial(
  stars: Stars,
  i: number,
  p: number,
  parameters: Float64Array,
  h: Float64Array,
  rhs: Float64Array,
): void {
  const [vx, vy, vz, variance] = parameters;
  const { value, error } = stars.radialVelocity as NonNullable<Stars['radialVelocity']>;
  const basis = stars.basis as Float64Array;
  const b = 9 * i + 6;
  const off = value[i] - (basis[b] * vx + basis[b + 1] * vy + basis[b + 2] * vz);
  const narrow = error[i] ** 2 + variance;
  const wide = narrow + BINARY_VELOCITY ** 2;
  const single = (1 - BINARY_SHARE) * gaussian(off, narrow);
  const binary = BINARY_SHARE * gaussian(off, wide);
  const w = single + binary > 0 ? (p * (single / narrow + binary / wide)) / (single + binary) : p / wide;
  for (let j = 0; j < 3; j++) {
    rhs[j] += w * basis[b + j] * off;
    for (let k = 0; k <= j; k++) h[3 * j + k] += w * basis[b + j] * basis[b + k];
  }
}

/**
 * Parallax of each star if it belongs to the cluster: the measured one improved by how fast the star moves.
 * @param model a model made by spaceMotion
 * @param value filled here, mas, shape (count)
 * @param error filled here, mas, shape (count)
 */
export function kinematicParallaxes(stars: Stars, model: ClusterModel, value: Float64Array, error: Float64Array): void {
  const [vx, vy, vz, variance, mean] = model.parameters;
  const scratch = new Float64Array(12);
  for (let i = 0; i < stars.count; i++) {
    // An endless depth leaves the cluster's mean parallax out of it.
    prepare(stars, i, vx, vy, vz, variance, mean, 1e12, scratch);
    const [s0, s1, r0, r1, c00, c01, c11, , , known, tau] = scratch;
    const b00 = c00 - tau * s0 * s0;
    const b01 = c01 - tau * s0 * s1;
    const b11 = c11 - tau * s1 * s1;
    const d = b00 * b11 - b01 * b01;
    const info = (b11 * s0 * s0 - 2 * b01 * s0 * s1 + b00 * s1 * s1) / d;
    const pull = (b11 * s0 * r0 - b01 * (s0 * r1 + s1 * r0) + b00 * s1 * r1) / d;
    const left = tau / (1 + tau * info);
    value[i] = known + left * pull;
    error[i] = Math.sqrt(left);
  }
}

function clamp(x: number, low: number, high: number): number {
  return Math.min(high, Math.max(low, x));
}

function derivativeSteps(p: Float64Array, limits: SpaceLimits): Float64Array {
  const inside = (x: number, low: number, high: number) => x > 1.01 * low && x < 0.99 * high;
  const m = Math.abs(p[4]);
  return Float64Array.of(
    0.02,
    0.02,
    0.02,
    inside(p[3], limits.leastDispersion ** 2, limits.mostDispersion ** 2) ? 0.02 * p[3] : 0,
    0.01 * Math.sqrt(p[5]) + 1e-5 * m,
    inside(p[5], (limits.leastDepth * m) ** 2, (limits.mostDepth * m) ** 2) ? 0.02 * p[5] : 0,
  );
}
