import type { ClusterModel } from './cluster-model';
import { type FieldModel, fieldPass, improveField } from './field-stars';
import type { Stars } from './stars';

/** A mixture with the numbers of its fit. */
export interface Mixture {
  /** null: the field alone */
  readonly cluster: ClusterModel | null;
  readonly field: FieldModel;
  /** natural logarithm, of all stars */
  readonly logLikelihood: number;
  readonly iterations: number;
  readonly converged: boolean;
  /** Probability of belonging to the cluster, shape (count). */
  readonly probability: Float64Array;
}

/**
 * Expectation-maximisation from a given start.
 * @param tolerance stop when the log-likelihood gains less than this a star
 * @returns the last mixture whose probabilities were computed: numbers and probabilities belong together
 */
export function fitMixture(
  stars: Stars,
  start: { cluster: ClusterModel | null; field: FieldModel },
  maxIterations: number,
  tolerance: number,
  onIteration?: (iteration: number, logLikelihood: number) => void,
): Mixture {
  let { cluster, field } = start;
  const density = cluster === null ? null : new Float64Array(stars.count);
  const probability = new Float64Array(stars.count);
  let before = Number.NEGATIVE_INFINITY;
  for (let iteration = 1; ; iteration++) {
    if (cluster !== null && density !== null) cluster.density(stars, density);
    const sums = fieldPass(stars, field, density, probability);
    onIteration?.(iteration, sums.logLikelihood);
    // The shrunken shares can lower the likelihood by a hair near the top: that ends the climb as well.
    const converged = Math.abs(sums.logLikelihood - before) <= tolerance * stars.count;
    if (converged || iteration >= maxIterations) {
      return { cluster, field, logLikelihood: sums.logLikelihood, iterations: iteration, converged, probability };
    }
    before = sums.logLikelihood;
    field = improveField(stars, field, sums);
    if (cluster !== null) cluster = cluster.improve(stars, probability);
  }
}
