import { logSum } from './log-sum';
import type { Shift } from './metallicity-nodes';
import { type Comparison, fitPlace, likelihoodAt, type PlaceFit, type PlacePrior, type PlaceStart } from './place-fit';
import type { Sequence } from './sequence';

/** Density over log10 of age, on an even grid about its peak. */
export interface AgePosterior {
  readonly logAge: readonly number[];
  /** Normalised over the grid. */
  readonly density: readonly number[];
  /** The best age looked at. */
  readonly best: { readonly logAge: number; readonly fit: PlaceFit; readonly sequence: Sequence };
}

/** Sequence of an age, null where there is none. */
export type SequenceAt = (logAge: number) => { readonly sequence: Sequence | null };

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
 * Posterior of the age, uniform in its logarithm beforehand; reddening and distance integrated over.
 * @returns null when no age gives a main sequence where the stars lie
 */
export function agePosterior(
  comparison: Comparison,
  sequenceAt: SequenceAt,
  prior: PlacePrior,
  [low, high]: readonly [number, number],
  onProgress?: (share: number) => void,
): AgePosterior | null {
  const centre: PlaceStart = { ebv: prior.ebv.value, modulus: prior.modulus.value };
  const known = new Map<number, number>();
  const fits: { logAge: number; fit: PlaceFit }[] = [];
  let best: AgePosterior['best'] | null = null;
  const logDensity = (logAge: number): number => {
    let value = known.get(logAge);
    if (value !== undefined) return value;
    value = Number.NEGATIVE_INFINITY;
    const { sequence } = sequenceAt(logAge);
    if (sequence !== null) {
      const fit = fitPlace(comparison, sequence, prior, nearestFit(fits, logAge) ?? centre);
      if (Number.isFinite(fit.logIntegral)) {
        value = fit.logIntegral;
        fits.push({ logAge, fit });
        if (best === null || value > best.fit.logIntegral) best = { logAge, fit, sequence };
      }
    }
    known.set(logAge, value);
    return value;
  };

  let logAge = steps(low, high, STEP_COARSE);
  const total = logAge.length + FINE_ROUNDS * FINE_AGES;
  let done = 0;
  const tell = (value: number) => {
    onProgress?.(Math.min(1, ++done / total));
    return value;
  };
  const first = logAge.map((a) => {
    const { sequence } = sequenceAt(a);
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
  onProgress?.(1);
  if (best === null) return null;
  const smooth = smoothed(values);
  const whole = logSum(smooth) + Math.log(logAge[1] - logAge[0]);
  return { logAge, density: smooth.map((v) => Math.exp(v - whole)), best };
}

/** Points of the grid of a posterior that was spread. */
const SPREAD = 161;

/** A posterior moved to and fro by shifts of log10 of age, within the range searched. */
export function spreadPosterior(
  posterior: AgePosterior,
  shifts: readonly Shift[],
  [low, high]: readonly [number, number],
): AgePosterior {
  if (shifts.length === 1) return posterior;
  const moves = shifts.map((s) => s.shift);
  const first = Math.max(low, posterior.logAge[0] + Math.min(...moves));
  const last = Math.min(high, posterior.logAge[posterior.logAge.length - 1] + Math.max(...moves));
  const logAge = steps(first, last, (last - first) / (SPREAD - 1));
  const density = logAge.map((a) => shifts.reduce((sum, s) => sum + s.weight * densityAt(posterior, a - s.shift), 0));
  const whole = density.reduce((sum, d) => sum + d, 0) * (logAge[1] - logAge[0]);
  return { logAge, density: density.map((d) => d / whole), best: posterior.best };
}

/** log10 of age below which half of a posterior lies. */
export function medianLogAge({ logAge, density }: AgePosterior): number {
  const half = 0.5 * density.reduce((sum, d) => sum + d, 0);
  let sum = 0;
  for (let k = 0; k < logAge.length; k++) {
    if (sum + density[k] >= half) {
      return logAge[k] + ((half - sum) / density[k] - 0.5) * (logAge[1] - logAge[0]);
    }
    sum += density[k];
  }
  return Number.NaN;
}

function densityAt({ logAge, density }: AgePosterior, at: number): number {
  const step = logAge[1] - logAge[0];
  const place = (at - logAge[0]) / step;
  const k = Math.floor(place);
  if (place < -1e-9 || k > logAge.length - 1) return 0;
  if (k >= logAge.length - 1) return density[logAge.length - 1];
  return density[Math.max(k, 0)] + (place - Math.max(k, 0)) * (density[Math.max(k, 0) + 1] - density[Math.max(k, 0)]);
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
