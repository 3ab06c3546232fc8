import type { Catalogue } from '../catalogue/catalogue';
import { bandExtinction, colourExcessRatio } from '../extinction/band-coefficients';
import { analyticModel } from '../models/analytic-model';
import type { Isochrone, StellarModel } from '../models/stellar-model';
import { bandsOfColour } from '../quantity/band';
import { type Measured, sortedQuantile } from '../quantity/measured';
import { checkRange, describe } from '../quantity/options';
import { type DiagramChoice, type DiagramStars, diagramStars } from './diagram-stars';
import { findRidge, type Ridge } from './ridge';
import { byMagnitude, LEAST_STARS, requireStars, windowFor } from './ridge-line';
import { type Sequence, sequenceOf } from './sequence';
import type { Region } from './sequence-likelihood';

/** What the fits of this room share. */
export interface ClusterOptions extends DiagramChoice {
  /**
   * True distance modulus, mag, with or without its error; or 'parallax': every star at its own distance (near clusters), from the column
   * `kinematicParallax` where there is one, else from its parallax.
   */
  distanceModulus: number | Measured | 'parallax';
  /** [Fe/H], dex. Default: 0. */
  metallicity?: number;
  /** A(V) / E(B-V). Default: 3.1. */
  rV?: number;
  /** Extinction law. Default: `CCM89`. */
  law?: string;
  /** Where the isochrones come from. Default: the built-in analytic model. */
  model?: StellarModel;
  /** Error added to every colour in quadrature, mag: rotation, patchy reddening, small faults of models. Default: 0.01. */
  colourFloor?: number;
}

/** Names of these options. */
export const CLUSTER_OPTIONS: readonly string[] = [
  'colour',
  'magnitude',
  'probability',
  'missingError',
  'distanceModulus',
  'metallicity',
  'rV',
  'law',
  'model',
  'colourFloor',
];

/** A value with a standard error (half the 68 % interval). */
export interface Guess {
  readonly value: number;
  readonly error: number;
}

/** Everything that a fit needs, checked. */
export interface ClusterSetting {
  readonly stars: DiagramStars;
  /** Indices of likely members, bright to faint. */
  readonly order: Uint32Array;
  readonly ridge: Ridge;
  readonly model: StellarModel;
  readonly metallicity: number;
  readonly modulus: Guess;
  /** Colour excess and extinction for one magnitude of E(B-V). */
  readonly perExcess: number;
  readonly perExtinction: number;
  readonly colourFloor: number;
  /** Index of the bluest point of the ridge, as a first idea of the turnoff. */
  readonly bluest: number;
  /** True when stars were placed one by one, so that magnitudes are absolute already. */
  readonly absolute: boolean;
  readonly notes: string[];
}

/** Splits a number or a Measured into value and error. @throws TypeError when it is neither */
export function guessOf(
  caller: string,
  name: string,
  value: number | Measured,
  low: number,
  high: number,
  unit: string,
): Guess {
  const centre = typeof value === 'number' ? value : value?.value;
  if (typeof centre !== 'number') {
    throw new TypeError(`${caller}: ${name} must be a number or a measured value, got ${describe(value)}.`);
  }
  if (Number.isNaN(centre)) {
    throw new RangeError(
      `${caller}: ${name} is not determined; pass a value of your own, with its error if there is one.`,
    );
  }
  checkRange(caller, name, centre, low, high, unit);
  const error = typeof value === 'number' ? 0 : 0.5 * (value.upper - value.lower);
  return { value: centre, error: Number.isFinite(error) ? error : 0 };
}

/**
 * Reads the stars and settles the options.
 * @param modulusError error of the distance modulus where none is given; null (default) makes it an error to give none
 */
export function settleCluster(
  caller: string,
  members: Catalogue,
  options: Partial<ClusterOptions>,
  modulusError: number | null = null,
): ClusterSetting {
  const { metallicity = 0, rV = 3.1, law = 'CCM89', model = analyticModel, colourFloor = 0.01 } = options;
  if (options.distanceModulus === undefined && modulusError === null) {
    throw new TypeError(
      `${caller}: distanceModulus is missing; pass clusterDistance(members).modulus, a number, or 'parallax'.`,
    );
  }
  checkRange(caller, 'metallicity', metallicity, model.metallicityRange[0], model.metallicityRange[1], 'dex');
  checkRange(caller, 'colourFloor', colourFloor, 0, 1, 'mag');
  const absolute = options.distanceModulus === 'parallax';
  const seen = diagramStars(caller, members, options);
  const stars = absolute ? placeByParallax(caller, members, seen) : seen;
  requireStars(caller, stars, LEAST_STARS);
  const modulus = absolute
    ? { value: 0, error: 0 }
    : options.distanceModulus === undefined
      ? { value: 10, error: modulusError as number }
      : guessOf(caller, 'distanceModulus', options.distanceModulus as number | Measured, -5, 25, 'mag');
  const order = byMagnitude(stars);
  const ridge = findRidge(stars.colour, stars.magnitude, stars.colourError, order, windowFor(order.length));
  return {
    stars,
    order,
    ridge,
    model,
    metallicity,
    modulus,
    perExcess: colourExcessRatio(stars.colourName, { rV, law }),
    perExtinction: rV * bandExtinction(stars.magnitudeBand, { rV, law }),
    colourFloor,
    bluest: bluestPoint(ridge),
    absolute,
    notes: [...stars.notes],
  };
}

/** Index of the bluest ridge point; points that stand on few stars do not count. */
export function bluestPoint(ridge: Ridge): number {
  let best = 0;
  let least = Number.POSITIVE_INFINITY;
  for (let w = 0; w < ridge.colour.length; w++) {
    if (ridge.stars[w] < 3) continue;
    if (ridge.colour[w] < least) {
      least = ridge.colour[w];
      best = w;
    }
  }
  return best;
}

/** Magnitudes made absolute star by star. */
function placeByParallax(caller: string, members: Catalogue, stars: DiagramStars): DiagramStars {
  const name = members.has('kinematicParallax') ? 'kinematicParallax' : 'parallax';
  const errorName = name === 'parallax' ? 'parallax.error' : 'kinematicParallaxError';
  for (const needed of [name, errorName]) {
    if (!members.has(needed))
      throw new Error(`${caller}: distanceModulus 'parallax' needs ${needed}, which ${members.source} lacks.`);
  }
  const parallax = members.numbers(name);
  const error = members.numbers(errorName);
  // A relative error above a fifth makes a magnitude from one parallax biased and its error lopsided.
  const good = Uint32Array.from({ length: stars.count }, (_, k) => k).filter((k) => {
    const i = stars.rows[k];
    return parallax[i] > 0 && error[i] / parallax[i] < 0.2;
  });
  const take = (v: Float64Array) => Float64Array.from(good, (k) => v[k]);
  const dropped = stars.count - good.length;
  return {
    ...stars,
    count: good.length,
    rows: good.map((k) => stars.rows[k]),
    colour: take(stars.colour),
    magnitude: Float64Array.from(good, (k) => stars.magnitude[k] + 5 * Math.log10(parallax[stars.rows[k]] / 100)),
    colourError: take(stars.colourError),
    magnitudeError: Float64Array.from(good, (k) =>
      Math.hypot(stars.magnitudeError[k], (5 / Math.LN10) * (error[stars.rows[k]] / parallax[stars.rows[k]])),
    ),
    covariance: take(stars.covariance),
    probability: take(stars.probability),
    dropped: stars.dropped + dropped,
    notes:
      dropped > 0 ? [...stars.notes, `${dropped} stars with a parallax error above 20 % were left out.`] : stars.notes,
  };
}

/** Isochrone and sequence of an age, given as log10 of years; null where the isochrone has no main sequence. */
export type SequenceMaker = (logAge: number) => { readonly isochrone: Isochrone; readonly sequence: Sequence | null };

/** Makes sequences by age and keeps them. */
export function sequenceMaker(setting: ClusterSetting, metallicity: number = setting.metallicity): SequenceMaker {
  const { blue, red } = bandsOfColour(setting.stars.colourName);
  const band = setting.stars.magnitudeBand;
  const bands = [...new Set([blue, red, band])];
  const known = new Map<number, { isochrone: Isochrone; sequence: Sequence | null }>();
  return (logAge: number) => {
    const key = Math.round(logAge * 1e6);
    let made = known.get(key);
    if (made === undefined) {
      const isochrone = setting.model.isochrone({ logAge, metallicity, bands });
      made = { isochrone, sequence: isochrone.count === 0 ? null : sequenceOf(isochrone, blue, red, band) };
      known.set(key, made);
    }
    return made;
  };
}

/** The part of the diagram between two apparent magnitudes, wide enough in colour for the stars there. */
export function regionOf(setting: ClusterSetting, bright: number, faint: number): Region {
  const { stars, ridge, bluest } = setting;
  const colours: number[] = [];
  for (let k = 0; k < stars.count; k++) {
    if (stars.magnitude[k] >= bright && stars.magnitude[k] <= faint) colours.push(stars.colour[k]);
  }
  const sorted = Float64Array.from(colours).sort();
  const blueEdge = Math.min(sortedQuantile(sorted, 0), ridge.colour[bluest]) - 0.3;
  const redEdge = sortedQuantile(sorted, 1) + 0.3;
  return {
    bright,
    faint,
    blueEdge,
    redEdge,
    ...giantCorner(setting),
  };
}

/** Stars up to this much fainter than the bluest point of the ridge, and red enough, count as giants. */
const GIANTS_BELOW = 1.5;

/** The corner of the diagram where giants are; it leaves the main sequence out also where that has no turnoff in the data. */
export function giantCorner({ ridge, bluest }: Pick<ClusterSetting, 'ridge' | 'bluest'>): {
  giantColour: number;
  giantMagnitude: number;
} {
  const giantMagnitude = ridge.magnitude[bluest] + GIANTS_BELOW;
  let sequence = ridge.colour[bluest];
  for (let w = bluest; w < ridge.colour.length && ridge.magnitude[w] <= giantMagnitude; w++) {
    if (ridge.stars[w] >= 3) sequence = Math.max(sequence, ridge.colour[w]);
  }
  return { giantColour: Math.max(ridge.colour[bluest] + 0.3, sequence + 0.15), giantMagnitude };
}
