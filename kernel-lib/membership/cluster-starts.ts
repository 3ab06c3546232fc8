import { KMS_PER_AU_PER_YEAR } from '../quantity/constants';
import { sortedQuantile } from '../quantity/measured';
import { checkOptions } from '../quantity/options';
import type { RandomStream } from '../quantity/random';
import type { ClusterModel } from './cluster-model';
import { densityPeaks } from './density-peaks';
import { type DispersionLimits, meanMotion } from './mean-motion';
import { SPACE_LIMITS, spaceMotion } from './space-motion';
import type { Stars } from './stars';
import { commonVelocities } from './velocity-starts';

/** A first idea of a cluster's motion. */
export interface MotionGuess {
  /** mas/yr (motion 'mean') */
  properMotionRa?: number;
  properMotionDec?: number;
  /** km/s along equatorial axes (motion 'space-velocity') */
  velocity?: readonly [number, number, number];
  /** mas */
  parallax?: number;
}

/** A place to start a fit from. */
export interface ClusterStart {
  readonly cluster: ClusterModel;
  /** share of the stars that belong, 0 to 1 */
  readonly share: number;
}

/** What of the settings the starts depend on. */
export interface StartSettings {
  readonly motion: 'mean' | 'space-velocity';
  readonly guess: MotionGuess | undefined;
  readonly dispersionLimit: number | undefined;
  readonly starts: number;
}

/** Velocity dispersion that a cluster may show, binaries and all, km/s (common practice, no source). */
const MOST_DISPERSION = 3;
/** And as a share of the extent of all stars in motion. */
const MOST_OF_EXTENT = 0.4;
/** A cluster's own spread in parallax, as a share of its parallax, at most. */
const MOST_DEPTH = 0.15;

/** Where to start: the guess alone if there is one, else crowded places, and random ones to make up the number. */
export function clusterStarts(stars: Stars, settings: StartSettings, stream: RandomStream): ClusterStart[] {
  checkOptions('findMembers: guess', settings.guess, ['properMotionRa', 'properMotionDec', 'velocity', 'parallax']);
  return settings.motion === 'mean' ? meanStarts(stars, settings, stream) : spaceStarts(stars, settings, stream);
}

function meanStarts(stars: Stars, settings: StartSettings, stream: RandomStream): ClusterStart[] {
  const motion = Math.min(stars.spread[0], stars.spread[1]);
  const limitsAt = (parallax: number) => dispersionLimits(stars, parallax, settings.dispersionLimit);
  const start = (mean: readonly number[], width: number, depth: number, share: number): ClusterStart => {
    const limits = limitsAt(mean[2]);
    const w = Math.min(width, limits.mostMotion) ** 2;
    const d = stars.useParallax ? Math.min(depth, limits.mostParallax) ** 2 : 0;
    const mPlx = stars.useParallax ? mean[2] : 0;
    const parameters = Float64Array.of(mean[0], mean[1], mPlx, w, 0, w, d);
    return { cluster: meanMotion(parameters, limits, stars.useParallax), share };
  };
  const { guess } = settings;
  if (guess !== undefined) {
    const { properMotionRa, properMotionDec, parallax } = guess;
    if (!Number.isFinite(properMotionRa) || !Number.isFinite(properMotionDec)) {
      throw new TypeError(
        "findMembers: with motion 'mean' the guess needs properMotionRa and properMotionDec, mas/yr.",
      );
    }
    const at = [properMotionRa as number, properMotionDec as number];
    const parallaxes = parallax === undefined ? parallaxesNear(stars, at, 0.3 * motion) : [parallax];
    return parallaxes.flatMap((plx) =>
      [0.05, 0.2].map((f) => start([at[0], at[1], plx], f * motion, 0.1 * stars.spread[2], 0.05)),
    );
  }
  const out = densityPeaks(stars, settings.starts).map((peak) =>
    start(
      peak.mean,
      peak.motionWidth,
      Math.max(peak.parallaxWidth, 1e-3 * stars.spread[2]),
      Math.min(0.5, Math.max(2, peak.excess) / stars.count),
    ),
  );
  while (out.length < settings.starts) {
    const i = stream.below(stars.count);
    const mean = [0, 1, 2].map((d) => stars.values[3 * i + d]);
    out.push(start(mean, 0.1 * motion, 0.2 * stars.spread[2], 0.05));
  }
  return out;
}

/** How wide a cluster at that parallax may be: as its velocity dispersion allows, well below the field's spread. */
function dispersionLimits(stars: Stars, parallax: number, given: number | undefined): DispersionLimits {
  const spread = Math.min(stars.spread[0], stars.spread[1]);
  const cap = MOST_OF_EXTENT * Math.min(stars.extent[0], stars.extent[1]);
  // Where most parallaxes are not even positive they say nothing about velocities.
  const physical = stars.useParallax && stars.centre[2] > 0 ? (MOST_DISPERSION * parallax) / KMS_PER_AU_PER_YEAR : 0;
  const relative = physical === 0 ? 0.1 * spread : 0.03 * spread;
  const mostMotion = given ?? Math.min(cap, Math.max(relative, physical));
  return {
    leastMotion: 1e-3 * mostMotion,
    mostMotion,
    leastParallax: 1e-5 * stars.spread[2],
    mostParallax: Math.max(0.1 * stars.spread[2], MOST_DEPTH * Math.abs(parallax)),
  };
}

/** Parallaxes through the range of the stars that move about so, evenly by number. */
function parallaxesNear(stars: Stars, motion: readonly number[], within: number): number[] {
  if (!stars.useParallax) return [0];
  const near: number[] = [];
  for (let i = 0; i < stars.count; i++) {
    const off = Math.hypot(stars.values[3 * i] - motion[0], stars.values[3 * i + 1] - motion[1]);
    if (off < within) near.push(stars.values[3 * i + 2]);
  }
  const sorted = Float64Array.from(near.length >= 20 ? near : [stars.centre[2]]).sort();
  return Array.from({ length: 15 }, (_, k) => sortedQuantile(sorted, (k + 0.5) / 15));
}

function spaceStarts(stars: Stars, settings: StartSettings, stream: RandomStream): ClusterStart[] {
  const limits = { ...SPACE_LIMITS, mostDispersion: settings.dispersionLimit ?? SPACE_LIMITS.mostDispersion };
  const dispersion = Math.min(1, limits.mostDispersion / 2) ** 2;
  const start = (v: readonly number[], parallax: number, depth: number, share: number): ClusterStart => ({
    cluster: spaceMotion(
      Float64Array.of(v[0], v[1], v[2], dispersion, parallax, Math.max(depth, 0.02 * parallax) ** 2),
      limits,
    ),
    share,
  });
  const { guess } = settings;
  if (guess !== undefined) {
    const v = guess.velocity;
    if (v === undefined || v.length !== 3 || !v.every(Number.isFinite)) {
      throw new TypeError(
        "findMembers: with motion 'space-velocity' the guess needs velocity: [x, y, z], km/s along equatorial axes.",
      );
    }
    const plx = guess.parallax ?? stars.centre[2];
    return [start(v, plx, 0.2 * Math.abs(plx), 0.05)];
  }
  const out = commonVelocities(stars, stream, settings.starts).map((c) =>
    start(c.velocity, c.parallax, Math.min(c.parallaxSpread, 0.3 * c.parallax), Math.min(0.5, c.excess / stars.count)),
  );
  if (out.length === 0)
    out.push(start([0, 0, 0], Math.max(stars.centre[2], 1e-3), 0.2 * Math.abs(stars.centre[2]), 0.02));
  return out;
}
