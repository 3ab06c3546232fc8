import type { Catalogue } from '../catalogue/catalogue';
import { mainSequenceLifetime } from '../models/lifetime';
import { type Measured, measured, measuredFromSamples } from '../quantity/measured';
import { describe } from '../quantity/options';
import { presentable } from '../quantity/present';
import { fitMassRelation, type MassRelationFit, type MassRelationOptions, relationAt } from './mass-relation';
import { publishedLuminosity } from './published-relations';
import { drawnValues } from './relation-result';
import type { StarsOfKnownMass } from './relation-stars';
import { relationPresentation } from './show-relation';

/** Options of `fitMassLuminosity`. */
export type MassLuminosityOptions = MassRelationOptions;

/** Main-sequence lifetime of a mass by the fitted relation and by the stellar models. */
export interface RelationLifetime {
  /** Solar masses. */
  readonly mass: number;
  /** Gyr: 10 M / L of the relation, with the interval of the fit. Not determined outside the fitted masses. */
  readonly relation: Measured;
  /** Gyr, by the stellar models. */
  readonly model: number;
  /** Relation over model. */
  readonly ratio: number;
}

/** A relation as a curve, with the 68 % band of the fit. */
export interface MassLuminosityFitCurve {
  readonly mass: Float64Array;
  readonly luminosity: Float64Array;
  readonly lower: Float64Array;
  readonly upper: Float64Array;
  readonly label: string;
}

/** A fitted mass-luminosity relation. */
export interface MassLuminosityFit extends MassRelationFit {
  readonly quantity: 'luminosity';
  /** Exponent of the lifetime with mass, one a piece: t ∝ M / L, so 1 less the exponent of the luminosity. */
  readonly lifetimeExponents: readonly Measured[];
  /** The fitted stars, as `massLuminosityDiagram` takes them. */
  readonly stars: {
    readonly mass: Float64Array;
    readonly luminosity: Float64Array;
    readonly massError: Float64Array;
    readonly luminosityError: Float64Array;
    readonly name: readonly string[];
  };
  /** Luminosity at a mass, solar; not determined outside the fitted masses. */
  luminosity(mass: number): Measured;
  /** Lifetime at a mass, Gyr, beside that of the stellar models. */
  lifetime(mass: number): RelationLifetime;
  /** The relation as a curve over the fitted masses. @param points default 200 */
  curve(points?: number): MassLuminosityFitCurve;
}

/** Lifetime of a star of one solar mass and luminosity, Gyr: fuel of a tenth of the mass. Common practice, no source. */
const SOLAR_LIFETIME = 10;
/** Masses at which lifetimes are shown, solar. */
const SHOWN_MASSES = [0.3, 0.5, 0.8, 1, 1.5, 2, 3, 5, 10, 20];

/**
 * Mass-luminosity relation fitted to stars of known mass, as a power law or a broken one: log L = constant + exponent x log M.
 * Default: Bayesian fit with errors in both axes and intrinsic scatter, to the stars that are on the main sequence by their radii.
 * @param stars catalogue with columns mass (or log_mass), luminosity (or log_luminosity, log_l), their errors, and radius (or
 *   log_radius); or plain lists; solar units
 * @param options breaks (number, list of solar masses, or `auto` by BIC), method, continuous, select, metallicity, seed, resamples,
 *   columns, onProgress
 * @returns frozen fit: exponents, breaks, scatter and lifetimes with 68 % intervals; outliers and leverage named; the same pieces
 *   fitted to other choices of stars
 * @throws TypeError on an unknown option; Error where a column is missing; RangeError where stars, errors or breaks do not serve
 * @example fitMassLuminosity(binaries, { breaks: 'auto' }).exponents
 * Source: the likelihood of Kelly 2007, ApJ 665, 1489 (posterior); York et al. 2004, Am. J. Phys. 72, 367; Isobe et al. 1990,
 * ApJ 364, 104; Sen 1968; Lange et al. 1989.
 */
export function fitMassLuminosity(
  stars: Catalogue | StarsOfKnownMass,
  options: MassLuminosityOptions = {},
): MassLuminosityFit {
  const core = fitMassRelation('fitMassLuminosity', stars, 'luminosity', options);
  const { fit, law } = core;
  const { metallicity = 0 } = options;
  const lifetime = (mass: number): RelationLifetime => {
    if (typeof mass !== 'number') throw new TypeError(`lifetime: mass must be a number, got ${describe(mass)}.`);
    const light = relationAt(core, mass, '');
    const relation = Number.isNaN(light.value)
      ? light
      : measuredFromSamples(
          drawnValues(law, Math.log10(mass)).map((l) => (SOLAR_LIFETIME * mass) / 10 ** l),
          'Gyr',
        );
    const model = mainSequenceLifetime({ mass, metallicity });
    return Object.freeze({ mass, relation, model, ratio: relation.value / model });
  };
  const curve = (points = 200): MassLuminosityFitCurve => {
    const { x, value, lower, upper } = sampleCurve(points, fit.massRange, (m) => relationAt(core, m, ''));
    return Object.freeze({ mass: x, luminosity: value, lower, upper, label: `fit to ${fit.starCount} stars` });
  };
  const linear = (logs: Float64Array) => logs.map((v) => 10 ** v);
  const mass = linear(core.stars.logMass);
  const luminosity = linear(core.stars.logValue);
  const result: MassLuminosityFit = {
    ...fit,
    quantity: 'luminosity',
    lifetimeExponents: Object.freeze(fit.exponents.map((e) => measured(1 - e.value, 1 - e.upper, 1 - e.lower))),
    stars: Object.freeze({
      mass,
      luminosity,
      massError: core.stars.logMassError.map((e, i) => e * Math.LN10 * mass[i]),
      luminosityError: core.stars.logValueError.map((e, i) => e * Math.LN10 * luminosity[i]),
      name: core.stars.name,
    }),
    luminosity: (m: number) => relationAt(core, m, 'solar'),
    lifetime,
    curve,
  };
  const shown = SHOWN_MASSES.filter((m) => m >= fit.massRange[0] && m <= fit.massRange[1]);
  return presentable(
    result,
    relationPresentation(fit, {
      head: ['lifetime exponent'],
      cells: (k) => [String(result.lifetimeExponents[k])],
      tables: () => [
        {
          caption: 'Luminosity and main-sequence lifetime (relation: 10 Gyr x M / L)',
          head: ['mass (solar)', 'L (solar)', 'L, Eker et al. 2018', 'lifetime (Gyr)', 'lifetime, models (Gyr)'],
          rows: shown.map((m) => {
            const life = lifetime(m);
            const published = publishedLuminosity(m);
            return [
              String(m),
              String(relationAt(core, m, '')),
              Number.isNaN(published) ? '' : String(Number(published.toPrecision(3))),
              String(life.relation).replace(/ Gyr$/, ''),
              String(Number(life.model.toPrecision(3))),
            ];
          }),
        },
      ],
    }),
  );
}

/** A relation with its interval at many masses, columns of one length. */
export interface RelationCurve {
  readonly x: Float64Array;
  readonly value: Float64Array;
  readonly lower: Float64Array;
  readonly upper: Float64Array;
}

/** A measured function of mass at equal steps in log mass. */
export function sampleCurve(
  points: number,
  range: readonly [number, number],
  at: (mass: number) => Measured,
): RelationCurve {
  if (!(Number.isInteger(points) && points >= 2 && points <= 10000)) {
    throw new RangeError(`curve: points must be a whole number of 2 to 10000, got ${describe(points)}.`);
  }
  const x = new Float64Array(points);
  const value = new Float64Array(points);
  const lower = new Float64Array(points);
  const upper = new Float64Array(points);
  for (let i = 0; i < points; i++) {
    x[i] = range[0] * (range[1] / range[0]) ** (i / (points - 1));
    const m = at(x[i]);
    [value[i], lower[i], upper[i]] = [m.value, m.lower, m.upper];
  }
  return { x, value, lower, upper };
}
