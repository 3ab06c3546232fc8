/** How far a chain can be believed, for one parameter. */
export interface Convergence {
  /** Split R-hat; near 1 when all parts of the chain agree, above 1.01 suspicious. */
  readonly rHat: number;
  /** Number of independent draws that the chain is worth for the mean. */
  readonly effectiveSampleSize: number;
}

/**
 * Split R-hat and effective sample size of one parameter from several chains (rank-normalisation left out).
 * @param samples shape (steps, chains, dimensions), as the ensemble sampler returns them
 * @param chains  number of chains (walkers)
 * @param dimensions number of parameters
 * @param parameter which one
 * @returns NaN in both when there are fewer than eight steps
 * Source: Vehtari, Gelman, Simpson, Carpenter & Buerkner 2021, Bayesian Analysis 16, 667, Eqs 3-4 and 10-11;
 * Geyer 1992, Stat. Sci. 7, 473 (initial monotone sequence).
 */
export function convergence(samples: Float64Array, chains: number, dimensions: number, parameter: number): Convergence {
  const steps = Math.floor(samples.length / (chains * dimensions));
  const half = Math.floor(steps / 2);
  if (half < 4) return { rHat: Number.NaN, effectiveSampleSize: Number.NaN };
  const m = chains * 2;
  const n = half;
  // Split each chain in two and lay the halves out one after another.
  const parts = new Float64Array(m * n);
  for (let c = 0; c < chains; c++) {
    for (let side = 0; side < 2; side++) {
      const first = side === 0 ? 0 : steps - half;
      for (let t = 0; t < n; t++) {
        parts[(2 * c + side) * n + t] = samples[((first + t) * chains + c) * dimensions + parameter];
      }
    }
  }
  const means = new Float64Array(m);
  let within = 0;
  let grand = 0;
  for (let p = 0; p < m; p++) {
    let mean = 0;
    for (let t = 0; t < n; t++) mean += parts[p * n + t] / n;
    means[p] = mean;
    grand += mean / m;
    let square = 0;
    for (let t = 0; t < n; t++) square += (parts[p * n + t] - mean) ** 2;
    within += square / (n - 1) / m;
  }
  let between = 0;
  for (let p = 0; p < m; p++) between += ((means[p] - grand) ** 2 * n) / (m - 1);
  const pooled = ((n - 1) / n) * within + between / n;
  if (!(within > 0)) return { rHat: Number.NaN, effectiveSampleSize: Number.NaN };
  const correlation = (lag: number): number => {
    let sum = 0;
    for (let p = 0; p < m; p++) {
      const mean = means[p];
      for (let t = 0; t + lag < n; t++) sum += (parts[p * n + t] - mean) * (parts[p * n + t + lag] - mean);
    }
    return 1 - (within - sum / (m * (n - 1))) / pooled;
  };
  let time = -1;
  let before = Number.POSITIVE_INFINITY;
  for (let lag = 0; lag + 1 < n; lag += 2) {
    const pair = correlation(lag) + correlation(lag + 1);
    if (!(pair > 0)) break;
    before = Math.min(before, pair);
    time += 2 * before;
  }
  // A chain cannot be worth more than m n log10(m n) draws (the paper's cap on antithetic chains).
  const effective = Math.min((m * n) / Math.max(time, 1e-12), m * n * Math.log10(m * n));
  return { rHat: Math.sqrt(pooled / within), effectiveSampleSize: effective };
}
