import type { Fits } from './fits';
import { MASS_RANGE } from './metallicity';
import { type LifeSource, type MomentTable, massesAtMoment } from './moments';
import { followPath, MOST_PIECES, type PathPoints, type PathSource, Pieces } from './path';
import { PHASE, type StarState } from './phases/phase';

const cuts = new Float64Array(MOST_PIECES);
const pieces = new Pieces();

/** Stars of one age: the parameter of the path is the initial mass. */
class SameAge implements PathSource {
  source: LifeSource | null = null;
  time = 0;

  sample(phase: number, mass: number, out: StarState): void {
    const source = this.source as LifeSource;
    source.setMass(mass);
    source.stateIn(phase, this.time, out);
  }
}

const sameAge = new SameAge();

/**
 * The curve of all shining stars at a time, at equal steps on the HR diagram; the parameter is the initial mass.
 * @param time   Myr
 * @param points number of points
 */
export function traceCurve(
  fits: Fits,
  source: LifeSource,
  table: MomentTable,
  time: number,
  points: number,
): PathPoints {
  cutIntoPieces(fits, source, table, time);
  sameAge.source = source;
  sameAge.time = time;
  return followPath(sameAge, pieces, points);
}

/** Finds the masses between which nothing but the mass changes: same phase, same branch of the fits. */
function cutIntoPieces(fits: Fits, source: LifeSource, table: MomentTable, time: number): void {
  const lnTime = Math.log(time);
  let count = 0;
  cuts[count++] = MASS_RANGE[0];
  for (let k = 0; k < source.momentCount; k++) {
    const from = count;
    count = Math.min(MOST_PIECES - 3, massesAtMoment(source, table, k, lnTime, cuts, count));
    // Stars without a hook have no kink there.
    if (k < 2) for (let i = count - 1; i >= from; i--) if (cuts[i] <= fits.massHook) count = i;
  }
  // Limits between kinds of giants matter only where there are giants.
  const turnoff = Math.min(...cuts.subarray(1, Math.max(2, count)));
  if (count > 1) {
    for (const limit of [fits.massFlash, fits.massGiantBranch]) if (limit > turnoff) cuts[count++] = limit;
  }
  cuts[count++] = MASS_RANGE[1];
  cuts.subarray(0, count).sort();
  pieces.count = 0;
  for (let i = 1; i < count; i++) {
    source.setMass(0.5 * (cuts[i - 1] + cuts[i]));
    const phase = source.phaseAt(time);
    // White dwarfs and other remnants are no part of the curve.
    if (phase < PHASE.heliumWhiteDwarf) pieces.add(cuts[i - 1], cuts[i], phase);
  }
}

/** Span of initial mass of each point: half-way to its neighbours within its unbroken run. */
export function massSpans(initialMass: Float64Array, breaks: ArrayLike<number>): Float64Array {
  const n = initialMass.length;
  const out = new Float64Array(n);
  for (let r = 0; r < breaks.length; r++) {
    const first = breaks[r];
    const last = (r + 1 < breaks.length ? breaks[r + 1] : n) - 1;
    for (let i = first; i <= last; i++) {
      out[i] = 0.5 * (initialMass[Math.min(i + 1, last)] - initialMass[Math.max(i - 1, first)]);
    }
  }
  return out;
}
