import type { Catalogue } from '../catalogue/catalogue';
import { type GaussianPart, gaussianSumQuantile } from '../numeric/gaussian-sum';
import { type Measured, measured } from '../quantity/measured';
import { checkOptions, checkRange } from '../quantity/options';
import { escapeHtml, htmlTable, presentable, textTable } from '../quantity/present';

/** What `clusterDistance` takes. */
export interface ClusterDistanceOptions {
  /** What the catalogue's parallaxes are off by, mas: measured minus true, about -0.03 in Gaia DR3. Default: 0 (none applied). */
  zeroPoint?: number;
  /** Systematic error of the zero point (and of parallaxes over small fields), mas. Default: 0. */
  zeroPointError?: number;
  /** Column with the membership probability. Default: `membershipProbability` where there is one. */
  probability?: string;
  /** Spread of the members' parallaxes beyond their errors, mas, where it is known. Default: fitted and averaged over. */
  intrinsicScatter?: number;
}

/** Parallax, distance and modulus with the errors of chance alone. */
export interface DistanceByChance {
  readonly parallax: Measured;
  readonly distance: Measured;
  readonly modulus: Measured;
}

/** Distance of a cluster. */
export interface ClusterDistance {
  /** Mean parallax, zero point applied and its error included, mas. */
  readonly parallax: Measured;
  /** pc */
  readonly distance: Measured;
  /** True distance modulus, mag. */
  readonly modulus: Measured;
  /** The same three without the error of the zero point: what more stars of the same catalogue would make smaller. */
  readonly byChance: DistanceByChance;
  /** Spread of the members' parallaxes beyond their errors (depth of the cluster, or errors that are too small), mas. */
  readonly intrinsicScatter: Measured;
  readonly starCount: number;
  /** Zero point that was taken off, mas, and its error. */
  readonly zeroPoint: number;
  readonly zeroPointError: number;
  /** Mean square of residuals in units of error and scatter; near 1 when all is well. */
  readonly meanSquare: number;
  readonly notes: readonly string[];
}

/** Steps of the intrinsic scatter that is averaged over. */
const SCATTER_STEPS = 120;

/**
 * Distance of a cluster from the parallaxes of its members: likelihood of one mean parallax, every star with its own error and a
 * common intrinsic scatter, which is averaged over. Distance and modulus are the exact transforms of the parallax's interval; single
 * stars are never inverted, and no star is left out for a small or negative parallax, so neither biases the mean. Nor does the depth
 * of a near cluster: over any distribution that is spherical about a centre, the mean of 1/distance is 1/distance of the centre
 * (Newton's theorem of the shell).
 * @param members catalogue with parallax and parallax.error; stars count by their membership probability
 * @param options zero point and its error, mas; column of probabilities
 * @returns parallax, distance and modulus with 68 % intervals; distance not determined where the parallax is not positive
 * @throws Error when the roles are missing or no star can be used; TypeError or RangeError on options
 * @example clusterDistance(members, { zeroPoint: -0.03, zeroPointError: 0.01 }).distance
 * Prior: uniform in parallax and in scatter. Not included: correlated errors of neighbouring stars, unless given as zeroPointError.
 */
export function clusterDistance(members: Catalogue, options: ClusterDistanceOptions = {}): ClusterDistance {
  const caller = 'clusterDistance';
  checkOptions(caller, options, ['zeroPoint', 'zeroPointError', 'probability', 'intrinsicScatter']);
  const { zeroPoint = 0, zeroPointError = 0, intrinsicScatter } = options;
  checkRange(caller, 'zeroPoint', zeroPoint, -10, 10, 'mas');
  checkRange(caller, 'zeroPointError', zeroPointError, 0, 10, 'mas');
  if (intrinsicScatter !== undefined) checkRange(caller, 'intrinsicScatter', intrinsicScatter, 0, 1000, 'mas');
  const stars = readStars(caller, members, zeroPoint, options.probability);
  const { parts, scatters, centre } = overScatter(stars, intrinsicScatter);
  const widened = parts.map((p) => ({ ...p, sigma: Math.hypot(p.sigma, zeroPointError) }));
  const quantiles = (of: readonly GaussianPart[]) =>
    [0.5, 0.158655254, 0.841344746].map((q) => gaussianSumQuantile(of, q));
  const [value, lower, upper] = quantiles(widened);
  const chance = quantiles(parts);
  const notes: string[] = [];
  if (zeroPoint === 0) notes.push('No parallax zero point was applied.');
  if (stars.dropped > 0) notes.push(`${stars.dropped} stars have no parallax or error and were left out.`);
  if (!(value > 0)) notes.push('The mean parallax is not positive: the distance is not determined.');
  else if (lower <= 0)
    notes.push('The parallax reaches zero within its interval: there is no upper limit to the distance.');
  if (members.has('membershipProbability') === false && options.probability === undefined) {
    notes.push('All stars counted as members, as no membership probabilities are known.');
  }
  const meanSquare = squareOf(stars, value, centre);
  if (meanSquare > 2)
    notes.push(
      `Residuals are larger than errors and scatter allow (mean square ${meanSquare.toFixed(1)}): look for stars that do not belong.`,
    );
  const result: ClusterDistance = {
    ...transformed(value, lower, upper),
    byChance: Object.freeze(transformed(value, Math.min(value, chance[1]), Math.max(value, chance[2]))),
    intrinsicScatter: scatters,
    starCount: stars.count,
    zeroPoint,
    zeroPointError,
    meanSquare,
    notes: Object.freeze(notes),
  };
  return show(result);
}

/** Parallax with its interval, and the distance and modulus that follow; not determined where it is not positive. */
function transformed(value: number, lower: number, upper: number): DistanceByChance {
  const far = (parallax: number) => (parallax > 0 ? 1000 / parallax : Number.POSITIVE_INFINITY);
  const modulus = (parallax: number) => 5 * Math.log10(far(parallax)) - 5;
  const through = (f: (parallax: number) => number, unit: string) =>
    value > 0 ? measured(f(value), f(upper), f(lower), unit) : measured(Number.NaN, Number.NaN, Number.NaN, unit);
  return {
    parallax: measured(value, lower, upper, 'mas'),
    distance: through(far, 'pc'),
    modulus: through(modulus, 'mag'),
  };
}

interface ParallaxStars {
  readonly count: number;
  readonly parallax: Float64Array;
  readonly error: Float64Array;
  readonly weight: Float64Array;
  readonly dropped: number;
}

function readStars(caller: string, members: Catalogue, zeroPoint: number, column?: string): ParallaxStars {
  const parallax = members.numbers('parallax');
  if (!members.has('parallax.error')) {
    throw new Error(
      `${caller}: ${members.source} has no parallax errors; give their column: roles: { 'parallax.error': '...' }.`,
    );
  }
  const error = members.numbers('parallax.error');
  const name = column ?? (members.has('membershipProbability') ? 'membershipProbability' : null);
  const probability = name === null ? null : members.numbers(name);
  const good: number[] = [];
  for (let i = 0; i < parallax.length; i++) {
    if (
      Number.isFinite(parallax[i]) &&
      error[i] > 0 &&
      Number.isFinite(error[i]) &&
      (probability === null || probability[i] > 0)
    )
      good.push(i);
  }
  if (members.rowCount === 0) {
    throw new Error(
      `${caller}: the catalogue has no rows: no star passed the last selection. Its history tells where they went.`,
    );
  }
  if (good.length === 0) {
    throw new Error(
      `${caller}: none of the ${members.rowCount} rows of ${members.source} has a parallax with a positive error.`,
    );
  }
  return {
    count: good.length,
    parallax: Float64Array.from(good, (i) => parallax[i] - zeroPoint),
    error: Float64Array.from(good, (i) => error[i]),
    weight: Float64Array.from(good, (i) => (probability === null ? 1 : Math.min(1, probability[i]))),
    dropped: members.rowCount - good.length,
  };
}

/** For each intrinsic scatter the Gaussian of the mean parallax, and how likely that scatter is. */
function overScatter(stars: ParallaxStars, fixed: number | undefined) {
  const { count, parallax, error, weight } = stars;
  let mean = 0;
  let sum = 0;
  for (let i = 0; i < count; i++) {
    mean += weight[i] * parallax[i];
    sum += weight[i];
  }
  mean /= sum;
  let square = 0;
  for (let i = 0; i < count; i++) square += (weight[i] * (parallax[i] - mean) ** 2) / sum;
  const widest = 2 * Math.sqrt(square) + 1e-9;
  const rows: { s: number; at: number; sigma: number; log: number }[] = [];
  const last = fixed === undefined ? SCATTER_STEPS : 0;
  for (let k = 0; k <= last; k++) {
    // Steps grow with the scatter, so that a small one is resolved as well.
    const s = fixed ?? widest * (k / SCATTER_STEPS) ** 2;
    let w = 0;
    let wx = 0;
    for (let i = 0; i < count; i++) {
      const v = weight[i] / (error[i] * error[i] + s * s);
      w += v;
      wx += v * parallax[i];
    }
    const at = wx / w;
    let log = -0.5 * Math.log(w);
    for (let i = 0; i < count; i++) {
      const v = error[i] * error[i] + s * s;
      log -= 0.5 * weight[i] * (Math.log(v) + (parallax[i] - at) ** 2 / v);
    }
    rows.push({ s, at, sigma: Math.sqrt(1 / w), log: log + Math.log((2 * k + 0.5) / SCATTER_STEPS) });
  }
  const top = Math.max(...rows.map((r) => r.log));
  const parts: GaussianPart[] = rows.map((r) => ({ at: r.at, sigma: r.sigma, share: Math.exp(r.log - top) }));
  const total = parts.reduce((t, p) => t + p.share, 0);
  const quantile = (q: number) => {
    let seen = 0;
    for (let k = 0; k < rows.length; k++) {
      seen += parts[k].share / total;
      if (seen >= q) return rows[k].s;
    }
    return widest;
  };
  const middle = quantile(0.5);
  return {
    parts: parts.filter((p) => p.share > 1e-12),
    scatters: measured(middle, Math.min(middle, quantile(0.158655)), Math.max(middle, quantile(0.841345)), 'mas'),
    centre: middle,
  };
}

function squareOf(stars: ParallaxStars, mean: number, scatter: number): number {
  let sum = 0;
  let weights = 0;
  for (let i = 0; i < stars.count; i++) {
    const v = stars.error[i] ** 2 + scatter ** 2;
    sum += (stars.weight[i] * (stars.parallax[i] - mean) ** 2) / v;
    weights += stars.weight[i];
  }
  return sum / weights;
}

function show(d: ClusterDistance): ClusterDistance {
  const rows = [
    ['parallax', String(d.parallax)],
    ['distance', String(d.distance)],
    ['distance modulus', String(d.modulus)],
    ...(d.zeroPointError > 0 ? [['distance modulus, errors of chance alone', String(d.byChance.modulus)]] : []),
    ['scatter of parallaxes beyond errors', String(d.intrinsicScatter)],
  ];
  const title = `Distance from ${d.starCount} stars, zero point ${d.zeroPoint} ± ${d.zeroPointError} mas`;
  const head = ['quantity', 'value'];
  return presentable(d, {
    text: () => [title, textTable(head, rows), ...d.notes.map((n) => `- ${n}`)].join('\n'),
    html: () =>
      `<div>${htmlTable(head, rows, { caption: title })}<ul>${d.notes.map((n) => `<li>${escapeHtml(n)}</li>`).join('')}</ul></div>`,
  });
}
