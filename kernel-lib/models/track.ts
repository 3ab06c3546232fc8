import { SOLAR_LOG_GRAVITY, SOLAR_TEMPERATURE } from '../quantity/constants';
import { checkOptions, checkRange, describe } from '../quantity/options';
import { presentable } from '../quantity/present';
import { fitsAt } from './fits';
import { Life } from './life';
import { type Composition, metallicityOf, whyNotMass, whyNotZ, zOf } from './metallicity';
import type { LifeSource } from './moments';
import { followPath, type PathSource, Pieces } from './path';
import { PHASE_NAMES, type StarState } from './phases/phase';
import { columnsPresentation } from './show';
import { lifeUnder, type MassLoss, massLossWords, windsOf } from './winds/mass-loss';
import type { WindLife } from './winds/wind-life';

/** One star's life from zero age to the end of its last shining phase. Columns of `count` entries, in order of age. */
export interface Track {
  readonly initialMass: number;
  readonly metallicity: number;
  readonly z: number;
  readonly count: number;
  /** Gyr. */
  readonly age: Float64Array;
  /** Solar masses. */
  readonly mass: Float64Array;
  readonly coreMass: Float64Array;
  /** log10 of solar luminosities, of solar radii, of K, of cm/s2. */
  readonly logL: Float64Array;
  readonly logR: Float64Array;
  readonly logTeff: Float64Array;
  readonly logGravity: Float64Array;
  /** Numbers into `phaseNames`. */
  readonly phase: Uint8Array;
  readonly phaseNames: readonly string[];
  /** Indices at which an unbroken piece starts: 0, and the helium flash where there is one. */
  readonly breaks: Uint32Array;
  /** What is left at the end, in words, and its mass. */
  readonly remnant: string;
  readonly finalMass: number;
  readonly massLoss: string;
  readonly note: string;
}

/** What track takes. */
export interface TrackOptions extends Composition {
  /** Initial mass, solar masses. */
  readonly mass: number;
  /** Number of points, default 400. */
  readonly points?: number;
  /** Mass loss, default 'none'. */
  readonly massLoss?: MassLoss;
}

class OneStar implements PathSource {
  private readonly source: LifeSource;
  constructor(source: LifeSource) {
    this.source = source;
  }
  sample(phase: number, time: number, out: StarState): void {
    this.source.stateIn(phase, time, out);
  }
}

/**
 * The track of one star in the HR diagram, at equal steps along the curve.
 * @param options mass: initial mass in solar masses, range 0.1 to 100; metallicity: [Fe/H], dex (default 0, which is
 *   Z = 0.0188), or z: mass fraction, range 0.0001 to 0.03; points: 60 to 5000 (default 400); massLoss: 'none' (default),
 *   'winds' or { reimers: efficiency }
 * @returns columns, frozen; count 0 and a note outside the range
 * @throws TypeError on an unknown option or a mass that is no number; RangeError on points out of range
 * @example track({ mass: 5 }).logTeff
 * Source: Hurley, Pols & Tout 2000, MNRAS 315, 543 (see evolve).
 */
export function track(options: TrackOptions): Track {
  checkOptions('track', options, ['mass', 'metallicity', 'z', 'points', 'massLoss']);
  const { mass, points = 400 } = options;
  if (typeof mass !== 'number')
    throw new TypeError(`track: mass must be one number (solar masses), got ${describe(mass)}.`);
  checkRange('track', 'points', points, 60, 5000);
  const z = zOf('track', options);
  const wind = windsOf('track', options.massLoss ?? 'none');
  const note = whyNotZ(z) || whyNotMass(mass);
  if (note !== '') return finish(mass, z, null, note, 0, massLossWords(wind));
  const life = lifeUnder(fitsAt(z), wind);
  life.setMass(mass);
  return finish(mass, z, life, '', Math.round(points), massLossWords(wind));
}

function finish(
  initialMass: number,
  z: number,
  life: Life | WindLife | null,
  note: string,
  points: number,
  massLoss: string,
): Track {
  const pieces = new Pieces();
  if (life !== null) {
    if (life instanceof Life) life.complete();
    const hookless = initialMass <= fitsAt(z).massHook;
    const moments = Array.from({ length: life.momentCount }, (_, k) => life.moment(k));
    const cuts = Float64Array.from(moments.filter((t, k) => Number.isFinite(t) && !(hookless && k < 2))).sort();
    let from = 0;
    for (const to of cuts) {
      pieces.add(from, to, life.phaseAt(0.5 * (from + to)));
      from = Math.max(from, to);
    }
  }
  const left = life instanceof Life ? life.giant : life;
  const path = life === null ? EMPTY : followPath(new OneStar(life), pieces, points);
  const { parameter, mass, coreMass, logL, logR, phase, breaks } = path;
  const solar = Math.log10(SOLAR_TEMPERATURE);
  const track: Track = {
    initialMass,
    metallicity: metallicityOf(z),
    z,
    count: parameter.length,
    age: parameter.map((t) => t / 1000),
    mass,
    coreMass,
    logL,
    logR,
    logTeff: logL.map((l, i) => solar + 0.25 * (l - 2 * logR[i])),
    logGravity: logR.map((r, i) => SOLAR_LOG_GRAVITY + Math.log10(mass[i]) - 2 * r),
    phase,
    phaseNames: PHASE_NAMES,
    breaks,
    remnant: left === null ? '' : PHASE_NAMES[left.remnant],
    finalMass: left === null ? Number.NaN : left.remnantMass,
    massLoss,
    note,
  };
  return presentable(track, columnsPresentation('Track', track));
}

const EMPTY = {
  parameter: new Float64Array(0),
  mass: new Float64Array(0),
  coreMass: new Float64Array(0),
  logL: new Float64Array(0),
  logR: new Float64Array(0),
  phase: new Uint8Array(0),
  breaks: new Uint32Array(0),
};
