import { naturalSpline } from '../numeric/natural-spline';
import type { LawFormula } from './ccm';

/** Ultraviolet anchors, 1/micron: 0.27 and 0.26 micron. */
const UV_ANCHORS = [1 / 0.27, 1 / 0.26];

const splines = new Map<number, (x: number) => number>();

/**
 * Fitzpatrick 1999, PASP 111, 63: the ultraviolet by his equation for c1 and c2 (Appendix), a cubic spline through the anchor points
 * of his Tables 3 and 4 in the optical and infrared, 0.115 to 3.33 micron (figures from memory; they give Table 3 to its last digit).
 */
export const fitzpatrick99: LawFormula = (micron, rV) => {
  const x = 1 / micron;
  if (!(x >= 0.3 && x <= 1 / 0.115)) return Number.NaN;
  if (x >= UV_ANCHORS[0]) return ultraviolet(x, rV) / rV;
  let spline = splines.get(rV);
  if (spline === undefined) {
    spline = opticalSpline(rV);
    // Held for the ratios of one notebook's work; a sampler over R must not fill the memory.
    if (splines.size > 50) splines.clear();
    splines.set(rV, spline);
  }
  return spline(x) / rV;
};

/** A(lambda)/E(B-V) beyond 0.27 micron. */
function ultraviolet(x: number, rV: number): number {
  const c2 = -0.824 + 4.717 / rV;
  const c1 = 2.03 - 3.007 * c2;
  const drude = (x * x) / ((x * x - 4.596 ** 2) ** 2 + (x * 0.99) ** 2);
  const d = x < 5.9 ? 0 : x - 5.9;
  return rV + c1 + c2 * x + 3.23 * drude + 0.41 * (0.5392 * d * d + 0.05644 * d ** 3);
}

/** A(lambda)/E(B-V) as a function of 1/micron. */
function opticalSpline(rV: number): (x: number) => number {
  const anchors: readonly (readonly [number, number])[] = [
    [0, 0],
    [1 / 2.65, (0.265 * rV) / 3.1],
    [1 / 1.22, (0.829 * rV) / 3.1],
    [1 / 0.6, -0.426 + 1.0044 * rV],
    [1 / 0.547, -0.05 + 1.0016 * rV],
    [1 / 0.467, 0.701 + 1.0016 * rV],
    [1 / 0.411, 1.208 + 1.0032 * rV - 0.00033 * rV * rV],
    [UV_ANCHORS[0], ultraviolet(UV_ANCHORS[0], rV)],
    [UV_ANCHORS[1], ultraviolet(UV_ANCHORS[1], rV)],
  ];
  return naturalSpline(
    anchors.map(([x]) => x),
    anchors.map(([, y]) => y),
  );
}
