import { invertPositive } from '../numeric/cholesky';
import { KMS_PER_AU_PER_YEAR } from '../quantity/constants';
import type { RandomStream } from '../quantity/random';
import type { Stars } from './stars';

/** A velocity in space that more stars share than chance would have. */
export interface CommonVelocity {
  /** km/s, equatorial axes */
  readonly velocity: readonly [number, number, number];
  /** median parallax of the stars that share it, mas, and their spread */
  readonly parallax: number;
  readonly parallaxSpread: number;
  readonly excess: number;
  readonly significance: number;
}

/** Tangential velocities count as alike within this, km/s, beside their errors. */
const NEAR = 3;
const PAIRS = 4000;
/** Stars are compared with stars whose parallax is the same within this factor: clusters are compact. */
const WINDOW = 1.3;
/** Stars that take part in the search, at most. */
const MOST_STARS = 4000;
/** Weak prior on a component of the velocity, km/s. */
const PRIOR = 60;

/**
 * Common velocities found from the data alone: the velocity through each of many pairs of stars is judged by how many more
 * stars move with it, as seen at their own places, than with velocities a little off.
 * @param limit velocities returned at most, most significant first
 */
export function commonVelocities(stars: Stars, stream: RandomStream, limit: number): CommonVelocity[] {
  const use = usable(stars, stream);
  if (use.length < 4) return [];
  const found: CommonVelocity[] = [];
  for (let pair = 0; pair < PAIRS; pair++) {
    const first = stream.below(use.length);
    let middle = stars.values[3 * use[first] + 2];
    let peers = within(stars, use, middle);
    const j = peers[stream.below(peers.length)];
    if (j === use[first]) continue;
    let velocity = solve(stars, Uint32Array.of(use[first], j));
    // Refine on the stars that agree, twice.
    for (let round = 0; round < 2 && velocity !== null; round++) {
      const near = agreeing(stars, peers, velocity, NEAR);
      if (near.length < 4) {
        velocity = null;
        break;
      }
      velocity = solve(stars, near);
      // In order of parallax, hence the median.
      middle = stars.values[3 * near[near.length >> 1] + 2];
      peers = within(stars, use, middle);
    }
    if (velocity === null) continue;
    const inner = agreeing(stars, peers, velocity, NEAR);
    const outer = agreeing(stars, peers, velocity, 3 * NEAR);
    const expected = (outer.length - inner.length) / 8;
    const excess = inner.length - expected;
    const significance = excess / Math.sqrt(expected + 1);
    if (inner.length < 4 || significance < 2) continue;
    const parallaxes = Float64Array.from(inner, (k) => stars.values[3 * k + 2]);
    const low = parallaxes[Math.floor(parallaxes.length * 0.16)];
    const high = parallaxes[Math.floor(parallaxes.length * 0.84)];
    found.push({ velocity, parallax: middle, parallaxSpread: (high - low) / 2, excess, significance });
  }
  found.sort((a, b) => b.significance - a.significance);
  const kept: CommonVelocity[] = [];
  for (const c of found) {
    if (kept.length >= limit) break;
    const alike = (k: CommonVelocity) =>
      Math.hypot(...k.velocity.map((v, d) => v - c.velocity[d])) < 2 * NEAR &&
      Math.abs(k.parallax - c.parallax) < 0.3 * c.parallax;
    if (!kept.some(alike)) kept.push(c);
  }
  return kept;
}

/** Stars with a parallax of at least five errors, a seeded choice of them when there are many, in order of parallax. */
function usable(stars: Stars, stream: RandomStream): Uint32Array {
  const rows: number[] = [];
  for (let i = 0; i < stars.count; i++) {
    const plx = stars.values[3 * i + 2];
    if (plx > 5 * Math.sqrt(stars.covariance[6 * i + 5]) && plx > 0) rows.push(i);
  }
  for (let k = 0; k < Math.min(MOST_STARS, rows.length - 1); k++) {
    const at = k + stream.below(rows.length - k);
    [rows[k], rows[at]] = [rows[at], rows[k]];
  }
  const parallax = (i: number) => stars.values[3 * i + 2];
  return Uint32Array.from(rows.slice(0, MOST_STARS).sort((a, b) => parallax(a) - parallax(b) || a - b));
}

/** The stars, in order of parallax, whose parallax is near the given one. */
function within(stars: Stars, rows: Uint32Array, parallax: number): Uint32Array {
  const firstAbove = (limit: number) => {
    let low = 0;
    let high = rows.length;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (stars.values[3 * rows[middle] + 2] < limit) low = middle + 1;
      else high = middle;
    }
    return low;
  };
  return rows.subarray(firstAbove(parallax / WINDOW), firstAbove(parallax * WINDOW));
}

/** Velocity that the tangential velocities of the stars agree on, by least squares; null when undetermined. */
function solve(stars: Stars, rows: Uint32Array): [number, number, number] | null {
  const basis = stars.basis as Float64Array;
  const h = new Float64Array(9);
  const rhs = new Float64Array(3);
  for (let d = 0; d < 3; d++) h[4 * d] = 1 / PRIOR ** 2;
  for (const i of rows) {
    const scale = KMS_PER_AU_PER_YEAR / stars.values[3 * i + 2];
    for (let axis = 0; axis < 2; axis++) {
      const at = 9 * i + 3 * axis;
      const v = stars.values[3 * i + axis] * scale;
      for (let j = 0; j < 3; j++) {
        rhs[j] += basis[at + j] * v;
        for (let k = 0; k <= j; k++) h[3 * j + k] += basis[at + j] * basis[at + k];
      }
    }
  }
  const inverse = invertPositive(h, 3);
  if (inverse === null) return null;
  const out: [number, number, number] = [0, 0, 0];
  for (let j = 0; j < 3; j++) for (let k = 0; k < 3; k++) out[j] += inverse[3 * j + k] * rhs[k];
  return out;
}

/** The stars whose tangential velocity is that of the given velocity, within so many km/s and their errors. */
function agreeing(stars: Stars, rows: Uint32Array, velocity: readonly number[], reach: number): Uint32Array {
  const basis = stars.basis as Float64Array;
  const near = new Uint32Array(rows.length);
  let count = 0;
  for (let k = 0; k < rows.length; k++) {
    const i = rows[k];
    const plx = stars.values[3 * i + 2];
    const scale = KMS_PER_AU_PER_YEAR / plx;
    const b = 9 * i;
    const e = basis[b] * velocity[0] + basis[b + 1] * velocity[1] + basis[b + 2] * velocity[2];
    const n = basis[b + 3] * velocity[0] + basis[b + 4] * velocity[1] + basis[b + 5] * velocity[2];
    const d0 = stars.values[3 * i] * scale - e;
    const d1 = stars.values[3 * i + 1] * scale - n;
    const speed = e * e + n * n;
    const c = 6 * i;
    const error =
      scale * scale * (stars.covariance[c] + stars.covariance[c + 3]) + (speed * stars.covariance[c + 5]) / plx ** 2;
    if (d0 * d0 + d1 * d1 < reach * reach + error) near[count++] = i;
  }
  return near.slice(0, count);
}
