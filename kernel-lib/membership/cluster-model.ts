import type { Stars } from './stars';

/** What a cluster looks like in motion and parallax, apart from its share of the stars. Immutable. */
export interface ClusterModel {
  /** Names of the fitted numbers, for messages and tables. */
  readonly names: readonly string[];
  /** The fitted numbers, shape (names). */
  readonly parameters: Float64Array;
  /** Steps for derivatives, 0 for a number held at its limit; shape (names). */
  readonly steps: Float64Array;
  /** The same model with other numbers. */
  withParameters(parameters: Float64Array): ClusterModel;
  /** Density of each star under the cluster, its errors included, per (mas/yr)^2 mas, into `out` of shape (count). */
  density(stars: Stars, out: Float64Array): void;
  /** The model improved, given each star's probability of belonging; shape (count). */
  improve(stars: Stars, probability: Float64Array): ClusterModel;
}
