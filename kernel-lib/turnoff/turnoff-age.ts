import type { Catalogue } from '../catalogue/catalogue';
import { analyticModel } from '../models/analytic-model';
import { isochroneTurnoff } from '../models/isochrone-turnoff';
import { turnoffMass } from '../models/lifetime';
import type { Band, ColourName } from '../quantity/band';
import { type Measured, measured, measuredFromSigma } from '../quantity/measured';
import { checkOptions, checkRange } from '../quantity/options';
import { escapeHtml, htmlTable, presentable, textTable } from '../quantity/present';
import { type AgePosterior, agePosterior, medianLogAge, spreadPosterior } from './age-posterior';
import {
  CLUSTER_OPTIONS,
  type ClusterOptions,
  type ClusterSetting,
  guessOf,
  sequenceMaker,
  settleCluster,
} from './cluster-setting';
import { metallicityNodes, metallicityShifts } from './metallicity-nodes';
import { type Comparison, likelihoodAt, makeComparison, type PlaceFit, type PlacePrior } from './place-fit';
import { thinned } from './place-start';
import { meanShares, readyStars } from './sequence-likelihood';
import { turnoffRegion } from './turnoff-region';

/** What `turnoffAge` takes. */
export interface TurnoffAgeOptions extends ClusterOptions {
  /** E(B-V), mag, with or without its error. */
  ebv: number | Measured;
  /** Standard error of the metallicity, dex: ages are averaged over it, never used to measure it. Default: 0. */
  metallicityError?: number;
  /**
   * Magnitude down from which the catalogue would hold every star of the cluster, apparent (absolute with 'parallax'). Default: 4 mag
   * above the brightest star where the sequence bends or giants are there, else the brightest star of the sequence.
   */
  brightLimit?: number;
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
  /** Share of unresolved binaries among them, and of stars that fit no sequence. */
  readonly binaryShare: number;
  readonly foreignShare: number;
  readonly model: string;
  readonly metallicity: number;
  /** Probability over log10 of age: places and density, normalised. */
  readonly posterior: { readonly logAge: Float64Array; readonly density: Float64Array };
  /** True when the stars themselves bound the age on both sides. */
  readonly bounded: boolean;
  readonly notes: readonly string[];
}

const FEWEST = 8;
/** Stars about the turnoff that are compared, at most. */
const MOST_STARS = 600;
/** Share of the peak's height at an end of the range from which the age counts as not bounded there. */
const HIGH_END = 0.1;
const FOREIGN_WARNING = 0.2;

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
  checkOptions(caller, options, [
    ...CLUSTER_OPTIONS,
    'ebv',
    'metallicityError',
    'brightLimit',
    'logAgeRange',
    'onProgress',
  ]);
  const { metallicityError = 0, onProgress } = options;
  checkRange(caller, 'metallicityError', metallicityError, 0, 1, 'dex');
  const ebv = guessOf(caller, 'ebv', options.ebv, -0.5, 10, 'mag');
  const setting = settleCluster(caller, members, options);
  const { modulus, model, notes } = setting;
  const region = turnoffRegion(setting, options.brightLimit);
  const comparison = makeComparison(
    setting,
    thinned(readyStars(setting.stars, region, setting.colourFloor), MOST_STARS),
    region,
  );
  if (comparison.stars.count < FEWEST) {
    notes.push(`Only ${comparison.stars.count} stars lie about the turnoff; the age rests on them alone.`);
  }
  const [least, most] = model.logAgeRange;
  const [low, high] = options.logAgeRange ?? [Math.max(7, least), Math.min(10.15, most)];
  checkRange(caller, 'logAgeRange[0]', low, least, most);
  checkRange(caller, 'logAgeRange[1]', high, low, most);

  const prior = { ebv, modulus };
  const nodes = metallicityNodes(model, setting.metallicity, metallicityError);
  const perNode = nodes.map((node, k) => {
    const tell = (share: number) => onProgress?.((k + share) / nodes.length, 1);
    return agePosterior(comparison, sequenceMaker(setting, node), prior, [low, high], tell);
  });
  const [centre] = perNode;
  if (centre === null) {
    throw new Error(
      `${caller}: no age between 10^${low} and 10^${high} years gives a main sequence where these stars lie.`,
    );
  }
  const medians = perNode.map((p) => (p === null ? Number.NaN : medianLogAge(p)));
  const posterior = spreadPosterior(centre, metallicityShifts(nodes, medians, metallicityError), [low, high]);
  const { sequence, fit } = posterior.best;
  likelihoodAt(comparison, sequence, fit.ebv, fit.modulus);
  const shares = meanShares(comparison.work);
  notes.push(...doubts(shares.foreign, fit, prior));
  return conclude(setting, comparison, posterior, [low, high], ebv.value, shares);
}

/** What makes the comparison doubtful. */
function doubts(foreign: number, fit: PlaceFit, prior: PlacePrior): string[] {
  const out: string[] = [];
  if (foreign > FOREIGN_WARNING) {
    out.push(
      `About ${Math.round(100 * foreign)} % of the stars about the turnoff fit no sequence: check membership, distance and reddening.`,
    );
  }
  const pulls = [
    ['E(B-V)', fit.ebv, prior.ebv],
    ['distance modulus', fit.modulus, prior.modulus],
  ] as const;
  for (const [name, at, { value, error }] of pulls) {
    if (error > 0 && Math.abs(at - value) > 2.5 * error) {
      out.push(
        `The turnoff region wants ${name} ${at.toFixed(3)}, ${(Math.abs(at - value) / error).toFixed(1)} errors from the value given.`,
      );
    }
  }
  return out;
}

const show3 = (x: number) => Number(x.toPrecision(3));

function conclude(
  setting: ClusterSetting,
  comparison: Comparison,
  { logAge: grid, density: height }: AgePosterior,
  range: readonly [number, number],
  ebv: number,
  shares: { readonly binary: number; readonly foreign: number },
): TurnoffAge {
  const { stars, model, metallicity, notes } = setting;
  const n = grid.length;
  const peak = Math.max(...height);
  const density = Float64Array.from(height);
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
  const young = grid[0] <= range[0] + 1e-6 && height[0] > HIGH_END * peak;
  const old = grid[n - 1] >= range[1] - 1e-6 && height[n - 1] > HIGH_END * peak;
  const wide = beyond - far > 1;
  const bounded = !young && !old && !wide;
  const limits = {
    young: `younger than ${show3(10 ** (beyond - 9))} Gyr`,
    old: `older than ${show3(10 ** (far - 9))} Gyr`,
  };
  if (young && old)
    notes.unshift('The stars do not bound the age on either side: the interval is that of the range searched.');
  else if (young)
    notes.unshift(
      `The stars give an upper limit to the age only, as no turnoff shows in them: ${limits.young} (95 %). The lower end is that of the range searched.`,
    );
  else if (old)
    notes.unshift(
      `The stars give a lower limit to the age only: ${limits.old} (95 %). The upper end is that of the range searched.`,
    );
  if (wide && !young && !old)
    notes.unshift('The age is hardly bounded: the turnoff is not in the data, or too few stars lie about it.');
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
    starCount: comparison.stars.count,
    binaryShare: shares.binary,
    foreignShare: shares.foreign,
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
