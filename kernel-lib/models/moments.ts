import type { Fits } from './fits';
import { MASS_RANGE } from './metallicity';
import type { StarState } from './phases/phase';

/** A star whose mass can be set and that then answers for every moment of its life. Times in Myr. */
export interface LifeSource {
  /** Number of moments that cut a life into pieces. */
  readonly momentCount: number;
  setMass(mass: number): void;
  /** Time of a moment: two kinks of the hook, then the ends of the phases; see Life.moment and WindLife. */
  moment(k: number): number;
  phaseAt(time: number): number;
  stateIn(phase: number, time: number, out: StarState): void;
}

/** The moments of stars over the whole range of mass at one composition, from which roots are bracketed. */
export interface MomentTable {
  /** Rising, solar masses. */
  readonly mass: Float64Array;
  /** ln of the time in Myr, one column a moment. */
  readonly lnTime: readonly Float64Array[];
  /** Least and greatest entry of each column. */
  readonly least: Float64Array;
  readonly greatest: Float64Array;
}

/** Tabulates the moments: evenly in log mass, with extra masses where a fit changes its branch. */
export function makeMomentTable(fits: Fits, source: LifeSource, count = 200): MomentTable {
  const [low, high] = MASS_RANGE;
  const masses = new Set<number>();
  for (let i = 0; i < count; i++) masses.add(low * (high / low) ** (i / (count - 1)));
  // Helium burning takes much longer just below the flash limit, so its end is not monotonic there.
  for (let i = 0; i <= 24; i++) masses.add(fits.massFlash - 0.12 + i * 0.005);
  for (const special of [fits.massFlash, fits.massGiantBranch]) {
    masses.add(special * (1 - 1e-11));
    masses.add(special);
  }
  masses.add(high);
  const mass = Float64Array.from(masses).filter((m) => m >= low && m <= high);
  mass.sort();
  const lnTime = Array.from({ length: source.momentCount }, () => new Float64Array(mass.length));
  for (let j = 0; j < mass.length; j++) {
    source.setMass(mass[j]);
    for (let k = 0; k < source.momentCount; k++) lnTime[k][j] = Math.log(source.moment(k));
  }
  return {
    mass,
    lnTime,
    least: Float64Array.from(lnTime, (c) => c.reduce((a, b) => Math.min(a, b))),
    greatest: Float64Array.from(lnTime, (c) => c.reduce((a, b) => Math.max(a, b))),
  };
}

/**
 * Adds every mass at which moment k comes at the time given.
 * @param out masses are written from `at` on
 * @returns the next free place in `out`
 */
export function massesAtMoment(
  source: LifeSource,
  table: MomentTable,
  k: number,
  lnTime: number,
  out: Float64Array,
  at: number,
): number {
  if (lnTime < table.least[k] || lnTime > table.greatest[k]) return at;
  const column = table.lnTime[k];
  const { mass } = table;
  let place = at;
  for (let j = 1; j < column.length; j++) {
    const before = column[j - 1] - lnTime;
    const after = column[j] - lnTime;
    if (before === 0 || before * after >= 0) continue;
    if (place >= out.length) return place;
    out[place++] =
      mass[j] - mass[j - 1] < 1e-9 * mass[j] ? mass[j] : refine(source, k, lnTime, mass[j - 1], before, mass[j], after);
  }
  return place;
}

/** A bracketed root by the secant rule, an end that stays losing half its weight (Illinois rule). */
function refine(source: LifeSource, k: number, lnTime: number, m0: number, f0: number, m1: number, f1: number): number {
  let low = m0;
  let high = m1;
  let fLow = f0;
  let fHigh = f1;
  let side = 0;
  for (let step = 0; step < 60; step++) {
    const mid = (low * fHigh - high * fLow) / (fHigh - fLow);
    source.setMass(mid);
    const f = Math.log(source.moment(k)) - lnTime;
    if (Math.abs(f) < 2e-13 || high - low < 1e-13 * high) return mid;
    if (f * fLow > 0) {
      low = mid;
      fLow = f;
      if (side === 1) fHigh /= 2;
      side = 1;
    } else {
      high = mid;
      fHigh = f;
      if (side === -1) fLow /= 2;
      side = -1;
    }
  }
  return (low + high) / 2;
}
