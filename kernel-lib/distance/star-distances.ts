import type { Catalogue } from '../catalogue/catalogue';
import { checkChoice, checkOptions, checkRange } from '../quantity/options';

/** What `starDistances` takes. */
export interface StarDistancesOptions {
  /** Prior on distance: exponentially decreasing space density. The only one so far. */
  prior?: 'exponential';
  /** Scale length of the prior, pc, 1 to 1e6. Default: 1350. */
  lengthScale?: number;
  /** What the catalogue's parallaxes are off by, mas: measured minus true. Default: 0. */
  zeroPoint?: number;
}

const POINTS = 400;

/**
 * Distance of every star from its own parallax: median and 68 % interval of the posterior with an exponentially decreasing
 * space density as prior, r^2 exp(-r/L). Where the parallax says little, the distance is the prior's.
 * @param catalogue with parallax and parallax.error
 * @returns the catalogue with columns distance, distance_lower and distance_upper, pc; NaN where parallax or error is missing
 * @throws Error when the roles are missing; TypeError or RangeError on options
 * @example starDistances(field, { lengthScale: 1350 }).numbers('distance')
 * Source: Bailer-Jones 2015, PASP 127, 994, Section 7; default length scale: Astraatmadja & Bailer-Jones 2016, ApJ 833, 119.
 */
export function starDistances(catalogue: Catalogue, options: StarDistancesOptions = {}): Catalogue {
  const caller = 'starDistances';
  checkOptions(caller, options, ['prior', 'lengthScale', 'zeroPoint']);
  const { prior = 'exponential', lengthScale = 1350, zeroPoint = 0 } = options;
  checkChoice(caller, 'prior', prior, ['exponential']);
  checkRange(caller, 'lengthScale', lengthScale, 1, 1e6, 'pc');
  checkRange(caller, 'zeroPoint', zeroPoint, -10, 10, 'mas');
  const parallax = catalogue.numbers('parallax');
  if (!catalogue.has('parallax.error')) {
    throw new Error(
      `${caller}: ${catalogue.source} has no parallax errors; give their column: roles: { 'parallax.error': '...' }.`,
    );
  }
  const error = catalogue.numbers('parallax.error');
  const n = catalogue.rowCount;
  const columns = ['distance', 'distance_lower', 'distance_upper'].map(() => new Float64Array(n).fill(Number.NaN));
  const density = new Float64Array(POINTS);
  const quantiles = new Float64Array(3);
  let missing = 0;
  for (let i = 0; i < n; i++) {
    if (!Number.isFinite(parallax[i]) || !(error[i] > 0) || !Number.isFinite(error[i])) {
      missing++;
      continue;
    }
    starDistance(parallax[i] - zeroPoint, error[i], lengthScale, density, quantiles);
    for (let k = 0; k < 3; k++) columns[k][i] = quantiles[k];
  }
  const words = ['median distance', 'lower bound of the 68 % interval', 'upper bound of the 68 % interval'];
  return catalogue.withColumns(
    ['distance', 'distance_lower', 'distance_upper'].map((name, k) => ({
      name,
      values: columns[k],
      unit: 'pc',
      description: words[k],
    })),
    `starDistances: exponentially decreasing density, L = ${lengthScale} pc, zero point ${zeroPoint} mas`,
    { note: missing > 0 ? `${missing} rows without parallax or error` : '' },
  );
}

/** Median, lower and upper bound of one star's distance, pc, into `out`. */
function starDistance(parallax: number, error: number, length: number, density: Float64Array, out: Float64Array): void {
  const mode = modeOf(parallax, error, length);
  const log = (r: number) => 2 * Math.log(r) - r / length - 0.5 * ((parallax - 1000 / r) / error) ** 2;
  const top = log(mode);
  // The grid ends where the density has fallen by exp(-18), which leaves out about 1e-8 of it.
  let low = mode;
  let high = mode;
  for (let f = 0.5; f > 1e-6; f /= 2) while (low * (1 - f) > 0 && log(low * (1 - f)) > top - 18) low *= 1 - f;
  for (let f = 0.5; f > 1e-6; f /= 2) while (log(high * (1 + f)) > top - 18) high *= 1 + f;
  const step = Math.log(high / low) / (POINTS - 1);
  let total = 0;
  for (let k = 0; k < POINTS; k++) {
    const r = low * Math.exp(k * step);
    density[k] = Math.exp(log(r) - top) * r;
    total += density[k];
  }
  let seen = 0;
  let next = 0;
  const order = [0.158655, 0.5, 0.841345];
  const place = [1, 0, 2];
  for (let k = 0; k < POINTS && next < 3; k++) {
    const gain = density[k] / total;
    while (next < 3 && seen + gain >= order[next]) {
      out[place[next]] = low * Math.exp((k - 0.5 + (order[next] - seen) / gain) * step);
      next++;
    }
    seen += gain;
  }
}

/** Most probable distance: the root of the cubic of the paper's Eq. 19 that is the highest point. */
function modeOf(parallax: number, error: number, length: number): number {
  // r^3 / L - 2 r^2 + (parallax / error^2) r - 1 / error^2 = 0 with parallax in arcsec and r in pc.
  const w = parallax / 1000;
  const s2 = (error / 1000) ** 2;
  const f = (r: number) => r ** 3 / length - 2 * r ** 2 + (w / s2) * r - 1 / s2;
  const log = (r: number) => 2 * Math.log(r) - r / length - 0.5 * ((w - 1 / r) ** 2 / s2);
  let best = 2 * length;
  let height = Number.NEGATIVE_INFINITY;
  let before = f(1e-3);
  let r0 = 1e-3;
  for (let k = 1; k <= 240; k++) {
    const r = 1e-3 * 10 ** (k / 24);
    const value = f(r);
    if (before < 0 && value >= 0) {
      let a = r0;
      let b = r;
      for (let round = 0; round < 60; round++) {
        const middle = 0.5 * (a + b);
        if (f(middle) < 0) a = middle;
        else b = middle;
      }
      if (log(b) > height) {
        height = log(b);
        best = b;
      }
    }
    before = value;
    r0 = r;
  }
  return best;
}
