import type { ThetaRelation } from './theta-relation';

const PAPER = 'Mucciarelli, Bellazzini & Massari 2021, A&A 653, A90';

/** Where the relations of this file come from. */
export const MUCCIARELLI_2021_SOURCE: string = PAPER;

/**
 * Infrared flux method carried to Gaia EDR3 colours, dwarfs, [Fe/H] -4 to 0.4.
 * Source: Mucciarelli, Bellazzini & Massari 2021, A&A 653, A90, Table 1. From memory: BP-RP lies within 0.05 mag of the dwarf sequence from
 * 4250 to 7000 K; G-RP is left out for want of figures, it is the difference of the other two.
 */
export const MUCCIARELLI_2021_DWARFS: readonly ThetaRelation[] = [
  { colour: 'BP-RP', range: [0.39, 1.5], scatter: 61, b: [0.4929, 0.5092, -0.0353], m: [0.0192, -0.002, -0.0395] },
  { colour: 'BP-G', range: [0.15, 0.7], scatter: 82, b: [0.5316, 1.2452, -0.4677], m: [0.0068, -0.0031, -0.0752] },
];

/**
 * The same for giants. Source: same table, from memory: BP-G and G-RP add up to BP-RP within 0.012 mag from 4000 to 7000 K.
 */
export const MUCCIARELLI_2021_GIANTS: readonly ThetaRelation[] = [
  { colour: 'BP-RP', range: [0.33, 1.81], scatter: 83, b: [0.5323, 0.4775, -0.0344], m: [-0.011, -0.002, -0.0009] },
  { colour: 'BP-G', range: [0.12, 0.97], scatter: 83, b: [0.5701, 1.1188, -0.371], m: [-0.0236, -0.0039, 0.007] },
  { colour: 'G-RP', range: [0.24, 0.9], scatter: 71, b: [0.5472, 0.5914, 0.2347], m: [-0.0119, -0.0012, 0.006] },
];
