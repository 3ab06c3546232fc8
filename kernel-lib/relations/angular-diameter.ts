import { PARSEC_M, RADIANS_PER_DEGREE, SOLAR_RADIUS_M } from '../quantity/constants';
import { checkChoice, checkOptions } from '../quantity/options';

/** Surface-brightness-colour relations. */
export type SurfaceBrightnessName = 'Kervella2004 V-K' | 'Boyajian2014 V-K' | 'Boyajian2014 B-V';

/** One relation: log10 of the angular diameter (mas) that a star of magnitude 0 would have, as a polynomial in the colour. */
export interface SurfaceBrightnessRelation {
  readonly colour: 'V-Ks' | 'B-V';
  /** Band of the magnitude that goes with it. */
  readonly band: 'V' | 'Ks';
  readonly coefficients: readonly number[];
  /** Colours it holds for, mag. */
  readonly range: readonly [number, number];
  /** Star-to-star scatter of the diameter, relative. */
  readonly scatter: number;
  readonly source: string;
}

/** The relations, all from memory. Ks stands for their K: the two differ by about 0.04 mag, 1 % of a diameter at most. */
export const SURFACE_BRIGHTNESS: Readonly<Record<SurfaceBrightnessName, SurfaceBrightnessRelation>> = Object.freeze({
  'Kervella2004 V-K': Object.freeze({
    colour: 'V-Ks',
    band: 'Ks',
    coefficients: [0.517, 0.0755],
    range: [-0.2, 4] as const,
    scatter: 0.01,
    source: 'Kervella et al. 2004, A&A 426, 297: dwarfs A0 to M2, subgiants to K0 (from memory)',
  }),
  'Boyajian2014 V-K': Object.freeze({
    colour: 'V-Ks',
    band: 'V',
    coefficients: [0.53246, 0.26382],
    range: [-0.15, 4.15] as const,
    scatter: 0.046,
    source: 'Boyajian et al. 2014, AJ 147, 47 (from memory)',
  }),
  'Boyajian2014 B-V': Object.freeze({
    colour: 'B-V',
    band: 'V',
    coefficients: [0.49612, 1.11136, -1.18694, 0.91974],
    range: [-0.02, 1.73] as const,
    scatter: 0.078,
    source: 'Boyajian et al. 2014, AJ 147, 47 (from memory)',
  }),
});

/** Names of the relations, the least scattered first. */
export const SURFACE_BRIGHTNESS_NAMES: readonly SurfaceBrightnessName[] = Object.freeze(
  Object.keys(SURFACE_BRIGHTNESS) as SurfaceBrightnessName[],
);

/**
 * Limb-darkened angular diameter of a star from its colour and magnitude, both without extinction.
 * @param colour    intrinsic colour of the relation, mag
 * @param magnitude extinction-free magnitude in the relation's band (K or V), mag
 * @param options   relation: `Kervella2004 V-K` (default, with the K magnitude), `Boyajian2014 V-K` or `Boyajian2014 B-V` (with V)
 * @returns mas; NaN outside the colours of the relation
 * @throws TypeError on an unknown option or relation
 * @example angularDiameter(0, -0.1) // => 3.44
 * Source: Kervella et al. 2004, A&A 426, 297; Boyajian et al. 2014, AJ 147, 47 (coefficients from memory).
 */
export function angularDiameter(
  colour: number,
  magnitude: number,
  options: { readonly relation?: SurfaceBrightnessName } = {},
): number {
  checkOptions('angularDiameter', options, ['relation']);
  const { relation = 'Kervella2004 V-K' } = options;
  checkChoice('angularDiameter', 'relation', relation, SURFACE_BRIGHTNESS_NAMES);
  return diameterBy(SURFACE_BRIGHTNESS[relation], colour, magnitude);
}

/** The formula, for loops. */
export function diameterBy(relation: SurfaceBrightnessRelation, colour: number, magnitude: number): number {
  if (!(colour >= relation.range[0] && colour <= relation.range[1])) return Number.NaN;
  let log = 0;
  for (let k = relation.coefficients.length - 1; k >= 0; k--) log = log * colour + relation.coefficients[k];
  return 10 ** (log - 0.2 * magnitude);
}

/** Solar radii of a star of 1 mas at 1 pc. */
export const RADII_PER_MAS_PARSEC: number = ((RADIANS_PER_DEGREE / 3.6e6) * PARSEC_M) / 2 / SOLAR_RADIUS_M;
