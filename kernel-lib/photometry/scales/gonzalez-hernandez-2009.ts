import type { ThetaRelation } from './theta-relation';

/**
 * Infrared flux method for giants with 2MASS magnitudes, [Fe/H] -4 to 0.2.
 * Source: Gonzalez Hernandez & Bonifacio 2009, A&A 497, 497, Table 5. From memory, ranges too; the colours agree with one another, and B-V
 * with Alonso et al. 1999.
 */
export const GONZALEZ_HERNANDEZ_2009_GIANTS: readonly ThetaRelation[] = [
  { colour: 'B-V', range: [0.2, 1.4], scatter: 57, b: [0.5737, 0.4882, -0.0149], m: [-0.116, -0.0114, 0.0563] },
  { colour: 'V-J', range: [0.5, 2.5], scatter: 94, b: [0.4629, 0.4124, -0.0417], m: [0.0094, 0.0013, -0.0012] },
  { colour: 'V-H', range: [0.6, 3.3], scatter: 23, b: [0.5321, 0.2649, -0.0146], m: [0.0211, 0.0009, -0.0069] },
  { colour: 'V-Ks', range: [0.7, 3.5], scatter: 23, b: [0.5293, 0.2489, -0.0119], m: [0.0135, 0.001, -0.0042] },
];
