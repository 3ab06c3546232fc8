import { polynomial } from '../../numeric/polynomial';

const G_V = [-0.01597, -0.02809, -0.2483, 0.03656, -0.002939];
const BP_RP = [-0.03298, 1.259, -0.1279, 0.01631];
/** Reddest V-Ic of the relations; beyond, they go on straight. */
const REDDEST = 5;
const RP_V = [0.01868, -0.9028, -0.005321, -0.004186];

/**
 * G - V from V-Ic, mag; V-Ic -0.4 to 5 (redder giants straight on), scatter 0.027 mag.
 * Source: Riello et al. 2021, A&A 649, A3, and the Gaia EDR3 documentation (transformations from Landolt standards); from memory: the
 * coefficients for BP and RP give those for BP-RP to the last digit, and G - V lies within 0.06 mag of the dwarf sequence from B0 to M3.
 */
export function gMinusV(vi: number): number {
  return straightBeyond(G_V, vi);
}

/** BP - RP from V-Ic, mag; scatter 0.045 mag. Same source. */
export function bpMinusRp(vi: number): number {
  return straightBeyond(BP_RP, vi);
}

/** G - RP from V-Ic, mag. Same source. */
export function gMinusRp(vi: number): number {
  return straightBeyond(G_V, vi) - straightBeyond(RP_V, vi);
}

function straightBeyond(c: readonly number[], vi: number): number {
  if (vi <= REDDEST) return polynomial(c, vi);
  const slope = c.slice(1).map((v, k) => (k + 1) * v);
  return polynomial(c, REDDEST) + polynomial(slope, REDDEST) * (vi - REDDEST);
}
