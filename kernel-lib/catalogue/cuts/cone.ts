import { RADIANS_PER_DEGREE } from '../../quantity/constants';
import { checkOptions, checkRange } from '../../quantity/options';
import type { Cut } from './cut';
import { withoutValueNote } from './without-value';

/** A circle on the sky. */
export interface ConeOptions {
  /** Right ascension of the centre, deg. */
  readonly ra: number;
  /** Declination of the centre, deg. */
  readonly dec: number;
  /** Radius, deg, more than 0 and up to 180. */
  readonly radiusDeg: number;
}

/**
 * Keeps stars within an angle of a place on the sky, the rim included. Correct at the poles, through 0h and for the smallest
 * angles, since the haversine of the separation is compared (R. W. Sinnott 1984, Sky and Telescope 68, 159). Rows without
 * a position fail.
 * @throws RangeError when a value is out of range; Error when the catalogue has no position
 * @example field.keep(cone({ ra: 130.1, dec: 19.7, radiusDeg: 3 }))
 */
export function cone(options: ConeOptions): Cut {
  const caller = 'cone';
  checkOptions(caller, options, ['ra', 'dec', 'radiusDeg']);
  const { ra, dec, radiusDeg } = options;
  checkRange(caller, 'ra', ra, -360, 360, 'deg');
  checkRange(caller, 'dec', dec, -90, 90, 'deg');
  checkRange(caller, 'radiusDeg', radiusDeg, Number.MIN_VALUE, 180, 'deg');
  return Object.freeze({
    description: `within ${radiusDeg} deg of ra ${ra}, dec ${dec} deg`,
    apply(catalogue) {
      const ras = catalogue.numbers('rightAscension');
      const decs = catalogue.numbers('declination');
      const mask = new Uint8Array(ras.length);
      const cosDec = Math.cos(dec * RADIANS_PER_DEGREE);
      const limit = haversine(radiusDeg);
      let without = 0;
      for (let i = 0; i < mask.length; i++) {
        if (Number.isNaN(ras[i]) || Number.isNaN(decs[i])) {
          without++;
          continue;
        }
        const h = haversine(decs[i] - dec) + cosDec * Math.cos(decs[i] * RADIANS_PER_DEGREE) * haversine(ras[i] - ra);
        // Rounding may carry h of an antipode past 1.
        if (Math.min(h, 1) <= limit) mask[i] = 1;
      }
      return { mask, note: withoutValueNote(without, 'a position') };
    },
  } satisfies Cut);
}

/** sin^2 of half an angle in degrees. */
function haversine(degrees: number): number {
  const s = Math.sin(0.5 * degrees * RADIANS_PER_DEGREE);
  return s * s;
}
