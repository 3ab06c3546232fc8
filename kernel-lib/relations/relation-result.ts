import { type Measured, measured, measuredFromSamples } from '../quantity/measured';
import { brokenLineAt, pieceAt } from './broken-line';
import { type RelationMethod, residualError } from './line-methods';
import type { PowerLaw } from './power-law-fit';
import type { RelationStars } from './relation-stars';

/** A star that lies off the relation. */
export interface Outlier {
  readonly name: string;
  /** Row of the input, from 0. */
  readonly row: number;
  /** Solar masses. */
  readonly mass: number;
  /** Observed less relation, dex. */
  readonly residual: number;
  /** The residual in units of error and scatter together. */
  readonly sigmas: number;
}

/** A star that by its place alone has much say in the slope of its piece. */
export interface LeverageStar {
  readonly name: string;
  readonly row: number;
  readonly mass: number;
  /** 0 to 1: share of its own value in the fitted value there. */
  readonly leverage: number;
  /** Leverage over the average of its piece. */
  readonly timesAverage: number;
}

/** Residuals of the fitted stars, shape (n). */
export interface RelationResiduals {
  readonly logMass: Float64Array;
  /** Observed less relation, dex. */
  readonly residual: Float64Array;
  /** Error and scatter together, dex. */
  readonly error: Float64Array;
  readonly name: readonly string[];
}

/** Standard deviations beyond which a star is an outlier. */
const OUTLYING = 3;
/** Leverage in units of the average beyond which a star is named. */
const LEVERED = 3;

/** Exponents with their 68 % intervals. */
export function exponentsOf(law: PowerLaw): readonly Measured[] {
  return Object.freeze(law.draws.slopes.map((s, k) => around(law.best.slopes[k], s)));
}

/** Breaks in solar masses. */
export function breaksOf(law: PowerLaw): readonly Measured[] {
  return Object.freeze(
    law.draws.breaks.map((b, k) => {
      const at = 10 ** law.best.breaks[k];
      if (law.breakOrigin === 'drawn')
        return around(
          at,
          b.map((v) => 10 ** v),
          'solar masses',
        );
      const bound = law.breakOrigin === 'given' ? at : Number.NaN;
      return measured(at, bound, bound, 'solar masses');
    }),
  );
}

/** log10 of the value of each piece at 1 solar mass (the piece extended to there). */
export function constantsOf(law: PowerLaw): readonly Measured[] {
  return Object.freeze(law.draws.intercepts.map((c, k) => around(law.best.intercepts[k], c, 'dex')));
}

/** Median and interval of draws; the best value alone where there are none. */
export function around(best: number, draws: Float64Array, unit = ''): Measured {
  if (draws.length > 0) return measuredFromSamples(draws, unit);
  return measured(best, Number.NaN, Number.NaN, unit);
}

/** log10 of the fitted quantity at a mass, one value a draw. */
export function drawnValues(law: PowerLaw, logMass: number): Float64Array {
  const { count, breaks, slopes, intercepts } = law.draws;
  const out = new Float64Array(count);
  for (let t = 0; t < count; t++) {
    let k = 0;
    while (k < breaks.length && logMass > breaks[k][t]) k++;
    out[t] = intercepts[k][t] + slopes[k][t] * logMass;
  }
  return out;
}

/** Residuals of stars about the most probable line. */
export function residualsOf(stars: RelationStars, law: PowerLaw): RelationResiduals {
  const { best, bestScatter } = law;
  const residual = stars.logMass.map((m, i) => stars.logValue[i] - brokenLineAt(best, m));
  const error = stars.logMass.map((m, i) =>
    residualError(
      best.slopes[pieceAt(best.breaks, m)],
      stars.logMassError[i],
      stars.logValueError[i],
      stars.correlation[i],
      bestScatter,
    ),
  );
  return Object.freeze({ logMass: stars.logMass, residual, error, name: Object.freeze([...stars.name]) });
}

/** Stars beyond three standard deviations, the worst first. */
export function outliersOf(stars: RelationStars, residuals: RelationResiduals): readonly Outlier[] {
  const found: Outlier[] = [];
  for (let i = 0; i < stars.count; i++) {
    const sigmas = residuals.residual[i] / residuals.error[i];
    if (!(Math.abs(sigmas) > OUTLYING)) continue;
    const { [i]: name } = stars.name;
    found.push(
      Object.freeze({ name, row: stars.row[i], mass: 10 ** stars.logMass[i], residual: residuals.residual[i], sigmas }),
    );
  }
  return Object.freeze(found.sort((a, b) => Math.abs(b.sigmas) - Math.abs(a.sigmas)));
}

/** Stars with more than three times the average leverage of their piece, the greatest first. */
export function leverageOf(
  stars: RelationStars,
  law: PowerLaw,
  residuals: RelationResiduals,
  method: RelationMethod,
): readonly LeverageStar[] {
  const weighted = method === 'posterior' || method === 'errors-in-both-axes' || method === 'student-t';
  const weight = residuals.error.map((e) => (weighted && e > 0 ? 1 / (e * e) : 1));
  const found: LeverageStar[] = [];
  for (let k = 0; k < law.best.slopes.length; k++) {
    const rows: number[] = [];
    for (let i = 0; i < stars.count; i++) if (pieceAt(law.best.breaks, stars.logMass[i]) === k) rows.push(i);
    let sum = 0;
    let mean = 0;
    for (const i of rows) {
      sum += weight[i];
      mean += weight[i] * stars.logMass[i];
    }
    mean /= sum;
    let square = 0;
    for (const i of rows) square += weight[i] * (stars.logMass[i] - mean) ** 2;
    for (const i of rows) {
      const leverage = weight[i] / sum + (weight[i] * (stars.logMass[i] - mean) ** 2) / square;
      const timesAverage = (leverage * rows.length) / 2;
      if (!(timesAverage > LEVERED)) continue;
      const { [i]: name } = stars.name;
      found.push(Object.freeze({ name, row: stars.row[i], mass: 10 ** stars.logMass[i], leverage, timesAverage }));
    }
  }
  return Object.freeze(found.sort((a, b) => b.leverage - a.leverage));
}
