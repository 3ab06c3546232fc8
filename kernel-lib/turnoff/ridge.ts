/** Ridge of a sequence as raw columns; see ridgeLine for what they mean. */
export interface Ridge {
  readonly magnitude: Float64Array;
  readonly colour: Float64Array;
  readonly colourError: Float64Array;
  readonly width: Float64Array;
  readonly stars: Float64Array;
}

/** An unresolved pair of equals is this much brighter than one of them, mag: 2.5 log10 2. */
const EQUAL_PAIR = 0.753;
/** Least range over which binaries lie to the red of single stars, mag: where the sequence is steep. */
const LEAST_TAIL = 0.03;
/** Width of the range over which foreign stars spread, mag. */
const FOREIGN_RANGE = 2;
const LEAST_WIDTH = 0.004;
/** Width that a sequence of single stars usually has beyond its errors, mag, and the share of a window's stars that its pull counts as. */
const USUAL_WIDTH = 0.006;
const PULL = 0.6;
/** Places in the order of colours at which the search for the core begins. */
const STARTS = [0.1, 0.25, 0.4, 0.55, 0.7];
const ROUNDS = 4;
/** Errors grow by this as some binaries pass for single stars: measured on invented clusters. */
const CONFUSION = 1.3;

/**
 * Ridge by windows in magnitude. In each the colours, less the slope of the ridge found before, are a narrow core of single stars, binaries
 * spread evenly from it to where pairs of equals lie, and a thin spread of foreign stars; the ridge is the centre of the core.
 * @param rows     stars by ascending magnitude
 * @param window   stars a window; neighbours overlap by half
 */
export function findRidge(
  colour: ArrayLike<number>,
  magnitude: ArrayLike<number>,
  colourError: ArrayLike<number>,
  rows: Uint32Array,
  window: number,
): Ridge {
  const n = rows.length;
  const step = Math.max(1, Math.floor(window / 2));
  const windows = Math.max(1, Math.floor((n - window) / step) + 1);
  const ridge: Ridge = {
    magnitude: new Float64Array(windows),
    colour: new Float64Array(windows),
    colourError: new Float64Array(windows),
    width: new Float64Array(windows),
    stars: new Float64Array(windows),
  };
  const residual = new Float64Array(window);
  const errors = new Float64Array(window);
  const sorted = new Float64Array(window);
  for (let w = 0; w < windows; w++) {
    // Windows are laid from the faint end, so that what is left over falls on the few bright stars.
    const first = n - window - (windows - 1 - w) * step;
    let mean = 0;
    for (let k = 0; k < window; k++) {
      mean += magnitude[rows[first + k]] / window;
      sorted[k] = colour[rows[first + k]];
    }
    ridge.magnitude[w] = mean;
    // A first idea: a little blueward of the median, where half are binaries.
    ridge.colour[w] = sorted.sort()[Math.floor(0.4 * window)];
  }
  const slopes = new Float64Array(windows);
  for (let round = 0; round < ROUNDS; round++) {
    for (let w = 0; w < windows; w++) slopes[w] = slopeAt(ridge, w);
    for (let w = 0; w < windows; w++) {
      const first = n - window - (windows - 1 - w) * step;
      // The brightest windows have no neighbours beyond, and the hook bends back there: their own stars may know the slope better.
      const inside = w < 2 && windows > 2 ? slopeInside(colour, magnitude, rows, first, window) : Number.NaN;
      let best: Core | null = null;
      for (const slope of [slopes[w], inside]) {
        if (Number.isNaN(slope)) continue;
        for (let k = 0; k < window; k++) {
          const i = rows[first + k];
          residual[k] = colour[i] - slope * (magnitude[i] - ridge.magnitude[w]);
          errors[k] = colourError[i];
        }
        sorted.set(residual);
        sorted.sort();
        const tail = Math.max(LEAST_TAIL, EQUAL_PAIR * slope);
        for (const start of STARTS) {
          const core = fitCore(residual, errors, sorted[Math.floor(start * window)], tail);
          if (best === null || core.logLikelihood > best.logLikelihood) best = core;
        }
      }
      const { centre, width, stars, error } = best as Core;
      ridge.colour[w] = centre;
      ridge.width[w] = width;
      ridge.stars[w] = stars;
      ridge.colourError[w] = error;
    }
  }
  return ridge;
}

/** Slope of the ridge at a window, by a straight line through it and two neighbours on each side. */
function slopeAt(ridge: Ridge, w: number): number {
  const low = Math.max(0, w - 2);
  const high = Math.min(ridge.magnitude.length - 1, w + 2);
  const count = high - low + 1;
  let m = 0;
  let c = 0;
  for (let k = low; k <= high; k++) {
    m += ridge.magnitude[k] / count;
    c += ridge.colour[k] / count;
  }
  let top = 0;
  let bottom = 0;
  for (let k = low; k <= high; k++) {
    top += (ridge.magnitude[k] - m) * (ridge.colour[k] - c);
    bottom += (ridge.magnitude[k] - m) ** 2;
  }
  return bottom > 0 ? top / bottom : 0;
}

/** Median slope of pairs of stars of a window that lie apart in magnitude; NaN when too few do. */
function slopeInside(
  colour: ArrayLike<number>,
  magnitude: ArrayLike<number>,
  rows: Uint32Array,
  first: number,
  window: number,
): number {
  const slopes: number[] = [];
  for (let k = 0; k < window; k++) {
    for (let j = k + 1; j < window; j++) {
      const dm = magnitude[rows[first + j]] - magnitude[rows[first + k]];
      if (dm > 0.05) slopes.push((colour[rows[first + j]] - colour[rows[first + k]]) / dm);
    }
  }
  if (slopes.length < window) return Number.NaN;
  return Float64Array.from(slopes).sort()[slopes.length >> 1];
}

/** The core of single stars in one window. */
interface Core {
  readonly centre: number;
  readonly width: number;
  readonly stars: number;
  readonly error: number;
  readonly logLikelihood: number;
}

/** Centre and width of the core by expectation-maximisation. */
function fitCore(residual: Float64Array, errors: Float64Array, start: number, range: number): Core {
  const n = residual.length;
  let centre = start;
  let width = Math.max(LEAST_WIDTH, range / 4);
  let core = 0.6;
  let tail = 0.35;
  let stars = 0;
  let information = 0;
  let logLikelihood = Number.NEGATIVE_INFINITY;
  for (let round = 0; round < 80; round++) {
    let sum = 0;
    let sumTail = 0;
    let weight = 0;
    let weighted = 0;
    let square = 0;
    let log = 0;
    for (let k = 0; k < n; k++) {
      const v = width * width + errors[k] * errors[k];
      const s = Math.sqrt(v);
      const d = residual[k] - centre;
      const a = (core * Math.exp((-0.5 * d * d) / v)) / Math.sqrt(2 * Math.PI * v);
      const b = (tail * (step(d / s) - step((d - range) / s))) / range;
      const all = a + b + (1 - core - tail) / FOREIGN_RANGE;
      log += Math.log(all);
      const share = a / all;
      sum += share;
      sumTail += b / all;
      weight += share / v;
      weighted += (share * residual[k]) / v;
      square += share * Math.max(0, d * d - errors[k] * errors[k]);
    }
    const next = weighted / weight;
    // The pull towards a narrow core keeps it from swallowing the binaries beside it.
    const pull = PULL * n;
    width = Math.max(LEAST_WIDTH, Math.sqrt((square + pull * USUAL_WIDTH * USUAL_WIDTH) / (sum + pull)));
    // A core and few foreign stars there always are.
    core = Math.min(0.97, Math.max(0.25, sum / n));
    tail = Math.min(0.99 - core, Math.max(0.01, sumTail / n));
    stars = sum;
    information = weight;
    logLikelihood = log - pull * (Math.log(width / USUAL_WIDTH) + 0.5 * (USUAL_WIDTH / width) ** 2);
    const moved = Math.abs(next - centre);
    centre = next;
    if (moved < 1e-5 && round > 5) break;
  }
  return { centre, width, stars, error: CONFUSION * Math.sqrt(1 / information), logLikelihood };
}

/** A smooth step, close to the cumulative normal distribution. */
function step(x: number): number {
  return 1 / (1 + Math.exp(-1.702 * x));
}
