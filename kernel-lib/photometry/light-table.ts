import { uniformSpline } from '../numeric/uniform-spline';

/** log10 of temperature (K) of the first node of the grid. */
export const GRID_START = 3.36;
/** Distance of nodes in log10 of temperature: fine against the bends of all relations. */
export const GRID_STEP = 0.004;
/** Number of nodes: up to log Teff 4.88. */
export const GRID_NODES = 381;
/** [Fe/H] for which the table answers, dex. */
export const METALLICITY_RANGE: readonly [number, number] = [-2.5, 0.5];

/** Coefficients of a knot: dwarf level, its linear and quadratic term in [Fe/H]; the same of what giants differ from dwarfs. */
const TERMS = 6;

/** The bolometric correction in one band as a function of temperature, gravity and metallicity. */
export interface BandLight {
  /** Cubic B-spline coefficients, shape (GRID_NODES + 2, TERMS). */
  readonly coefficients: Float64Array;
  /** Least log Teff of dwarfs. */
  readonly low: number;
  /** Least log Teff of giants. */
  readonly lowGiant: number;
  /** Greatest log Teff. */
  readonly high: number;
}

/** Values at the grid's nodes from which a BandLight is made. */
export interface BandNodes {
  /** Shape (TERMS) of shape (GRID_NODES). */
  readonly terms: readonly ArrayLike<number>[];
  readonly low: number;
  readonly lowGiant: number;
  readonly high: number;
}

/** Log Teff of the nodes, shape (GRID_NODES). */
export function gridLogTeff(): Float64Array {
  return Float64Array.from({ length: GRID_NODES }, (_, i) => GRID_START + i * GRID_STEP);
}

/** Turns values at nodes into splines. */
export function bandLight(nodes: BandNodes): BandLight {
  const terms = nodes.terms.map(uniformSpline);
  const coefficients = new Float64Array(TERMS * (GRID_NODES + 2));
  for (let i = 0; i < GRID_NODES + 2; i++) for (let k = 0; k < TERMS; k++) coefficients[TERMS * i + k] = terms[k][i];
  return { coefficients, low: nodes.low, lowGiant: nodes.lowGiant, high: nodes.high };
}

/**
 * How far a star's light follows the giants' relation: 0 for dwarfs, 1 for giants, two continuous derivatives between. The
 * change runs from log g 4.0 to 2.2 up to 7000 K and from 3.5 to 1.7 above 9000 K, since hot stars leave the main sequence at lower
 * gravity.
 * @param logTeff    log10 of K
 * @param logGravity log10 of cm/s2
 */
export function giantShare(logTeff: number, logGravity: number): number {
  const h = (logTeff - 3.85) * 10;
  const hot = h <= 0 ? 0 : h >= 1 ? 1 : h * h * h * (10 + h * (6 * h - 15));
  const x = (4 - 0.5 * hot - logGravity) / 1.8;
  if (!(x > 0)) return x <= 0 ? 0 : Number.NaN;
  return x >= 1 ? 1 : x * x * x * (10 + x * (6 * x - 15));
}

/**
 * Bolometric correction in a band.
 * @param band        from the light table
 * @param logTeff     log10 of K
 * @param share       of giants, from giantShare
 * @param metallicity [Fe/H], dex
 * @returns mag; NaN outside the ranges
 */
export function bandCorrection(band: BandLight, logTeff: number, share: number, metallicity: number): number {
  const out = ONE_VALUE;
  const at = (logTeff - GRID_START) / GRID_STEP;
  const i = at >= GRID_NODES - 1 ? GRID_NODES - 2 : at | 0;
  if (!(logTeff >= (share > 0 ? band.lowGiant : band.low) && logTeff <= band.high)) return Number.NaN;
  if (!(metallicity >= METALLICITY_RANGE[0] && metallicity <= METALLICITY_RANGE[1])) return Number.NaN;
  knotWeights(at - i, out);
  return weighed(band.coefficients, TERMS * i, out[0], out[1], out[2], out[3], share, metallicity);
}

const ONE_VALUE = new Float64Array(4);

/** Weights of the four B-splines at a fraction of the way between two nodes. */
function knotWeights(u: number, out: Float64Array): void {
  const v = 1 - u;
  out[0] = (v * v * v) / 6;
  out[1] = (u * u * (3 * u - 6) + 4) / 6;
  out[3] = (u * u * u) / 6;
  out[2] = 1 - out[0] - out[1] - out[3];
}

function weighed(
  c: Float64Array,
  k: number,
  w0: number,
  w1: number,
  w2: number,
  w3: number,
  share: number,
  metallicity: number,
): number {
  let sum = w0 * c[k] + w1 * c[k + 6] + w2 * c[k + 12] + w3 * c[k + 18];
  if (metallicity !== 0) {
    const m1 = w0 * c[k + 1] + w1 * c[k + 7] + w2 * c[k + 13] + w3 * c[k + 19];
    const m2 = w0 * c[k + 2] + w1 * c[k + 8] + w2 * c[k + 14] + w3 * c[k + 20];
    sum += metallicity * (m1 + metallicity * m2);
  }
  if (share === 0) return sum;
  let giant = w0 * c[k + 3] + w1 * c[k + 9] + w2 * c[k + 15] + w3 * c[k + 21];
  if (metallicity !== 0) {
    const m1 = w0 * c[k + 4] + w1 * c[k + 10] + w2 * c[k + 16] + w3 * c[k + 22];
    const m2 = w0 * c[k + 5] + w1 * c[k + 11] + w2 * c[k + 17] + w3 * c[k + 23];
    giant += metallicity * (m1 + metallicity * m2);
  }
  return sum + share * giant;
}

/**
 * Bolometric magnitudes less bolometric corrections, for many stars and bands. Writes only into `out`.
 * @param bands       light tables, shape (b)
 * @param out         mag, shape (b) of shape (n); NaN outside the ranges
 * @param bolometric  bolometric magnitude of 1 solar luminosity
 * @param logL        log10 of solar luminosities, shape (n)
 * @param logTeff     log10 of K, shape (n)
 * @param logGravity  log10 of cm/s2, shape (n) or one for all
 * @param metallicity [Fe/H], shape (n) or one for all
 */
export function magnitudesInto(
  bands: readonly BandLight[],
  out: readonly Float64Array[],
  bolometric: number,
  logL: ArrayLike<number>,
  logTeff: ArrayLike<number>,
  logGravity: number | ArrayLike<number>,
  metallicity: number | ArrayLike<number>,
): void {
  const w = ONE_VALUE;
  const [poor, rich] = METALLICITY_RANGE;
  for (let i = 0; i < logL.length; i++) {
    const t = logTeff[i];
    const share = giantShare(t, typeof logGravity === 'number' ? logGravity : logGravity[i]);
    const f = typeof metallicity === 'number' ? metallicity : metallicity[i];
    const m = f >= poor && f <= rich ? bolometric - 2.5 * logL[i] : Number.NaN;
    const at = (t - GRID_START) / GRID_STEP;
    const node = at >= GRID_NODES - 1 ? GRID_NODES - 2 : at | 0;
    knotWeights(at - node, w);
    for (let b = 0; b < bands.length; b++) {
      const band = bands[b];
      out[b][i] =
        t >= (share > 0 ? band.lowGiant : band.low) && t <= band.high
          ? m - weighed(band.coefficients, TERMS * node, w[0], w[1], w[2], w[3], share, f)
          : Number.NaN;
    }
  }
}
