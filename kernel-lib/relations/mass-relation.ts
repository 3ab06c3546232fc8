import type { Catalogue } from '../catalogue/catalogue';
import { type Measured, measuredFromSamples } from '../quantity/measured';
import { checkChoice, checkOptions, checkRange, describe } from '../quantity/options';
import { METHOD_WORDS, RELATION_METHODS, type RelationMethod } from './line-methods';
import { MAIN_SEQUENCE_RULE, mainSequencePlace, PLACE } from './main-sequence-stars';
import { type BreakScore, fitPowerLaw, type PowerLaw, type PowerLawSettings } from './power-law-fit';
import {
  around,
  breaksOf,
  constantsOf,
  drawnValues,
  exponentsOf,
  type LeverageStar,
  leverageOf,
  type Outlier,
  outliersOf,
  type RelationResiduals,
  residualsOf,
} from './relation-result';
import {
  type RelationColumns,
  type RelationQuantity,
  type RelationStars,
  readRelationStars,
  type StarsOfKnownMass,
  takeStars,
} from './relation-stars';

/** Options of `fitMassLuminosity` and `fitMassRadius`. */
export interface MassRelationOptions {
  /** Number of free breaks (0 to 6), their places in solar masses, or `auto`: 0 to 3 by BIC. Default: 0. */
  readonly breaks?: number | readonly number[] | 'auto';
  /** Default `posterior`: errors in both axes and intrinsic scatter. */
  readonly method?: RelationMethod;
  /** Whether the pieces join at the breaks; the method `posterior` only, the others fit each piece alone. Default: true. */
  readonly continuous?: boolean;
  /** Which stars: on the main sequence by mass and radius against the models, or all. Default: main sequence where radii are known. */
  readonly select?: 'main-sequence' | 'all';
  /** [Fe/H] of the models, dex, -2.27 to 0.2. Default: 0. */
  readonly metallicity?: number;
  /** Default: 1. */
  readonly seed?: number;
  /** Posterior draws wanted (counted as independent ones), or bootstrap resamples; 50 to 100,000. Default: 1000. */
  readonly resamples?: number;
  /** Columns of the catalogue, where they are not named as usual. */
  readonly columns?: RelationColumns;
  /** Called with steps done and in all; return false to stop early. */
  readonly onProgress?: (done: number, total: number) => boolean | undefined;
}

/** A star that was not fitted, and why. */
export interface ExcludedStar {
  readonly name: string;
  readonly row: number;
  readonly reason: string;
}

/** Exponents of the same pieces from another choice of stars. */
export interface OtherSelection {
  readonly stars: string;
  readonly count: number;
  readonly exponents: readonly Measured[];
  /** These exponents less those of the fit. */
  readonly shift: readonly number[];
  readonly scatter: Measured;
}

/** The fit and its neighbours: what the choice of stars does to it. */
export interface SelectionComparison {
  readonly selected: 'main-sequence' | 'all';
  readonly others: readonly OtherSelection[];
  /** The bias, in words. */
  readonly bias: readonly string[];
}

/** What every fitted relation with mass holds. */
export interface MassRelationFit {
  readonly quantity: RelationQuantity;
  readonly method: RelationMethod;
  readonly continuous: boolean;
  /** d log(quantity) / d log(mass), one a piece, from low to high mass. */
  readonly exponents: readonly Measured[];
  /** Solar masses; where one of the simpler methods held a break where the likelihood put it, without interval. */
  readonly breaks: readonly Measured[];
  /** log10 of the quantity at 1 solar mass, each piece extended to there. */
  readonly constants: readonly Measured[];
  /** Intrinsic scatter in the quantity, dex. */
  readonly scatter: Measured;
  /** Score of each number of breaks that was tried, by the likelihood of the method `posterior`; smaller is better. Empty where a simpler method was told its breaks. */
  readonly bic: readonly BreakScore[];
  readonly starCount: number;
  /** Solar masses of the fitted stars. */
  readonly massRange: readonly [number, number];
  /** Number of stars on each piece. */
  readonly starsOnPiece: readonly number[];
  readonly outliers: readonly Outlier[];
  readonly leverage: readonly LeverageStar[];
  readonly excluded: readonly ExcludedStar[];
  readonly comparison: SelectionComparison;
  readonly residuals: RelationResiduals;
  readonly notes: readonly string[];
}

const OPTIONS = [
  'breaks',
  'method',
  'continuous',
  'select',
  'metallicity',
  'seed',
  'resamples',
  'columns',
  'onProgress',
] as const;
/** An equal pair counted as one star lies this far above, dex; those within 0.15 of it are set aside for comparison. */
const PAIR = Math.log10(2);

/** The fit with what the public functions still need. */
export interface RelationCore {
  readonly fit: MassRelationFit;
  readonly law: PowerLaw;
  readonly stars: RelationStars;
}

/** Reads, selects, fits, and compares choices of stars. */
export function fitMassRelation(
  caller: string,
  given: Catalogue | StarsOfKnownMass,
  quantity: RelationQuantity,
  options: MassRelationOptions,
): RelationCore {
  checkOptions(caller, options, OPTIONS);
  const { metallicity = 0 } = options;
  const settings = settle(caller, options);
  const all = readRelationStars(caller, given, quantity, options.columns);
  const select = options.select ?? (all.hasRadius ? 'main-sequence' : 'all');
  checkChoice(caller, 'select', select, ['main-sequence', 'all']);
  if (select === 'main-sequence' && !all.hasRadius) {
    throw new Error(
      `${caller}: select: 'main-sequence' goes by radius, and no radii are given; pass radius or logRadius, or select: 'all'.`,
    );
  }
  const place = all.hasRadius ? mainSequencePlace(all.logMass, all.logRadius, all.logRadiusError, metallicity) : null;
  const onSequence = place === null ? null : rowsWhere(all.count, (i) => place[i] === PLACE.on);
  if (select === 'main-sequence') checkSelection(caller, all, place as Uint8Array);
  const stars = select === 'main-sequence' ? takeStars(all, onSequence as number[]) : all;
  const law = fitPowerLaw(stars, settings);
  const residuals = residualsOf(stars, law);
  const exponents = exponentsOf(law);
  const excluded = select === 'main-sequence' ? excludedOf(all, place as Uint8Array) : [];
  const masses = stars.logMass.slice().sort();
  const edges = [Number.NEGATIVE_INFINITY, ...law.best.breaks, Number.POSITIVE_INFINITY];
  const notes = [METHOD_WORDS[settings.method], ...law.notes];
  if (select === 'main-sequence') notes.push(MAIN_SEQUENCE_RULE);
  else if (!all.hasRadius)
    notes.push('No radii are known, so evolved stars could not be told apart: all stars were fitted.');
  if (all.dropped > 0) notes.push(`${all.dropped} rows without mass or ${quantity} were left out.`);
  if (select === 'main-sequence' && quantity === 'radius') {
    notes.push('Stars were chosen by the very radius that is fitted, so the scatter is a lower limit.');
  }
  const fit: MassRelationFit = {
    quantity,
    method: settings.method,
    continuous: settings.continuous && settings.method === 'posterior',
    exponents,
    breaks: breaksOf(law),
    constants: constantsOf(law),
    scatter: around(law.bestScatter, law.draws.scatter, 'dex'),
    bic: Object.freeze([...law.bic]),
    starCount: stars.count,
    massRange: Object.freeze([10 ** masses[0], 10 ** masses[masses.length - 1]] as const),
    starsOnPiece: Object.freeze(
      exponents.map((_, k) => stars.logMass.filter((m) => m > edges[k] && m <= edges[k + 1]).length),
    ),
    outliers: outliersOf(stars, residuals),
    leverage: leverageOf(stars, law, residuals, settings.method),
    excluded: Object.freeze(excluded),
    comparison: compare(quantity, all, stars, onSequence, select, law, exponents, settings),
    residuals,
    notes: Object.freeze(notes),
  };
  return { fit, law, stars };
}

/** Value of the quantity at a mass, with the interval of the fit; NaN outside the fitted masses. */
export function relationAt(core: RelationCore, mass: number, unit: string): Measured {
  const [low, high] = core.fit.massRange;
  if (!(mass >= low * (1 - 1e-12) && mass <= high * (1 + 1e-12))) return measuredFromSamples([], unit);
  const logs = drawnValues(core.law, Math.log10(mass));
  return measuredFromSamples(
    logs.map((v) => 10 ** v),
    unit,
  );
}

function settle(caller: string, options: MassRelationOptions): PowerLawSettings {
  const { breaks = 0, method = 'posterior', resamples = 1000, seed = 1, onProgress } = options;
  checkChoice(caller, 'method', method, RELATION_METHODS);
  checkRange(caller, 'resamples', resamples, 50, 100000);
  if (options.continuous === true && method !== 'posterior') {
    throw new TypeError(
      `${caller}: continuous: true needs method "posterior"; "${method}" fits each piece alone. Leave continuous out.`,
    );
  }
  const { continuous = true } = options;
  const base = { caller, method, continuous, resamples: Math.round(resamples), seed, onProgress };
  if (breaks === 'auto') return { ...base, breaks };
  if (typeof breaks === 'number') {
    checkRange(caller, 'breaks', breaks, 0, 6);
    if (!Number.isInteger(breaks)) {
      throw new TypeError(
        `${caller}: breaks is ${breaks}; a number counts breaks, so give a whole one, or a list of solar masses: [${breaks}].`,
      );
    }
    return { ...base, breaks };
  }
  if (!Array.isArray(breaks) || breaks.length > 12 || !breaks.every((b) => typeof b === 'number' && b > 0)) {
    throw new TypeError(
      `${caller}: breaks must be a number of breaks, "auto", or a list of solar masses, got ${describe(breaks)}.`,
    );
  }
  return { ...base, breaks: breaks.map(Math.log10) };
}

function rowsWhere(n: number, keep: (i: number) => boolean): number[] {
  const out: number[] = [];
  for (let i = 0; i < n; i++) if (keep(i)) out.push(i);
  return out;
}

function checkSelection(caller: string, all: RelationStars, place: Uint8Array): void {
  const counts = [0, 0, 0, 0];
  for (const p of place) counts[p]++;
  if (counts[PLACE.on] > 0 || all.count === 0) return;
  throw new RangeError(
    `${caller}: none of ${all.count} stars is on the main sequence: ${counts[PLACE.larger]} are larger (evolved or not yet there), ` +
      `${counts[PLACE.smaller]} smaller, ${counts[PLACE.unknown]} without radius or outside the models. Check the units (solar), or pass select: 'all'.`,
  );
}

function excludedOf(all: RelationStars, place: Uint8Array): ExcludedStar[] {
  const reasons = {
    [PLACE.larger]: 'larger than main-sequence stars of its mass: evolved, or not yet on the main sequence',
    [PLACE.smaller]: 'smaller than main-sequence stars of its mass',
    [PLACE.unknown]: 'no radius, or mass outside the models (0.1 to 100)',
  } as Record<number, string>;
  return rowsWhere(all.count, (i) => place[i] !== PLACE.on).map((i) => {
    const { [i]: name } = all.name;
    return Object.freeze({ name, row: all.row[i], reason: reasons[place[i]] });
  });
}

/** The same pieces fitted to other choices of stars. */
function compare(
  quantity: RelationQuantity,
  all: RelationStars,
  stars: RelationStars,
  onSequence: readonly number[] | null,
  select: 'main-sequence' | 'all',
  law: PowerLaw,
  exponents: readonly Measured[],
  settings: PowerLawSettings,
): SelectionComparison {
  const others: OtherSelection[] = [];
  const bias: string[] = [];
  const again = (of: RelationStars, words: string): OtherSelection | null => {
    try {
      const other = fitPowerLaw(of, {
        ...settings,
        breaks: [...law.best.breaks],
        resamples: Math.min(settings.resamples, 300),
        onProgress: undefined,
      });
      const found = exponentsOf(other);
      const shift = Object.freeze(found.map((e, k) => e.value - exponents[k].value));
      const scatter = around(other.bestScatter, other.draws.scatter, 'dex');
      return Object.freeze({ stars: words, count: of.count, exponents: found, shift, scatter });
    } catch {
      // Too few stars are left on a piece.
      return null;
    }
  };
  const signed = (v: number) => `${v < 0 ? '-' : '+'}${Math.abs(v).toFixed(2)}`;
  const shifts = (o: OtherSelection) => o.shift.map(signed).join(', ');
  if (onSequence === null) {
    bias.push(
      'Evolved stars: not known without radii. They lie above the relation and steepen or flatten it where they crowd.',
    );
  } else if (onSequence.length === all.count) {
    bias.push('Evolved stars: none by the radii.');
  } else {
    const other = again(
      select === 'all' ? takeStars(all, onSequence) : all,
      select === 'all' ? 'main sequence only' : 'with the stars off the main sequence',
    );
    if (other === null) bias.push('Evolved stars: too few stars on a piece to fit without them.');
    else {
      others.push(other);
      bias.push(
        `Evolved stars: the fit ${other.stars} has exponents different by ${shifts(other)} and scatter ${String(other.scatter)}.`,
      );
    }
  }
  // A pair's light adds; its radius, measured star by star, does not.
  if (quantity === 'radius')
    return Object.freeze({ selected: select, others: Object.freeze(others), bias: Object.freeze(bias) });
  const residual = residualsOf(stars, law).residual;
  const single = rowsWhere(stars.count, (i) => Math.abs(residual[i] - PAIR) > PAIR / 2);
  const pairs = stars.count - single.length;
  if (pairs === 0)
    bias.push(
      'Unresolved pairs: no star lies 0.15 to 0.45 dex above the relation, where an equal pair taken for one star would.',
    );
  else {
    const other = again(takeStars(stars, single), 'without those 0.15 to 0.45 dex above');
    const effect =
      other === null ? 'too few are left without them' : `without them the exponents differ by ${shifts(other)}`;
    if (other !== null) others.push(other);
    bias.push(
      `Unresolved pairs: ${pairs} stars lie 0.15 to 0.45 dex above the relation, where an equal pair taken for one star would; ${effect} (evolution within the main sequence puts stars there too, so this is a limit).`,
    );
  }
  return Object.freeze({ selected: select, others: Object.freeze(others), bias: Object.freeze(bias) });
}
