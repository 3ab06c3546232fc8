import type { ClusterSetting, Guess } from './cluster-setting';
import { findPeak } from './peak';
import type { Sequence } from './sequence';
import {
  makeWorkspace,
  type ReadyStars,
  type Region,
  sequenceLogLikelihood,
  type Workspace,
} from './sequence-likelihood';

/** Stars, the part of the diagram they are compared in, and room to work. */
export interface Comparison {
  readonly stars: ReadyStars;
  readonly region: Region;
  readonly work: Workspace;
  /** Colour excess and extinction for one magnitude of E(B-V). */
  readonly perExcess: number;
  readonly perExtinction: number;
}

/** What is known beforehand of reddening and distance. An error of 0 holds the value, an infinite one leaves it free. */
export interface PlacePrior {
  readonly ebv: Guess;
  readonly modulus: Guess;
}

/** Where a sequence lies best on the stars. */
export interface PlaceFit {
  readonly ebv: number;
  readonly modulus: number;
  /** Variances and covariance; 0 for what was held. */
  readonly ebvVariance: number;
  readonly modulusVariance: number;
  readonly covariance: number;
  /** Log of the integral of likelihood and prior over reddening and distance. */
  readonly logIntegral: number;
  /** Steps that suited the search: a start for a sequence like this one. */
  readonly steps: readonly [number, number];
}

/** Where to begin. */
export interface PlaceStart {
  readonly ebv: number;
  readonly modulus: number;
  readonly steps?: readonly [number, number];
}

export function makeComparison(setting: ClusterSetting, stars: ReadyStars, region: Region): Comparison {
  const { perExcess, perExtinction } = setting;
  return { stars, region, work: makeWorkspace(stars.count), perExcess, perExtinction };
}

/** Log-likelihood of the stars on a sequence at a reddening and distance modulus. */
export function likelihoodAt(c: Comparison, sequence: Sequence, ebv: number, modulus: number): number {
  const { stars, region, work, perExcess, perExtinction } = c;
  return sequenceLogLikelihood(stars, sequence, ebv * perExcess, modulus + ebv * perExtinction, region, work);
}

/** Integrates likelihood and prior over reddening and distance by Laplace's method, from a start near the peak. */
export function fitPlace(c: Comparison, sequence: Sequence, prior: PlacePrior, start: PlaceStart): PlaceFit {
  const { ebv, modulus } = prior;
  const freeEbv = ebv.error > 0;
  const freeModulus = modulus.error > 0;
  const first: number[] = [];
  const from: number[] = [];
  if (freeEbv) {
    from.push(start.ebv);
    first.push(start.steps?.[0] ?? Math.min(ebv.error, 0.008));
  }
  if (freeModulus) {
    from.push(start.modulus);
    first.push(start.steps?.[1] ?? Math.min(modulus.error, 0.03));
  }
  const at = freeEbv ? 1 : 0;
  const pull = (x: number, g: Guess) => (Number.isFinite(g.error) ? -0.5 * ((x - g.value) / g.error) ** 2 : 0);
  const peak = findPeak(
    (x) => {
      const e = freeEbv ? x[0] : ebv.value;
      const m = freeModulus ? x[at] : modulus.value;
      return likelihoodAt(c, sequence, e, m) + (freeEbv ? pull(e, ebv) : 0) + (freeModulus ? pull(m, modulus) : 0);
    },
    from,
    first,
  );
  const both = freeEbv && freeModulus;
  const v = peak.covariance;
  const unknown = Number.isFinite(peak.top) ? Number.POSITIVE_INFINITY : Number.NaN;
  return {
    ebv: freeEbv ? peak.at[0] : ebv.value,
    modulus: freeModulus ? peak.at[at] : modulus.value,
    ebvVariance: freeEbv ? (v?.[0] ?? unknown) : 0,
    modulusVariance: freeModulus ? (v?.[both ? 3 : 0] ?? unknown) : 0,
    covariance: both ? (v?.[1] ?? 0) : 0,
    logIntegral: peak.logIntegral,
    steps: [freeEbv ? peak.steps[0] : 0, freeModulus ? peak.steps[at] : 0],
  };
}
