import type { ClusterModel } from './cluster-model';
import type { ClusterStart } from './cluster-starts';
import { fieldDensity } from './field-density';
import { withClusterShare } from './field-stars';
import { fitMixture, type Mixture } from './mixture';
import type { Stars } from './stars';

/** Iterations of every start against a field that stands still, and of the best few with the field moving. */
const SHORT = 20;
const LONG = 75;
const FINALISTS = 3;

/**
 * The start that climbs highest. All climb shortly with the field held still, which costs little; the best few that end in
 * different places then climb with the field.
 */
export function bestStart(
  stars: Stars,
  alone: Mixture,
  starts: readonly ClusterStart[],
  maxIterations: number,
  tolerance: number,
  progress: (done: number) => void,
): Mixture {
  const field = fieldDensity(stars, alone.field);
  const tried = starts.map((start, k) => {
    progress(k / starts.length);
    return climb(stars, field, start, Math.min(SHORT, maxIterations));
  });
  tried.sort((a, b) => b.logLikelihood - a.logLikelihood);
  const finalists: typeof tried = [];
  for (const t of tried) {
    if (finalists.length < FINALISTS && !finalists.some((f) => alike(f.cluster, t.cluster))) finalists.push(t);
  }
  let best: Mixture | null = null;
  for (const { cluster, share } of finalists) {
    const start = { cluster, field: withClusterShare(stars, alone.field, share) };
    const fit = fitMixture(stars, start, Math.min(LONG, maxIterations), tolerance);
    if (best === null || fit.logLikelihood > best.logLikelihood) best = fit;
  }
  return best as Mixture;
}

/** Whether two fits have come to the same place, seen against their steps for derivatives (a hundredth of the spread). */
function alike(a: ClusterModel, b: ClusterModel): boolean {
  return a.parameters.every((x, j) => a.steps[j] === 0 || Math.abs(x - b.parameters[j]) < 30 * a.steps[j]);
}

function climb(
  stars: Stars,
  field: Float64Array,
  start: ClusterStart,
  iterations: number,
): { cluster: ClusterModel; share: number; logLikelihood: number } {
  const n = stars.count;
  const density = new Float64Array(n);
  const probability = new Float64Array(n);
  let { cluster, share } = start;
  for (let iteration = 1; ; iteration++) {
    cluster.density(stars, density);
    let logLikelihood = 0;
    let sum = 0;
    for (let i = 0; i < n; i++) {
      const inside = share * density[i];
      const total = inside + (1 - share) * field[i];
      probability[i] = inside / total;
      sum += probability[i];
      logLikelihood += Math.log(total);
    }
    if (iteration >= iterations || !(sum > 1e-3)) return { cluster, share, logLikelihood };
    cluster = cluster.improve(stars, probability);
    // A cluster that takes more than nine tenths leaves no field to compare with.
    share = Math.min(0.9, sum / n);
  }
}
