import { convergence } from '../numeric/convergence';
import { curvatureShape } from '../numeric/curvature-shape';
import { sampleEnsemble } from '../numeric/ensemble-sampler';
import { sampleIndependence } from '../numeric/independence-sampler';
import { nelderMead } from '../numeric/nelder-mead';
import type { ErrorPoints } from '../numeric/regression/york';
import { sortedQuantile } from '../quantity/measured';
import { type RandomStream, randomStream } from '../quantity/random';
import { type BrokenLine, joinPieces } from './broken-line';
import { brokenLineLikelihood } from './broken-line-likelihood';
import { spreadOfX } from './spread-of-x';

/** How a broken line is to be fitted. */
export interface BrokenLineOptions {
  /** Number of free breaks, or the places of fixed ones. Default: 0. */
  breaks?: number | readonly number[];
  /** Whether the pieces join at the breaks. Default: true. */
  continuous?: boolean;
  /** Effective number of posterior draws wanted; sampling goes on until half of it is reached or the steps allowed are spent. Default: 1000. 0: best fit only. */
  draws?: number;
  /** Default: 1. */
  seed?: number;
  /** Called with steps done and in all; return false to stop early. */
  onProgress?: (done: number, total: number) => boolean | undefined;
}

/** A fitted broken line. */
export interface BrokenLineFit {
  /** Most probable line. */
  readonly best: BrokenLine;
  readonly bestScatter: number;
  readonly logLikelihood: number;
  /** Bayesian information criterion; smaller is better. */
  readonly bic: number;
  readonly parameterCount: number;
  /** Posterior draws. Each array holds one number a draw; breaks, slopes and intercepts one array a piece. */
  readonly draws: {
    readonly count: number;
    readonly breaks: readonly Float64Array[];
    readonly slopes: readonly Float64Array[];
    readonly intercepts: readonly Float64Array[];
    readonly scatter: Float64Array;
  };
  /** Worst over the parameters; NaN without draws. */
  readonly rHat: number;
  readonly effectiveSampleSize: number;
}

/** Fewest points that may stand on a piece: a slope, a height and a scatter need three, one more tells them apart. */
const LEAST_ON_PIECE = 4;
const SMALLEST_SCATTER = 1e-5;
/** Draws a walker of the short run that finds the shape of the posterior. */
const PILOT_STEPS = 60;
/** Steps between kept draws. */
const THIN = 4;

/**
 * Broken line through points with errors in both axes and intrinsic scatter in y: most probable values and posterior draws.
 * Priors: uniform in the height, in the angle of each slope, in the scatter, and in the breaks over the range that leaves four
 * points on each piece.
 * @param points shape (n)
 * @throws RangeError when there are too few points for the pieces or a fixed break leaves a piece with fewer than four
 */
export function fitBrokenLine(points: ErrorPoints, options: BrokenLineOptions = {}): BrokenLineFit {
  const { breaks = 0, continuous = true, draws = 1000, seed = 1, onProgress } = options;
  const fixed = typeof breaks === 'number' ? null : Float64Array.from(breaks).sort();
  const count = fixed ? fixed.length : (breaks as number);
  const n = points.x.length;
  if (n < LEAST_ON_PIECE * (count + 1)) {
    throw new RangeError(
      `fitBrokenLine: ${n} points for ${count + 1} pieces; each piece needs ${LEAST_ON_PIECE}. Take fewer breaks.`,
    );
  }
  const sorted = Float64Array.from(points.x).sort();
  if (fixed) checkFixed(fixed, sorted);
  const shape: Shape = { count, free: fixed === null, fixed, continuous, pivot: sortedQuantile(sorted, 0.5), sorted };
  const state = makeState(shape);
  const likelihood = brokenLineLikelihood(points, spreadOfX(points.x, points.xError));
  const logPosterior = (v: Float64Array, offset = 0): number => {
    if (!unpack(shape, v, offset, state)) return Number.NEGATIVE_INFINITY;
    let prior = Math.log(state.scatter);
    for (let k = 0; k <= count; k++) prior -= Math.log(1 + state.slopes[k] ** 2);
    return prior + likelihood(state.breaks, state.slopes, state.intercepts, state.scatter);
  };

  const start = bestStart(points, shape, logPosterior);
  const found = nelderMead((v) => -logPosterior(v), start.at, start.steps, { tolerance: 1e-9 });
  unpack(shape, found.at, 0, state);
  const best: BrokenLine = {
    breaks: state.breaks.slice(),
    slopes: state.slopes.slice(),
    intercepts: state.intercepts.slice(),
  };
  const bestScatter = state.scatter;
  const logLikelihood = likelihood(state.breaks, state.slopes, state.intercepts, state.scatter);
  const parameterCount = found.at.length;
  const drawn =
    draws > 0 ? sample(logPosterior, shape, found.at, start.steps, draws, randomStream(seed), onProgress) : null;
  return Object.freeze({
    best,
    bestScatter,
    logLikelihood,
    bic: parameterCount * Math.log(n) - 2 * logLikelihood,
    parameterCount,
    draws: drawn ? unpackDraws(shape, drawn.samples) : unpackDraws(shape, new Float64Array(0)),
    rHat: drawn?.rHat ?? Number.NaN,
    effectiveSampleSize: drawn?.effectiveSampleSize ?? Number.NaN,
  });
}

interface Shape {
  readonly count: number;
  readonly free: boolean;
  readonly fixed: Float64Array | null;
  readonly continuous: boolean;
  readonly pivot: number;
  readonly sorted: Float64Array;
}

interface State {
  readonly breaks: Float64Array;
  readonly slopes: Float64Array;
  readonly intercepts: Float64Array;
  scatter: number;
}

function makeState(shape: Shape): State {
  return {
    breaks: shape.fixed ? shape.fixed.slice() : new Float64Array(shape.count),
    slopes: new Float64Array(shape.count + 1),
    intercepts: new Float64Array(shape.count + 1),
    scatter: 0,
  };
}

/** Order of the parameters: free breaks, angles of the slopes, height (or heights) at the pivot, log scatter. */
function unpack(shape: Shape, v: Float64Array, offset: number, out: State): boolean {
  const { count, free, continuous, pivot } = shape;
  let at = offset;
  if (free) {
    for (let k = 0; k < count; k++) out.breaks[k] = v[at++];
    if (!breaksAllowed(out.breaks, shape.sorted)) return false;
  }
  for (let k = 0; k <= count; k++) out.slopes[k] = v[at++];
  if (continuous) {
    joinPieces(out.breaks, out.slopes, pivot, v[at++], out.intercepts);
  } else {
    for (let k = 0; k <= count; k++) out.intercepts[k] = v[at++] - out.slopes[k] * pivot;
  }
  const logScatter = v[at];
  if (!(logScatter > Math.log(SMALLEST_SCATTER) && logScatter < 3)) return false;
  out.scatter = Math.exp(logScatter);
  return true;
}

function dimensionsOf(shape: Shape): number {
  return (shape.free ? shape.count : 0) + (shape.count + 1) + (shape.continuous ? 1 : shape.count + 1) + 1;
}

function breaksAllowed(breaks: Float64Array, sorted: Float64Array): boolean {
  let before = 0;
  for (let k = 0; k < breaks.length; k++) {
    const below = countBelow(sorted, breaks[k]);
    if (below - before < LEAST_ON_PIECE) return false;
    before = below;
  }
  return breaks.length === 0 || sorted.length - before >= LEAST_ON_PIECE;
}

function countBelow(sorted: Float64Array, x: number): number {
  let low = 0;
  let high = sorted.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle] <= x) low = middle + 1;
    else high = middle;
  }
  return low;
}

function checkFixed(fixed: Float64Array, sorted: Float64Array): void {
  if (breaksAllowed(fixed, sorted)) return;
  const low = sorted[LEAST_ON_PIECE - 1];
  const high = sorted[sorted.length - LEAST_ON_PIECE];
  throw new RangeError(
    `fitBrokenLine: breaks at ${Array.from(fixed, (b) => b.toPrecision(4)).join(', ')} leave a piece with fewer than ` +
      `${LEAST_ON_PIECE} points; put them between ${low.toPrecision(4)} and ${high.toPrecision(4)}, further apart.`,
  );
}

/** Where to begin: breaks added one by one from a grid where a weighted least-squares broken line fits best. */
function bestStart(points: ErrorPoints, shape: Shape, logPosterior: (v: Float64Array) => number) {
  let breaks: number[] = shape.fixed ? Array.from(shape.fixed) : [];
  let line = hingeLine(points, breaks, shape);
  while (shape.free && breaks.length < shape.count) {
    let chosen: { breaks: number[]; line: HingeLine } | null = null;
    for (let g = 1; g < 30; g++) {
      const candidate = [...breaks, sortedQuantile(shape.sorted, g / 30)].sort((a, b) => a - b);
      if (!breaksAllowed(Float64Array.from(candidate), shape.sorted)) continue;
      const tried = hingeLine(points, candidate, shape);
      if (chosen === null || tried.rms < chosen.line.rms) chosen = { breaks: candidate, line: tried };
    }
    if (chosen === null) {
      throw new RangeError(
        `fitBrokenLine: no room for ${shape.count} breaks with ${LEAST_ON_PIECE} points on each piece; take fewer.`,
      );
    }
    breaks = chosen.breaks;
    line = chosen.line;
  }
  const range = shape.sorted[shape.sorted.length - 1] - shape.sorted[0] || 1;
  const heights = shape.continuous ? [line.height] : line.slopes.map(() => line.height);
  const at = Float64Array.from([
    ...(shape.free ? breaks : []),
    ...line.slopes,
    ...heights,
    Math.log(Math.max(line.rms / 2, 1e-3)),
  ]);
  const steps = Float64Array.from([
    ...(shape.free ? breaks.map(() => range / 30) : []),
    ...line.slopes.map(() => 0.1),
    ...heights.map(() => 0.05),
    0.5,
  ]);
  if (!shape.continuous) {
    // Separate pieces: each height follows from a line through its own points.
    const first = at.length - 1 - heights.length;
    for (let k = 0; k < heights.length; k++) at[first + k] = line.pieceHeights[k];
  }
  if (!Number.isFinite(logPosterior(at)))
    throw new RangeError('fitBrokenLine: the points do not define a broken line.');
  return { at, steps };
}

interface HingeLine {
  readonly slopes: number[];
  readonly height: number;
  readonly pieceHeights: number[];
  readonly rms: number;
}

/** Least-squares broken line at given breaks, in the basis 1, x - pivot, max(0, x - break). */
function hingeLine(points: ErrorPoints, breaks: readonly number[], shape: Shape): HingeLine {
  const { x, y, yError } = points;
  const n = x.length;
  const size = breaks.length + 2;
  const matrix = Array.from({ length: size }, () => new Float64Array(size + 1));
  const basis = new Float64Array(size);
  // Error floor: points of tiny error must not decide where to begin.
  const floor = sortedQuantile(Float64Array.from(yError).sort(), 0.5) + 0.02;
  for (let i = 0; i < n; i++) {
    fillBasis(basis, x[i], shape.pivot, breaks);
    const w = 1 / (yError[i] ** 2 + floor ** 2);
    for (let a = 0; a < size; a++) {
      for (let b = 0; b < size; b++) matrix[a][b] += w * basis[a] * basis[b];
      matrix[a][size] += w * basis[a] * y[i];
    }
  }
  const c = solve(matrix);
  let square = 0;
  for (let i = 0; i < n; i++) {
    fillBasis(basis, x[i], shape.pivot, breaks);
    let fitted = 0;
    for (let a = 0; a < size; a++) fitted += c[a] * basis[a];
    square += (y[i] - fitted) ** 2 / n;
  }
  const slopes = [c[1]];
  for (let k = 0; k < breaks.length; k++) slopes.push(slopes[k] + c[k + 2]);
  const intercepts = new Float64Array(slopes.length);
  const atPivot = c[0] + breaks.reduce((s, b, k) => s + c[k + 2] * Math.max(0, shape.pivot - b), 0);
  joinPieces(breaks, slopes, shape.pivot, atPivot, intercepts);
  return {
    slopes,
    height: atPivot,
    pieceHeights: slopes.map((s, k) => intercepts[k] + s * shape.pivot),
    rms: Math.sqrt(square),
  };
}

function fillBasis(out: Float64Array, x: number, pivot: number, breaks: readonly number[]): void {
  out[0] = 1;
  out[1] = x - pivot;
  for (let k = 0; k < breaks.length; k++) out[k + 2] = Math.max(0, x - breaks[k]);
}

/** Gauss elimination with pivoting on an augmented matrix; a singular direction gets 0. */
function solve(m: Float64Array[]): Float64Array {
  const n = m.length;
  for (let c = 0; c < n; c++) {
    let p = c;
    for (let r = c + 1; r < n; r++) if (Math.abs(m[r][c]) > Math.abs(m[p][c])) p = r;
    [m[c], m[p]] = [m[p], m[c]];
    if (Math.abs(m[c][c]) < 1e-12) continue;
    for (let r = 0; r < n; r++) {
      if (r === c) continue;
      const f = m[r][c] / m[c][c];
      for (let k = c; k <= n; k++) m[r][k] -= f * m[c][k];
    }
  }
  return Float64Array.from(m, (row, i) => (Math.abs(row[i]) < 1e-12 ? 0 : row[n] / row[i]));
}

function sample(
  logPosterior: (v: Float64Array, offset: number) => number,
  shape: Shape,
  centre: Float64Array,
  steps: Float64Array,
  draws: number,
  stream: RandomStream,
  onProgress?: BrokenLineOptions['onProgress'],
) {
  const d = dimensionsOf(shape);
  const walkers = Math.max(24, 4 * d + (d % 2 === 0 ? 0 : 4));
  const starts = new Float64Array(walkers * d);
  const random = stream.fork(1);
  const trial = new Float64Array(d);
  const peak = curvatureShape(logPosterior, centre, steps);
  const z = new Float64Array(d);
  for (let w = 0; w < walkers; w++) {
    for (let spread = peak === null ? 0.3 : 1; ; spread *= 0.7) {
      for (let k = 0; k < d; k++) z[k] = spread * random.normal();
      for (let k = 0; k < d; k++) {
        let shift = 0;
        if (peak === null) shift = steps[k] * z[k];
        else for (let j = 0; j <= k; j++) shift += peak[k * d + j] * z[j];
        trial[k] = centre[k] + shift;
      }
      if (Number.isFinite(logPosterior(trial, 0))) break;
      if (spread < 1e-9) trial.set(centre);
    }
    starts.set(trial, w * d);
  }
  // A short ensemble run finds the shape; independent proposals of that shape then give draws that are nearly independent.
  const pilot = sampleEnsemble(logPosterior, starts, d, stream.fork(2), {
    // From a spread of the right shape only the tails remain to be found.
    warmUp: peak === null ? 400 : 80,
    steps: PILOT_STEPS,
    thin: 2,
    onProgress,
  });
  if (pilot.steps < PILOT_STEPS) return { samples: pilot.samples, ...worst(pilot.samples, walkers, d) };
  let shapeFrom = pilot.samples;
  for (let round = 0, steps = Math.ceil(draws / 8); round < 3; round++, steps *= 2) {
    const refined = sampleIndependence(logPosterior, shapeFrom, d, 16, steps, stream.fork(10 + round));
    if (refined.acceptance < 0.15) break;
    const quality = worst(refined.samples, 16, d);
    if (quality.effectiveSampleSize > draws / 2) return { samples: refined.samples, ...quality };
    shapeFrom = refined.samples;
  }
  // The posterior has more than one hump or long arms: let the ensemble go on, twice as long each round.
  let from = pilot.samples.slice((pilot.steps - 1) * walkers * d);
  for (let round = 0, steps = Math.ceil(draws / 2); ; round++, steps *= 2) {
    const chain = sampleEnsemble(logPosterior, from, d, stream.fork(4 + round), { steps, thin: THIN, onProgress });
    const found = worst(chain.samples, walkers, d);
    if (chain.steps < steps || found.effectiveSampleSize >= draws / 2 || round === 1) {
      return { samples: chain.samples, ...found };
    }
    from = chain.samples.slice((chain.steps - 1) * walkers * d);
  }
}

function worst(samples: Float64Array, chains: number, d: number) {
  let rHat = 0;
  let effectiveSampleSize = Number.POSITIVE_INFINITY;
  for (let k = 0; k < d; k++) {
    const c = convergence(samples, chains, d, k);
    rHat = Math.max(rHat, c.rHat);
    effectiveSampleSize = Math.min(effectiveSampleSize, c.effectiveSampleSize);
  }
  return { rHat, effectiveSampleSize };
}

function unpackDraws(shape: Shape, samples: Float64Array): BrokenLineFit['draws'] {
  const d = dimensionsOf(shape);
  const count = samples.length / d;
  const series = (length: number) => Array.from({ length }, () => new Float64Array(count));
  const breaks = series(shape.count);
  const slopes = series(shape.count + 1);
  const intercepts = series(shape.count + 1);
  const scatter = new Float64Array(count);
  const state = makeState(shape);
  for (let i = 0; i < count; i++) {
    unpack(shape, samples, i * d, state);
    for (let k = 0; k < shape.count; k++) breaks[k][i] = state.breaks[k];
    for (let k = 0; k <= shape.count; k++) {
      slopes[k][i] = state.slopes[k];
      intercepts[k][i] = state.intercepts[k];
    }
    scatter[i] = state.scatter;
  }
  return { count, breaks, slopes, intercepts, scatter };
}
