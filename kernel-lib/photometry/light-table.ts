import { uniformSpline } from '../numeric/uniform-spline';

/** log10 of temperature (K) of the first node of the grid. */
export const GRID_START = 3.36;
/** Distance of nodes in log10 of temperature: fine against the bends of all relations. */
export const GRID_STEP = 0.004;
/** Number of nodes: up to log Teff 4.76. */
export const GRID_NODES = 351;
/** [Fe/H] for which the table answers, dex. */
export const METALLICITY_RANGE: readonly [number, number] = [-2.5, 0.5];

/** The bolometric correction in one band as a function of temperature, gravity and metallicity. */
export interface BandLight {
  /**
   * Six cubic B-spline coefficients for each knot, shape (GRID_NODES + 2, 6): dwarf level, its linear and quadratic term in
   * [Fe/H]; then the same for what giants differ from dwarfs.
   */
  readonly coefficients: Float64Array;
  /** Least log Teff of dwarfs. */
  readonly low: number;
  /** Least log Teff of giants. */
  readonly lowGiant: number;
  /** Greatest log Teff. */
  readonly high: number;
}

/** Values at the grid's nodes from which a BandLight is made, each shape (GRID_NODES). */
export interface BandNodes {
  /** Dwarf level, linear, quadratic; giant difference level, linear, quadratic. */
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
  const coefficients = new Float64Array(6 * (GRID_NODES + 2));
  for (let i = 0; i < GRID_NODES + 2; i++) for (let k = 0; k < 6; k++) coefficients[6 * i + k] = terms[k][i];
  return { coefficients, low: nodes.low, lowGiant: nodes.lowGiant, high: nodes.high };
}

/**
 * Share of the giants' relation in a star's light: 0 for dwarfs, 1 for giants, with three continuous derivatives... between.
 * @param logTeff    log10 of K
 * @param logGravity log10 of cm/s2
 */
export function giantShare(logTeff: number, logGravity: number): number {
  // Hot stars leave the main sequence at lower gravity than cool ones do.
  const h = (logTeff - 3.85) * 10;
  const hot = h <= 0 ? 0 : h >= 1 ? 1 : h * h * (3 - 2 * h);
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
  if (!(logTeff >= (share > 0 ? band.lowGiant : band.low) && logTeff <= band.high)) return Number.NaN;
  if (!(metallicity >= -2.5 && metallicity <= 0.5)) return Number.NaN;
  const c = band.coefficients;
  const at = (logTeff - GRID_START) / GRID_STEP;
  let i = at | 0;
  if (i > GRID_NODES - 2) i = GRID_NODES - 2;
  const u = at - i;
  const v = 1 - u;
  const w0 = (v * v * v) / 6;
  const w1 = (u * u * (3 * u - 6) + 4) / 6;
  const w3 = (u * u * u) / 6;
  const w2 = 1 - w0 - w1 - w3;
  const k = 6 * i;
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
