import type { Isochrone } from '../models/stellar-model';

/** Where stars lie nearest to an isochrone on the HR diagram, shape (n). */
export interface IsochronePlaces {
  /** Index of the nearest point, -1 where the star has no place. */
  readonly point: Int32Array;
  /** Distance there in units of the errors. */
  readonly sigmas: Float64Array;
}

/** Errors below which nothing is believed, dex: colours and models are not better. */
export const HR_FLOOR = { logTeff: 0.008, logL: 0.03 } as const;

/**
 * The nearest point of an isochrone to each star, both axes in units of the star's errors (at least 0.008 dex in temperature, 0.03 in
 * luminosity).
 * @param logTeff, logL, logTeffError, logLError shape (n); NaN errors count as none
 */
export function placeOnIsochrone(
  iso: Isochrone,
  logTeff: Float64Array,
  logL: Float64Array,
  logTeffError: Float64Array | null,
  logLError: Float64Array | null,
): IsochronePlaces {
  const n = logTeff.length;
  const point = new Int32Array(n).fill(-1);
  const sigmas = new Float64Array(n).fill(Number.NaN);
  for (let i = 0; i < n; i++) {
    if (!Number.isFinite(logTeff[i]) || !Number.isFinite(logL[i])) continue;
    const et = Math.hypot(HR_FLOOR.logTeff, logTeffError?.[i] || 0);
    const el = Math.hypot(HR_FLOOR.logL, logLError?.[i] || 0);
    let best = Number.POSITIVE_INFINITY;
    for (let k = 0; k < iso.count; k++) {
      const a = (iso.logTeff[k] - logTeff[i]) / et;
      const b = (iso.logL[k] - logL[i]) / el;
      const d = a * a + b * b;
      if (d < best) {
        best = d;
        point[i] = k;
      }
    }
    if (point[i] >= 0) sigmas[i] = Math.sqrt(best);
  }
  return { point, sigmas };
}
