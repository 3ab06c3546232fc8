import type { ThetaRelation } from './theta-relation';

/**
 * Infrared flux method for dwarfs and subgiants, [Fe/H] -5 to 0.4.
 * Source: Casagrande et al. 2010, A&A 512, A54, Table 4. From memory; each colour gives the Sun 5700 to 5780 K at its observed colours.
 */
export const CASAGRANDE_2010: readonly ThetaRelation[] = [
  relation('B-V', [0.18, 1.29], 73, [0.5665, 0.4809, -0.006], [-0.0042, -0.0055, -0.0613]),
  relation('V-Rc', [0.24, 0.8], 62, [0.4386, 1.4614, -0.7014], [0.0142, -0.0015, -0.0807]),
  relation('V-Ic', [0.46, 1.47], 59, [0.4033, 0.8171, -0.1987], [0.0319, 0.0012, -0.0409]),
  relation('V-J', [0.61, 2.44], 42, [0.4669, 0.3849, -0.035], [0.0225, 0.0011, -0.014]),
  relation('V-H', [0.67, 3.01], 33, [0.5251, 0.2553, -0.0119], [0.041, 0.0025, -0.0187]),
  relation('V-Ks', [0.78, 3.15], 25, [0.5057, 0.26, -0.0146], [0.0288, 0.0016, -0.0131]),
];

function relation(
  colour: ThetaRelation['colour'],
  range: ThetaRelation['range'],
  scatter: number,
  b: ThetaRelation['b'],
  m: ThetaRelation['m'],
): ThetaRelation {
  return { colour, range, scatter, b, m };
}
