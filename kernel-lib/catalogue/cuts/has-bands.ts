import { BAND_NAMES, type Band } from '../../quantity/band';
import { checkChoice } from '../../quantity/options';
import type { Cut } from './cut';

/**
 * Keeps stars that have a magnitude in every one of the bands.
 * @param bands one or more of U B V Rc Ic J H Ks G BP RP Hp
 * @throws Error when the catalogue has no such magnitude
 * @example field.keep(hasBands('G', 'BP', 'RP'))
 */
export function hasBands(...bands: readonly Band[]): Cut {
  if (bands.length === 0) throw new TypeError(`hasBands: name at least one band of ${BAND_NAMES.join(', ')}.`);
  for (const band of bands) checkChoice('hasBands', 'band', band, BAND_NAMES);
  return Object.freeze({
    description: `has ${bands.join(', ')}`,
    apply(catalogue) {
      const mask = new Uint8Array(catalogue.rowCount).fill(1);
      const counts = bands.map((band) => {
        const values = catalogue.numbers(`magnitude.${band}`);
        let lacking = 0;
        for (let i = 0; i < mask.length; i++) {
          if (Number.isFinite(values[i])) continue;
          mask[i] = 0;
          lacking++;
        }
        return lacking === 0 ? '' : `${lacking} without ${band}`;
      });
      return { mask, note: counts.filter((c) => c !== '').join(', ') };
    },
  } satisfies Cut);
}
