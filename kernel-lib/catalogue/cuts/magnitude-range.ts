import { BAND_NAMES, type Band } from '../../quantity/band';
import { checkChoice, checkRange } from '../../quantity/options';
import type { Cut } from './cut';
import { withoutValueNote } from './without-value';

/**
 * Keeps stars between two magnitudes, both included. Rows without that magnitude fail.
 * @param band   one of U B V Rc Ic J H Ks G BP RP Hp
 * @param bright mag, the smaller number
 * @param faint  mag, the larger number
 * @throws RangeError when bright is not below faint; Error when the catalogue has no such magnitude
 * @example field.keep(magnitudeRange('G', 5, 18))
 */
export function magnitudeRange(band: Band, bright: number, faint: number): Cut {
  const caller = 'magnitudeRange';
  checkChoice(caller, 'band', band, BAND_NAMES);
  checkRange(caller, 'bright', bright, -50, 100, 'mag');
  checkRange(caller, 'faint', faint, -50, 100, 'mag');
  if (!(bright < faint)) {
    throw new RangeError(
      `${caller}: bright (${bright} mag) must be the smaller number, faint (${faint} mag) the larger.`,
    );
  }
  return Object.freeze({
    description: `${bright} <= ${band} <= ${faint} mag`,
    apply(catalogue) {
      const values = catalogue.numbers(`magnitude.${band}`);
      const mask = new Uint8Array(values.length);
      let without = 0;
      for (let i = 0; i < mask.length; i++) {
        if (Number.isNaN(values[i])) without++;
        else if (values[i] >= bright && values[i] <= faint) mask[i] = 1;
      }
      return { mask, note: withoutValueNote(without, band) };
    },
  } satisfies Cut);
}
