import { checkChoice, checkOptions, describe } from '../quantity/options';
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

interface TypeTemperature {
  readonly type: string;
  readonly temperature: number;
}

/** 'G5 5050, G8 4800' as a list. */
function typeList(text: string): readonly TypeTemperature[] {
  return text.split(', ').map((entry) => {
    const [type, temperature] = entry.split(' ');
    return { type, temperature: Number(temperature) };
  });
}

const DWARFS: readonly TypeTemperature[] = DWARF_ROWS.map((row) => ({ type: row[0], temperature: row[1] }));

/**
 * Drilling & Landolt 2000, in Allen's Astrophysical Quantities, 4th edition, Table 15.7; F5 and G0 Schmidt-Kaler 1982, Landolt-Boernstein
 * VI/2b; F0 as a dwarf. From memory.
 */
const GIANTS = typeList(
  'F0 7220, F5 6470, G0 5850, G5 5050, G8 4800, K0 4660, K2 4390, K5 4050, M0 3690, M2 3540, M5 3380',
);
const SUPERGIANTS = typeList(
  'O9 32000, B2 17600, B5 13600, B8 11100, A0 9980, A2 9380, A5 8610, F0 7460, F2 7030, F5 6370, F8 5750, G0 5370, G2 5190, G5 4930, ' +
    'G8 4700, K0 4550, K2 4310, K5 3990, M0 3620, M2 3370, M5 2880',
);

const LETTERS = ['O', 'B', 'A', 'F', 'G', 'K', 'M'];

/** The letters O to M with the temperatures (K) between which they lie for dwarfs, hot to cool, for the axis of a diagram. */
export const SPECTRAL_CLASSES: readonly SpectralClassBounds[] = Object.freeze(
  LETTERS.map((letter) => {
    const first = DWARFS.findIndex((s) => s.type[0] === letter);
    const next = DWARFS.findIndex((s, i) => i > first && s.type[0] !== letter);
    const hot = first === 0 ? DWARFS[0].temperature : between(DWARFS, first);
    const cool = next < 0 ? DWARFS[DWARFS.length - 1].temperature : between(DWARFS, next);
    return Object.freeze({ letter, cool: Math.round(cool), hot: Math.round(hot) });
  }),
);

/** Where a type gives way to the one before it: the geometric mean of their temperatures, K. */
function between(types: readonly TypeTemperature[], i: number): number {
  return Math.sqrt(types[i - 1].temperature * types[i].temperature);
}

/** Step beyond its hottest and coolest type that a scale still takes, as a fraction of temperature. */
const MARGIN = 0.04;

/**
 * Spectral class of a star of a temperature.
 * @param temperature effective, K
 * @param options     luminosityClass: V (default), III or I; when given it is written behind the class. Giants hotter than F0 are classed
 *   as dwarfs.
 * @returns such as 'G2' or 'K0III', the nearest type in log temperature: for dwarfs those of the table (O3 to M9.5, halves where it has them),
 *   for others whole subclasses; '' when the temperature is missing or outside the types
 * @throws TypeError when the temperature is no number, for an unknown option or class
 * @example spectralClass(5772) // => 'G2'
 * @example spectralClass(4750, { luminosityClass: 'III' }) // => 'G9III'
 * Sources: Pecaut & Mamajek 2013, on-line version 2024.05.15; giants and supergiants by Drilling & Landolt 2000 (from memory).
 */
export function spectralClass(
  temperature: number,
  options: { readonly luminosityClass?: LuminosityClass } = {},
): string {
  checkOptions('spectralClass', options, ['luminosityClass']);
  const { luminosityClass } = options;
  if (typeof temperature !== 'number') {
    throw new TypeError(`spectralClass: temperature must be a number in K, got ${describe(temperature)}.`);
  }
  if (luminosityClass === undefined) return nearestDwarf(temperature);
  checkChoice('spectralClass', 'luminosityClass', luminosityClass, ['V', 'III', 'I'] as const);
  const type =
    luminosityClass === 'I'
      ? wholeSubclass(SUPERGIANTS, temperature)
      : luminosityClass === 'III' && temperature < GIANTS[0].temperature
        ? wholeSubclass(GIANTS, temperature)
        : nearestDwarf(temperature);
  return type === '' ? '' : type + luminosityClass;
}

function nearestDwarf(temperature: number): string {
  const hottest = DWARFS[0].temperature * (1 + MARGIN);
  const coolest = DWARFS[DWARFS.length - 1].temperature * (1 - MARGIN);
  if (!(temperature >= coolest && temperature <= hottest)) return '';
  let i = 0;
  while (i + 1 < DWARFS.length && temperature < between(DWARFS, i + 1)) i++;
  return DWARFS[i].type;
}

/** Number of subclasses from O0. */
function subclass(type: string): number {
  return 10 * LETTERS.indexOf(type[0]) + Number(type.slice(1));
}

/** Nearest whole subclass, the scale being interpolated in log temperature. */
function wholeSubclass(types: readonly TypeTemperature[], temperature: number): string {
  const last = types.length - 1;
  if (!(temperature >= types[last].temperature * (1 - MARGIN) && temperature <= types[0].temperature * (1 + MARGIN)))
    return '';
  let i = 0;
  while (i < last - 1 && temperature < types[i + 1].temperature) i++;
  const [a, b] = [types[i], types[i + 1]];
  const part = Math.log(temperature / a.temperature) / Math.log(b.temperature / a.temperature);
  const held = Math.min(1, Math.max(0, part));
  const number = Math.round(subclass(a.type) + held * (subclass(b.type) - subclass(a.type)));
  return LETTERS[Math.floor(number / 10)] + (number % 10);
}
