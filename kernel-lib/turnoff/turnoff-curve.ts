import { invertPositive } from '../numeric/cholesky';

/** The sequence about its turnoff as a polynomial: colour as a function of magnitude. */
export interface TurnoffCurve {
  /** Coefficients, lowest power first, in t = (magnitude - middle) / half. */
  readonly coefficients: Float64Array;
  readonly middle: number;
  readonly half: number;
  /** Intrinsic width of the single stars, mag. */
  readonly width: number;
  /** Bluest place. */
  readonly colour: number;
  readonly magnitude: number;
  /** Stars of the core that are brighter than the bluest place. */
  readonly above: number;
}

/** Stars as the fit takes them: parallel arrays and how many. */
export interface CurveStars {
  readonly count: number;
  readonly colour: Float64Array;
  readonly magnitude: Float64Array;
  readonly colourError: Float64Array;
}

const LEAST_WIDTH = 0.003;
const FOREIGN_RANGE = 2;
/** Colour over which binaries spread redward of single stars about a turnoff, mag: e-folding scale. */
const BINARY_TAIL = 0.06;
const GRID = 240;
/** Stars of the core above which the curve is not followed. */
const LEAST_CORE = 2;
/** Rise of the colour that counts as a turn, mag. */
const TURNED = 0.004;

/** Powers that so many stars can bear. */
export function degreeFor(count: number): number {
  return count >= 60 ? 5 : count >= 30 ? 4 : count >= 16 ? 3 : 2;
}

/**
 * Fits the curve by expectation-maximisation: single stars about it with an intrinsic width, a tail of binaries to the red of it,
 * and a thin spread of foreign stars.
 * @param start colour of the sequence at a magnitude, as a first idea
 * @param from  bright and faint end, mag
 */
export function fitTurnoffCurve(
  stars: CurveStars,
  start: (magnitude: number) => number,
  [bright, faint]: readonly [number, number],
  degree: number,
  rounds: number,
): TurnoffCurve {
  const { count, colour, magnitude, colourError } = stars;
  const middle = 0.5 * (bright + faint);
  const half = 0.5 * (faint - bright);
  const terms = degree + 1;
  let coefficients = new Float64Array(terms);
  const normal = new Float64Array(terms * terms);
  const right = new Float64Array(terms);
  const powers = new Float64Array(terms);
  const share = new Float64Array(count);
  const offset = Float64Array.from({ length: count }, (_, i) => colour[i] - start(magnitude[i]));
  const order = Uint32Array.from({ length: count }, (_, i) => i).sort((p, q) => magnitude[p] - magnitude[q]);
  let width = 0.02;
  let core = 0.6;
  let tail = 0.3;
  for (let round = 0; round < rounds; round++) {
    normal.fill(0);
    right.fill(0);
    let sum = 0;
    let sumTail = 0;
    for (let i = 0; i < count; i++) {
      const v = width * width + colourError[i] * colourError[i];
      const d = offset[i];
      const a = (core * Math.exp((-0.5 * d * d) / v)) / Math.sqrt(2 * Math.PI * v);
      const b = tail * tailDensity(d, Math.sqrt(v));
      const all = a + b + (1 - core - tail) / FOREIGN_RANGE;
      share[i] = a / all;
      sum += share[i];
      sumTail += b / all;
      const weight = share[i] / v;
      const t = (magnitude[i] - middle) / half;
      powers[0] = 1;
      for (let k = 1; k < terms; k++) powers[k] = powers[k - 1] * t;
      for (let k = 0; k < terms; k++) {
        right[k] += weight * powers[k] * colour[i];
        for (let j = 0; j <= k; j++) normal[k * terms + j] += weight * powers[k] * powers[j];
      }
    }
    // A breath of a ridge penalty keeps the highest powers still where no star asks for them.
    for (let k = 0; k < terms; k++) normal[k * terms + k] += 1e-3 + 1e-9 * normal[0];
    const inverse = invertPositive(normal, terms);
    if (inverse === null) break;
    coefficients = new Float64Array(terms);
    for (let k = 0; k < terms; k++)
      for (let j = 0; j < terms; j++) coefficients[k] += inverse[k * terms + j] * right[j];
    let square = 0;
    for (let i = 0; i < count; i++) {
      offset[i] = colour[i] - polynomial(coefficients, (magnitude[i] - middle) / half);
      square += share[i] * Math.max(0, offset[i] * offset[i] - colourError[i] * colourError[i]);
    }
    width = Math.max(LEAST_WIDTH, Math.sqrt(square / Math.max(sum, 1)));
    core = Math.min(0.98, Math.max(0.2, sum / count));
    tail = Math.min(0.98 - core, Math.max(0.005, sumTail / count));
  }
  // From the faint end up to the first place where the curve turns back; where hardly a star of the core is left it means nothing.
  let end = -1;
  for (let i = 0, inCore = 0; i < count; i++) {
    if (share[order[i]] < 0.5) continue;
    end = (magnitude[order[i]] - middle) / half;
    if (++inCore === LEAST_CORE) break;
  }
  let best = 1;
  for (let g = 1; g <= GRID; g++) {
    const t = 1 + ((end - 1) * g) / GRID;
    if (polynomial(coefficients, t) > polynomial(coefficients, best) + TURNED) break;
    if (polynomial(coefficients, t) < polynomial(coefficients, best)) best = t;
  }
  let above = 0;
  const vertex = middle + half * best;
  for (let i = 0; i < count; i++) if (magnitude[i] < vertex) above += share[i];
  return { coefficients, middle, half, width, colour: polynomial(coefficients, best), magnitude: vertex, above };
}

/** Colour of a curve at a magnitude. */
export function curveColour(curve: TurnoffCurve, magnitude: number): number {
  return polynomial(curve.coefficients, (magnitude - curve.middle) / curve.half);
}

function polynomial(coefficients: Float64Array, t: number): number {
  let value = 0;
  for (let k = coefficients.length - 1; k >= 0; k--) value = value * t + coefficients[k];
  return value;
}

/** Exponential tail to the red, blurred by the width of the core (a rough convolution: exact far from the centre). */
function tailDensity(d: number, s: number): number {
  const edge = 1 / (1 + Math.exp((-1.7 * (d - s)) / s));
  return (edge * Math.exp(-Math.max(d / BINARY_TAIL, 0))) / BINARY_TAIL;
}
