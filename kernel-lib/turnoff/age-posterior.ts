import { type Comparison, fitPlace, likelihoodAt, type PlaceFit, type PlacePrior, type PlaceStart } from './place-fit';
import type { Sequence } from './sequence';

/** Log-density over log10 of age, on an even grid about its peak. */
export interface AgePosterior {
  readonly logAge: readonly number[];
  /** Not normalised. */
  readonly logDensity: readonly number[];
  /** The best age of the grid, at the first maker's side of the middle. */
  readonly best: { readonly logAge: number; readonly fit: PlaceFit; readonly sequence: Sequence };
}

/** Sequences of one metallicity by age, with the log of its weight. */
export interface WeighedMaker {
  readonly log: number;
  readonly sequenceAt: (logAge: number) => { readonly sequence: Sequence | null };
}

const STEP_COARSE = 0.05;
/** Ages in a finer grid, and how many times the grids close in on the peak. */
const FINE_AGES = 33;
const FINE_ROUNDS = 4;
/** Fall of the log-density below its peak at which an age no longer counts. */
const FAR_BELOW = 10;
/** Fall at which ages farther out need no look, and at which an age is not worth a start of its own. */
const HOPELESS = 60;
/** Points on each side that the log-density is smoothed over. */
const SMOOTH = 4;

/**
 * Posterior of the age, uniform in its logarithm beforehand; reddening, distance and metallicity integrated over.
 * @returns null when no age gives a main sequence where the stars lie
 */
export function agePosterior(
  comparison: Comparison,
  makers: readonly WeighedMaker[],
  prior: PlacePrior,
  [low, high]: readonly [number, number],
  onProgress?: (done: number, total: number) => void,
): AgePosterior | null {
  const middle = makers[makers.length >> 1];
  const centre: PlaceStart = { ebv: prior.ebv.value, modulus: prior.modulus.value };
  const known = new Map<number, number>();
  const fits = makers.map(() => [] as { logAge: number; fit: PlaceFit }[]);
  let best: AgePosterior['best'] | null = null;
  const logDensity = (logAge: number): number => {
    const before = known.get(logAge);
    if (before !== undefined) return before;
    const terms: number[] = [];
    makers.forEach(({ log, sequenceAt }, k) => {
      const { sequence } = sequenceAt(logAge);
      if (sequence === null) return;
      const fit = fitPlace(comparison, sequence, prior, nearestFit(fits[k], logAge) ?? centre);
      if (!Number.isFinite(fit.logIntegral)) return;
      fits[k].push({ logAge, fit });
      terms.push(fit.logIntegral + log);
      if (makers[k] === middle && (best === null || fit.logIntegral > best.fit.logIntegral)) {
        best = { logAge, fit, sequence };
      }
    });
    const value = logSum(terms);
    known.set(logAge, value);
    return value;
  };

  let logAge = steps(low, high, STEP_COARSE);
  const total = logAge.length + FINE_ROUNDS * FINE_AGES;
  let done = 0;
  const tell = (value: number) => {
    onProgress?.(Math.min(++done, total), total);
    return value;
  };
  const first = logAge.map((a) => {
    const { sequence } = middle.sequenceAt(a);
    return tell(
      sequence === null ? Number.NEGATIVE_INFINITY : likelihoodAt(comparison, sequence, centre.ebv, centre.modulus),
    );
  });
  const start = first.indexOf(Math.max(...first));
  if (!Number.isFinite(first[start])) return null;
  let values = outward(logAge, first, start, logDensity);
  for (let round = 0; round < FINE_ROUNDS; round++) {
    const [from, to] = where(values, FAR_BELOW);
    if (round > 0 && to - from > 0.6 * values.length) break;
    logAge = steps(logAge[from], logAge[to], (logAge[to] - logAge[from]) / (FINE_AGES - 1));
    values = logAge.map((a) => tell(logDensity(a)));
  }
  onProgress?.(total, total);
  return best === null ? null : { logAge, logDensity: smoothed(values), best };
}

/** Values from the start outward on both sides, as far as they matter. */
function outward(
  logAge: readonly number[],
  first: readonly number[],
  start: number,
  logDensity: (logAge: number) => number,
): number[] {
  const values = logAge.map(() => Number.NEGATIVE_INFINITY);
  values[start] = logDensity(logAge[start]);
  let top = values[start];
  for (const direction of [1, -1]) {
    let poor = 0;
    for (let i = start + direction; i >= 0 && i < logAge.length; i += direction) {
      if (poor >= 2 && first[i] < first[start] - HOPELESS) continue;
      values[i] = logDensity(logAge[i]);
      top = Math.max(top, values[i]);
      poor = values[i] < top - HOPELESS ? poor + 1 : 0;
    }
  }
  return values;
}

/** First and last index of values not far below the highest, and one more on each side. */
function where(values: readonly number[], fall: number): [number, number] {
  const least = Math.max(...values) - fall;
  const from = values.findIndex((v) => v > least);
  let to = values.length - 1;
  while (!(values[to] > least)) to--;
  return [Math.max(0, from - 1), Math.min(values.length - 1, to + 1)];
}

function nearestFit(fits: readonly { logAge: number; fit: PlaceFit }[], logAge: number): PlaceFit | null {
  let best: PlaceFit | null = null;
  let least = 1.5 * STEP_COARSE;
  for (const f of fits) {
    const distance = Math.abs(f.logAge - logAge);
    if (distance < least) {
      least = distance;
      best = f.fit;
    }
  }
  return best;
}

/**
 * Parabola through neighbouring points by least squares, at each point: isochrones of nearby ages have their points in other places,
 * which makes the log-density tremble by some tenths from age to age.
 */
function smoothed(values: readonly number[]): number[] {
  return values.map((value, i) => {
    const reach = Math.min(SMOOTH, i, values.length - 1 - i);
    if (reach < 2) return value;
    let top = 0;
    let bottom = 0;
    const m = reach;
    for (let k = -m; k <= m; k++) {
      const v = values[i + k];
      if (!Number.isFinite(v)) return value;
      // Savitzky & Golay 1964, Anal. Chem. 36, 1627: weights of a quadratic at the middle of 2m + 1 points.
      const weight = 3 * m * (m + 1) - 1 - 5 * k * k;
      top += weight * v;
      bottom += weight;
    }
    return top / bottom;
  });
}

function steps(low: number, high: number, step: number): number[] {
  const count = Math.max(2, Math.round((high - low) / step) + 1);
  return Array.from({ length: count }, (_, i) => low + ((high - low) * i) / (count - 1));
}

function logSum(terms: readonly number[]): number {
  const top = Math.max(...terms);
  if (!Number.isFinite(top)) return Number.NEGATIVE_INFINITY;
  return top + Math.log(terms.reduce((s, t) => s + Math.exp(t - top), 0));
}
