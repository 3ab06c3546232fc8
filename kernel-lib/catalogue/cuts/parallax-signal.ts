import { checkRange } from '../../quantity/options';
import type { Cut } from './cut';
import { withoutValueNote } from './without-value';

/**
 * Keeps stars whose parallax is at least so many times its standard error. Rows without either fail. Note that a cut on
 * the signal favours parallaxes measured too large (Lutz & Kelker 1973, PASP 85, 573): keep it low where distances follow.
 * @param min parallax / error, 0 or more
 * @throws Error when the catalogue has no parallax or no parallax error
 * @example field.keep(parallaxSignal(5))
 */
export function parallaxSignal(min: number): Cut {
  checkRange('parallaxSignal', 'min', min, 0, 1e9);
  return Object.freeze({
    description: `parallax / error >= ${min}`,
    apply(catalogue) {
      const parallax = catalogue.numbers('parallax');
      const error = catalogue.numbers('parallax.error');
      const mask = new Uint8Array(parallax.length);
      let without = 0;
      for (let i = 0; i < mask.length; i++) {
        if (Number.isNaN(parallax[i]) || !(error[i] > 0)) without++;
        else if (parallax[i] >= min * error[i]) mask[i] = 1;
      }
      return { mask, note: withoutValueNote(without, 'a parallax and a positive error') };
    },
  } satisfies Cut);
}
