import type { Catalogue } from '../catalogue/catalogue';
import { CORRECTION_SCALES } from '../photometry/scales/correction-scales';
import { temperatureScale } from '../photometry/scales/temperature-scales';
import { type Band, bandsOfColour, type ColourName } from '../quantity/band';
import type { Measured } from '../quantity/measured';
import { checkRange, describe } from '../quantity/options';
import { preferredColour, preferredMagnitude } from './observed-colour';

/** Options of `physicalProperties`. */
export interface PhysicalPropertiesOptions {
  /**
   * Distance, pc: one for all stars, with or without its error, or one a star, as a list of shape (n) or the name of a column.
   */
  readonly distance: number | Measured | ArrayLike<number> | string;
  /** Standard errors of distances given one a star, pc, shape (n) or the name of a column. Default: none. */
  readonly distanceError?: ArrayLike<number> | string;
  /** Reddening E(B-V), mag, -0.2 to 10, with or without its error. */
  readonly ebv: number | Measured;
  /** [Fe/H], dex, -4 to 1. Default 0. */
  readonly metallicity?: number;
  /** Colour that gives the temperature. Default: the best the catalogue has, BP-RP before B-V. */
  readonly colour?: ColourName;
  /** Band that gives the luminosity. Default: G with Gaia colours, else V. */
  readonly magnitude?: Band;
  /**
   * Scale of temperatures by name, see photometricScales(). Where a scale of bolometric corrections has the same name and knows the
   * band it goes with it, else the composite's are used. Default `composite`.
   */
  readonly scale?: string;
  /**
   * log10 of surface gravity, cm/s2, one for all or one a star: giants differ from dwarfs of the same colour. Default: from the star's
   * place, see below.
   */
  readonly logGravity?: number | ArrayLike<number>;
  /** A(V) / E(B-V). Default 3.1. */
  readonly rV?: number;
  /** Extinction law by name. Default `CCM89`. */
  readonly law?: string;
}

/** The options with every choice made. */
export interface PropertySettings {
  readonly colour: ColourName;
  readonly band: Band;
  readonly metallicity: number;
  readonly scale: string;
  /** Name of the scale of bolometric corrections. */
  readonly correctionScale: string;
  /** What the authors say of both scales. */
  readonly accuracy: { readonly temperature: string; readonly correction: string };
  /** One for all, one a star, or undefined: from the place. */
  readonly logGravity: number | ArrayLike<number> | undefined;
  readonly rV: number;
  readonly law: string;
  readonly ebv: { readonly value: number; readonly error: number };
  readonly distance: {
    /** One for all stars or one a star, pc. */
    readonly value: number | ArrayLike<number>;
    /** The same for its error, pc. */
    readonly error: number | ArrayLike<number>;
    readonly each: boolean;
  };
}

/** Checks the options and makes the choices left open. @throws as physicalProperties does */
export function settle(caller: string, catalogue: Catalogue, options: PhysicalPropertiesOptions): PropertySettings {
  const { metallicity = 0, rV = 3.1, law = 'CCM89', scale = 'composite', logGravity } = options;
  checkRange(caller, 'metallicity', metallicity, -4, 1, 'dex');
  const colour = options.colour ?? preferredColour(catalogue);
  if (colour === null) {
    throw new Error(
      `${caller}: ${catalogue.source} has no colour and no two magnitudes with known roles. Give roles when reading.`,
    );
  }
  bandsOfColour(colour);
  const band = options.magnitude ?? preferredMagnitude(catalogue, colour);
  if (band === null) {
    throw new Error(
      `${caller}: ${catalogue.source} has no magnitude to go with ${colour}. Give a role such as magnitude.V when reading.`,
    );
  }
  const ebv = withError(options.ebv);
  if (ebv === null) {
    throw new TypeError(
      `${caller}: ebv must be E(B-V) in mag, a number or a measured value, got ${describe(options.ebv)}; pass ebv: 0 for none.`,
    );
  }
  checkRange(caller, 'ebv', ebv.value, -0.2, 10, 'mag');
  const distance = settleDistance(caller, catalogue, options);
  if (logGravity !== undefined && typeof logGravity !== 'number' && logGravity.length !== catalogue.rowCount) {
    throw new RangeError(`${caller}: logGravity has ${logGravity.length} values for ${catalogue.rowCount} stars.`);
  }
  const temperatures = temperatureScale(caller, scale, colour);
  const corrections = CORRECTION_SCALES.find((s) => s.name === scale && s.bands.includes(band)) ?? CORRECTION_SCALES[0];
  const accuracy = { temperature: temperatures.accuracy, correction: corrections.accuracy };
  const scales = { scale, correctionScale: corrections.name, accuracy };
  return { colour, band, metallicity, ...scales, logGravity, rV, law, ebv, distance };
}

function settleDistance(
  caller: string,
  catalogue: Catalogue,
  options: PhysicalPropertiesOptions,
): PropertySettings['distance'] {
  const { distance, distanceError } = options;
  const one = withError(distance);
  if (one !== null) {
    if (distanceError !== undefined) {
      throw new TypeError(
        `${caller}: distanceError goes with distances given one a star; give one distance as a measured value.`,
      );
    }
    if (!(one.value > 0)) throw new RangeError(`${caller}: distance must be positive, in pc, got ${one.value}.`);
    return { value: one.value, error: one.error, each: false };
  }
  const list = (value: unknown, name: string): ArrayLike<number> => {
    const values = typeof value === 'string' ? catalogue.numbers(value) : (value as ArrayLike<number>);
    if (values === null || typeof values !== 'object' || typeof values.length !== 'number') {
      throw new TypeError(
        `${caller}: ${name} must be pc: a number, a measured value, a list or a column's name, got ${describe(value)}.`,
      );
    }
    if (values.length !== catalogue.rowCount) {
      throw new RangeError(`${caller}: ${name} has ${values.length} values for ${catalogue.rowCount} stars.`);
    }
    return values;
  };
  return {
    value: list(distance, 'distance'),
    error: distanceError === undefined ? 0 : list(distanceError, 'distanceError'),
    each: true,
  };
}

/** Value and half of the 68 % interval; null for what is neither a number nor a measured value. */
function withError(quantity: unknown): { value: number; error: number } | null {
  if (typeof quantity === 'number') return { value: quantity, error: 0 };
  if (quantity === null || typeof quantity !== 'object') return null;
  const { value, lower, upper } = quantity as Partial<Measured>;
  if (typeof value !== 'number' || typeof lower !== 'number' || typeof upper !== 'number') return null;
  return { value, error: (upper - lower) / 2 };
}
