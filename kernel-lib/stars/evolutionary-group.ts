import type { Catalogue } from '../catalogue/catalogue';
import { SOLAR_TEMPERATURE } from '../quantity/constants';
import { checkOptions, describe } from '../quantity/options';
import { STAR_COLUMNS } from './columns';
import { type HrLine, lineAt, TERMINAL_AGE_LINE, ZERO_AGE_LINE } from './main-sequence-band';

/** Where a star stands in its life, as far as its place on the HR diagram tells. */
export type EvolutionaryGroup =
  | 'main sequence'
  | 'turnoff'
  | 'subgiants'
  | 'giants'
  | 'supergiants'
  | 'white dwarfs'
  | 'other';

/** Every group, in the order of a star's life. */
export const EVOLUTIONARY_GROUPS: readonly EvolutionaryGroup[] = [
  'main sequence',
  'turnoff',
  'subgiants',
  'giants',
  'supergiants',
  'white dwarfs',
  'other',
];

/** Options of `evolutionaryGroup` and `evolutionaryGroups`. */
export interface EvolutionaryGroupOptions {
  /** The cluster's turnoff point; without it no star is called turnoff. */
  readonly turnoff?: { readonly logTeff: number; readonly logL: number };
  /** Zero-age main sequence. Default: Tout et al. 1996 at Z = 0.0188. */
  readonly zeroAge?: HrLine;
  /** End of the main sequence. Default: Hurley, Pols & Tout 2000 at Z = 0.0188. */
  readonly terminalAge?: HrLine;
}

const OPTIONS = ['turnoff', 'zeroAge', 'terminalAge'];
const LOG_SOLAR_TEMPERATURE = Math.log10(SOLAR_TEMPERATURE);

/** White dwarfs are smaller than this, solar radii: three times the largest common one, a third of the smallest dwarf. */
const WHITE_DWARF_RADIUS = 0.05;
/** The main sequence reaches this far below the zero-age line and, where that is more, above it, dex. */
const BAND = 0.6;
/** Allowed above the end of the main sequence for errors and close pairs, dex. */
const PAST_END = 0.05;
/** Stars this near the turnoff point on the main sequence are called turnoff, dex. */
const NEAR_TURNOFF = { logTeff: 0.03, logL: 0.25 };

/**
 * Least luminosity of supergiants: over cool giants, which reach 10^4 L on the asymptotic branch; at the Cepheids and
 * other yellow stars of class Ib; and over the hot giants. Convention of this library.
 */
const SUPERGIANT_LINE: HrLine = { logTeff: [3.3, 3.6, 3.7, 3.9, 4.0, 4.7], logL: [4.2, 4.2, 3, 3, 3.9, 3.9] };

/**
 * The group of one star by its place on the HR diagram. Rules, a convention of this library, with the lines by Tout et al.
 * 1996 and Hurley, Pols & Tout 2000 unless others are given:
 * - white dwarfs: radius below 0.05 solar;
 * - main sequence: from 0.6 dex below the zero-age line to the end of the main sequence (and at least 0.6 dex above the
 *   zero-age line, where unresolved pairs lie); hotter than 27,900 K everything above counts, since there the end of the
 *   main sequence turns back;
 * - turnoff: main sequence within 0.03 dex in temperature and 0.25 dex in luminosity of the turnoff point, if given;
 * - supergiants: past the main sequence and above 10^3 (yellow) to 10^4.2 (red) solar luminosities;
 * - subgiants: past the main sequence and hotter than the giant branch: 4840 K below 10 L, rising to 5500 K above 25 L, so
 *   that stars crossing to the giant branch are counted here whatever their luminosity class;
 * - giants: the rest of those past the main sequence;
 * - other: below the main sequence, or above it but too faint to have left it (stars not yet on it, bad photometry).
 * @param logTeff log10 of effective temperature in K
 * @param logL    log10 of luminosity in solar units
 * @returns the group; null when a value is missing or the temperature lies outside the zero-age line (2800-44,500 K) and the
 *   star is neither a white dwarf nor a cool giant
 * @throws TypeError for an unknown option
 * @example evolutionaryGroup(Math.log10(5772), 0) // => 'main sequence'
 * @example evolutionaryGroup(3.59, 2.64) // => 'giants' (Aldebaran)
 */
export function evolutionaryGroup(
  logTeff: number,
  logL: number,
  options: EvolutionaryGroupOptions = {},
): EvolutionaryGroup | null {
  checkOptions('evolutionaryGroup', options, OPTIONS);
  return groupOf(logTeff, logL, options);
}

/**
 * Adds the column `group` to a catalogue with log_teff and log_l: see evolutionaryGroup for the rules.
 * @param catalogue made by physicalProperties
 * @throws Error when the columns log_teff and log_l are missing, TypeError for an unknown option
 * @example evolutionaryGroups(stars, { turnoff: { logTeff: 3.9, logL: 1.4 } })
 */
export function evolutionaryGroups(catalogue: Catalogue, options: EvolutionaryGroupOptions = {}): Catalogue {
  const caller = 'evolutionaryGroups';
  checkOptions(caller, options, OPTIONS);
  const { turnoff } = options;
  if (turnoff !== undefined && !(Number.isFinite(turnoff?.logTeff) && Number.isFinite(turnoff?.logL))) {
    throw new TypeError(`${caller}: turnoff must be { logTeff, logL }, two finite numbers, got ${describe(turnoff)}.`);
  }
  for (const name of [STAR_COLUMNS.logTeff, STAR_COLUMNS.logL]) {
    if (catalogue.has(name)) continue;
    throw new Error(`${caller}: ${catalogue.source} has no column ${name}; call physicalProperties first.`);
  }
  const logTeff = catalogue.numbers(STAR_COLUMNS.logTeff);
  const logL = catalogue.numbers(STAR_COLUMNS.logL);
  const groups = Array.from(logTeff, (t, i) => groupOf(t, logL[i], options));
  const counts = EVOLUTIONARY_GROUPS.map((g) => [g, groups.filter((x) => x === g).length] as const).filter(
    ([, n]) => n > 0,
  );
  const unplaced = groups.filter((g) => g === null).length;
  const note = [...counts.map(([g, n]) => `${n} ${g}`), ...(unplaced > 0 ? [`${unplaced} without a place`] : [])].join(
    ', ',
  );
  const description = 'evolutionary group by place on the HR diagram';
  return catalogue.withColumns([{ name: STAR_COLUMNS.group, values: groups, description }], 'evolutionary groups', {
    note,
  });
}

function groupOf(logTeff: number, logL: number, options: EvolutionaryGroupOptions): EvolutionaryGroup | null {
  if (!Number.isFinite(logTeff) || !Number.isFinite(logL)) return null;
  const logRadius = 0.5 * logL - 2 * (logTeff - LOG_SOLAR_TEMPERATURE);
  if (logRadius < Math.log10(WHITE_DWARF_RADIUS)) return 'white dwarfs';
  const { zeroAge = ZERO_AGE_LINE, terminalAge = TERMINAL_AGE_LINE, turnoff } = options;
  const zero = lineAt(zeroAge, logTeff);
  if (Number.isNaN(zero)) {
    // Cooler than the zero-age line only giants and supergiants are bright.
    if (logTeff < zeroAge.logTeff[0] && logL > 1) return pastMainSequence(logTeff, logL);
    return null;
  }
  if (logL < zero - BAND) return 'other';
  if (logL <= upperEdge(terminalAge, logTeff, zero))
    return isTurnoff(logTeff, logL, turnoff) ? 'turnoff' : 'main sequence';
  return logL > 0 ? pastMainSequence(logTeff, logL) : 'other';
}

function upperEdge(terminalAge: HrLine, logTeff: number, zero: number): number {
  if (logTeff > terminalAge.logTeff[terminalAge.logTeff.length - 1]) return Number.POSITIVE_INFINITY;
  const end = lineAt(terminalAge, logTeff);
  return Number.isNaN(end) ? zero + BAND : Math.max(end + PAST_END, zero + BAND);
}

function isTurnoff(logTeff: number, logL: number, turnoff: EvolutionaryGroupOptions['turnoff']): boolean {
  if (turnoff === undefined) return false;
  return (
    Math.abs(logTeff - turnoff.logTeff) <= NEAR_TURNOFF.logTeff && Math.abs(logL - turnoff.logL) <= NEAR_TURNOFF.logL
  );
}

function pastMainSequence(logTeff: number, logL: number): EvolutionaryGroup {
  if (logL >= lineAt(SUPERGIANT_LINE, logTeff)) return 'supergiants';
  const ramp = Math.min(1, Math.max(0, (logL - 1) / 0.4));
  return logTeff > 3.685 + ramp * 0.055 ? 'subgiants' : 'giants';
}
