import type { Catalogue } from '../catalogue/catalogue';
import { isochrone } from '../models/isochrone';
import { isochroneTurnoff } from '../models/isochrone-turnoff';
import { PHASE } from '../models/phases/phase';
import type { Isochrone } from '../models/stellar-model';
import { type Measured, measured } from '../quantity/measured';
import { checkOptions, checkRange } from '../quantity/options';
import { escapeHtml, htmlTable, presentable, textTable } from '../quantity/present';
import { randomStream } from '../quantity/random';
import { STAR_COLUMNS } from '../stars/columns';
import { evolutionaryGroup } from '../stars/evolutionary-group';
import { lineAt, TERMINAL_AGE_LINE, ZERO_AGE_LINE } from '../stars/main-sequence-band';
import { ageOf, hrColumns } from './evolutionary-state';
import { HR_FLOOR } from './isochrone-place';
import { interpolate, risingPart } from './mass-source';

/** Kinds of stars that are listed. */
export type OddityKind = 'white dwarf' | 'blue straggler' | 'equal-mass binary' | 'red clump' | 'giant' | 'supergiant';

/** A star on one of the lists. */
export interface Oddity {
  readonly kind: OddityKind;
  readonly name: string;
  /** Row of the catalogue, from 0. */
  readonly row: number;
  /** Share of the draws within its errors that put it there, times its membership probability where that is known. */
  readonly probability: number;
  readonly reason: string;
  readonly logTeff: number;
  readonly logL: number;
}

/** Options of `oddities`. */
export interface OdditiesOptions {
  /** Age of the cluster, Gyr, with or without its error. */
  readonly age: number | Measured;
  /** [Fe/H], dex. Default: 0. */
  readonly metallicity?: number;
  /** Stars of a smaller probability are not listed, 0 to 1. Default: 0.3. */
  readonly leastProbability?: number;
  /** Share of main-sequence stars that are pairs of nearly equal stars, before looking, 0 to 1. Default: 0.1. */
  readonly pairFraction?: number;
  /** Draws within the errors, 20 to 10,000. Default: 200. */
  readonly samples?: number;
  /** Default: 1. */
  readonly seed?: number;
}

/** The clump of giants that burn helium as a check of the distance. */
export interface ClumpCheck {
  readonly count: number;
  /** True modulus by the clump less the modulus used, mag: positive when the stars are fainter than the model's clump. */
  readonly modulusDifference: Measured;
  readonly sigmas: number;
}

/** Stars out of the common run of a cluster. */
export interface Oddities {
  readonly whiteDwarfs: readonly Oddity[];
  readonly blueStragglers: readonly Oddity[];
  readonly equalMassBinaries: readonly Oddity[];
  readonly redClump: readonly Oddity[];
  readonly giants: readonly Oddity[];
  readonly supergiants: readonly Oddity[];
  /** Null without clump stars in the cluster or in the model. */
  readonly clumpCheck: ClumpCheck | null;
  readonly notes: readonly string[];
}

const KINDS: readonly OddityKind[] = [
  'white dwarf',
  'blue straggler',
  'equal-mass binary',
  'red clump',
  'giant',
  'supergiant',
];
/** A straggler is hotter than the hottest point of the isochrone by this, dex. */
const BLUER = 0.015;
/** Height of two equal stars over the single-star sequence, dex. */
const PAIR = Math.log10(2);
/** Spread of either about its line beyond the errors, dex: unequal masses, rotation, models. */
const PAIR_SPREAD = 0.05;
/** Pairs are told from single stars only this far below the turnoff, dex in log L. */
const BELOW_TURNOFF = 0.15;
/** Accuracy of the model's clump luminosity, mag. Common practice, no source. */
const CLUMP_ACCURACY = 0.1;

/**
 * Lists of the stars that do not follow the common run of their cluster: white dwarfs, blue stragglers, pairs of equal stars, clump
 * giants, giants and supergiants, each with reason and probability, and the clump as a check of the distance.
 *
 * Rules: white dwarf: radius below 0.05 solar. Blue straggler: in the main-sequence band, hotter by 0.015 dex than the hottest point of the
 * isochrone and brighter than 0.1 dex below the turnoff. Equal-mass binary, below the turnoff: height over the isochrone at its
 * temperature of 0.15 to 0.45 dex, weighed between 0.30 dex (two equal stars) and 0 (a single star), with pairFraction as the prior. Red clump: a giant within 0.03 dex in temperature and 0.2 dex in luminosity of the model's core-helium-burning
 * giants. Giants and supergiants: see evolutionaryGroup.
 * @param catalogue with log_teff and log_l (physicalProperties), membershipProbability if known
 * @param options age (Gyr), metallicity, leastProbability, pairFraction, samples, seed
 * @returns frozen lists, the likeliest first
 * @throws TypeError on an unknown option; RangeError on values out of range; Error without the columns
 * @example oddities(stars, { age: 0.7 }).blueStragglers
 * Source: Hurley, Pols & Tout 2000, MNRAS 315, 543 (isochrone); the margins are this library's.
 */
export function oddities(catalogue: Catalogue, options: OdditiesOptions): Oddities {
  const caller = 'oddities';
  checkOptions(caller, options, ['age', 'metallicity', 'leastProbability', 'pairFraction', 'samples', 'seed']);
  const { metallicity = 0, leastProbability = 0.3, pairFraction = 0.1, samples = 200, seed = 1 } = options ?? {};
  const age = ageOf(caller, options?.age).value;
  checkRange(caller, 'leastProbability', leastProbability, 0, 1);
  checkRange(caller, 'pairFraction', pairFraction, 0, 1);
  checkRange(caller, 'samples', samples, 20, 10000);
  const { logTeff, logL } = hrColumns(caller, catalogue);
  const errors = (name: string) => (catalogue.has(name) ? catalogue.numbers(name) : null);
  const [eT, eL] = [errors(STAR_COLUMNS.logTeffError), errors(STAR_COLUMNS.logLError)];
  const member = catalogue.has('membershipProbability') ? catalogue.numbers('membershipProbability') : null;
  const names = catalogue.has('identifier') ? catalogue.values('identifier') : null;
  const model = modelOf(age, metallicity);
  const lists = new Map<OddityKind, Oddity[]>(KINDS.map((k) => [k, []]));
  const stream = randomStream(seed);
  const draws = Math.round(samples);
  for (let i = 0; i < catalogue.rowCount; i++) {
    if (!Number.isFinite(logTeff[i]) || !Number.isFinite(logL[i])) continue;
    const random = stream.fork(i);
    const st = Math.hypot(HR_FLOOR.logTeff, eT?.[i] || 0);
    const sl = Math.hypot(HR_FLOOR.logL, eL?.[i] || 0);
    const found = new Map<OddityKind, number>();
    for (let t = 0; t < draws; t++) {
      const kind = kindOf(model, logTeff[i] + st * random.normal(), logL[i] + sl * random.normal());
      if (kind !== null) found.set(kind, (found.get(kind) ?? 0) + 1);
    }
    const chances = new Map<OddityKind, number>();
    for (const [kind, count] of found) chances.set(kind, count / draws);
    const common = 1 - [...chances.values()].reduce((a, b) => a + b, 0);
    chances.set('equal-mass binary', common * pairProbability(model, logTeff[i], logL[i], st, sl, pairFraction));
    for (const [kind, chance] of chances) {
      const probability = chance * (member === null ? 1 : member[i] || 0);
      if (probability < leastProbability) continue;
      const name = names?.[i] == null ? `row ${i + 1}` : String(names[i]);
      const reason = reasonFor(kind, model, logTeff[i], logL[i]);
      lists
        .get(kind)
        ?.push(Object.freeze({ kind, name, row: i, probability, reason, logTeff: logTeff[i], logL: logL[i] }));
    }
  }
  const list = (kind: OddityKind) =>
    Object.freeze([...(lists.get(kind) ?? [])].sort((a, b) => b.probability - a.probability || a.row - b.row));
  const notes: string[] = [];
  if (member === null) notes.push('No membership probabilities are known: every star counts as a member.');
  if (eT === null || eL === null) notes.push('No errors of log_teff and log_l: 0.008 and 0.03 dex were taken.');
  if (Number.isNaN(model.turnoff.logL))
    notes.push('The isochrone has no turnoff: no blue stragglers or pairs were looked for.');
  notes.push(
    'Turnoff stars that rotate fast, and fast evolution past it, can pass for pairs: probabilities are those of the rules, not of physics.',
  );
  const result: Oddities = {
    whiteDwarfs: list('white dwarf'),
    blueStragglers: list('blue straggler'),
    equalMassBinaries: list('equal-mass binary'),
    redClump: list('red clump'),
    giants: list('giant'),
    supergiants: list('supergiant'),
    clumpCheck: checkClump(list('red clump'), model, eL),
    notes: Object.freeze(notes),
  };
  return show(result, age);
}

interface Model {
  readonly hottest: number;
  readonly turnoff: { readonly logTeff: number; readonly logL: number };
  /** Single-star main sequence below the turnoff: log L against log Teff, ascending. */
  readonly sequence: { readonly x: Float64Array; readonly y: Float64Array };
  /** Mean place of the model's core-helium-burning giants; NaN without. */
  readonly clump: { readonly logTeff: number; readonly logL: number };
}

function modelOf(age: number, metallicity: number): Model {
  const iso = isochrone({ logAge: 9 + Math.log10(age), metallicity, bands: [], points: 1500 });
  const turnoff = isochroneTurnoff(iso, { colour: null });
  let hottest = Number.NEGATIVE_INFINITY;
  const [x, y]: [number[], number[]] = [[], []];
  for (let i = 0; i < iso.count; i++) {
    if (iso.phase[i] !== PHASE.mainSequence) continue;
    hottest = Math.max(hottest, iso.logTeff[i]);
    if (!(iso.logL[i] < turnoff.logL)) continue;
    x.push(iso.logTeff[i]);
    y.push(iso.logL[i]);
  }
  const rising = risingPart(y, x);
  return {
    hottest,
    turnoff: { logTeff: turnoff.logTeff, logL: turnoff.logL },
    sequence: { x: rising.y, y: rising.x },
    clump: clumpOf(iso),
  };
}

/** Mean of the core-helium-burning points cooler than 5600 K, weighted by the mass they span. */
function clumpOf(iso: Isochrone): { logTeff: number; logL: number } {
  let sum = 0;
  let t = 0;
  let l = 0;
  for (let i = 0; i < iso.count; i++) {
    if (iso.phase[i] !== PHASE.coreHelium || iso.logTeff[i] > Math.log10(5600)) continue;
    const w = iso.weight[i];
    sum += w;
    t += w * iso.logTeff[i];
    l += w * iso.logL[i];
  }
  return { logTeff: t / sum, logL: l / sum };
}

function kindOf(model: Model, logTeff: number, logL: number): OddityKind | null {
  const group = evolutionaryGroup(logTeff, logL);
  if (group === 'white dwarfs') return 'white dwarf';
  if (group === 'supergiants') return 'supergiant';
  const { turnoff, clump } = model;
  if (group === 'giants' || group === 'subgiants') {
    const near = Math.abs(logTeff - clump.logTeff) < 0.03 && Math.abs(logL - clump.logL) < 0.2;
    if (near) return 'red clump';
    return group === 'giants' ? 'giant' : null;
  }
  if (logTeff > model.hottest + BLUER && logL > turnoff.logL - 0.1) {
    const zero = lineAt(ZERO_AGE_LINE, logTeff);
    const end = lineAt(TERMINAL_AGE_LINE, logTeff);
    const inBand = logL > zero - 0.3 && (Number.isNaN(end) || logL < end + 0.2);
    return inBand ? 'blue straggler' : null;
  }
  return null;
}

/** Probability that a star below the turnoff is a pair of equal stars and no single one. */
function pairProbability(model: Model, logTeff: number, logL: number, st: number, sl: number, prior: number): number {
  const { x, y } = model.sequence;
  const above = logL - interpolate(x, y, logTeff);
  if (!(logL - above < model.turnoff.logL - BELOW_TURNOFF)) return 0;
  if (!(Math.abs(above - PAIR) < PAIR / 2)) return 0;
  const step = 0.005;
  const slope = (interpolate(x, y, logTeff + step) - interpolate(x, y, logTeff - step)) / (2 * step);
  const sigma = Math.hypot(sl, (slope || 0) * st, PAIR_SPREAD);
  const density = (height: number) => Math.exp(-0.5 * ((above - height) / sigma) ** 2) / sigma;
  const pair = prior * density(PAIR);
  // Neither: a wide spread of unequal pairs and strangers, so that a star far from both is no pair.
  const neither = 0.1 / 1.5;
  return pair / (pair + (1 - prior) * density(0) + neither);
}

function reasonFor(kind: OddityKind, model: Model, logTeff: number, logL: number): string {
  const temperature = `${Math.round(10 ** logTeff)} K`;
  const radius = Number((10 ** (0.5 * logL - 2 * (logTeff - Math.log10(5772)))).toPrecision(2));
  if (kind === 'white dwarf') return `radius ${radius} solar, far below the main sequence`;
  if (kind === 'blue straggler') {
    return `${temperature}, hotter than the ${Math.round(10 ** model.hottest)} K at which single stars of this age turn off, and no fainter`;
  }
  if (kind === 'equal-mass binary') {
    const above = logL - interpolate(model.sequence.x, model.sequence.y, logTeff);
    return `${above.toFixed(2)} dex above the single-star sequence; two equal stars lie 0.30 above`;
  }
  if (kind === 'red clump')
    return `${temperature}, log L ${logL.toFixed(2)}: where giants of this age burn helium (log L ${model.clump.logL.toFixed(2)})`;
  return `${temperature}, radius ${radius} solar, past the main sequence`;
}

function checkClump(clump: readonly Oddity[], model: Model, errors: Float64Array | null): ClumpCheck | null {
  if (clump.length === 0 || Number.isNaN(model.clump.logL)) return null;
  const lights = Float64Array.from(clump, (s) => s.logL).sort();
  const middle = lights.length >> 1;
  const median = lights.length % 2 === 1 ? lights[middle] : (lights[middle - 1] + lights[middle]) / 2;
  const value = 2.5 * (model.clump.logL - median);
  let square = 0;
  for (const s of clump) square += Math.hypot(0.1, errors?.[s.row] || 0) ** 2 / clump.length;
  // Efficiency of a median; clump stars themselves spread by about 0.1 dex.
  const error = Math.hypot((2.5 * 1.2533 * Math.sqrt(square)) / Math.sqrt(clump.length), CLUMP_ACCURACY);
  return Object.freeze({
    count: clump.length,
    modulusDifference: measured(value, value - error, value + error, 'mag'),
    sigmas: value / error,
  });
}

const SHOWN = 8;

function show(result: Oddities, age: number): Oddities {
  const title = `Stars out of the common run at ${Number(age.toPrecision(3))} Gyr`;
  const lists = [
    result.whiteDwarfs,
    result.blueStragglers,
    result.equalMassBinaries,
    result.redClump,
    result.giants,
    result.supergiants,
  ];
  const head = ['kind', 'star', 'probability', 'reason'];
  const rows = () =>
    lists.flatMap((list, k) => {
      const shown = list.slice(0, SHOWN).map((o) => [o.kind, o.name, o.probability.toFixed(2), o.reason]);
      return list.length > SHOWN ? [...shown, [KINDS[k], `... ${list.length} in all`, '', '']] : shown;
    });
  const clump = () => {
    const c = result.clumpCheck;
    return c === null
      ? []
      : [
          `Red clump, ${c.count} stars: its distance modulus less the one used is ${c.modulusDifference} (${c.sigmas.toFixed(1)} sigma).`,
        ];
  };
  return presentable(result, {
    text: () => `${title}\n${textTable(head, rows())}\n${[...clump(), ...result.notes].join('\n')}`,
    html: () =>
      `<div>${htmlTable(head, rows(), { caption: title, numeric: [2] })}${[...clump(), ...result.notes].map((l) => `<div>${escapeHtml(l)}</div>`).join('')}</div>`,
  });
}
