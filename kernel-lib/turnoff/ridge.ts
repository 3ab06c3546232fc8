/** Ridge of a sequence as raw columns; see ridgeLine for what they mean. */
export interface Ridge {
  readonly magnitude: Float64Array;
  readonly colour: Float64Array;
  readonly colourError: Float64Array;
  readonly width: Float64Array;
  readonly stars: Float64Array;
}

/** Colour over which binaries spread redward of single stars, mag: e-folding scale of the tail. */
const BINARY_TAIL = 0.06;
/** Width of the range over which foreign stars spread, mag. */
const FOREIGN_RANGE = 2;
const LEAST_WIDTH = 0.004;

/**
 * Ridge by windows in magnitude. In each the colours, less the slope of the ridge found before, are a narrow core of single stars, a tail
 * of binaries to the red of it, and a thin spread of foreign stars; the ridge is the centre of the core. Three rounds.
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
    for (let k = 0; k < window; k++) mean += magnitude[rows[first + k]] / window;
    ridge.magnitude[w] = mean;
  }
  for (let round = 0; round < 3; round++) {
    for (let w = 0; w < windows; w++) {
      const first = n - window - (windows - 1 - w) * step;
      const slope = round === 0 ? 0 : slopeAt(ridge, w);
      for (let k = 0; k < window; k++) {
        const i = rows[first + k];
        residual[k] = colour[i] - slope * (magnitude[i] - ridge.magnitude[w]);
        errors[k] = colourError[i];
      }
      fitCore(residual, errors, sorted, ridge, w);
    }
  }
  return ridge;
}

/** Slope of the ridge at a window, from its neighbours. */
function slopeAt(ridge: Ridge, w: number): number {
  const last = ridge.magnitude.length - 1;
  const low = Math.max(0, w - 1);
  const high = Math.min(last, w + 1);
  const span = ridge.magnitude[high] - ridge.magnitude[low];
  return span > 0 ? (ridge.colour[high] - ridge.colour[low]) / span : 0;
}

/** Centre and width of the core of single stars by expectation-maximisation, from the densest half of the colours. */
function fitCore(residual: Float64Array, errors: Float64Array, sorted: Float64Array, out: Ridge, w: number): void {
  const n = residual.length;
  sorted.set(residual);
  sorted.sort();
  const half = Math.max(2, Math.ceil(n / 2));
  let at = 0;
  for (let i = 0; i + half <= n; i++) {
    if (sorted[i + half - 1] - sorted[i] < sorted[at + half - 1] - sorted[at]) at = i;
  }
  let centre = sorted[at + (half >> 1)];
  let width = Math.max(LEAST_WIDTH, (sorted[at + half - 1] - sorted[at]) / 1.35);
  let core = 0.6;
  let tail = 0.3;
  let inCore = 0;
  let information = 0;
  for (let round = 0; round < 60; round++) {
    let sum0 = 0;
    let sumTail = 0;
    let weight = 0;
    let weighted = 0;
    let square = 0;
    for (let k = 0; k < n; k++) {
      const v = width * width + errors[k] * errors[k];
      const d = residual[k] - centre;
      const a = (core * Math.exp((-0.5 * d * d) / v)) / Math.sqrt(2 * Math.PI * v);
      const s = Math.sqrt(v);
      const b = tail * tailDensity(d, s);
      const c = (1 - core - tail) / FOREIGN_RANGE;
      const share = a / (a + b + c);
      sum0 += share;
      sumTail += b / (a + b + c);
      weight += share / v;
      weighted += (share * residual[k]) / v;
      square += share * Math.max(0, d * d - errors[k] * errors[k]);
    }
    const next = weighted / weight;
    width = Math.max(LEAST_WIDTH, Math.sqrt(square / sum0));
    core = Math.min(0.98, Math.max(0.2, sum0 / n));
    tail = Math.min(0.98 - core, Math.max(0.005, sumTail / n));
    inCore = sum0;
    information = weight;
    const moved = Math.abs(next - centre);
    centre = next;
    if (moved < 1e-6) break;
  }
  out.colour[w] = centre;
  out.width[w] = width;
  out.stars[w] = inCore;
  out.colourError[w] = Math.sqrt(1 / information);
}

/** Exponential tail to the red, blurred by the width of the core (a rough convolution: exact far from the centre). */
export function tailDensity(d: number, s: number): number {
  const x = d / BINARY_TAIL;
  const edge = 1 / (1 + Math.exp((-1.7 * (d - s)) / s));
  return (edge * Math.exp(-Math.max(x, 0))) / BINARY_TAIL;
}
