import { GIANT_ROWS, MAIN_SEQUENCE_ROWS } from './evolution-rows';
import { ZERO_AGE_LUMINOSITY_ROWS, ZERO_AGE_RADIUS_ROWS } from './zero-age-rows';

/** The coefficients of the evolution fits at one metallicity, under the papers' symbols (a[1] is a_1). */
export interface Coefficients {
  /** Mass fraction of elements heavier than helium. */
  readonly z: number;
  /** log10(Z/0.02). */
  readonly zeta: number;
  readonly a: Float64Array;
  readonly b: Float64Array;
  /** alpha, beta, gamma, delta, epsilon, zeta, eta of the zero-age luminosity. */
  readonly zeroAgeLuminosity: Float64Array;
  /** theta, iota, kappa, lambda, mu, nu, xi, omicron, pi of the zero-age radius. */
  readonly zeroAgeRadius: Float64Array;
  /** Smallest mass whose main sequence ends in a hook, solar masses. */
  readonly massHook: number;
  /** Largest mass with a helium flash. */
  readonly massFlash: number;
  /** Largest mass that ignites helium on the first giant branch. */
  readonly massGiantBranch: number;
}

/**
 * Coefficients at a mass fraction Z, from the tabulated rows and the rules that limit and combine them.
 * Source: Hurley, Pols & Tout 2000, MNRAS 315, 543, Appendix A and Eqs 1-3; Tout et al. 1996, MNRAS 281, 257.
 */
export function makeCoefficients(z: number): Coefficients {
  const zeta = Math.log10(z / 0.02);
  const a = new Float64Array(82);
  const b = new Float64Array(58);
  for (const n of Object.keys(MAIN_SEQUENCE_ROWS)) a[Number(n)] = polynomial(MAIN_SEQUENCE_ROWS[Number(n)], zeta);
  for (const n of Object.keys(GIANT_ROWS)) b[Number(n)] = polynomial(GIANT_ROWS[Number(n)], zeta);
  const massFlash = 1.995 + 0.25 * zeta + 0.087 * zeta * zeta;
  const massGiantBranch = (13.048 * (z / 0.02) ** 0.06) / (1 + 0.0012 * (0.02 / z) ** 1.27);
  finishMainSequence(a, z, zeta);
  finishGiants(b, z, zeta, massFlash, massGiantBranch);
  return Object.freeze({
    z,
    zeta,
    a,
    b,
    zeroAgeLuminosity: Float64Array.from(Object.values(ZERO_AGE_LUMINOSITY_ROWS), (row) => polynomial(row, zeta)),
    zeroAgeRadius: Float64Array.from(Object.values(ZERO_AGE_RADIUS_ROWS), (row) => polynomial(row, zeta)),
    massHook: 1.0185 + 0.16015 * zeta + 0.0892 * zeta * zeta,
    massFlash,
    massGiantBranch,
  });
}

function polynomial(row: readonly number[], x: number): number {
  let sum = 0;
  for (let k = row.length - 1; k >= 0; k--) sum = sum * x + row[k];
  return sum;
}

function clamp(x: number, low: number, high: number): number {
  return Math.max(low, Math.min(x, high));
}

function finishMainSequence(a: Float64Array, z: number, zeta: number): void {
  const sigma = Math.log10(z);
  a[11] *= a[14];
  a[12] *= a[14];
  a[17] =
    10 ** Math.max(0.097 - 0.1072 * (sigma + 3), Math.max(0.097, Math.min(0.1461, 0.1461 + 0.1237 * (sigma + 2))));
  a[18] *= a[20];
  a[19] *= a[20];
  a[29] **= a[32];
  a[33] = Math.max(0.6355 - 0.4192 * zeta, clamp(1.5135 + 0.3769 * zeta, 1.25, 1.4));
  a[42] = clamp(a[42], 1.1, 1.25);
  a[44] = clamp(a[44], 0.45, 1.3);
  a[49] = Math.max(a[49], 0.145);
  a[50] = Math.min(a[50], 0.306 + 0.053 * zeta);
  a[51] = Math.min(a[51], 0.3625 + 0.062 * zeta);
  a[52] = Math.max(a[52], 0.9);
  a[53] = Math.max(a[53], 1);
  if (z > 0.01) {
    a[52] = Math.min(a[52], 1);
    a[53] = Math.min(a[53], 1.1);
    a[72] = Math.max(a[72], 0.95);
  }
  a[57] = a[33];
  a[62] = Math.max(0.065, a[62]);
  if (z < 0.004) a[63] = Math.min(0.055, a[63]);
  a[66] = Math.max(a[66], Math.min(1.6, -0.308 - 1.046 * zeta));
  a[66] = Math.max(0.8, Math.min(0.8 - 2 * zeta, a[66]));
  a[68] = clamp(a[68], 0.9, 1);
  a[64] = clamp(a[64], 0.091, 0.121);
  if (a[68] > a[66]) {
    a[64] = (a[58] * a[66] ** a[60]) / (a[59] + a[66] ** a[61]);
    a[68] = a[66];
  }
  a[74] = clamp(a[74], 1.4, 1.6);
  a[75] = Math.max(clamp(a[75], 1, 1.27), 0.6355 - 0.4192 * zeta);
  a[76] = Math.max(a[76], -0.1015564 - 0.2161264 * zeta - 0.05182516 * zeta * zeta);
  a[77] = Math.max(-0.3868776 - 0.5457078 * zeta - 0.1463472 * zeta * zeta, Math.min(0, a[77]));
  a[78] = Math.max(0, Math.min(a[78], 7.454 + 9.046 * zeta));
  a[79] = Math.min(a[79], Math.max(2, -13.3 - 18.6 * zeta));
  a[80] = Math.max(0.0585542, a[80]);
  a[81] = clamp(a[81], 0.4, 1.5);
}

function finishGiants(b: Float64Array, z: number, zeta: number, massFlash: number, massGiantBranch: number): void {
  const sigma = Math.log10(z);
  const rho = zeta + 1;
  const fifth = zeta ** 5;
  b[1] = Math.min(0.54, b[1]);
  b[2] = 10 ** (-4.6739 - 0.9394 * sigma);
  b[2] = Math.min(Math.max(b[2], -0.04167 + 55.67 * z), 0.4771 - 9329.21 * z ** 2.94);
  b[3] = 10 ** Math.max(-0.1451, -2.2794 - 1.5175 * sigma - 0.254 * sigma * sigma);
  if (z > 0.004) b[3] = Math.max(b[3], 0.7307 + 14265.1 * z ** 3.395);
  b[4] += 0.1231572 * fifth;
  b[6] += 0.01640687 * fifth;
  b[11] *= b[11];
  b[13] *= b[13];
  b[14] **= b[15];
  b[16] **= b[15];
  b[17] = zeta <= -1 ? 1 : 1 - 0.3880523 * (zeta + 1) ** 2.862149;
  b[24] **= b[28];
  b[26] = 5 - 0.09138012 * z ** -0.3671407;
  b[27] **= 2 * b[28];
  b[31] **= b[33];
  b[34] **= b[33];
  b[36] **= 4;
  b[37] *= 4;
  b[38] **= 4;
  b[40] = Math.max(b[40], 1);
  b[41] **= b[42];
  b[44] **= 5;
  b[45] = rho <= 0 ? 1 : 1 - (2.47162 * rho - 5.401682 * rho ** 2 + 3.247361 * rho ** 3);
  b[46] *= -Math.log10(massFlash / massGiantBranch);
  b[47] = 1.127733 * rho + 0.2344416 * rho ** 2 - 0.3793726 * rho ** 3;
  b[51] -= 0.1343798 * fifth;
  b[53] += 0.4426929 * fifth;
  b[55] = Math.min(0.99164 - 743.123 * z ** 2.83, b[55]);
  b[56] += 0.1140142 * fifth;
  b[57] -= 0.01308728 * fifth;
}
