import type { Catalogue } from '../catalogue/catalogue';
import { type Band, bandsOfColour, type ColourName } from '../quantity/band';

/** A colour index of every star. */
export interface ObservedColour {
  /** mag, shape (n); NaN where missing. */
  readonly values: Float64Array;
  /** Standard errors, mag, shape (n); NaN where unknown. */
  readonly errors: Float64Array;
  /** True when made from two magnitudes, so that it shares their errors; false when the catalogue has a column of its own. */
  readonly fromMagnitudes: boolean;
}

/** Colours that can stand on the horizontal axis, best for temperatures first. */
const PREFERRED: readonly ColourName[] = ['BP-RP', 'B-V', 'V-Ic', 'V-Ks', 'G-RP', 'BP-G', 'V-Rc', 'J-Ks', 'J-H'];

/** Whether a catalogue has a colour, as a column or as two magnitudes. */
export function hasColour(catalogue: Catalogue, colour: ColourName): boolean {
  const { blue, red } = bandsOfColour(colour);
  return catalogue.has(`colour.${colour}`) || (catalogue.has(`magnitude.${blue}`) && catalogue.has(`magnitude.${red}`));
}

/** The colour that suits a catalogue: Gaia's before Johnson's, null when it has none. */
export function preferredColour(catalogue: Catalogue): ColourName | null {
  return PREFERRED.find((colour) => hasColour(catalogue, colour)) ?? null;
}

/** The magnitude that goes with a colour: G with Gaia colours, V with Johnson's, else a band of the colour; null when there is none. */
export function preferredMagnitude(catalogue: Catalogue, colour: ColourName): Band | null {
  const { blue, red } = bandsOfColour(colour);
  const gaia = [blue, red].some((band) => ['G', 'BP', 'RP'].includes(band));
  const order: Band[] = gaia ? ['G', red, blue, 'V'] : ['V', red, blue, 'G'];
  return order.find((band) => catalogue.has(`magnitude.${band}`)) ?? null;
}

/**
 * A colour index of every star: the catalogue's own column if it has one, else the difference of two magnitudes, with
 * errors added in quadrature.
 * @param caller name of the public function, for messages
 * @throws Error when the catalogue has neither
 */
export function observedColour(caller: string, catalogue: Catalogue, colour: ColourName): ObservedColour {
  const n = catalogue.rowCount;
  const missing = () => new Float64Array(n).fill(Number.NaN);
  if (catalogue.has(`colour.${colour}`)) {
    const errors = catalogue.has(`colour.${colour}.error`) ? catalogue.numbers(`colour.${colour}.error`) : missing();
    return { values: catalogue.numbers(`colour.${colour}`), errors, fromMagnitudes: false };
  }
  const { blue, red } = bandsOfColour(colour);
  const absent = [blue, red].filter((band) => !catalogue.has(`magnitude.${band}`));
  if (absent.length > 0) {
    throw new Error(
      `${caller}: ${catalogue.source} has no colour ${colour}: neither a column with the role colour.${colour}, nor ` +
        `${absent.map((b) => `magnitude.${b}`).join(' and ')}. Give the roles when reading, or choose another colour.`,
    );
  }
  const b = catalogue.numbers(`magnitude.${blue}`);
  const r = catalogue.numbers(`magnitude.${red}`);
  const eb = catalogue.has(`magnitude.${blue}.error`) ? catalogue.numbers(`magnitude.${blue}.error`) : missing();
  const er = catalogue.has(`magnitude.${red}.error`) ? catalogue.numbers(`magnitude.${red}.error`) : missing();
  const values = new Float64Array(n);
  const errors = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    values[i] = b[i] - r[i];
    errors[i] = Math.hypot(eb[i], er[i]);
  }
  return { values, errors, fromMagnitudes: true };
}
