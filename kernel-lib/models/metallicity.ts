import { describe } from '../quantity/options';

/**
 * Mass fraction of elements heavier than helium that goes with [Fe/H] = 0. With it the fits give the Sun at 4.57 Gyr
 * 0.988 of its luminosity, 0.988 of its radius and 5791 K; the fits' own reference, 0.02, gives 0.956, 0.985 and 5752 K.
 * Close to the initial solar composition of standard solar models, 0.0187 to 0.0188 (Grevesse & Sauval 1998 mixture; from memory).
 */
export const SOLAR_Z = 0.0188;

/** Range of mass fraction that the fits cover. Source: Hurley, Pols & Tout 2000, MNRAS 315, 543, abstract. */
export const Z_RANGE: readonly [number, number] = [1e-4, 0.03];

/** Range of initial mass that the fits cover, solar masses. Source: the same. */
export const MASS_RANGE: readonly [number, number] = [0.1, 100];

/** Chemical composition: [Fe/H] in dex, or the mass fraction itself. */
export interface Composition {
  /** [Fe/H], dex; 0 (the default) is Z = 0.0188. Range -2.27 to 0.20. */
  readonly metallicity?: number;
  /** Mass fraction of elements heavier than helium, in place of `metallicity`. Range 0.0001 to 0.03. */
  readonly z?: number;
}

/**
 * The mass fraction Z that a composition means.
 * @throws TypeError when both are given or one is not a number
 * @example zOf('evolve', { metallicity: -0.5 }) // => 0.005945
 */
export function zOf(caller: string, options: Composition): number {
  const { metallicity, z } = options;
  if (z !== undefined && metallicity !== undefined) {
    throw new TypeError(`${caller}: give metallicity ([Fe/H]) or z (mass fraction), not both.`);
  }
  const given = z ?? metallicity ?? 0;
  if (typeof given !== 'number') {
    throw new TypeError(
      `${caller}: ${z === undefined ? 'metallicity' : 'z'} must be a number, got ${describe(given)}.`,
    );
  }
  return z ?? SOLAR_Z * 10 ** given;
}

/** [Fe/H] of a mass fraction. */
export function metallicityOf(z: number): number {
  return Math.log10(z / SOLAR_Z);
}

/** Why a mass fraction cannot be used, or ''. The ends are allowed a rounding error. */
export function whyNotZ(z: number): string {
  if (z >= Z_RANGE[0] * (1 - 1e-9) && z <= Z_RANGE[1] * (1 + 1e-9)) return '';
  const fe = Number.isFinite(z) && z > 0 ? ` ([Fe/H] ${metallicityOf(z).toFixed(2)})` : '';
  return `Z = ${Number(z.toPrecision(6))}${fe} lies outside the range of the models, ${Z_RANGE[0]} to ${Z_RANGE[1]} ([Fe/H] -2.27 to 0.20)`;
}

/** Why an initial mass cannot be used, or ''. */
export function whyNotMass(mass: number): string {
  if (mass >= MASS_RANGE[0] && mass <= MASS_RANGE[1]) return '';
  return `mass ${Number(mass.toPrecision(6))} lies outside the range of the models, ${MASS_RANGE[0]} to ${MASS_RANGE[1]} solar masses`;
}

/** One mass or many, as the user gave them. */
export type Masses = number | ArrayLike<number>;

/** Checks that a mass argument is a number or an array of numbers; gives it as an array. */
export function massArray(caller: string, name: string, mass: unknown): ArrayLike<number> {
  if (typeof mass === 'number') return [mass];
  const list = mass as ArrayLike<number> | null | undefined;
  if (list != null && typeof list === 'object' && typeof list.length === 'number') {
    if (list.length === 0 || typeof list[0] === 'number') return list;
  }
  throw new TypeError(
    `${caller}: ${name} must be a number or an array of numbers (solar masses), got ${describe(mass)}.`,
  );
}
