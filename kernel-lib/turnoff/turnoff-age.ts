import type { Catalogue } from '../catalogue/catalogue';
import { analyticModel } from '../models/analytic-model';
import { isochroneTurnoff } from '../models/isochrone-turnoff';
import { turnoffMass } from '../models/lifetime';
import type { Band, ColourName } from '../quantity/band';
import { type Measured, measured, measuredFromSigma } from '../quantity/measured';
import { checkOptions, checkRange } from '../quantity/options';
import { escapeHtml, htmlTable, presentable, textTable } from '../quantity/present';
import {
  CLUSTER_OPTIONS,
  type ClusterOptions,
  type ClusterSetting,
  guessOf,
  regionOf,
  sequenceMaker,
  settleCluster,
} from './cluster-setting';
import { UNEVOLVED_BELOW } from './main-sequence-fit';
import { findPeak } from './peak';
import { makeWorkspace, type ReadyStars, type Region, readyStars, sequenceLogLikelihood } from './sequence-likelihood';

/** What `turnoffAge` takes. */
export interface TurnoffAgeOptions extends ClusterOptions {
  /** E(B-V), mag, with or without its error. */
  ebv: number | Measured;
  /** Standard error of the metallicity, dex: ages are averaged over it. Default: 0. */
  metallicityError?: number;
  /** log10 of ages searched, years. Default: 7 to 10.15, within the model's range. */
  logAgeRange?: readonly [number, number];
  /** Called with the share of the work that is done. */
  onProgress?: (done: number, total: number) => void;
}

/** Age of a cluster from the region of its turnoff. */
export interface TurnoffAge {
  /** Gyr */
  readonly age: Measured;
  /** log10 of years */
  readonly logAge: Measured;
  /** 95 % interval of the age, Gyr. */
  readonly age95: readonly [number, number];
  /** Mass of the stars that leave the main sequence at this age, solar masses. */
  readonly turnoffMass: Measured;
  /** Model's turnoff (bluest point of the main sequence) at this age: intrinsic colour and absolute magnitude. */
  readonly turnoffColour: Measured;
  readonly turnoffMagnitude: Measured;
  /** Textbook age 10 Gyr x M^-2.5 of the turnoff mass, Gyr, and by how much it is off the age. */
  readonly textbookAge: number;
  readonly textbookRatio: number;
  readonly colourName: ColourName;
  readonly magnitudeBand: Band;
  /** Stars in the region that was compared. */
  readonly starCount: number;
  readonly model: string;
  readonly metallicity: number;
  /** Probability over log10 of age: places and density, normalised. */
  readonly posterior: { readonly logAge: Float64Array; readonly density: Float64Array };
  /** True when the stars themselves bound the age on both sides. */
  readonly bounded: boolean;
  readonly notes: readonly string[];
}

const STEP_COARSE = 0.05;
const STEP_FINE = 0.0125;
/** Fall of log-likelihood below the best at which an age is no longer looked at closely. */
const FAR_BELOW = 14;
/** Gauss-Hermite nodes, in standard deviations, for distance and metallicity. */
const HERMITE = [
  { at: -Math.sqrt(3), weight: 1 / 6 },
  { at: 0, weight: 2 / 3 },
  { at: Math.sqrt(3), weight: 1 / 6 },
];
const FEWEST = 8;
/** Errors of distance and reddening below this, mag, do not move the age. */
const NEGLIGIBLE = 0.002;
/** Points of the closest look. */
const CLOSE = 33;

/**
 * Age of a cluster from its turnoff region: for each age the main sequence and subgiants of the isochrone, with unresolved binaries, are
 * compared with the stars about the turnoff (from the brightest to 2.5 mag below the bluest point of the ridge; giants apart), star by
 * star with its own errors, a share of foreign stars allowed. Stars that an age predicts and that are missing count against it, so the
 * vanished upper main sequence tells as much as the bend. Errors of distance, reddening and (if given) metallicity are averaged over.
 * @param members catalogue of member stars, with membership probabilities if there are any
 * @returns age with its 68 and 95 % intervals, turnoff mass and place
 * @throws Error when bands are missing or fewer than 12 stars have them; TypeError or RangeError on options
 * @example turnoffAge(members, { distanceModulus: distance.modulus, ebv: reddening }).age
 * Not included in the interval: faults of the stellar models and of the colour scale, rotation, an error of the assumed metallicity
 * unless given. Source of the models: see the model; of the textbook rule: common practice.
 */
export function turnoffAge(members: Catalogue, options: TurnoffAgeOptions): TurnoffAge {
  const caller = 'turnoffAge';
  checkOptions(caller, options, [...CLUSTER_OPTIONS, 'ebv', 'metallicityError', 'logAgeRange', 'onProgress']);
  const { metallicityError = 0, onProgress } = options;
  checkRange(caller, 'metallicityError', metallicityError, 0, 1, 'dex');
  const ebv = guessOf(caller, 'ebv', options.ebv, -0.5, 10, 'mag');
  const setting = settleCluster(caller, members, options);
  const { stars, order, ridge, bluest, modulus, model, notes } = setting;
  const faintest = stars.magnitude[order[order.length - 1]] + 0.01;
  const brightest = stars.magnitude[order[0]];
  // An empty stretch above the brightest star is part of what is compared: a younger cluster would have stars there.
  const bright = brightest - 4;
  const deep = ridge.magnitude[bluest] + UNEVOLVED_BELOW + 0.75;
  const region = regionOf(setting, bright, Math.min(faintest, Math.max(deep, brightest + 1)));
  const ready = readyStars(stars, region, setting.colourFloor);
  if (ready.count < FEWEST) {
    notes.push(`Only ${ready.count} stars lie about the turnoff; the age rests on them alone.`);
  }
  const [least, most] = model.logAgeRange;
  const [low, high] = options.logAgeRange ?? [Math.max(7, least), Math.min(10.15, most)];
  checkRange(caller, 'logAgeRange[0]', low, least, most);
  checkRange(caller, 'logAgeRange[1]', high, low, most);

  const compositions = metallicityNodes(setting, metallicityError);
  const makers = compositions.map((c) => ({ ...c, sequenceAt: sequenceMaker(setting, c.metallicity) }));
  const central = makers[makers.length >> 1].sequenceAt;
  const work = makeWorkspace(ready.count);
  const at = (sequenceAt: typeof central, logAge: number, e: number, dm: number) =>
    oneLikelihood(setting, ready, region, work, sequenceAt(logAge).sequence, e, dm);

  // At each age the reddening is free within its error: the stars about the turnoff often know it better than it was given.
  const overReddening = (sequenceAt: typeof central, logAge: number, dm: number): number => {
    if (!(ebv.error > NEGLIGIBLE)) return at(sequenceAt, logAge, ebv.value, dm);
    const prior = (e: number) => -0.5 * ((e - ebv.value) / ebv.error) ** 2;
    const reach = 4 * ebv.error;
    const peak = findPeak(
      (e) => at(sequenceAt, logAge, e, dm) + prior(e),
      ebv.value,
      ebv.error / 2,
      ebv.value - reach,
      ebv.value + reach,
    );
    return Number.isFinite(peak.top)
      ? peak.top + Math.log((peak.sigma || ebv.error) / ebv.error)
      : Number.NEGATIVE_INFINITY;
  };

  const coarse = steps(low, high, STEP_COARSE);
  const first = coarse.map((a, i) => {
    onProgress?.(i, 2 * coarse.length);
    return overReddening(central, a, modulus.value);
  });
  const top = Math.max(...first);
  if (!Number.isFinite(top)) {
    throw new Error(
      `${caller}: no age between 10^${low} and 10^${high} years gives a main sequence where these stars lie.`,
    );
  }
  const from = Math.max(low, coarse[first.findIndex((v) => v > top - FAR_BELOW)] - STEP_COARSE);
  const to = Math.min(
    high,
    coarse[coarse.length - 1 - [...first].reverse().findIndex((v) => v > top - FAR_BELOW)] + STEP_COARSE,
  );
  const modulusNodes = modulus.error > NEGLIGIBLE ? HERMITE : [{ at: 0, weight: 1 }];
  const densityAt = (a: number) =>
    logSum(
      makers.flatMap(({ sequenceAt, weight }) =>
        modulusNodes.map(
          (m) => overReddening(sequenceAt, a, modulus.value + m.at * modulus.error) + Math.log(weight * m.weight),
        ),
      ),
    );
  let fine = steps(from, to, Math.max(STEP_FINE, (to - from) / 120));
  const half = coarse.length + Math.round(coarse.length / 2);
  let logDensity = fine.map((a, i) => {
    onProgress?.(coarse.length + Math.round((0.5 * coarse.length * (i + 1)) / fine.length), 2 * coarse.length);
    return densityAt(a);
  });
  // Many stars pin the age to less than a step: then look again, closely, where it lies.
  for (let round = 0; round < 2; round++) {
    const best = Math.max(...logDensity);
    const first = logDensity.findIndex((v) => v > best - 10);
    const last = logDensity.length - 1 - [...logDensity].reverse().findIndex((v) => v > best - 10);
    if (last - first > 16) break;
    fine = evenly(fine[Math.max(0, first - 1)], fine[Math.min(fine.length - 1, last + 1)], CLOSE);
    logDensity = fine.map((a) => densityAt(a));
    onProgress?.(half + Math.round((round + 1) * 0.25 * coarse.length), 2 * coarse.length);
  }
  onProgress?.(2 * coarse.length, 2 * coarse.length);
  return conclude(setting, ready, fine, logDensity, [low, high], ebv.value);
}

function oneLikelihood(
  setting: ClusterSetting,
  ready: ReadyStars,
  region: Region,
  work: ReturnType<typeof makeWorkspace>,
  sequence: Parameters<typeof sequenceLogLikelihood>[1] | null,
  e: number,
  dm: number,
): number {
  if (sequence === null) return Number.NEGATIVE_INFINITY;
  return sequenceLogLikelihood(ready, sequence, e * setting.perExcess, dm + e * setting.perExtinction, region, work);
}

/** Nodes of the metallicity, held within the model's range. */
function metallicityNodes(setting: ClusterSetting, error: number): { metallicity: number; weight: number }[] {
  const { metallicity, model } = setting;
  if (!(error > 0)) return [{ metallicity, weight: 1 }];
  const [low, high] = model.metallicityRange;
  return HERMITE.map(({ at, weight }) => ({
    metallicity: Math.min(Math.max(metallicity + at * error, low), high),
    weight,
  }));
}

function steps(low: number, high: number, step: number): number[] {
  return evenly(low, high, Math.max(2, Math.round((high - low) / step) + 1));
}

function evenly(low: number, high: number, count: number): number[] {
  return Array.from({ length: count }, (_, i) => low + ((high - low) * i) / (count - 1));
}

function logSum(terms: readonly number[]): number {
  const top = Math.max(...terms);
  if (!Number.isFinite(top)) return Number.NEGATIVE_INFINITY;
  return top + Math.log(terms.reduce((s, t) => s + Math.exp(t - top), 0));
}

function conclude(
  setting: ClusterSetting,
  ready: ReadyStars,
  grid: readonly number[],
  logDensity: readonly number[],
  range: readonly [number, number],
  ebv: number,
): TurnoffAge {
  const { stars, model, metallicity, notes } = setting;
  const n = grid.length;
  const peak = Math.max(...logDensity);
  const density = Float64Array.from(logDensity, (v) => Math.exp(v - peak));
  const cumulative = new Float64Array(n);
  for (let i = 1; i < n; i++)
    cumulative[i] = cumulative[i - 1] + 0.5 * (density[i] + density[i - 1]) * (grid[i] - grid[i - 1]);
  const total = cumulative[n - 1];
  for (let i = 0; i < n; i++) density[i] /= total;
  const quantile = (q: number) => {
    let k = 1;
    while (k < n - 1 && cumulative[k] < q * total) k++;
    const span = cumulative[k] - cumulative[k - 1];
    return grid[k - 1] + (span > 0 ? (q * total - cumulative[k - 1]) / span : 0) * (grid[k] - grid[k - 1]);
  };
  const [value, lower, upper] = [quantile(0.5), quantile(0.158655), quantile(0.841345)];
  const [far, beyond] = [quantile(0.025), quantile(0.975)];
  const share = (i: number) => (density[i] * (grid[n - 1] - grid[0])) / n;
  const young = grid[0] <= range[0] + 1e-6 && share(0) > 0.02;
  const old = grid[n - 1] >= range[1] - 1e-6 && share(n - 1) > 0.02;
  const wide = beyond - far > 1;
  const bounded = !young && !old && !wide;
  if (young)
    notes.push(
      'The stars give an upper limit to the age only: no turnoff shows in them. The lower end is set by the range searched.',
    );
  if (old) notes.push('The stars give a lower limit to the age only. The upper end is set by the range searched.');
  if (wide && !young && !old)
    notes.push('The age is hardly bounded: the turnoff is not in the data, or too few stars lie about it.');
  const massAt = (logAge: number) =>
    model === analyticModel
      ? turnoffMass({ age: 10 ** (logAge - 9), metallicity })
      : isochroneTurnoff(model.isochrone({ logAge, metallicity, bands: [] }), { colour: null }).mass;
  const place = (logAge: number) => {
    const { isochrone } = sequenceMaker(setting)(logAge);
    return isochroneTurnoff(isochrone, { colour: stars.colourName, magnitude: stars.magnitudeBand });
  };
  const [atValue, atLower, atUpper] = [place(value), place(lower), place(upper)];
  const spread = (a: number, b: number, c: number, unit: string) =>
    [a, b, c].every(Number.isFinite)
      ? measured(a, Math.min(a, b, c), Math.max(a, b, c), unit)
      : measuredFromSigma(Number.NaN, Number.NaN, unit);
  const mass = spread(massAt(value), massAt(lower), massAt(upper), 'solar masses');
  const age = 10 ** (value - 9);
  const textbookAge = 10 * mass.value ** -2.5;
  notes.push(
    `Intervals do not include faults of the models or of the colour scale; [Fe/H] ${metallicity} was taken as given.`,
  );
  const result: TurnoffAge = {
    age: measured(age, 10 ** (lower - 9), 10 ** (upper - 9), 'Gyr'),
    logAge: measured(value, lower, upper, 'log yr'),
    age95: Object.freeze([10 ** (far - 9), 10 ** (beyond - 9)] as const),
    turnoffMass: mass,
    turnoffColour: spread(atValue.colour, atLower.colour, atUpper.colour, 'mag'),
    turnoffMagnitude: spread(atValue.magnitude, atLower.magnitude, atUpper.magnitude, 'mag'),
    textbookAge,
    textbookRatio: textbookAge / age,
    colourName: stars.colourName,
    magnitudeBand: stars.magnitudeBand,
    starCount: ready.count,
    model: model.name,
    metallicity,
    posterior: Object.freeze({ logAge: Float64Array.from(grid), density }),
    bounded,
    notes: Object.freeze([...notes]),
  };
  return present(result, ebv);
}

function present(result: TurnoffAge, ebv: number): TurnoffAge {
  const [far, beyond] = result.age95;
  const rows = [
    ['age', String(result.age)],
    ['95 % interval', `${far.toPrecision(3)} to ${beyond.toPrecision(3)} Gyr`],
    ['log age', String(result.logAge)],
    ['turnoff mass', String(result.turnoffMass)],
    [`turnoff (${result.colourName})0`, String(result.turnoffColour)],
    [`turnoff M(${result.magnitudeBand})`, String(result.turnoffMagnitude)],
    [
      'textbook age, 10 Gyr x M^-2.5',
      `${result.textbookAge.toPrecision(3)} Gyr, ${result.textbookRatio.toFixed(2)} times the age`,
    ],
  ];
  const title =
    `${result.bounded ? 'Turnoff age' : 'Turnoff age, not bounded by the data'} from ${result.starCount} stars, ` +
    `E(B-V) ${ebv.toFixed(3)}, model: ${result.model}`;
  const head = ['quantity', 'value'];
  return presentable(result, {
    text: () => [title, textTable(head, rows), ...result.notes.map((t) => `- ${t}`)].join('\n'),
    html: () =>
      `<div>${htmlTable(head, rows, { caption: title })}<ul>${result.notes.map((t) => `<li>${escapeHtml(t)}</li>`).join('')}</ul></div>`,
  });
}
