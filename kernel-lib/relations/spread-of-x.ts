import { sortedQuantile } from '../quantity/measured';

/** A sum of Gaussians that describes where the true x lie. */
export interface SpreadOfX {
  readonly weights: Float64Array;
  readonly means: Float64Array;
  readonly deviations: Float64Array;
}

/**
 * Distribution of the true x behind values with errors: one to three Gaussians, the number by BIC. It is what keeps errors in x
 * from flattening a slope.
 * @param x      shape (n)
 * @param xError shape (n), zero allowed
 * Source: deconvolving expectation-maximisation, Bovy, Hogg & Roweis 2011, Ann. Appl. Stat. 5, 1657, Section 2; its use in a regression:
 * Kelly 2007, ApJ 665, 1489, Section 4.1 (there the mixture is sampled too; here it is held at its best fit).
 */
export function spreadOfX(x: ArrayLike<number>, xError: ArrayLike<number>): SpreadOfX {
  const n = x.length;
  const sorted = Float64Array.from(x).sort();
  let best: SpreadOfX | null = null;
  let bestScore = Number.POSITIVE_INFINITY;
  for (let count = 1; count <= 3 && n >= 8 * count; count++) {
    const { spread, logLikelihood } = deconvolve(x, xError, sorted, count);
    const score = (3 * count - 1) * Math.log(n) - 2 * logLikelihood;
    if (score < bestScore) {
      bestScore = score;
      best = spread;
    }
  }
  return best ?? deconvolve(x, xError, sorted, 1).spread;
}

function deconvolve(x: ArrayLike<number>, xError: ArrayLike<number>, sorted: Float64Array, count: number) {
  const n = x.length;
  const width = Math.max((sorted[n - 1] - sorted[0]) / count / 2, 1e-6);
  // A component narrower than this would lock on to single points.
  const floor = (width / 20) ** 2;
  const weights = new Float64Array(count).fill(1 / count);
  const means = Float64Array.from({ length: count }, (_, j) => sortedQuantile(sorted, (j + 0.5) / count));
  const variances = new Float64Array(count).fill(width * width);
  const share = new Float64Array(count);
  let logLikelihood = Number.NEGATIVE_INFINITY;
  for (let round = 0; round < 500; round++) {
    const sum0 = new Float64Array(count);
    const sum1 = new Float64Array(count);
    const sum2 = new Float64Array(count);
    let total = 0;
    for (let i = 0; i < n; i++) {
      const e2 = xError[i] * xError[i];
      let all = 0;
      for (let j = 0; j < count; j++) {
        const v = variances[j] + e2;
        share[j] = (weights[j] * Math.exp((-0.5 * (x[i] - means[j]) ** 2) / v)) / Math.sqrt(2 * Math.PI * v);
        all += share[j];
      }
      if (!(all > 0)) continue;
      total += Math.log(all);
      for (let j = 0; j < count; j++) {
        const q = share[j] / all;
        const gain = variances[j] / (variances[j] + e2);
        const expected = means[j] + gain * (x[i] - means[j]);
        sum0[j] += q;
        sum1[j] += q * expected;
        sum2[j] += q * (expected * expected + variances[j] * (1 - gain));
      }
    }
    for (let j = 0; j < count; j++) {
      if (!(sum0[j] > 1e-9)) continue;
      weights[j] = sum0[j] / n;
      means[j] = sum1[j] / sum0[j];
      variances[j] = Math.max(sum2[j] / sum0[j] - means[j] ** 2, floor);
    }
    const done = Math.abs(total - logLikelihood) < 1e-9 * (1 + Math.abs(total));
    logLikelihood = total;
    if (done) break;
  }
  return { spread: { weights, means, deviations: variances.map(Math.sqrt) }, logLikelihood };
}
