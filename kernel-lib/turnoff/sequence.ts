import { initialMassFunction } from '../models/initial-mass-function';
import type { Isochrone } from '../models/stellar-model';
import type { Band } from '../quantity/band';

/**
 * A main sequence with its unresolved binaries in one diagram, as straight segments: place and run of each, and how many stars
 * of the initial mass function lie on it. Single stars come first, then binaries, one curve a mass ratio.
 */
export interface Sequence {
  readonly singles: number;
  readonly count: number;
  /** Colour and absolute magnitude of the start, and the steps to the end, mag; shape (count). */
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly dx: Float64Array;
  readonly dy: Float64Array;
  /** Relative number of stars, singles and binaries each adding up to 1; shape (count). */
  readonly weight: Float64Array;
}

/** Mass ratios stand at the middles of this many steps from 0.1 to 1, all alike. */
const RATIOS = 14;
const LEAST_RATIO = 0.1;
/** Phases taken as the sequence: main sequence and Hertzsprung gap. 255 has no label and is taken too. */
const LAST_PHASE = 1;

/**
 * The sequence of an isochrone: main sequence and subgiants, single and with companions of every mass ratio.
 * @param isochrone with the three bands
 * @returns null when it has no main sequence
 * Initial mass function: Kroupa 2001. Mass ratios: uniform from 0.1 to 1.
 */
export function sequenceOf(isochrone: Isochrone, blue: Band, red: Band, band: Band): Sequence | null {
  const { count, phase, initialMass, breaks } = isochrone;
  const columns = [blue, red, band].map((b) => isochrone.magnitudes[b] as Float64Array);
  let end = 0;
  while (end < count && (phase[end] <= LAST_PHASE || phase[end] === 255)) end++;
  if (end < 3) return null;
  const starts = new Uint8Array(count);
  for (const b of breaks) starts[b] = 1;
  // Number of stars between points, by the initial mass function.
  const gain = new Float64Array(end);
  for (let k = 0; k + 1 < end; k++) {
    const span = initialMass[k + 1] - initialMass[k];
    if (span > 0) gain[k] = span * initialMassFunction('kroupa2001', 0.5 * (initialMass[k] + initialMass[k + 1]));
  }
  const most = (end - 1) * (RATIOS + 1);
  const out = {
    x: new Float64Array(most),
    y: new Float64Array(most),
    dx: new Float64Array(most),
    dy: new Float64Array(most),
    weight: new Float64Array(most),
  };
  const pairX = new Float64Array(end);
  const pairY = new Float64Array(end);
  let at = 0;
  const joins = (k: number) => !starts[k + 1] && Number.isFinite(pairX[k + 1] + pairY[k + 1]);
  const add = (stray: number): number => {
    const first = at;
    let total = 0;
    for (let k = 0; k + 1 < end; ) {
      if (!Number.isFinite(pairX[k] + pairY[k]) || !joins(k)) {
        k++;
        continue;
      }
      let to = k + 1;
      while (to + 1 < end && joins(to) && isStraight(pairX, pairY, gain, k, to + 1, stray)) to++;
      let weight = 0;
      for (let i = k; i < to; i++) weight += gain[i];
      if (weight > 0) {
        out.x[at] = pairX[k];
        out.y[at] = pairY[k];
        out.dx[at] = pairX[to] - pairX[k];
        out.dy[at] = pairY[to] - pairY[k];
        out.weight[at] = weight;
        total += weight;
        at++;
      }
      k = to;
    }
    for (let k = first; k < at; k++) out.weight[k] /= total;
    return at;
  };
  for (let k = 0; k < end; k++) {
    pairX[k] = columns[0][k] - columns[1][k];
    pairY[k] = columns[2][k];
  }
  const singles = add(STRAY_SINGLE);
  for (let j = 0; j < RATIOS; j++) {
    const ratio = LEAST_RATIO + ((1 - LEAST_RATIO) * (j + 0.5)) / RATIOS;
    let low = 0;
    for (let k = 0; k < end; k++) {
      const mass = ratio * initialMass[k];
      while (low + 2 < end && initialMass[low + 1] < mass) low++;
      const dark = mass < initialMass[0];
      const share = dark ? 0 : Math.min(1, (mass - initialMass[low]) / (initialMass[low + 1] - initialMass[low] || 1));
      const combined = (c: Float64Array) =>
        dark ? c[k] : c[k] - 2.5 * Math.log10(1 + 10 ** (-0.4 * (c[low] + share * (c[low + 1] - c[low]) - c[k])));
      pairX[k] = combined(columns[0]) - combined(columns[1]);
      pairY[k] = combined(columns[2]);
    }
    add(STRAY_BINARY);
  }
  for (let k = singles; k < at; k++) out.weight[k] /= RATIOS;
  return { singles, count: at, ...out };
}

/** What a segment may stray from the curve in colour, mag, and four times that in magnitude: less than what photometry resolves. */
const STRAY_SINGLE = 0.0005;
const STRAY_BINARY = 0.0015;

/** Whether points from one to another can stand as one segment, with stars spread evenly along it. */
function isStraight(
  x: Float64Array,
  y: Float64Array,
  gain: Float64Array,
  from: number,
  to: number,
  stray: number,
): boolean {
  let total = 0;
  for (let i = from; i < to; i++) total += gain[i];
  if (!(total > 0)) return false;
  let part = 0;
  for (let i = from + 1; i < to; i++) {
    part += gain[i - 1];
    const share = part / total;
    if (Math.abs(x[i] - x[from] - share * (x[to] - x[from])) > stray) return false;
    if (Math.abs(y[i] - y[from] - share * (y[to] - y[from])) > 4 * stray) return false;
  }
  return true;
}
