import { checkOptions, describe } from '../quantity/options';
import { DWARF_ROWS } from './dwarf-table';

/** Luminosity class: V dwarfs, III giants, I supergiants. */
export type LuminosityClass = 'V' | 'III' | 'I';

/** One letter of the sequence with the temperatures it spans. */
export interface SpectralClassBounds {
  readonly letter: string;
  /** K. */
  readonly cool: number;
  /** K. */
  readonly hot: number;
}

const SCALE: readonly { readonly type: string; readonly temperature: number }[] = DWARF_ROWS.map((row) => ({
  type: row[0],
  temperature: row[1],
}));

/** The letters O to M with the temperatures (K) between which they lie for dwarfs, hot to cool. */
export const SPECTRAL_CLASSES: readonly SpectralClassBounds[] = Object.freeze(
  ['O', 'B', 'A', 'F', 'G', 'K', 'M'].map((letter) => {
    const first = SCALE.findIndex((s) => s.type[0] === letter);
    let last = first;
    while (last + 1 < SCALE.length && SCALE[last + 1].type[0] === letter) last++;
    return Object.freeze({
      letter,
      hot: first === 0 ? SCALE[0].temperature : between(SCALE[first - 1].temperature, SCALE[first].temperature),
      cool:
        last === SCALE.length - 1
          ? SCALE[last].temperature
          : between(SCALE[last].temperature, SCALE[last + 1].temperature),
    });
  }),
);

function between(a: number, b: number): number {
  return Math.sqrt(a * b);
}

/**
 * Spectral class of the tabulated dwarf that is nearest in temperature.
 * @param temperature K
 * @returns such as 'G2'; '' when missing or outside O3 to M9.5
 */
export function spectralClass(
  temperature: number,
  options: { readonly luminosityClass?: LuminosityClass } = {},
): string {
  checkOptions('spectralClass', options, ['luminosityClass']);
  if (typeof temperature !== 'number')
    throw new TypeError(`spectralClass: temperature must be a number, got ${describe(temperature)}.`);
  if (!(temperature <= SCALE[0].temperature * 1.03 && temperature >= SCALE[SCALE.length - 1].temperature * 0.98))
    return '';
  let best = SCALE[0];
  for (const s of SCALE) {
    if (Math.abs(Math.log(s.temperature / temperature)) < Math.abs(Math.log(best.temperature / temperature))) best = s;
  }
  return best.type;
}
