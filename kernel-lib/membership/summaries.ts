import { KMS_PER_AU_PER_YEAR, RADIANS_PER_DEGREE } from '../quantity/constants';
import { type Measured, measured, measuredFromSigma } from '../quantity/measured';
import type { FieldModel } from './field-stars';
import type { FitErrors } from './information';
import type { ClusterSummary, FieldComponent, SpaceMotion } from './membership';
import type { Mixture } from './mixture';
import type { Stars } from './stars';

/** Mean direction of the members, a unit vector; null without positions. */
export type Direction = readonly [number, number, number];

/** The cluster of a fit by one mean motion. */
export function meanSummary(
  stars: Stars,
  mixture: Mixture,
  errors: FitErrors,
  share: number,
  direction: Direction | null,
): ClusterSummary {
  const p = (mixture.cluster as NonNullable<Mixture['cluster']>).parameters;
  const sigma = (j: number) => Math.sqrt(errors.covariance[j * 7 + j]);
  const axis = (j: number, d: number, unit: string) =>
    spread(p[j], errors.covariance[j * 7 + j], varianceError(stars, mixture.probability, d, p[j], 1), unit);
  const none = measured(Number.NaN, Number.NaN, Number.NaN, 'mas');
  return Object.freeze({
    properMotionRa: withSigma(p[0], sigma(0), 'mas/yr'),
    properMotionDec: withSigma(p[1], sigma(1), 'mas/yr'),
    parallax: stars.useParallax ? withSigma(p[2], sigma(2), 'mas') : none,
    dispersionRa: axis(3, 0, 'mas/yr'),
    dispersionDec: axis(5, 1, 'mas/yr'),
    parallaxDispersion: stars.useParallax ? axis(6, 2, 'mas') : none,
    share,
    centre: centreOf(direction),
  });
}

/** The cluster of a fit by one velocity in space, as seen at its centre, and that velocity. */
export function spaceSummary(
  stars: Stars,
  mixture: Mixture,
  errors: FitErrors,
  share: number,
  direction: Direction,
): { cluster: ClusterSummary; spaceMotion: SpaceMotion } {
  const p = (mixture.cluster as NonNullable<Mixture['cluster']>).parameters;
  const c = (a: number, b: number) => errors.covariance[a * 6 + b];
  /** Standard error of a linear function of the velocity. */
  const along = (g: readonly number[]): number => {
    let sum = 0;
    for (let a = 0; a < 3; a++) for (let b = 0; b < 3; b++) sum += g[a] * g[b] * c(a, b);
    return Math.sqrt(Math.max(0, sum));
  };
  const v = [p[0], p[1], p[2]];
  const dot = (g: readonly number[]) => g[0] * v[0] + g[1] * v[1] + g[2] * v[2];
  const speed = Math.hypot(...v);
  const { east, north } = axesAt(direction);
  const perMas = p[4] / KMS_PER_AU_PER_YEAR;
  const own = varianceError(stars, mixture.probability, 0, p[3] * perMas ** 2, 1) / perMas ** 2;
  const dispersion = spread(p[3], c(3, 3), own, 'km/s');
  const motion = (axis: readonly number[]): Measured => {
    // The motion at the mean parallax: both the velocity's and the parallax's error count.
    const value = dot(axis) * perMas;
    const s = Math.hypot(along(axis) * perMas, (dot(axis) / KMS_PER_AU_PER_YEAR) * Math.sqrt(c(4, 4)));
    return withSigma(value, s, 'mas/yr');
  };
  const inMotion = scaled(dispersion, perMas, 'mas/yr');
  const cluster: ClusterSummary = Object.freeze({
    properMotionRa: motion(east),
    properMotionDec: motion(north),
    parallax: withSigma(p[4], Math.sqrt(c(4, 4)), 'mas'),
    dispersionRa: inMotion,
    dispersionDec: inMotion,
    parallaxDispersion: spread(p[5], c(5, 5), varianceError(stars, mixture.probability, 2, p[5], 1), 'mas'),
    share,
    centre: centreOf(direction),
  });
  const apex: Direction = [v[0] / speed, v[1] / speed, v[2] / speed];
  const at = axesAt(apex);
  const place = centreOf(apex) as NonNullable<ClusterSummary['centre']>;
  const degree = 1 / (speed * RADIANS_PER_DEGREE);
  const cosDec = Math.hypot(apex[0], apex[1]);
  const spaceMotion: SpaceMotion = Object.freeze({
    velocity: Object.freeze({
      x: withSigma(v[0], Math.sqrt(c(0, 0)), 'km/s'),
      y: withSigma(v[1], Math.sqrt(c(1, 1)), 'km/s'),
      z: withSigma(v[2], Math.sqrt(c(2, 2)), 'km/s'),
    }),
    speed: withSigma(speed, along(apex), 'km/s'),
    convergentPoint: Object.freeze({
      rightAscension: withSigma(place.rightAscension, (along(at.east) * degree) / cosDec, 'deg'),
      declination: withSigma(place.declination, along(at.north) * degree, 'deg'),
    }),
    radialVelocity: withSigma(dot(direction), along(direction), 'km/s'),
    dispersion,
  });
  return { cluster, spaceMotion };
}

/** The field's components by share, largest first, and the share of the uniform layer. */
export function fieldSummary(stars: Stars, field: FieldModel): { components: FieldComponent[]; outlierShare: number } {
  const width = field.components + 2;
  const overall = new Float64Array(width);
  for (let i = 0; i < stars.count; i++) {
    for (let k = 0; k < width; k++) overall[k] += field.shares[stars.errorClass[i] * width + k] / stars.count;
  }
  const { means, covariances } = field;
  const components = Array.from({ length: field.components }, (_, k) =>
    Object.freeze({
      share: overall[k],
      properMotionRa: means[3 * k],
      properMotionDec: means[3 * k + 1],
      parallax: stars.useParallax ? means[3 * k + 2] : Number.NaN,
      spreadRa: Math.sqrt(covariances[6 * k]),
      spreadDec: Math.sqrt(covariances[6 * k + 3]),
      parallaxSpread: stars.useParallax ? Math.sqrt(covariances[6 * k + 5]) : Number.NaN,
    }),
  ).sort((a, b) => b.share - a.share);
  return { components, outlierShare: overall[width - 2] };
}

function withSigma(value: number, sigma: number, unit: string): Measured {
  // An error that could not be had is shown as endless, not as none.
  return Number.isFinite(sigma)
    ? measuredFromSigma(value, sigma, unit)
    : measured(value, Number.NEGATIVE_INFINITY, Number.POSITIVE_INFINITY, unit);
}

function scaled(m: Measured, factor: number, unit: string): Measured {
  return measured(m.value * factor, m.lower * factor, m.upper * factor, unit);
}

/**
 * A standard deviation from a variance and the variance's error variance.
 * @param fallback error of the variance where the fit holds it at its limit
 */
function spread(variance: number, errorVariance: number, fallback: number, unit: string): Measured {
  const e = Number.isFinite(errorVariance) ? Math.sqrt(errorVariance) : fallback;
  return measured(Math.sqrt(variance), Math.sqrt(Math.max(0, variance - e)), Math.sqrt(variance + e), unit);
}

/** Standard error of a variance beside known errors, along one axis, from Gaussian information. */
function varianceError(stars: Stars, probability: Float64Array, d: number, variance: number, scale: number): number {
  const at = d === 0 ? 0 : d === 1 ? 3 : 5;
  let information = 0;
  for (let i = 0; i < stars.count; i++) {
    const total = variance + scale * stars.covariance[6 * i + at];
    information += probability[i] / (2 * total * total);
  }
  return 1 / Math.sqrt(information);
}

function axesAt(u: Direction): { east: number[]; north: number[] } {
  const cosDec = Math.hypot(u[0], u[1]);
  const cosRa = cosDec > 0 ? u[0] / cosDec : 1;
  const sinRa = cosDec > 0 ? u[1] / cosDec : 0;
  return { east: [-sinRa, cosRa, 0], north: [-u[2] * cosRa, -u[2] * sinRa, cosDec] };
}

function centreOf(direction: Direction | null): ClusterSummary['centre'] {
  if (direction === null) return null;
  const ra = Math.atan2(direction[1], direction[0]) / RADIANS_PER_DEGREE;
  return Object.freeze({
    rightAscension: ra < 0 ? ra + 360 : ra,
    declination: Math.asin(Math.max(-1, Math.min(1, direction[2]))) / RADIANS_PER_DEGREE,
  });
}
