import { evolve } from '../models/evolve';
import { mainSequenceLifetime } from '../models/lifetime';
import { zeroAge } from '../models/zero-age';
import { checkOptions } from '../quantity/options';

/** Least radius over that of the zero-age main sequence: the fits are good to a few per cent, metal-poor stars are smaller. */
const BELOW_ZERO_AGE = 0.85;
/** Greatest radius over the largest on the main sequence. */
const ABOVE_END = 1.05;
/** Dwarfs that hardly evolve may be this much larger than at zero age: active ones are by up to 15-20 % (common practice, no source). */
const INFLATED = 1.25;
/** No star is older, Gyr. */
const OLDEST = 14;
/** Shares of the main-sequence life among which the radius is largest: the end, or shortly before the hook. */
const LATE = [0.9, 0.95, 0.98, 0.9999];

/** Radii between which stars of a mass are on the main sequence, solar radii, shape (n). */
export interface MainSequenceRadii {
  readonly least: Float64Array;
  readonly greatest: Float64Array;
}

/**
 * Radii that main-sequence stars of given masses may have: from 0.85 times the zero-age radius to 1.05 times the largest radius
 * reached on the main sequence within 14 Gyr (or 1.25 times the zero-age radius, if that is more).
 * @param mass    solar masses, shape (n)
 * @param options metallicity: [Fe/H], dex, default 0
 * @returns solar radii; NaN where the mass lies outside the models (0.1 to 100)
 * @throws TypeError on an unknown option
 * @example mainSequenceRadii([1]).greatest[0] // => 1.71
 * Source: Tout et al. 1996, MNRAS 281, 257; Hurley, Pols & Tout 2000, MNRAS 315, 543; the margins are this library's.
 */
export function mainSequenceRadii(
  mass: ArrayLike<number>,
  options: { readonly metallicity?: number } = {},
): MainSequenceRadii {
  checkOptions('mainSequenceRadii', options, ['metallicity']);
  const { metallicity = 0 } = options;
  const young = zeroAge({ mass, metallicity }).radius;
  const lifetime = mainSequenceLifetime({ mass, metallicity });
  const greatest = Float64Array.from(young, (r, i) => {
    if (!(r > 0)) return Number.NaN;
    let largest = r;
    for (const share of LATE) {
      const age = Math.min(OLDEST, share * lifetime[i]);
      largest = Math.max(largest, evolve({ mass: mass[i], metallicity, age }).radius);
    }
    return Math.max(ABOVE_END * largest, INFLATED * r);
  });
  return Object.freeze({ least: young.map((r) => BELOW_ZERO_AGE * r), greatest });
}

/**
 * Which stars are on the main sequence, by mass and radius. See mainSequenceRadii for the limits; a star counts when its radius lies
 * within them by one standard error.
 * @param logMass, logRadius, logRadiusError log10 of solar units and dex, shape (n); NaN errors count as none
 * @returns 0 not known (no radius, mass outside the models), 1 on the main sequence, 2 larger, 3 smaller; shape (n)
 */
export function mainSequencePlace(
  logMass: Float64Array,
  logRadius: Float64Array,
  logRadiusError: Float64Array,
  metallicity: number,
): Uint8Array {
  const { least, greatest } = mainSequenceRadii(
    logMass.map((m) => 10 ** m),
    { metallicity },
  );
  return Uint8Array.from(logMass, (_, i) => {
    const error = Number.isFinite(logRadiusError[i]) ? logRadiusError[i] : 0;
    if (!Number.isFinite(logRadius[i]) || Number.isNaN(least[i])) return PLACE.unknown;
    if (logRadius[i] - error > Math.log10(greatest[i])) return PLACE.larger;
    return logRadius[i] + error < Math.log10(least[i]) ? PLACE.smaller : PLACE.on;
  });
}

/** Where a star stands by its radius. */
export const PLACE = { unknown: 0, on: 1, larger: 2, smaller: 3 } as const;

/** The rule in words, for results. */
export const MAIN_SEQUENCE_RULE =
  'main sequence: radius from 0.85 of the zero-age radius to 1.05 of the largest main-sequence radius of the models (or 1.25 of the zero-age radius), within one standard error';
