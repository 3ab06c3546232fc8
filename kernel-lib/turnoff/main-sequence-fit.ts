import type { Catalogue } from '../catalogue/catalogue';
import { type GaussianPart, gaussianSumQuantile } from '../numeric/gaussian-sum';
import { type Measured, measured } from '../quantity/measured';
import { checkOptions, checkRange } from '../quantity/options';
import { escapeHtml, htmlTable, presentable, textTable } from '../quantity/present';
import {
  CLUSTER_OPTIONS,
  type ClusterOptions,
  type ClusterSetting,
  type Guess,
  guessOf,
  regionOf,
  sequenceMaker,
  settleCluster,
} from './cluster-setting';
import { metallicityNodes, metallicityShifts } from './metallicity-nodes';
import { fitPlace, likelihoodAt, makeComparison, type PlaceFit, type PlaceStart } from './place-fit';
import { placeStart, thinned } from './place-start';
import type { Sequence } from './sequence';
import { meanShares, type Region, readyStars } from './sequence-likelihood';

/** What `mainSequenceFit` takes. */
export interface MainSequenceFitOptions extends Omit<ClusterOptions, 'distanceModulus'> {
  /** True distance modulus, mag, with or without its error; 'parallax' for every star at its own distance. Default: free. */
  distanceModulus?: ClusterOptions['distanceModulus'];
  /** E(B-V), mag, with or without its error. Default: free. */
  ebv?: number | Measured;
  /** Standard error of the metallicity, dex: the result is averaged over it, never used to measure it. Default: 0. */
  metallicityError?: number;
  /** Range of E(B-V) searched, mag. Default: -0.1 to 3. */
  range?: readonly [number, number];
  /** Range of distance moduli searched where it is free, mag. Default: -2 to 19. */
  modulusRange?: readonly [number, number];
  /** Systematic error, mag of E(B-V), added in quadrature: zero points of photometry and colour scale. Default: 0.01. */
  systematicError?: number;
  /** Called with the work that is done and all of it. */
  onProgress?: (done: number, total: number) => void;
}

/** What `estimateReddening` takes. */
export interface EstimateReddeningOptions
  extends Omit<MainSequenceFitOptions, 'distanceModulus' | 'ebv' | 'modulusRange'> {
  /** True distance modulus, mag, with or without its error; 'parallax' for every star at its own distance. */
  distanceModulus: ClusterOptions['distanceModulus'];
}

/** Reddening and distance from the main sequence. */
export interface MainSequenceFit {
  /** E(B-V), mag; not determined where the search ends at the edge of its range. */
  readonly ebv: Measured;
  /** True distance modulus, mag. */
  readonly distanceModulus: Measured;
  /** Correlation of their errors. */
  readonly correlation: number;
  readonly starCount: number;
  /** Share of unresolved binaries among the stars compared, and of stars that fit no sequence. */
  readonly binaryShare: number;
  readonly foreignShare: number;
  readonly notes: readonly string[];
}

/** log10 of ages tried: the unevolved sequence hardly depends on them, and what it does is averaged over. */
const LOG_AGES = [7.6, 8.0, 8.3, 8.6, 8.8, 9.0, 9.2, 9.4, 9.6, 9.8, 10.0];
/** Where the turnoff itself has to be used, ages stand close. */
const CLOSE_LOG_AGES = Array.from({ length: 63 }, (_, i) => 7 + 0.05 * i);
/** Stars this much fainter than the bluest point of the ridge count as unevolved. */
export const UNEVOLVED_BELOW = 1.75;
const LEAST_UNEVOLVED = 20;
/** More stars than these add nothing to an error that the colour scale sets. */
const MOST_STARS = 500;
const FOREIGN_WARNING = 0.2;

/**
 * Reddening, distance or both from the main sequence: the sequence of the model, with its unresolved binaries, is moved to where
 * the stars are most likely, every star with its own errors. Stars more than 1.75 mag below the bluest point of the ridge are used, where
 * there are at least 20, else all; age is averaged over, and so are the errors of whatever is given.
 * @param members catalogue of member stars
 * @param options what is known: distanceModulus, ebv; neither frees both, which only the bends of the sequence tell apart
 * @returns E(B-V) and distance modulus with 68 % intervals and their correlation
 * @throws Error when bands are missing or fewer than 12 stars have them; TypeError or RangeError on options
 * @example mainSequenceFit(members, { ebv: 0.05 }).distanceModulus
 * Method: mixture likelihood of single stars, binaries of uniform mass ratio and foreign stars; Laplace's method over reddening and
 * distance. Not included: an error of R_V or of the models.
 */
export function mainSequenceFit(members: Catalogue, options: MainSequenceFitOptions = {}): MainSequenceFit {
  const caller = 'mainSequenceFit';
  const known = ['ebv', 'metallicityError', 'range', 'modulusRange', 'systematicError', 'onProgress'];
  checkOptions(caller, options, [...CLUSTER_OPTIONS, ...known]);
  return show(fitSequence(caller, members, options));
}

/**
 * Reddening from the unevolved main sequence at a known distance: `mainSequenceFit` with only the reddening free.
 * @param members catalogue of member stars
 * @returns E(B-V), mag, with its 68 % interval; not determined where the search ends at the edge of its range
 * @throws Error when bands are missing or fewer than 12 stars have them; TypeError or RangeError on options
 * @example estimateReddening(members, { distanceModulus: clusterDistance(members).modulus })
 * Not included: an error of R_V, and of the assumed metallicity unless given as metallicityError (in B-V, 0.1 dex is worth about
 * 0.05 mag, as reddening runs almost along the sequence). The accuracy of the colour scale enters as `systematicError`.
 */
export function estimateReddening(members: Catalogue, options: EstimateReddeningOptions): Measured {
  const caller = 'estimateReddening';
  checkOptions(caller, options, [...CLUSTER_OPTIONS, 'metallicityError', 'range', 'systematicError', 'onProgress']);
  if (options?.distanceModulus === undefined) {
    throw new TypeError(
      `${caller}: distanceModulus is missing; pass clusterDistance(members).modulus, a number, or 'parallax'.`,
    );
  }
  return fitSequence(caller, members, options).ebv;
}

function fitSequence(caller: string, members: Catalogue, options: MainSequenceFitOptions): MainSequenceFit {
  const { range = [-0.1, 3], modulusRange = [-2, 19], metallicityError = 0, systematicError = 0.01 } = options;
  checkRange(caller, 'metallicityError', metallicityError, 0, 1, 'dex');
  checkRange(caller, 'systematicError', systematicError, 0, 1, 'mag');
  checkRange(caller, 'range[0]', range[0], -1, 10, 'mag');
  checkRange(caller, 'range[1]', range[1], range[0], 10, 'mag');
  const setting = settleCluster(caller, members, options, Number.POSITIVE_INFINITY);
  const given = options.ebv === undefined ? null : guessOf(caller, 'ebv', options.ebv, -0.5, 10, 'mag');
  const ebv: Guess =
    given === null
      ? { value: 0.1, error: Number.POSITIVE_INFINITY }
      : { value: given.value, error: Math.hypot(given.error, systematicError) };
  const prior = { ebv, modulus: setting.modulus };
  const { region, evolved } = unevolvedRegion(setting);
  const notes = [...setting.notes];
  if (evolved) notes.push(`Fewer than ${LEAST_UNEVOLVED} stars are unevolved, so the turnoff itself was used as well.`);
  const comparison = makeComparison(
    setting,
    thinned(readyStars(setting.stars, region, setting.colourFloor), MOST_STARS),
    region,
  );
  const [youngest, oldest] = setting.model.logAgeRange;
  const ages = (evolved ? CLOSE_LOG_AGES : LOG_AGES).filter((a) => a >= youngest && a <= oldest);
  const nodes = metallicityNodes(setting.model, setting.metallicity, metallicityError);
  const total = nodes.length * ages.length;
  let done = 0;
  const perNode = nodes.map((metallicity) => {
    const sequenceAt = sequenceMaker(setting, metallicity);
    const sequences = ages.map((a) => sequenceAt(a).sequence).filter((s): s is Sequence => s !== null);
    const scanned = sequences.filter((_, i) => i % 4 === 1);
    let start: PlaceStart = placeStart(setting, region, scanned, prior, range, modulusRange);
    const here: AgePart[] = [];
    for (const sequence of sequences) {
      const fit = fitPlace(comparison, sequence, prior, start);
      if (Number.isFinite(fit.logIntegral) && Number.isFinite(fit.ebvVariance + fit.modulusVariance)) {
        here.push({ fit, sequence });
        start = bestOf(here)?.fit ?? start;
      }
      options.onProgress?.(++done, total);
    }
    return here;
  });
  const best = bestOf(perNode[0]);
  const shares = { binary: Number.NaN, foreign: Number.NaN };
  if (best !== undefined) {
    likelihoodAt(comparison, best.sequence, best.fit.ebv, best.fit.modulus);
    Object.assign(shares, meanShares(comparison.work));
  }
  if (shares.foreign > FOREIGN_WARNING) {
    notes.push(
      `About ${Math.round(100 * shares.foreign)} % of the stars fit no sequence: check membership and what was given.`,
    );
  }
  const weighed = withMetallicity(perNode.map(weigh), nodes, metallicityError);
  const edge = best === undefined || best.fit.ebv < range[0] || best.fit.ebv > range[1];
  if (edge) notes.push('The best reddening lies outside the range searched, so it is not determined.');
  const drift = setting.modulus.error > 0 ? slopeOf(weighed) : 0;
  return {
    ebv: edge
      ? unknown()
      : quantiles(
          weighed.map((p) => ({
            at: p.ebv,
            sigma: Math.hypot(Math.sqrt(p.ebvVariance), given === null ? systematicError : 0),
            share: p.share,
          })),
        ),
    distanceModulus: edge
      ? unknown()
      : quantiles(
          weighed.map((p) => ({
            at: p.modulus,
            sigma: Math.hypot(Math.sqrt(p.modulusVariance), drift * systematicError),
            share: p.share,
          })),
        ),
    correlation: correlationOf(weighed),
    starCount: comparison.stars.count,
    binaryShare: shares.binary,
    foreignShare: shares.foreign,
    notes: Object.freeze(notes),
  };
}

/** The unevolved part of the diagram; all of it where that holds too few stars. */
function unevolvedRegion(setting: ClusterSetting): { region: Region; evolved: boolean } {
  const { stars, order, ridge, bluest } = setting;
  const faintest = stars.magnitude[order[order.length - 1]] + 0.01;
  const bright = ridge.magnitude[bluest] + UNEVOLVED_BELOW;
  const below = order.filter((k) => stars.magnitude[k] >= bright).length;
  const evolved = below < LEAST_UNEVOLVED;
  return { region: regionOf(setting, evolved ? stars.magnitude[order[0]] - 0.01 : bright, faintest), evolved };
}

interface AgePart {
  readonly fit: PlaceFit;
  readonly sequence: Sequence;
}

function bestOf(parts: readonly AgePart[]): AgePart | undefined {
  return parts.reduce<AgePart | undefined>(
    (a, b) => (a === undefined || b.fit.logIntegral > a.fit.logIntegral ? b : a),
    undefined,
  );
}

/** A Gaussian in reddening and distance, and its share. */
interface Weighed {
  readonly ebv: number;
  readonly modulus: number;
  readonly ebvVariance: number;
  readonly modulusVariance: number;
  readonly covariance: number;
  readonly share: number;
}

/** The ages that count, each with its share. */
function weigh(parts: readonly AgePart[]): Weighed[] {
  const top = bestOf(parts)?.fit.logIntegral ?? 0;
  return parts
    .filter((p) => p.fit.logIntegral > top - 20)
    .map((p) => ({ ...p.fit, share: Math.exp(p.fit.logIntegral - top) }));
}

/**
 * The central result, spread as the metallicity wanders. Each metallicity counts as was known beforehand: the bends of a model's
 * sequence are not trusted to measure it.
 */
function withMetallicity(perNode: readonly Weighed[][], nodes: readonly number[], error: number): Weighed[] {
  const means = perNode.map(moments);
  const ebv = metallicityShifts(
    nodes,
    means.map((m) => m.e),
    error,
  );
  const modulus = metallicityShifts(
    nodes,
    means.map((m) => m.m),
    error,
  );
  return perNode[0].flatMap((part) =>
    ebv.map(({ shift, weight }, j) => ({
      ...part,
      ebv: part.ebv + shift,
      modulus: part.modulus + (modulus[j]?.shift ?? 0),
      share: part.share * weight,
    })),
  );
}

function moments(parts: readonly Weighed[]) {
  let total = 0;
  let e = 0;
  let m = 0;
  for (const p of parts) {
    total += p.share;
    e += p.share * p.ebv;
    m += p.share * p.modulus;
  }
  e /= total;
  m /= total;
  let ee = 0;
  let mm = 0;
  let em = 0;
  for (const p of parts) {
    ee += (p.share / total) * (p.ebvVariance + (p.ebv - e) ** 2);
    mm += (p.share / total) * (p.modulusVariance + (p.modulus - m) ** 2);
    em += (p.share / total) * (p.covariance + (p.ebv - e) * (p.modulus - m));
  }
  return { e, m, ee, mm, em };
}

function correlationOf(parts: readonly Weighed[]): number {
  const { ee, mm, em } = moments(parts);
  return ee > 0 && mm > 0 ? em / Math.sqrt(ee * mm) : 0;
}

/** How much the modulus moves with the reddening along the fit. */
function slopeOf(parts: readonly Weighed[]): number {
  const { ee, em } = moments(parts);
  return ee > 0 ? Math.abs(em / ee) : 0;
}

const unknown = () => measured(Number.NaN, Number.NaN, Number.NaN, 'mag');

function quantiles(parts: readonly GaussianPart[]): Measured {
  // What was held has no error.
  if (parts.every((p) => p.sigma === 0)) return measured(parts[0].at, parts[0].at, parts[0].at, 'mag');
  const spread = parts.map((p) => ({ ...p, sigma: Math.max(p.sigma, 1e-9) }));
  const at = (q: number) => gaussianSumQuantile(spread, q);
  const value = at(0.5);
  return measured(value, Math.min(value, at(0.158655)), Math.max(value, at(0.841345)), 'mag');
}

function show(fit: MainSequenceFit): MainSequenceFit {
  const rows = [
    ['E(B-V)', String(fit.ebv)],
    ['distance modulus', String(fit.distanceModulus)],
    ['correlation', fit.correlation.toFixed(2)],
    ['unresolved binaries', `${Math.round(100 * fit.binaryShare)} %`],
    ['stars that fit no sequence', `${Math.round(100 * fit.foreignShare)} %`],
  ];
  const title = `Main-sequence fit to ${fit.starCount} stars`;
  const head = ['quantity', 'value'];
  return presentable(fit, {
    text: () => [title, textTable(head, rows), ...fit.notes.map((t) => `- ${t}`)].join('\n'),
    html: () =>
      `<div>${htmlTable(head, rows, { caption: title })}<ul>${fit.notes.map((t) => `<li>${escapeHtml(t)}</li>`).join('')}</ul></div>`,
  });
}
