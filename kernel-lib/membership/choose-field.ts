import { type FieldModel, splitField } from './field-stars';
import { fitMixture, type Mixture } from './mixture';
import type { Stars } from './stars';

/** Iterations of a field while the number of its components is still open. */
const TRIAL_ITERATIONS = 20;
const CHOSEN_ITERATIONS = 60;
const TRIAL_TOLERANCE = 3e-6;

/** Numbers that a field component adds to a fit. */
export function componentNumbers(stars: Stars): number {
  return (stars.useParallax ? 9 : 5) + stars.classes;
}

/**
 * Bayesian information criterion; lower is better. The cluster's shares of the classes of error size count as one number: they
 * scatter about one share, and a count of each would hide a small cluster in a large field.
 * Source: Schwarz 1978, Ann. Stat. 6, 461.
 */
export function informationCriterion(stars: Stars, mixture: Mixture): number {
  const { cluster, field } = mixture;
  const ofCluster = cluster === null ? 0 : cluster.parameters.length + 1;
  const numbers = field.components * componentNumbers(stars) + ofCluster;
  return numbers * Math.log(stars.count) - 2 * mixture.logLikelihood;
}

/** The mixture with one field component more, split where the likelihood gains most. */
export function addComponent(stars: Stars, mixture: Mixture): Mixture {
  let best: Mixture | null = null;
  const tried = new Set<number>([heaviest(mixture.field), widest(mixture.field)]);
  for (const k of tried) {
    for (const how of ['width', 'parallax'] as const) {
      if (how === 'parallax' && !stars.useParallax) continue;
      const field = splitField(stars, mixture.field, k, how);
      const next = fitMixture(stars, { cluster: mixture.cluster, field }, TRIAL_ITERATIONS, TRIAL_TOLERANCE);
      if (best === null || next.logLikelihood > best.logLikelihood) best = next;
    }
  }
  return fitMixture(stars, best as Mixture, CHOSEN_ITERATIONS, TRIAL_TOLERANCE);
}

/**
 * Components added one by one while the information criterion falls.
 * @param most     components at most
 * @param patience trials without a gain that end it
 * @param least    components at least, whatever the criterion says
 */
export function growField(stars: Stars, start: Mixture, least: number, most: number, patience: number): Mixture {
  let best = start;
  let current = start;
  let bestCriterion = informationCriterion(stars, start);
  let failures = 0;
  while (current.field.components < most && failures < patience) {
    current = addComponent(stars, current);
    const criterion = informationCriterion(stars, current);
    if (criterion < bestCriterion || current.field.components <= least) {
      best = current;
      bestCriterion = criterion;
      failures = 0;
    } else {
      failures++;
    }
  }
  return best;
}

function total(field: FieldModel, k: number): number {
  let sum = 0;
  for (let at = k; at < field.shares.length; at += field.components + 2) sum += field.shares[at];
  return sum;
}

function heaviest(field: FieldModel): number {
  let best = 0;
  for (let k = 1; k < field.components; k++) if (total(field, k) > total(field, best)) best = k;
  return best;
}

/** The component whose width, weighted by its share, is largest. */
function widest(field: FieldModel): number {
  let best = 0;
  const size = (k: number) => total(field, k) * (field.covariances[6 * k] + field.covariances[6 * k + 3]);
  for (let k = 1; k < field.components; k++) if (size(k) > size(best)) best = k;
  return best;
}
