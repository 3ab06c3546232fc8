import { type Band, bandsOfColour, type ColourName } from '../quantity/band';
import { checkOptions, describe } from '../quantity/options';
import { presentable } from '../quantity/present';
import { analyticModel } from './analytic-model';
import type { Composition } from './metallicity';
import { PHASE } from './phases/phase';
import { columnsPresentation, numbersPresentation } from './show';
import type { Isochrone, StellarModel } from './stellar-model';

/** The turnoff of an isochrone: the bluest point of its main sequence, before the hook. */
export interface IsochroneTurnoff {
  readonly logAge: number;
  /** Initial mass of the star there, solar. */
  readonly mass: number;
  /** Absolute magnitude and colour, mag; NaN when no bands were asked for. */
  readonly magnitude: number;
  readonly colour: number;
  readonly logL: number;
  readonly logTeff: number;
  /** Index of the nearest point of the isochrone, -1 when there is no turnoff. */
  readonly index: number;
  /** Why the values are NaN, or ''. */
  readonly note: string;
}

/** Which diagram to look at. */
export interface TurnoffOptions {
  /** Colour, default `BP-RP`, the isochrone's bands permitting; null for the hottest point in place of the bluest. */
  readonly colour?: ColourName | null;
  /** Band of the magnitude, default the red band of the colour for B-V and the like, G for BP-RP. */
  readonly magnitude?: Band;
}

/**
 * The main-sequence turnoff of an isochrone: the bluest point of the main sequence below the hook, placed between the points
 * of the curve by a parabola. Near 7.5 Gyr at solar composition, where the hook is born, the built-in fits make the turnoff
 * nearly vertical: its magnitude then wanders by 0.1 mag from age to age, its colour does not.
 * @param isochrone any isochrone whose main sequence is labelled
 * @param options colour (default `BP-RP`; null for the hottest point) and magnitude (default G with BP-RP, else the red band)
 * @returns frozen record; NaN and a note where the sequence has no turnoff (too young) or the band is missing
 * @throws TypeError on an unknown option or a band that the isochrone does not hold
 * @example isochroneTurnoff(isochrone({ logAge: 9.6, bands: ['B', 'V'] }), { colour: 'B-V' }).magnitude
 */
export function isochroneTurnoff(isochrone: Isochrone, options: TurnoffOptions = {}): IsochroneTurnoff {
  checkOptions('isochroneTurnoff', options, ['colour', 'magnitude']);
  const turnoff = findTurnoff(isochrone, options);
  return presentable(turnoff, numbersPresentation('Turnoff', turnoff));
}

function findTurnoff(iso: Isochrone, options: TurnoffOptions): IsochroneTurnoff {
  const { colour = 'BP-RP' } = options;
  const bands = colour === null ? null : bandsOfColour(colour);
  const band = options.magnitude ?? (colour === 'BP-RP' ? 'G' : bands?.red);
  const blue = bands === null ? null : columnOf(iso, bands.blue);
  const red = bands === null ? null : columnOf(iso, bands.red);
  const height = band === undefined ? null : columnOf(iso, band);
  // Left on the diagram is small: the colour, or the temperature upside down.
  const left = (i: number): number => (blue === null || red === null ? -iso.logTeff[i] : blue[i] - red[i]);
  const top = mainSequenceTop(iso);
  if (top < 0) return nothing(iso, iso.note || 'the isochrone has no main sequence');
  const hook = hookStart(iso, top);
  let best = -1;
  for (let i = 0; i <= hook; i++) {
    // The coolest dwarfs turn blue again in some colours; they are no turnoff.
    if (iso.initialMass[i] < 0.4 * iso.initialMass[top]) continue;
    if (best < 0 || left(i) < left(best)) best = i;
  }
  if (best < 1 || best >= iso.count - 1) return nothing(iso, 'the main sequence does not turn');
  if (best === hook && hook === top && iso.phase[Math.min(top + 1, iso.count - 1)] === PHASE.mainSequence) {
    return nothing(iso, 'the main sequence does not turn');
  }
  const at = vertex(left(best - 1), left(best), left(best + 1));
  const between = (column: ArrayLike<number> | null): number => {
    if (column === null) return Number.NaN;
    const [a, b, c] = [column[best - 1], column[best], column[best + 1]];
    return b + (at * (c - a)) / 2 + (at * at * (a - 2 * b + c)) / 2;
  };
  return {
    logAge: iso.logAge,
    mass: between(iso.initialMass),
    magnitude: between(height),
    colour: blue === null || red === null ? Number.NaN : between(blue) - between(red),
    logL: between(iso.logL),
    logTeff: between(iso.logTeff),
    index: best,
    note: '',
  };
}

/** Where the parabola through three equally spaced values is least, in steps from the middle one, within a step. */
function vertex(a: number, b: number, c: number): number {
  const bend = a - 2 * b + c;
  if (!(bend > 0)) return 0;
  return Math.max(-1, Math.min(1, (0.5 * (a - c)) / bend));
}

function columnOf(iso: Isochrone, band: Band): Float64Array {
  const column = iso.magnitudes[band];
  if (column !== undefined) return column;
  throw new TypeError(
    `isochroneTurnoff: the isochrone has no band ${describe(band)}; it holds ${Object.keys(iso.magnitudes).join(', ') || 'none'}. ` +
      `Ask for it with bands: ['${band}', ...].`,
  );
}

/** Index of the last point of the main sequence; without labels, of the hottest point. */
function mainSequenceTop(iso: Isochrone): number {
  let last = -1;
  let hottest = -1;
  for (let i = 0; i < iso.count; i++) {
    if (iso.phase[i] === PHASE.mainSequence) last = i;
    if (hottest < 0 || iso.logTeff[i] > iso.logTeff[hottest]) hottest = i;
  }
  return last >= 0 ? last : hottest;
}

/** Share of the mass at the end of the main sequence below which no hook begins. */
const HOOK_MASS_SHARE = 0.93;

/**
 * Where the contraction of the hook begins: the deepest valley of temperature in the uppermost part of the main sequence,
 * between the turnoff and what follows the hook; the end itself where there is no valley.
 */
function hookStart(iso: Isochrone, top: number): number {
  const { logTeff, initialMass } = iso;
  let first = top;
  while (first > 0 && initialMass[first - 1] > HOOK_MASS_SHARE * initialMass[top]) first--;
  let start = top;
  let deepest = 1e-5;
  let above = logTeff[top];
  for (let i = top - 1; i > first; i--) {
    let below = Number.NEGATIVE_INFINITY;
    for (let j = first; j < i; j++) if (logTeff[j] > below) below = logTeff[j];
    const depth = Math.min(above, below) - logTeff[i];
    if (depth > deepest) {
      deepest = depth;
      start = i;
    }
    if (logTeff[i] > above) above = logTeff[i];
  }
  return start;
}

function nothing(iso: Isochrone, note: string): IsochroneTurnoff {
  const no = Number.NaN;
  return { logAge: iso.logAge, mass: no, magnitude: no, colour: no, logL: no, logTeff: no, index: -1, note };
}

/** Turnoffs at many ages, one an entry of each column. */
export interface TurnoffTable {
  readonly logAge: Float64Array;
  readonly mass: Float64Array;
  readonly magnitude: Float64Array;
  readonly colour: Float64Array;
  readonly logTeff: Float64Array;
  readonly logL: Float64Array;
  /** Name of the model. */
  readonly model: string;
}

/**
 * The turnoff at many ages of one composition, for reading an age off a turnoff's colour or magnitude.
 * @param options logAges: log10 of years, shape (n); metallicity or z; colour, magnitude: as isochroneTurnoff; model: default
 *   the built-in one; points: points of each isochrone, default 300
 * @returns columns of shape (n); NaN where there is no turnoff
 * @throws TypeError on an unknown option or band
 * @example turnoffTable({ logAges: [9, 9.5, 10], colour: 'B-V' }).magnitude
 */
export function turnoffTable(
  options: Composition &
    TurnoffOptions & { readonly logAges: ArrayLike<number>; readonly model?: StellarModel; readonly points?: number },
): TurnoffTable {
  checkOptions('turnoffTable', options, ['logAges', 'metallicity', 'z', 'colour', 'magnitude', 'model', 'points']);
  const { logAges, metallicity, z, colour = 'BP-RP', magnitude, model = analyticModel, points = 300 } = options;
  if (logAges == null || typeof logAges !== 'object' || typeof logAges.length !== 'number') {
    throw new TypeError(
      `turnoffTable: logAges must be an array of numbers (log10 of years), got ${describe(logAges)}.`,
    );
  }
  const names = new Set<Band>();
  if (colour !== null) {
    const { blue, red } = bandsOfColour(colour);
    names.add(blue).add(red);
    if (colour === 'BP-RP' && magnitude === undefined) names.add('G');
  }
  if (magnitude !== undefined) names.add(magnitude);
  const n = logAges.length;
  const column = () => new Float64Array(n).fill(Number.NaN);
  const table = {
    logAge: Float64Array.from(logAges),
    mass: column(),
    magnitude: column(),
    colour: column(),
    logTeff: column(),
    logL: column(),
    model: model.name,
  };
  for (let i = 0; i < n; i++) {
    const iso = model.isochrone({ logAge: logAges[i], metallicity, z, bands: [...names], points });
    if (iso.count === 0) continue;
    const turnoff = findTurnoff(iso, { colour, magnitude });
    table.mass[i] = turnoff.mass;
    table.magnitude[i] = turnoff.magnitude;
    table.colour[i] = turnoff.colour;
    table.logTeff[i] = turnoff.logTeff;
    table.logL[i] = turnoff.logL;
  }
  return presentable(table, columnsPresentation('Turnoffs', table));
}
