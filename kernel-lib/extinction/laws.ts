import { checkChoice, checkRange } from '../quantity/options';
import { ccm89, type LawFormula, odonnell94 } from './ccm';
import { fitzpatrick99 } from './fitzpatrick';

/** Name of an extinction law. */
export type LawName = 'CCM89' | 'O94' | 'F99';

/** A law with where it comes from and where it holds. */
export interface LawDescription {
  readonly name: LawName;
  readonly source: string;
  /** Wavelengths, micron. */
  readonly range: readonly [number, number];
  readonly formula: LawFormula;
}

/** Every law, by name. */
export const EXTINCTION_LAWS: Readonly<Record<LawName, LawDescription>> = Object.freeze({
  CCM89: Object.freeze({
    name: 'CCM89',
    source: 'Cardelli, Clayton & Mathis 1989, ApJ 345, 245',
    range: Object.freeze([0.1, 1 / 0.3] as const),
    formula: ccm89,
  }),
  O94: Object.freeze({
    name: 'O94',
    source: "O'Donnell 1994, ApJ 422, 158",
    range: Object.freeze([0.1, 1 / 0.3] as const),
    formula: odonnell94,
  }),
  F99: Object.freeze({
    name: 'F99',
    source: 'Fitzpatrick 1999, PASP 111, 63',
    range: Object.freeze([0.115, 1 / 0.3] as const),
    formula: fitzpatrick99,
  }),
});

/** Names of the laws. */
export const LAW_NAMES: readonly LawName[] = Object.freeze(['CCM89', 'O94', 'F99'] as LawName[]);

/**
 * A law of interstellar extinction.
 * @param name `CCM89` (Cardelli, Clayton & Mathis 1989), `O94` (O'Donnell 1994) or `F99` (Fitzpatrick 1999)
 * @param rV   A(V)/E(B-V), 2 to 6 (the laws were made from sight lines between 2.6 and 5.6)
 * @returns function of wavelength (micron) that gives A(lambda)/A(V); NaN outside the law's published wavelengths
 * @throws TypeError for an unknown name, RangeError for rV out of range
 * @example extinctionLaw('CCM89', 3.1)(0.44) // => 1.3245
 * Sources: see EXTINCTION_LAWS.
 */
export function extinctionLaw(name: LawName | (string & {}) = 'CCM89', rV = 3.1): (wavelengthMicron: number) => number {
  const { formula } = lawNamed('extinctionLaw', name, rV);
  return (wavelengthMicron) => formula(wavelengthMicron, rV);
}

/** The law of that name. @throws for an unknown law or an impossible ratio */
export function lawNamed(caller: string, law: string, rV: number): LawDescription {
  checkChoice<string>(caller, 'law', law, LAW_NAMES);
  checkRange(caller, 'rV', rV, 2, 6);
  return EXTINCTION_LAWS[law as LawName];
}
