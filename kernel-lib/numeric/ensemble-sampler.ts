import type { RandomStream } from '../quantity/random';

/** Samples drawn by the ensemble. */
export interface EnsembleChain {
  readonly walkers: number;
  readonly dimensions: number;
  readonly steps: number;
  /** shape (steps, walkers, dimensions) */
  readonly samples: Float64Array;
  /** shape (steps, walkers) */
  readonly logDensity: Float64Array;
  /** Share of proposals that were accepted. */
  readonly acceptance: number;
}

/** What `sampleEnsemble` takes. */
export interface EnsembleOptions {
  /** Steps of the whole ensemble to keep. */
  steps: number;
  /** Steps thrown away first. Default: 0. */
  warmUp?: number;
  /** Keep every so many steps. Default: 1. */
  thin?: number;
  /** Scale of the stretch move. Default: 2, as in the paper. */
  stretch?: number;
  /** Called now and then with steps done and in all; return false to stop early. */
  // biome-ignore lint/suspicious/noConfusingVoidType: a callback that returns nothing is welcome too
  onProgress?: (done: number, total: number) => boolean | void;
}

/**
 * Affine-invariant ensemble sampler with stretch moves: copes with long, narrow and bent distributions without tuning.
 * @param logDensity logarithm of an unnormalised density; reads `dimensions` numbers of the array from the offset on;
 *                   -Infinity or NaN forbids a place
 * @param starts     shape (walkers, dimensions), each allowed by the density; an even number of walkers, at least 2 x dimensions
 * @param stream     random numbers; each walker gets its own stream, so the result does not depend on the order of the work
 * @returns samples of shape (steps, walkers, dimensions); fewer steps when stopped early
 * @throws RangeError when the starts do not suffice or one is forbidden
 * Source: Goodman & Weare 2010, Commun. Appl. Math. Comput. Sci. 5, 65; halves moved in turn as in Foreman-Mackey et al. 2013,
 * PASP 125, 306, Section 3.
 */
export function sampleEnsemble(
  logDensity: (values: Float64Array, offset: number) => number,
  starts: Float64Array,
  dimensions: number,
  stream: RandomStream,
  options: EnsembleOptions,
): EnsembleChain {
  const walkers = starts.length / dimensions;
  if (!Number.isInteger(walkers) || walkers % 2 === 1 || walkers < 2 * dimensions) {
    throw new RangeError(
      `sampleEnsemble: ${walkers} walkers in ${dimensions} dimensions; an even number, at least ${2 * dimensions}, is needed.`,
    );
  }
  const { steps, warmUp = 0, thin = 1, stretch = 2, onProgress } = options;
  const positions = Float64Array.from(starts);
  const current = new Float64Array(walkers);
  for (let w = 0; w < walkers; w++) {
    current[w] = logDensity(positions, w * dimensions);
    if (!Number.isFinite(current[w])) {
      throw new RangeError(`sampleEnsemble: walker ${w} starts where the density is zero.`);
    }
  }
  const streams = Array.from({ length: walkers }, (_, w) => stream.fork(w));
  const half = walkers / 2;
  const proposal = new Float64Array(dimensions);
  const total = warmUp + steps * thin;
  const samples = new Float64Array(steps * walkers * dimensions);
  const kept = new Float64Array(steps * walkers);
  let accepted = 0;
  let proposed = 0;
  let stored = 0;
  for (let step = 0; step < total; step++) {
    for (let side = 0; side < 2; side++) {
      const own = side * half;
      const other = half - own;
      for (let k = 0; k < half; k++) {
        const w = own + k;
        const random = streams[w];
        const partner = other + random.below(half);
        // z has density proportional to 1/sqrt(z) on [1/stretch, stretch].
        const z = ((stretch - 1) * random.uniform() + 1) ** 2 / stretch;
        for (let d = 0; d < dimensions; d++) {
          const pivot = positions[partner * dimensions + d];
          proposal[d] = pivot + z * (positions[w * dimensions + d] - pivot);
        }
        const next = logDensity(proposal, 0);
        const gain = (dimensions - 1) * Math.log(z) + next - current[w];
        if (step >= warmUp) proposed++;
        if (Math.log(random.uniform()) < gain) {
          positions.set(proposal, w * dimensions);
          current[w] = next;
          if (step >= warmUp) accepted++;
        }
      }
    }
    const after = step - warmUp + 1;
    if (after > 0 && after % thin === 0) {
      samples.set(positions, stored * walkers * dimensions);
      kept.set(current, stored * walkers);
      stored++;
    }
    if (onProgress && onProgress(step + 1, total) === false) break;
  }
  return {
    walkers,
    dimensions,
    steps: stored,
    samples: stored === steps ? samples : samples.slice(0, stored * walkers * dimensions),
    logDensity: stored === steps ? kept : kept.slice(0, stored * walkers),
    acceptance: proposed === 0 ? Number.NaN : accepted / proposed,
  };
}
