import { isochrone } from '../models/isochrone';
import { PHASE } from '../models/phases/phase';
import { zeroAge } from '../models/zero-age';
import { SOLAR_TEMPERATURE } from '../quantity/constants';

/** The main sequence of the models as functions of log mass, ascending, shape (n). */
export interface ModelSequence {
  readonly logMass: Float64Array;
  readonly logL: Float64Array;
  readonly logR: Float64Array;
  readonly words: string;
}

/** Main sequence of an age in Gyr, or of zero age where none is given. */
export function modelSequence(age: number | undefined, metallicity: number): ModelSequence {
  if (age === undefined) {
    const mass = Float64Array.from({ length: 300 }, (_, i) => 0.1 * 1000 ** (i / 299));
    const { luminosity, radius } = zeroAge({ mass, metallicity });
    return {
      logMass: mass.map(Math.log10),
      logL: luminosity.map(Math.log10),
      logR: radius.map(Math.log10),
      words: 'zero age',
    };
  }
  const iso = isochrone({ logAge: 9 + Math.log10(age), metallicity, bands: [], points: 1000 });
  const rows: number[] = [];
  for (let i = 0; i < iso.count; i++) {
    if (iso.phase[i] !== PHASE.mainSequence) continue;
    // Past the hook the mass hardly grows; a mass then stands for its first point.
    if (rows.length > 0 && !(iso.initialMass[i] > iso.initialMass[rows[rows.length - 1]])) continue;
    rows.push(i);
  }
  const take = (f: (i: number) => number) => Float64Array.from(rows, f);
  return {
    logMass: take((i) => Math.log10(iso.initialMass[i])),
    logL: take((i) => iso.logL[i]),
    logR: take((i) => 0.5 * iso.logL[i] - 2 * (iso.logTeff[i] - Math.log10(SOLAR_TEMPERATURE))),
    words: `age ${Number(age.toPrecision(4))} Gyr`,
  };
}

/** Linear interpolation in ascending x; NaN outside. */
export function interpolate(x: ArrayLike<number>, y: ArrayLike<number>, at: number): number {
  const n = x.length;
  if (n < 2 || !(at >= x[0] && at <= x[n - 1])) return Number.NaN;
  let low = 0;
  let high = n - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (x[middle] <= at) low = middle;
    else high = middle;
  }
  const width = x[high] - x[low];
  return width > 0 ? y[low] + ((at - x[low]) / width) * (y[high] - y[low]) : y[low];
}

/** The rising part of a curve, so that it can be read the other way: points where y is above all before. */
export function risingPart(x: ArrayLike<number>, y: ArrayLike<number>): { x: Float64Array; y: Float64Array } {
  const keep: number[] = [];
  for (let i = 0; i < x.length; i++) if (keep.length === 0 || y[i] > y[keep[keep.length - 1]]) keep.push(i);
  return { x: Float64Array.from(keep, (i) => x[i]), y: Float64Array.from(keep, (i) => y[i]) };
}
