import { Catalogue } from '../catalogue/catalogue';
import type { ColumnData } from '../catalogue/columns';
import { RADIANS_PER_DEGREE } from '../quantity/constants';
import { measured, measuredFromSigma } from '../quantity/measured';
import { checkChoice, checkOptions, checkRange } from '../quantity/options';
import { randomStream } from '../quantity/random';
import { type Astrometry, type ConstantErrors, type CorrelationColumns, readAstrometry } from './astrometry';
import { bestStart } from './best-start';
import { addComponent, growField, informationCriterion } from './choose-field';
import { clusterStarts, type MotionGuess } from './cluster-starts';
import { firstField } from './field-stars';
import { fitErrors } from './information';
import { Membership } from './membership';
import { fitMixture, type Mixture } from './mixture';
import { kinematicParallaxes } from './space-motion';
import { type Stars, takeStars } from './stars';
import { type Direction, fieldSummary, meanSummary, spaceSummary } from './summaries';

/** What `findMembers` takes. */
export interface FindMembersOptions {
  /**
   * 'mean': one mean proper motion and parallax, for clusters small on the sky. 'space-velocity': one velocity in space, seen
   * at each star's own place, for near clusters whose motions fan out (needs positions; uses radial velocities where their
   * role is known). Default: 'mean'.
   */
  motion?: 'mean' | 'space-velocity';
  /** Gaussians of the field, 1 to 12. Default: as many as the Bayesian information criterion asks for, up to 6. */
  fieldComponents?: number;
  /** Default: true. False leaves parallax out (only with motion 'mean'). */
  useParallax?: boolean;
  /** Where to start, instead of searching. Only a start: the fit moves to the best place near it. */
  guess?: MotionGuess;
  /** One error for all stars, where the catalogue has no error columns. */
  errors?: ConstantErrors;
  /** Columns with the correlations of a star's errors. Default: found by their usual names, else none. */
  correlations?: CorrelationColumns;
  /**
   * Largest spread of the cluster itself in one direction: mas/yr with motion 'mean' (default: that of 3 km/s),
   * km/s with 'space-velocity' (default: 3).
   */
  dispersionLimit?: number;
  /** Places to start from, 1 to 1000. Default: 40. */
  starts?: number;
  /** Iterations at most, 1 to 100000. Default: 500. */
  maxIterations?: number;
  /** Stop when the log-likelihood gains less than this a star. Default: 1e-6. */
  tolerance?: number;
  /** Of the starts and of the stars that the search is done on when there are very many. Default: 1. */
  seed?: number;
  /** Called with the share of the work that is done (of 1 in all) and what is being done. */
  onProgress?: (done: number, total: number, note?: string) => void;
}

const KNOWN: readonly (keyof FindMembersOptions)[] = [
  'motion',
  'fieldComponents',
  'useParallax',
  'guess',
  'errors',
  'correlations',
  'dispersionLimit',
  'starts',
  'maxIterations',
  'tolerance',
  'seed',
  'onProgress',
];

/** Stars that the search for the best start is done on, at most; the fit itself is finished on all stars. */
const SEARCH_STARS = 40_000;
/** And for the number of field components. */
const FIELD_STARS = 6000;
/** Below this many stars nothing can be told from the field. */
const FEWEST_STARS = 20;
const MOST_COMPONENTS = 6;

/**
 * Which stars of a field belong to a cluster: a mixture of one cluster and a field of several Gaussians in proper motion and
 * parallax, every star with its own errors, fitted by expectation-maximisation from several seeded starts.
 *
 * The shares of cluster and field may differ between stars of small and large errors (bright and faint), so that
 * probabilities stay calibrated when the cluster's mix of magnitudes is not the field's. A fit of the field alone is made as
 * well; where that explains the stars as well, no cluster is reported. With more than 40,000 stars the search for the best
 * start is done on a seeded choice of 40,000; the fit is then continued on all of them, and the probabilities belong to it.
 *
 * @param catalogue needs the roles properMotionRa, properMotionDec, parallax and their errors; rightAscension and declination
 *                  for a velocity in space. Rows that lack one are counted and get probability NaN.
 * @returns probabilities of shape (rows), the expected number of members with its error, the cluster's motion, parallax and own
 *          spreads; `found` is false, and the probabilities 0, when there is no cluster
 * @throws Error when a role or its errors are missing; TypeError or RangeError on an option that is unknown or out of range
 * @example
 * const members = findMembers(field);
 * members.expectedCount;        // 412 ± 14
 * const cluster = members.select(0.5);
 * Source: mixture with errors: Bovy, Hogg & Roweis 2011, Ann. Appl. Stat. 5, 1657; moving cluster: Lindegren, Madsen & Dravins
 * 2000, A&A 356, 1119; choice of model: Schwarz 1978, Ann. Stat. 6, 461.
 */
export function findMembers(catalogue: Catalogue, options: FindMembersOptions = {}): Membership {
  checkOptions('findMembers', options, KNOWN);
  if (!(catalogue instanceof Catalogue)) throw new TypeError('findMembers: the first argument must be a Catalogue.');
  const settings = checkSettings(options);
  const astrometry = readAstrometry('findMembers', catalogue, {
    useParallax: settings.useParallax,
    positions: settings.motion === 'space-velocity',
    errors: options.errors,
    correlations: options.correlations,
  });
  const { stars } = astrometry;
  const reason = whyHopeless(stars);
  if (reason !== null) return notFound(catalogue, astrometry, settings, null, 0, [reason]);

  const stream = randomStream(settings.seed);
  const progress = (done: number, stage: string) => options.onProgress?.(done, 1, stage);
  progress(0, 'field');
  const sample =
    stars.count > SEARCH_STARS ? takeStars(stars, chooseRows(stars.count, SEARCH_STARS, stream.fork(1))) : stars;
  const most = settings.fieldComponents ?? Math.max(1, Math.min(MOST_COMPONENTS, Math.floor(sample.count / 100)));
  const least = settings.fieldComponents ?? 1;
  const few =
    sample.count > FIELD_STARS ? takeStars(sample, chooseRows(sample.count, FIELD_STARS, stream.fork(3))) : sample;
  const bare = fitMixture(few, { cluster: null, field: firstField(few) }, 50, 1e-6);
  const grown = growField(few, bare, least, most, 2);
  const alone = few === sample ? grown : fitMixture(sample, grown, 50, 1e-6);
  progress(0.2, 'starts');

  const starts = clusterStarts(sample, settings, stream.fork(2));
  const best = bestStart(sample, alone, starts, settings.maxIterations, settings.tolerance, (done) =>
    progress(0.2 + 0.4 * done, 'starts'),
  );
  progress(0.6, 'fit');
  let fit = fitMixture(sample, best, settings.maxIterations, settings.tolerance);
  let iterations = fit.iterations;
  if (settings.fieldComponents === undefined) fit = growField(sample, fit, 1, most + 1, 1);

  const evidence = evidenceFor(sample, alone, fit, settings);
  progress(0.7, 'all stars');
  fit = fitMixture(stars, fit, settings.maxIterations, settings.tolerance, (k) =>
    progress(0.7 + (0.3 * k) / settings.maxIterations, 'all stars'),
  );
  iterations += fit.iterations;
  progress(1, 'done');

  const errors = fitErrors(stars, fit);
  const doubt = whyDoubtful(fit, evidence, errors.countError);
  if (doubt !== null) {
    return notFound(catalogue, astrometry, settings, fit, evidence, [doubt, ...hints(settings)], starts.length);
  }
  return found(catalogue, astrometry, settings, fit, { evidence, iterations, starts: starts.length, errors });
}

/** Options with defaults, checked. */
export interface Settings {
  readonly motion: 'mean' | 'space-velocity';
  readonly fieldComponents: number | undefined;
  readonly useParallax: boolean;
  readonly guess: MotionGuess | undefined;
  readonly dispersionLimit: number | undefined;
  readonly starts: number;
  readonly maxIterations: number;
  readonly tolerance: number;
  readonly seed: number;
}

function checkSettings(options: FindMembersOptions): Settings {
  const {
    motion = 'mean',
    fieldComponents,
    useParallax = true,
    guess,
    dispersionLimit,
    starts = 40,
    maxIterations = 500,
    tolerance = 1e-6,
    seed = 1,
  } = options;
  checkChoice('findMembers', 'motion', motion, ['mean', 'space-velocity']);
  checkOptions('findMembers: errors', options.errors, ['properMotion', 'parallax']);
  checkOptions('findMembers: correlations', options.correlations, [
    'properMotions',
    'parallaxProperMotionRa',
    'parallaxProperMotionDec',
  ]);
  if (fieldComponents !== undefined) checkWhole('fieldComponents', fieldComponents, 1, 12);
  checkWhole('starts', starts, 1, 1000);
  checkWhole('maxIterations', maxIterations, 1, 100_000);
  checkRange('findMembers', 'tolerance', tolerance, 0, 1);
  if (dispersionLimit !== undefined) checkRange('findMembers', 'dispersionLimit', dispersionLimit, 1e-6, 1e6);
  if (motion === 'space-velocity' && !useParallax) {
    throw new RangeError("findMembers: motion 'space-velocity' needs parallaxes; leave useParallax at true.");
  }
  return { motion, fieldComponents, useParallax, guess, dispersionLimit, starts, maxIterations, tolerance, seed };
}

function checkWhole(name: string, value: number, low: number, high: number): void {
  checkRange('findMembers', name, value, low, high);
  if (!Number.isInteger(value)) throw new RangeError(`findMembers: ${name} must be a whole number, got ${value}.`);
}

/** Why no search makes sense, or null. */
function whyHopeless(stars: Stars): string | null {
  if (stars.count < FEWEST_STARS) {
    return `Only ${stars.count} stars have all that the fit needs; at least ${FEWEST_STARS} are needed to tell a cluster from a field.`;
  }
  const [ra, dec, plx] = stars.spread;
  if (!(ra > 0 && dec > 0))
    return 'The proper motions of nearly all stars are equal: there is no field to compare with.';
  if (stars.useParallax && !(plx > 0)) {
    return 'The parallaxes of nearly all stars are equal: leave them out with useParallax: false.';
  }
  return null;
}

/** A seeded choice of rows, in ascending order. */
function chooseRows(count: number, wanted: number, stream: ReturnType<typeof randomStream>): Uint32Array {
  const all = Uint32Array.from({ length: count }, (_, i) => i);
  for (let k = 0; k < wanted; k++) {
    const at = k + stream.below(count - k);
    const held = all[k];
    all[k] = all[at];
    all[at] = held;
  }
  return all.slice(0, wanted).sort();
}

/** Evidence beyond which a longer climb of the field alone cannot matter: at least this, and this for each star. */
const AMPLE_EVIDENCE = 500;
const AMPLE_EVIDENCE_PER_STAR = 0.1;

/**
 * By how much the cluster lowers the information criterion against the best explanation without one: the field alone, also
 * with one component more in the cluster's stead.
 */
function evidenceFor(stars: Stars, alone: Mixture, fit: Mixture, settings: Settings): number {
  const lowest = (...mixtures: Mixture[]) => Math.min(...mixtures.map((m) => informationCriterion(stars, m)));
  const own = informationCriterion(stars, fit);
  const wider = addComponent(stars, alone);
  const quick = lowest(alone, wider) - own;
  if (quick > Math.max(AMPLE_EVIDENCE, AMPLE_EVIDENCE_PER_STAR * stars.count)) return quick;
  const polish = (m: Mixture) => fitMixture(stars, m, settings.maxIterations, settings.tolerance);
  return lowest(polish(alone), polish(wider)) - own;
}

/** Why the fitted cluster is not to be believed, or null. */
function whyDoubtful(fit: Mixture, evidence: number, countError: number): string | null {
  let expected = 0;
  let likely = 0;
  for (const p of fit.probability) {
    expected += p;
    if (p > 0.5) likely += p;
  }
  if (!(evidence > 10)) {
    return `The best cluster lowers the Bayesian information criterion by ${evidence.toFixed(1)}; more than 10 is asked for.`;
  }
  if (likely < 5)
    return `The best cluster holds ${likely.toFixed(1)} stars that are likelier members than field; 5 are asked for.`;
  if (expected < 3 * countError) {
    return `The best cluster holds ${expected.toFixed(1)} ± ${countError.toFixed(1)} members: less than three standard errors.`;
  }
  return null;
}

/** What may have kept a cluster from being found. */
function hints(settings: Settings): string[] {
  const out: string[] = [];
  if (settings.guess !== undefined) out.push('Searched only near the guess: without it the whole field is searched.');
  if ((settings.fieldComponents ?? 9) < 3) {
    out.push('So few field components seldom suffice: without fieldComponents their number is chosen by the data.');
  }
  out.push(
    'A field needs stars around the cluster to compare with: do not cut closely about its motion or parallax first.',
  );
  return out;
}

function notFound(
  catalogue: Catalogue,
  astrometry: Astrometry,
  settings: Settings,
  fit: Mixture | null,
  evidence: number,
  notes: readonly string[],
  starts = 0,
): Membership {
  const probability = new Float64Array(catalogue.rowCount).fill(Number.NaN);
  for (const row of astrometry.rows) probability[row] = 0;
  const field = fit === null ? { components: [], outlierShare: 0 } : fieldSummary(astrometry.stars, fit.field);
  return new Membership({
    catalogue,
    motion: settings.motion,
    found: false,
    probability,
    expectedCount: measured(0, 0, 0),
    cluster: null,
    spaceMotion: null,
    field: field.components,
    outlierShare: field.outlierShare,
    evidence,
    logLikelihood: fit === null ? Number.NaN : fit.logLikelihood,
    iterations: fit === null ? 0 : fit.iterations,
    converged: fit?.converged ?? false,
    starts,
    seed: settings.seed,
    usable: astrometry.stars.count,
    notes: [...notes, ...astrometry.notes],
    extraColumns: [],
  });
}

function found(
  catalogue: Catalogue,
  astrometry: Astrometry,
  settings: Settings,
  fit: Mixture,
  how: { evidence: number; iterations: number; starts: number; errors: ReturnType<typeof fitErrors> },
): Membership {
  const { stars, rows } = astrometry;
  const probability = new Float64Array(catalogue.rowCount).fill(Number.NaN);
  let expected = 0;
  for (let k = 0; k < rows.length; k++) {
    probability[rows[k]] = fit.probability[k];
    expected += fit.probability[k];
  }
  const direction = meanDirection(catalogue, rows, fit.probability);
  const share = expected / stars.count;
  const space =
    settings.motion === 'space-velocity' ? spaceSummary(stars, fit, how.errors, share, direction as Direction) : null;
  const cluster = space?.cluster ?? meanSummary(stars, fit, how.errors, share, direction);
  const field = fieldSummary(stars, fit.field);
  const notes = [...astrometry.notes];
  if (!fit.converged) {
    notes.unshift(`Not converged after ${fit.iterations} iterations: raise maxIterations or tolerance.`);
  }
  const limit = cluster.parallax.value / Math.max(cluster.parallax.upper - cluster.parallax.value, 1e-300);
  if (settings.useParallax && limit < 3) notes.push("The cluster's mean parallax is not three errors above zero.");
  return new Membership({
    catalogue,
    motion: settings.motion,
    found: true,
    probability,
    expectedCount: measuredFromSigma(expected, how.errors.countError),
    cluster,
    spaceMotion: space?.spaceMotion ?? null,
    field: field.components,
    outlierShare: field.outlierShare,
    evidence: how.evidence,
    logLikelihood: fit.logLikelihood,
    iterations: how.iterations,
    converged: fit.converged,
    starts: how.starts,
    seed: settings.seed,
    usable: stars.count,
    notes,
    extraColumns: settings.motion === 'space-velocity' ? kinematicColumns(catalogue, astrometry, fit) : [],
  });
}

/** Unit vector to the mean place of the members; null without positions. */
function meanDirection(catalogue: Catalogue, rows: Uint32Array, probability: Float64Array): Direction | null {
  if (!catalogue.has('rightAscension') || !catalogue.has('declination')) return null;
  const ra = catalogue.numbers('rightAscension');
  const dec = catalogue.numbers('declination');
  const sum = [0, 0, 0];
  for (let k = 0; k < rows.length; k++) {
    const a = ra[rows[k]] * RADIANS_PER_DEGREE;
    const d = dec[rows[k]] * RADIANS_PER_DEGREE;
    if (Number.isNaN(a + d)) continue;
    sum[0] += probability[k] * Math.cos(d) * Math.cos(a);
    sum[1] += probability[k] * Math.cos(d) * Math.sin(a);
    sum[2] += probability[k] * Math.sin(d);
  }
  const length = Math.hypot(...sum);
  return length > 0 ? [sum[0] / length, sum[1] / length, sum[2] / length] : null;
}

function kinematicColumns(catalogue: Catalogue, astrometry: Astrometry, fit: Mixture): ColumnData[] {
  const { stars, rows } = astrometry;
  const value = new Float64Array(stars.count);
  const error = new Float64Array(stars.count);
  kinematicParallaxes(stars, fit.cluster as NonNullable<Mixture['cluster']>, value, error);
  const spreadOut = (of: Float64Array) => {
    const out = new Float64Array(catalogue.rowCount).fill(Number.NaN);
    for (let k = 0; k < rows.length; k++) out[rows[k]] = of[k];
    return out;
  };
  return [
    {
      name: 'kinematicParallax',
      values: spreadOut(value),
      unit: 'mas',
      description: 'parallax if the star moves with the cluster: the measured one and the motion together',
    },
    { name: 'kinematicParallaxError', values: spreadOut(error), unit: 'mas', description: 'its standard error' },
  ];
}
