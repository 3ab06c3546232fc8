import type { Catalogue } from '../catalogue/catalogue';
import { evolve } from '../models/evolve';
import { mainSequenceLifetime } from '../models/lifetime';
import { zeroAge } from '../models/zero-age';
import type { Measured } from '../quantity/measured';
import { presentable } from '../quantity/present';
import { sampleCurve } from './mass-luminosity';
import { fitMassRelation, type MassRelationFit, type MassRelationOptions, relationAt } from './mass-relation';
import { publishedRadius } from './published-relations';
import type { StarsOfKnownMass } from './relation-stars';
import { relationPresentation } from './show-relation';

/** Options of `fitMassRadius`. */
export type MassRadiusOptions = MassRelationOptions;

/** A fitted mass-radius relation. */
export interface MassRadiusFit extends MassRelationFit {
  readonly quantity: 'radius';
  /** The fitted stars, solar units. */
  readonly stars: {
    readonly mass: Float64Array;
    readonly radius: Float64Array;
    readonly massError: Float64Array;
    readonly radiusError: Float64Array;
    readonly name: readonly string[];
  };
  /** Radius at a mass, solar; not determined outside the fitted masses. */
  radius(mass: number): Measured;
  /** The relation as a curve over the fitted masses, with its 68 % band. @param points default 200 */
  curve(points?: number): {
    readonly mass: Float64Array;
    readonly radius: Float64Array;
    readonly lower: Float64Array;
    readonly upper: Float64Array;
    readonly label: string;
  };
}

const SHOWN_MASSES = [0.3, 0.5, 0.8, 1, 1.5, 2, 3, 5, 10, 20];

/**
 * Mass-radius relation fitted to stars of known mass, as a power law or a broken one. Everything as `fitMassLuminosity`.
 * @param stars catalogue with columns mass (or log_mass), radius (or log_radius) and their errors; or plain lists; solar units
 * @param options as fitMassLuminosity
 * @returns frozen fit: exponents, breaks and scatter with 68 % intervals; outliers and leverage named
 * @throws as fitMassLuminosity
 * @example fitMassRadius(binaries, { breaks: 1 }).breaks
 * Source: as fitMassLuminosity.
 */
export function fitMassRadius(stars: Catalogue | StarsOfKnownMass, options: MassRadiusOptions = {}): MassRadiusFit {
  const core = fitMassRelation('fitMassRadius', stars, 'radius', options);
  const { fit } = core;
  const { metallicity = 0 } = options;
  const mass = core.stars.logMass.map((v) => 10 ** v);
  const radius = core.stars.logValue.map((v) => 10 ** v);
  const result: MassRadiusFit = {
    ...fit,
    quantity: 'radius',
    stars: Object.freeze({
      mass,
      radius,
      massError: core.stars.logMassError.map((e, i) => e * Math.LN10 * mass[i]),
      radiusError: core.stars.logValueError.map((e, i) => e * Math.LN10 * radius[i]),
      name: core.stars.name,
    }),
    radius: (m: number) => relationAt(core, m, 'solar radii'),
    curve(points = 200) {
      const { x, value, lower, upper } = sampleCurve(points, fit.massRange, (m) => relationAt(core, m, ''));
      return Object.freeze({ mass: x, radius: value, lower, upper, label: `fit to ${fit.starCount} stars` });
    },
  };
  const digits = (v: number) => (Number.isNaN(v) ? '' : String(Number(v.toPrecision(3))));
  const shown = SHOWN_MASSES.filter((m) => m >= fit.massRange[0] && m <= fit.massRange[1]);
  return presentable(
    result,
    relationPresentation(fit, {
      head: [],
      cells: () => [],
      tables: () => [
        {
          caption: 'Radius beside published relations and the models, solar radii',
          head: [
            'mass (solar)',
            'R',
            'R, Eker et al. 2018',
            'R, Demircan & Kahraman 1991',
            'models, zero age',
            'models, half life',
          ],
          rows: shown.map((m) => [
            String(m),
            String(relationAt(core, m, '')),
            digits(publishedRadius(m)),
            digits(publishedRadius(m, { relation: 'DemircanKahraman1991' })),
            digits(zeroAge({ mass: m, metallicity }).radius),
            digits(evolve({ mass: m, metallicity, age: mainSequenceLifetime({ mass: m, metallicity }) / 2 }).radius),
          ]),
        },
      ],
    }),
  );
}
