import type { Band } from '../../quantity/band';
import { SOLAR_LOG_GRAVITY, SOLAR_TEMPERATURE } from '../../quantity/constants';
import { NO_PHASE } from '../evolve';
import { PHASE } from '../phases/phase';
import type { GridRows } from './grid-columns';

/** Columns that are interpolated, in this order; the magnitudes follow. */
export const FIXED_COLUMNS = 5;

/** One stored isochrone, with its evolutionary coordinate: phase and share of the way through the phase. */
export interface GridCurve {
  readonly logAge: number;
  readonly metallicity: number;
  readonly count: number;
  readonly phase: Uint8Array;
  /** 0 at the start of a phase, 1 at its end. */
  readonly share: Float64Array;
  /** ln of initial mass, ln of mass, log L, log Teff, log gravity, then the bands. */
  readonly columns: readonly Float64Array[];
  /** First and last index of each phase present, in order. */
  readonly phases: readonly { readonly phase: number; readonly first: number; readonly last: number }[];
}

/** Makes a curve of the rows given, already in order. */
export function makeCurve(rows: GridRows, order: Uint32Array, bands: readonly Band[]): GridCurve {
  const n = order.length;
  const take = (source: Float64Array) => Float64Array.from(order, (i) => source[i]);
  const nothing = () => new Float64Array(n).fill(Number.NaN);
  const initialMass = take(rows.initialMass);
  const mass = take(rows.mass);
  const logL = rows.logL === null ? nothing() : take(rows.logL);
  const logTeff = rows.logTeff === null ? nothing() : take(rows.logTeff);
  const magnitudes = bands.map((b) => take(rows.magnitudes[b] as Float64Array));
  const solar = SOLAR_LOG_GRAVITY - 4 * Math.log10(SOLAR_TEMPERATURE);
  const logGravity =
    rows.logGravity === null
      ? logL.map((l, i) => solar + Math.log10(mass[i]) + 4 * logTeff[i] - l)
      : take(rows.logGravity);
  const drawn = rows.logL !== null && rows.logTeff !== null;
  const x = drawn ? logTeff.map((t) => 8 * t) : magnitudes[0].map((m, i) => 1.5 * (m - magnitudes[1][i]));
  const y = drawn ? logL : magnitudes[1].map((m) => -0.4 * m);
  const phase = rows.phase === null ? landmarks(x, y) : Uint8Array.from(order, (i) => (rows.phase as Uint8Array)[i]);
  const phases = spans(phase);
  const share = new Float64Array(n);
  for (const { phase: p, first, last } of phases) {
    if (p === PHASE.mainSequence) shareByMass(initialMass, first, last, share);
    else shareByPath(x, y, first, last, share);
  }
  return {
    logAge: rows.logAge[order[0]],
    metallicity: rows.metallicity[order[0]],
    count: n,
    phase,
    share,
    columns: [initialMass.map(Math.log), mass.map(Math.log), logL, logTeff, logGravity, ...magnitudes],
    phases,
  };
}

/** Runs of one phase. A phase that comes twice (it does at a few ages) keeps its runs apart by their order. */
function spans(phase: Uint8Array): { phase: number; first: number; last: number }[] {
  const out: { phase: number; first: number; last: number }[] = [];
  for (let i = 0; i < phase.length; i++) {
    const open = out[out.length - 1];
    if (open !== undefined && open.phase === phase[i]) open.last = i;
    else out.push({ phase: phase[i], first: i, last: i });
  }
  return out.filter((s) => s.phase !== NO_PHASE);
}

/** On the main sequence stars of one share of the turnoff's mass have spent one share of their lives. */
function shareByMass(initialMass: Float64Array, first: number, last: number, out: Float64Array): void {
  const low = Math.log(initialMass[first]);
  const width = Math.log(initialMass[last]) - low;
  for (let i = first; i <= last; i++) out[i] = width > 0 ? (Math.log(initialMass[i]) - low) / width : 0;
}

/** Later, where the mass hardly changes, by the length of the path on the diagram. */
function shareByPath(x: Float64Array, y: Float64Array, first: number, last: number, out: Float64Array): void {
  out[first] = 0;
  for (let i = first + 1; i <= last; i++) out[i] = out[i - 1] + Math.hypot(x[i] - x[i - 1], y[i] - y[i - 1]);
  const length = out[last];
  for (let i = first; i <= last; i++) out[i] = length > 0 ? out[i] / length : 0;
}

/**
 * Phases of a table without labels, from its shape: main sequence up to the hottest point of the rise, then what follows up
 * to the brightest point as first giant branch, the rest as core helium burning.
 */
function landmarks(x: Float64Array, y: Float64Array): Uint8Array {
  const n = x.length;
  let brightest = 0;
  for (let i = 1; i < n; i++) if (y[i] > y[brightest]) brightest = i;
  const cool = x[0] <= x[Math.floor(n / 3)] ? 1 : -1;
  let hottest = 0;
  for (let i = 1; i <= brightest; i++) if (cool * x[i] > cool * x[hottest]) hottest = i;
  const out = new Uint8Array(n);
  for (let i = 0; i < n; i++) {
    if (i <= hottest) out[i] = PHASE.mainSequence;
    else out[i] = i <= brightest ? PHASE.giantBranch : PHASE.coreHelium;
  }
  return out;
}

/**
 * Values of a curve at places of a phase, added to `out` with a weight.
 * @param span   the run of the phase, or the point at which an absent phase would begin (first = last)
 * @param places shares of the phase, rising, shape (n)
 * @param out    one array a column, shape (n) from `at` on
 */
export function addPlaces(
  curve: GridCurve,
  span: { readonly first: number; readonly last: number },
  places: Float64Array,
  weight: number,
  out: readonly Float64Array[],
  at: number,
): void {
  const { share, columns } = curve;
  let i = span.first;
  for (let k = 0; k < places.length; k++) {
    const place = places[k];
    while (i < span.last - 1 && share[i + 1] < place) i++;
    const next = Math.min(i + 1, span.last);
    const width = share[next] - share[i];
    const t = next > i && width > 0 ? Math.max(0, Math.min(1, (place - share[i]) / width)) : 0;
    for (let c = 0; c < columns.length; c++) {
      const column = columns[c];
      out[c][at + k] += weight * (column[i] + t * (column[next] - column[i]));
    }
  }
}
