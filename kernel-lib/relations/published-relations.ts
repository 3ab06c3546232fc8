import { checkChoice, checkOptions } from '../quantity/options';

/** One piece of a published relation: log10 of the quantity as a polynomial in log10 of the mass, solar units. */
interface Piece {
  /** Solar masses; a mass equal to `to` belongs to this piece. */
  readonly from: number;
  readonly to: number;
  readonly exponent: number;
  readonly exponentError: number;
  readonly constant: number;
  /** Dex; NaN where the source gives none. */
  readonly scatter: number;
}

/** A published relation between the mass and another quantity of main-sequence stars. */
export interface PublishedRelation {
  readonly name: string;
  readonly source: string;
  /** Solar masses. */
  readonly range: readonly [number, number];
  readonly pieces: readonly Piece[];
}

/** Published mass-luminosity relations. */
export type MassLuminosityName = 'Eker2018' | 'Eker2015' | 'DemircanKahraman1991' | 'textbook';
/** Published mass-radius relations. */
export type MassRadiusName = 'Eker2018' | 'DemircanKahraman1991';

function pieces(rows: readonly (readonly [number, number, number, number, number, number])[]): readonly Piece[] {
  return Object.freeze(
    rows.map(([from, to, exponent, exponentError, constant, scatter]) =>
      Object.freeze({ from, to, exponent, exponentError, constant, scatter }),
    ),
  );
}

function relation(name: string, source: string, of: readonly Piece[]): PublishedRelation {
  const range = Object.freeze([of[0].from, of[of.length - 1].to] as const);
  return Object.freeze({ name, source, range, pieces: of });
}

const NONE = Number.NaN;

/** Mass-luminosity relations by name, with their sources. All coefficients from memory. */
export const MASS_LUMINOSITY_RELATIONS: Readonly<Record<MassLuminosityName, PublishedRelation>> = Object.freeze({
  Eker2018: relation(
    'Eker et al. 2018',
    'Eker et al. 2018, MNRAS 479, 5491, Table 4 (from memory)',
    pieces([
      [0.179, 0.45, 2.028, 0.135, -0.976, 0.076],
      [0.45, 0.72, 4.572, 0.319, -0.102, 0.109],
      [0.72, 1.05, 5.743, 0.413, -0.007, 0.129],
      [1.05, 2.4, 4.329, 0.087, 0.01, 0.14],
      [2.4, 7, 3.967, 0.143, 0.093, 0.165],
      [7, 31, 2.865, 0.155, 1.105, 0.152],
    ]),
  ),
  Eker2015: relation(
    'Eker et al. 2015',
    'Eker et al. 2015, AJ 149, 131 (from memory)',
    pieces([
      [0.38, 1.05, 4.841, 0.026, -0.026, NONE],
      [1.05, 2.4, 4.328, 0.029, -0.002, NONE],
      [2.4, 7, 3.962, 0.059, 0.12, NONE],
      [7, 32, 2.726, 0.203, 1.237, NONE],
    ]),
  ),
  DemircanKahraman1991: relation(
    'Demircan & Kahraman 1991',
    'Demircan & Kahraman 1991, Ap&SS 181, 313 (from memory)',
    pieces([[0.7, 25, 3.7, NONE, Math.log10(1.18), NONE]]),
  ),
  textbook: relation(
    'textbook powers',
    'L = 0.23 M^2.3, M^4, 1.4 M^3.5 in three ranges: common practice, no source',
    pieces([
      [0.1, 0.43, 2.3, NONE, Math.log10(0.23), NONE],
      [0.43, 2, 4, NONE, 0, NONE],
      [2, 55, 3.5, NONE, Math.log10(1.4), NONE],
    ]),
  ),
});

/**
 * Coefficients of R = a M^2 + b M + c, solar units, 0.179 to 1.5 solar masses. Source: Eker et al. 2018 (from memory); its
 * constant is uncertain by 0.08, so that it says little below 0.4 solar masses.
 */
const EKER_RADIUS = { a: 0.438, b: 0.479, c: 0.075, from: 0.179, to: 1.5 } as const;

/** Piecewise mass-radius relation. Source: Demircan & Kahraman 1991, Ap&SS 181, 313 (from memory). */
export const DEMIRCAN_RADIUS: PublishedRelation = relation(
  'Demircan & Kahraman 1991',
  'Demircan & Kahraman 1991, Ap&SS 181, 313 (from memory)',
  pieces([
    [0.1, 1.66, 0.945, NONE, Math.log10(1.06), NONE],
    [1.66, 25, 0.555, NONE, Math.log10(1.33), NONE],
  ]),
);

/**
 * Luminosity of a main-sequence star by a published mass-luminosity relation.
 * @param mass    solar masses, a number or shape (n)
 * @param options relation: `Eker2018` (default; 0.179 to 31 solar masses), `Eker2015`, `DemircanKahraman1991` or `textbook`
 * @returns solar luminosities; NaN outside the relation's range
 * @throws TypeError on an unknown option or relation
 * @example publishedLuminosity(2) // => 20.6
 * Source: see MASS_LUMINOSITY_RELATIONS.
 */
export function publishedLuminosity(mass: number, options?: { readonly relation?: MassLuminosityName }): number;
export function publishedLuminosity(
  mass: ArrayLike<number>,
  options?: { readonly relation?: MassLuminosityName },
): Float64Array;
export function publishedLuminosity(
  mass: number | ArrayLike<number>,
  options: { readonly relation?: MassLuminosityName } = {},
): number | Float64Array {
  const caller = 'publishedLuminosity';
  checkOptions(caller, options, ['relation']);
  const { relation: name = 'Eker2018' } = options;
  checkChoice(caller, 'relation', name, Object.keys(MASS_LUMINOSITY_RELATIONS) as MassLuminosityName[]);
  const { pieces: of } = MASS_LUMINOSITY_RELATIONS[name];
  return typeof mass === 'number' ? evaluate(of, mass) : Float64Array.from(mass, (m) => evaluate(of, m));
}

/**
 * Radius of a main-sequence star by a published mass-radius relation.
 * @param mass    solar masses, a number or shape (n)
 * @param options relation: `Eker2018` (default; a parabola, 0.179 to 1.5 solar masses) or `DemircanKahraman1991` (two powers, to 25)
 * @returns solar radii; NaN outside the relation's range
 * @throws TypeError on an unknown option or relation
 * @example publishedRadius(1) // => 0.992
 * Source: Eker et al. 2018, MNRAS 479, 5491; Demircan & Kahraman 1991, Ap&SS 181, 313 (both from memory).
 */
export function publishedRadius(mass: number, options?: { readonly relation?: MassRadiusName }): number;
export function publishedRadius(
  mass: ArrayLike<number>,
  options?: { readonly relation?: MassRadiusName },
): Float64Array;
export function publishedRadius(
  mass: number | ArrayLike<number>,
  options: { readonly relation?: MassRadiusName } = {},
): number | Float64Array {
  const caller = 'publishedRadius';
  checkOptions(caller, options, ['relation']);
  const { relation: name = 'Eker2018' } = options;
  checkChoice(caller, 'relation', name, ['Eker2018', 'DemircanKahraman1991']);
  const at = (m: number): number => {
    if (name !== 'Eker2018') return evaluate(DEMIRCAN_RADIUS.pieces, m);
    const { a, b, c, from, to } = EKER_RADIUS;
    return m >= from && m <= to ? a * m * m + b * m + c : Number.NaN;
  };
  return typeof mass === 'number' ? at(mass) : Float64Array.from(mass, at);
}

function evaluate(of: readonly Piece[], mass: number): number {
  for (const p of of) {
    if (mass <= p.to && (mass > p.from || (p === of[0] && mass === p.from))) {
      return 10 ** (p.constant + p.exponent * Math.log10(mass));
    }
  }
  return Number.NaN;
}
