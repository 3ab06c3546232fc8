import { polynomial } from '../numeric/polynomial';

/** One law of extinction: A(lambda)/A(V) from wavelength (micron) and A(V)/E(B-V). */
export type LawFormula = (micron: number, rV: number) => number;

const A_OPTICAL = [1, 0.17699, -0.50447, -0.02427, 0.72085, 0.01979, -0.7753, 0.32999];
const B_OPTICAL = [0, 1.41338, 2.28305, 1.07233, -5.38434, -0.62251, 5.3026, -2.09002];
const A_ODONNELL = [1, 0.104, -0.609, 0.701, 1.137, -1.718, -0.827, 1.647, -0.505];
const B_ODONNELL = [0, 1.952, 2.908, -3.989, -7.985, 11.102, 5.491, -10.805, 3.347];

/**
 * Cardelli, Clayton & Mathis 1989, ApJ 345, 245, equations 2 to 5 (coefficients from memory; they give the paper's Table 3):
 * 0.1 to 3.33 micron.
 */
export const ccm89: LawFormula = (micron, rV) => meanLaw(1 / micron, rV, A_OPTICAL, B_OPTICAL);

/**
 * O'Donnell 1994, ApJ 422, 158: new optical and near-ultraviolet coefficients (0.303 to 0.909 micron) for the law of Cardelli,
 * Clayton & Mathis 1989, which holds elsewhere (coefficients from memory). It differs from the older one by up to 0.05 A(V).
 */
export const odonnell94: LawFormula = (micron, rV) => meanLaw(1 / micron, rV, A_ODONNELL, B_ODONNELL);

/** a(x) + b(x)/R, x in 1/micron, by the branches of the paper of 1989. */
function meanLaw(x: number, rV: number, aOptical: readonly number[], bOptical: readonly number[]): number {
  if (!(x >= 0.3 && x <= 10)) return Number.NaN;
  if (x <= 1.1) return x ** 1.61 * (0.574 - 0.527 / rV);
  if (x <= 3.3) return polynomial(aOptical, x - 1.82) + polynomial(bOptical, x - 1.82) / rV;
  if (x <= 8) {
    const d = x < 5.9 ? 0 : x - 5.9;
    const a = 1.752 - 0.316 * x - 0.104 / ((x - 4.67) ** 2 + 0.341) - 0.04473 * d ** 2 - 0.009779 * d ** 3;
    const b = -3.09 + 1.825 * x + 1.206 / ((x - 4.62) ** 2 + 0.263) + 0.213 * d ** 2 + 0.1207 * d ** 3;
    return a + b / rV;
  }
  const d = x - 8;
  return polynomial([-1.073, -0.628, 0.137, -0.07], d) + polynomial([13.67, 4.257, -0.42, 0.374], d) / rV;
}
