import { checkOptions, checkRange } from '../../quantity/options';
import type { Catalogue } from '../catalogue';
import type { Cut } from './cut';
import { withoutValueNote } from './without-value';

/** Limits of `astrometricNoise`; at least one. */
export interface AstrometricNoiseOptions {
  /** Largest renormalised unit weight error (1 = a single star that the model fits). */
  readonly maxRuwe?: number;
  /** Largest excess noise of the astrometric solution, in the column's unit (mas in Gaia). */
  readonly maxExcessNoise?: number;
  /** Column of the renormalised unit weight error; found by the names below when left out. */
  readonly ruweColumn?: string;
  /** Column of the excess noise; found by the names below when left out. */
  readonly excessNoiseColumn?: string;
}

const RUWE_NAMES = ['ruwe', 'renormalised_unit_weight_error', 'RUWE'];
const NOISE_NAMES = ['astrometric_excess_noise', 'excess_noise', 'epsi', 'astrometricExcessNoise'];

/**
 * Keeps stars that a single-star astrometric solution fits: binaries and blends have a large unit weight error and excess
 * noise. Rows without a value fail. A limit of 1.4 on the unit weight error is common (L. Lindegren 2018, Gaia technical
 * note GAIA-C3-TN-LU-LL-124).
 * @throws Error when neither limit is given, or the catalogue has no such column
 * @example field.keep(astrometricNoise({ maxRuwe: 1.4 }))
 */
export function astrometricNoise(options: AstrometricNoiseOptions): Cut {
  const caller = 'astrometricNoise';
  checkOptions(caller, options, ['maxRuwe', 'maxExcessNoise', 'ruweColumn', 'excessNoiseColumn']);
  const { maxRuwe, maxExcessNoise } = options ?? {};
  if (maxRuwe === undefined && maxExcessNoise === undefined) {
    throw new TypeError(`${caller}: give a limit, for example astrometricNoise({ maxRuwe: 1.4 }).`);
  }
  if (maxRuwe !== undefined) checkRange(caller, 'maxRuwe', maxRuwe, 0, 1e6);
  if (maxExcessNoise !== undefined) checkRange(caller, 'maxExcessNoise', maxExcessNoise, 0, 1e6);
  const parts = [
    maxRuwe === undefined ? '' : `unit weight error <= ${maxRuwe}`,
    maxExcessNoise === undefined ? '' : `excess noise <= ${maxExcessNoise}`,
  ].filter((p) => p !== '');
  return Object.freeze({
    description: parts.join(' and '),
    apply(catalogue) {
      const mask = new Uint8Array(catalogue.rowCount).fill(1);
      const lacking = new Uint8Array(catalogue.rowCount);
      if (maxRuwe !== undefined) {
        limit(mask, lacking, columnOf(catalogue, options.ruweColumn, RUWE_NAMES, 'ruweColumn'), maxRuwe);
      }
      if (maxExcessNoise !== undefined) {
        const column = columnOf(catalogue, options.excessNoiseColumn, NOISE_NAMES, 'excessNoiseColumn');
        limit(mask, lacking, column, maxExcessNoise);
      }
      return {
        mask,
        note: withoutValueNote(
          lacking.reduce((a, b) => a + b, 0),
          'a value',
        ),
      };
    },
  } satisfies Cut);
}

function limit(mask: Uint8Array, lacking: Uint8Array, values: Float64Array, most: number): void {
  for (let i = 0; i < mask.length; i++) {
    if (Number.isNaN(values[i])) lacking[i] = 1;
    if (!(values[i] <= most)) mask[i] = 0;
  }
}

function columnOf(
  catalogue: Catalogue,
  given: string | undefined,
  names: readonly string[],
  option: string,
): Float64Array {
  if (given !== undefined) return catalogue.numbers(given);
  const lower = new Set(names.map((n) => n.toLowerCase()));
  const found = catalogue.columns.filter((c) => lower.has(c.name.toLowerCase()));
  if (found.length === 1) return catalogue.numbers(found[0].name);
  throw new Error(
    `astrometricNoise: ${catalogue.source} has ${found.length === 0 ? 'no column' : 'several columns'} named ${[...lower].join(' or ')}. Pass ${option}: 'column'.`,
  );
}
