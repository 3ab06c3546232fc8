import type { ErrorPoints } from '../numeric/regression/york';
import { yorkResampler } from '../numeric/regression/york-resampler';
import { type RandomStream, randomStream } from '../quantity/random';
import { type BrokenLine, pieceAt } from './broken-line';
import { type BrokenLineFit, fitBrokenLine } from './broken-line-fit';
import { lineThrough, needsErrors, type RelationMethod, residualError } from './line-methods';
import type { RelationStars } from './relation-stars';

/** How a broken power law is to be fitted; breaks in log10 of solar masses. */
export interface PowerLawSettings {
  readonly caller: string;
  readonly method: RelationMethod;
  readonly breaks: number | 'auto' | readonly number[];
  readonly continuous: boolean;
  readonly resamples: number;
  readonly seed: number;
  readonly onProgress?: (done: number, total: number) => boolean | undefined;
}

/** The score of one number of breaks. */
export interface BreakScore {
  readonly breaks: number;
  /** Bayesian information criterion; smaller is better. */
  readonly bic: number;
  readonly parameterCount: number;
}

/** A fitted broken power law in logarithms. */
export interface PowerLaw {
  readonly best: BrokenLine;
  readonly bestScatter: number;
  readonly draws: BrokenLineFit['draws'];
  readonly bic: readonly BreakScore[];
  /** 'drawn' with the rest; 'given' by the caller; 'held' where the likelihood put them. */
  readonly breakOrigin: 'none' | 'drawn' | 'given' | 'held';
  readonly notes: readonly string[];
}

/** Fewest stars on a piece. */
export const LEAST_STARS = 4;
/** Most breaks tried when their number is chosen. */
const MOST_BREAKS = 3;
/** Stars on a piece beyond which the pairs of Theil-Sen are too many to resample. */
const MOST_PAIRED = 400;

/** Fits a broken power law to stars by any of the methods. @throws RangeError naming what is wrong with the stars or breaks */
export function fitPowerLaw(stars: RelationStars, settings: PowerLawSettings): PowerLaw {
  checkStars(stars, settings);
  const points = pointsOf(stars);
  const fixed = typeof settings.breaks === 'object' ? [...settings.breaks].sort((a, b) => a - b) : null;
  if (fixed) checkBreaks(stars, fixed, settings.caller);
  const continuous = settings.continuous && settings.method === 'posterior';
  const bic: BreakScore[] = [];
  let breaks: number | number[] = fixed ?? 0;
  if (settings.breaks === 'auto') {
    for (let b = 0; b <= MOST_BREAKS && stars.count >= 2 * LEAST_STARS * (b + 1); b++) {
      const { bic: score, parameterCount } = fitBrokenLine(points, { breaks: b, continuous, draws: 0 });
      bic.push(Object.freeze({ breaks: b, bic: score, parameterCount }));
    }
    if (bic.length === 0) bic.push(scoreOf(points, 0, continuous));
    breaks = bic.reduce((a, b) => (b.bic < a.bic ? b : a)).breaks;
  } else if (typeof settings.breaks === 'number') {
    breaks = settings.breaks;
    if (stars.count < LEAST_STARS * (breaks + 1)) {
      throw new RangeError(
        `${settings.caller}: ${stars.count} stars for ${breaks + 1} pieces; each needs ${LEAST_STARS}. Take fewer breaks.`,
      );
    }
  }
  const found =
    settings.method === 'posterior'
      ? fromPosterior(points, breaks, continuous, settings)
      : fromResampling(points, breaks, settings, settings.method);
  if (bic.length === 0 && found.score !== null) bic.push(found.score);
  const none = found.best.breaks.length === 0;
  const origin = none ? 'none' : fixed ? 'given' : settings.method === 'posterior' ? 'drawn' : 'held';
  return { ...found, bic, breakOrigin: origin };
}

function scoreOf(points: ErrorPoints, breaks: number | number[], continuous: boolean): BreakScore {
  const { bic, parameterCount, best } = fitBrokenLine(points, { breaks, continuous, draws: 0 });
  return Object.freeze({ breaks: best.breaks.length, bic, parameterCount });
}

function fromPosterior(
  points: ErrorPoints,
  breaks: number | number[],
  continuous: boolean,
  settings: PowerLawSettings,
) {
  const { resamples, seed, onProgress } = settings;
  const fit = fitBrokenLine(points, { breaks, continuous, draws: resamples, seed, onProgress });
  const notes: string[] = [];
  if (fit.effectiveSampleSize < Math.min(100, resamples / 2)) {
    notes.push(
      `The posterior is hard to sample: its draws are worth only ${Math.round(fit.effectiveSampleSize)} independent ones (R-hat ${fit.rHat.toFixed(2)}). ` +
        'Take fewer breaks, or raise resamples.',
    );
  }
  const { best, bestScatter, draws, bic, parameterCount } = fit;
  return { best, bestScatter, draws, notes, score: Object.freeze({ breaks: best.breaks.length, bic, parameterCount }) };
}

function fromResampling(
  points: ErrorPoints,
  breaks: number | number[],
  settings: PowerLawSettings,
  method: Exclude<RelationMethod, 'posterior'>,
) {
  // The likelihood says where free breaks are; each piece then gets its own line.
  const free = typeof breaks === 'number' && breaks > 0;
  const at = free
    ? fitBrokenLine(points, { breaks, continuous: false, draws: 0 }).best.breaks
    : Float64Array.from(typeof breaks === 'number' ? [] : breaks);
  const n = points.x.length;
  const pieces = at.length + 1;
  const rowsOf = Array.from({ length: pieces }, (_, k) =>
    Uint32Array.from(Array.from({ length: n }, (_, i) => i).filter((i) => pieceAt(at, points.x[i]) === k)),
  );
  const slopes = new Float64Array(pieces);
  const intercepts = new Float64Array(pieces);
  for (let k = 0; k < pieces; k++) {
    const line = lineThrough(method, points, rowsOf[k]);
    if (line === null) {
      throw new RangeError(
        `${settings.caller}: piece ${k + 1} of ${pieces} (${rowsOf[k].length} stars) has no ${method} line; its masses or values are all alike, or the errors allow any slope.`,
      );
    }
    slopes[k] = line.slope;
    intercepts[k] = line.intercept;
  }
  const best: BrokenLine = { breaks: at, slopes, intercepts };
  const bestScatter = excessScatter(points, rowsOf, slopes, intercepts);
  const resampled = resample(points, rowsOf, best, settings, method);
  const notes = [
    'intrinsic scatter: what the residuals have beyond the errors, by moments',
    `intervals: ${resampled.draws.count} bootstrap resamples of the stars of each piece`,
    ...(pieces > 1 ? ['pieces fitted one by one: they need not join at the breaks'] : []),
    ...resampled.notes,
  ];
  return { best, bestScatter, draws: resampled.draws, notes, score: null };
}

function resample(
  points: ErrorPoints,
  rowsOf: readonly Uint32Array[],
  best: BrokenLine,
  settings: PowerLawSettings,
  method: Exclude<RelationMethod, 'posterior'>,
) {
  const { resamples, seed, onProgress, caller } = settings;
  const pieces = rowsOf.length;
  const column = () => new Float64Array(resamples);
  const slopes = Array.from({ length: pieces }, column);
  const intercepts = Array.from({ length: pieces }, column);
  const scatter = column();
  const stream = randomStream(seed);
  const slope = new Float64Array(pieces);
  const intercept = new Float64Array(pieces);
  if (method === 'theil-sen' && rowsOf.some((rows) => rows.length > MOST_PAIRED)) {
    throw new RangeError(
      `${caller}: theil-sen looks at every pair of stars; give at most ${MOST_PAIRED} stars a piece, or another method.`,
    );
  }
  let count = 0;
  let failed = 0;
  const york = method === 'errors-in-both-axes' ? yorkResampler(points) : null;
  const drawn = rowsOf.map((rows) => new Uint32Array(rows.length));
  const total = rowsOf.reduce((sum, rows) => sum + rows.length, 0);
  const out = new Float64Array(4);
  for (let t = 0; t < resamples; t++) {
    const random = stream.fork(t);
    let good = true;
    let square = 0;
    for (let k = 0; k < pieces && good; k++) {
      drawRows(rowsOf[k], random, drawn[k]);
      if (york !== null) {
        good = york.fit(drawn[k], best.slopes[k], out);
        [slope[k], intercept[k]] = [out[0], out[1]];
        // Two degrees of freedom went into the line of each piece.
        const m = drawn[k].length;
        square += (out[2] * m * m) / (m - 2) - out[3] * m;
      } else {
        const line = lineThrough(method, points, drawn[k]);
        if (line === null || !Number.isFinite(line.slope)) good = false;
        else [slope[k], intercept[k]] = [line.slope, line.intercept];
      }
    }
    if (!good) {
      failed++;
      continue;
    }
    for (let k = 0; k < pieces; k++) [slopes[k][count], intercepts[k][count]] = [slope[k], intercept[k]];
    scatter[count++] =
      york === null ? excessScatter(points, drawn, slope, intercept) : Math.sqrt(Math.max(0, square / total));
    if (onProgress && t % 50 === 49 && onProgress(t + 1, resamples) === false) break;
  }
  const cut = (values: Float64Array) => values.slice(0, count);
  const draws = {
    count,
    breaks: Array.from(best.breaks, (b) => new Float64Array(count).fill(b)),
    slopes: slopes.map(cut),
    intercepts: intercepts.map(cut),
    scatter: cut(scatter),
  };
  return { draws, notes: failed > 0 ? [`${failed} resamples gave no line and were left out`] : [] };
}

function drawRows(rows: Uint32Array, random: RandomStream, out: Uint32Array): void {
  const share = rows.length / 4294967296;
  for (let i = 0; i < out.length; i++) out[i] = rows[Math.floor(random.bits() * share)];
}

/** Scatter about the pieces beyond the errors, by moments, dex; 0 where the errors explain everything. */
function excessScatter(
  points: ErrorPoints,
  rowsOf: readonly Uint32Array[],
  slopes: Float64Array,
  intercepts: Float64Array,
): number {
  let square = 0;
  let n = 0;
  for (let k = 0; k < rowsOf.length; k++) {
    const rows = rowsOf[k];
    const fitted = rows.length / Math.max(1, rows.length - 2);
    for (let j = 0; j < rows.length; j++) {
      const i = rows[j];
      const r = points.correlation?.[i] ?? 0;
      const error = residualError(slopes[k], points.xError[i], points.yError[i], r, 0);
      square += fitted * (points.y[i] - intercepts[k] - slopes[k] * points.x[i]) ** 2 - error * error;
    }
    n += rows.length;
  }
  return Math.sqrt(Math.max(0, square / n));
}

function pointsOf(stars: RelationStars): ErrorPoints {
  const known = (errors: Float64Array) => errors.map((e) => e || 0);
  return {
    x: stars.logMass,
    y: stars.logValue,
    xError: known(stars.logMassError),
    yError: known(stars.logValueError),
    correlation: stars.correlation,
  };
}

function checkStars(stars: RelationStars, settings: PowerLawSettings): void {
  const { caller, method } = settings;
  if (stars.count < LEAST_STARS) {
    const who = stars.count === 1 ? '1 star' : `${stars.count} stars`;
    throw new RangeError(`${caller}: ${who} left to fit; a relation needs at least ${LEAST_STARS}.`);
  }
  if (stars.logMass.every((m) => m === stars.logMass[0])) {
    const mass = Number((10 ** stars.logMass[0]).toPrecision(4));
    throw new RangeError(`${caller}: all ${stars.count} stars have mass ${mass}; an exponent needs a range of masses.`);
  }
  if (!needsErrors(method)) return;
  for (let i = 0; i < stars.count; i++) {
    for (const [what, error] of [
      ['mass', stars.logMassError[i]],
      ['fitted quantity', stars.logValueError[i]],
    ] as const) {
      if (error > 0) continue;
      throw new RangeError(
        `${caller}: the error of the ${what} of ${stars.name[i]} is ${error === 0 ? 'zero' : 'missing'}; method "${method}" needs positive ` +
          "errors. Give them, leave the star out, or take method 'y-on-x', 'x-on-y', 'bisector' or 'theil-sen'.",
      );
    }
  }
}

function checkBreaks(stars: RelationStars, breaks: readonly number[], caller: string): void {
  const sorted = stars.logMass.slice().sort();
  const solar = (log: number) => Number((10 ** log).toPrecision(3));
  const range = `${solar(sorted[0])} to ${solar(sorted[sorted.length - 1])} solar masses`;
  let before = 0;
  for (let k = 0; k <= breaks.length; k++) {
    const upTo = k === breaks.length ? sorted.length : sorted.filter((m) => m <= breaks[k]).length;
    if (k < breaks.length && !(breaks[k] > sorted[0] && breaks[k] < sorted[sorted.length - 1])) {
      throw new RangeError(
        `${caller}: the break at ${solar(breaks[k])} solar masses lies outside the stars, ${range}.`,
      );
    }
    if (upTo - before < LEAST_STARS) {
      throw new RangeError(
        `${caller}: ${upTo - before} stars on piece ${k + 1} of ${breaks.length + 1} with breaks at ${breaks.map(solar).join(', ')}; each piece needs ${LEAST_STARS} (stars span ${range}).`,
      );
    }
    before = upTo;
  }
}
