/** Where a search ended. */
export interface Minimum {
  /** shape (n) */
  readonly at: Float64Array;
  readonly value: number;
  readonly evaluations: number;
  /** False when the allowed evaluations ran out first. */
  readonly converged: boolean;
}

/**
 * Smallest value of a function of several variables without derivatives, by the simplex method with coefficients that
 * adapt to the number of variables; started again from its own end until that no longer helps.
 * @param f      function of an array of n numbers; NaN counts as forbidden
 * @param start  shape (n)
 * @param steps  shape (n): first step in each variable, not zero
 * @param options tolerance on the value (1e-10 by default) and the largest number of evaluations (2000 n)
 * @example nelderMead((v) => (v[0] - 3) ** 2, [0], [1]).at[0] // => 3.0000...
 * Source: Nelder & Mead 1965, Comput. J. 7, 308; coefficients of Gao & Han 2012, Comput. Optim. Appl. 51, 259.
 */
export function nelderMead(
  f: (v: Float64Array) => number,
  start: ArrayLike<number>,
  steps: ArrayLike<number>,
  options: { tolerance?: number; maxEvaluations?: number } = {},
): Minimum {
  const n = start.length;
  const { tolerance = 1e-10, maxEvaluations = 2000 * n } = options;
  let evaluations = 0;
  const value = (v: Float64Array): number => {
    evaluations++;
    const y = f(v);
    return Number.isNaN(y) ? Number.POSITIVE_INFINITY : y;
  };
  let best: Float64Array = Float64Array.from(start);
  let bestValue = value(best);
  let converged = false;
  for (let round = 0; round < 8; round++) {
    const scale = round === 0 ? 1 : 0.2;
    const end = oneSearch(value, best, steps, scale, tolerance, () => evaluations < maxEvaluations);
    const gain = bestValue - end.value;
    if (end.value <= bestValue) {
      best = end.at;
      bestValue = end.value;
    }
    converged = end.converged;
    if (evaluations >= maxEvaluations) break;
    if (round > 0 && !(gain > tolerance * 10 * (1 + Math.abs(bestValue)))) break;
  }
  return { at: best, value: bestValue, evaluations, converged };
}

function oneSearch(
  value: (v: Float64Array) => number,
  start: Float64Array,
  steps: ArrayLike<number>,
  scale: number,
  tolerance: number,
  mayGoOn: () => boolean,
): { at: Float64Array; value: number; converged: boolean } {
  const n = start.length;
  const expand = n > 1 ? 1 + 2 / n : 2;
  const contract = n > 1 ? 0.75 - 1 / (2 * n) : 0.5;
  const shrink = n > 1 ? 1 - 1 / n : 0.5;
  const corners = Array.from({ length: n + 1 }, (_, k) => {
    const at = Float64Array.from(start);
    if (k > 0) at[k - 1] += steps[k - 1] * scale;
    return { at, value: value(at) };
  });
  const middle = new Float64Array(n);
  const trial = new Float64Array(n);
  const along = (factor: number, worst: Float64Array): number => {
    for (let d = 0; d < n; d++) trial[d] = middle[d] + factor * (worst[d] - middle[d]);
    return value(trial);
  };
  const order = () => corners.sort((a, b) => a.value - b.value);
  order();
  while (mayGoOn()) {
    const worst = corners[n];
    if (worst.value - corners[0].value <= tolerance * (1 + Math.abs(corners[0].value)) && isSmall(corners, steps)) {
      return { ...corners[0], converged: true };
    }
    middle.fill(0);
    for (let k = 0; k < n; k++) for (let d = 0; d < n; d++) middle[d] += corners[k].at[d] / n;
    const reflected = along(-1, worst.at);
    if (reflected < corners[0].value) {
      const kept = Float64Array.from(trial);
      const further = along(-expand, worst.at);
      if (further < reflected) replace(worst, trial, further);
      else replace(worst, kept, reflected);
    } else if (reflected < corners[n - 1].value) {
      replace(worst, trial, reflected);
    } else {
      const outside = reflected < worst.value;
      const inner = along(outside ? -contract : contract, worst.at);
      if (inner < Math.min(reflected, worst.value)) {
        replace(worst, trial, inner);
      } else {
        for (let k = 1; k <= n; k++) {
          const c = corners[k];
          for (let d = 0; d < n; d++) c.at[d] = corners[0].at[d] + shrink * (c.at[d] - corners[0].at[d]);
          c.value = value(c.at);
        }
      }
    }
    order();
  }
  return { ...corners[0], converged: false };
}

function replace(corner: { at: Float64Array; value: number }, at: Float64Array, value: number): void {
  corner.at.set(at);
  corner.value = value;
}

/** Equal values at far-apart corners are a coincidence, not a minimum. */
function isSmall(corners: readonly { at: Float64Array }[], steps: ArrayLike<number>): boolean {
  for (let d = 0; d < steps.length; d++) {
    let low = Number.POSITIVE_INFINITY;
    let high = Number.NEGATIVE_INFINITY;
    for (const c of corners) {
      low = Math.min(low, c.at[d]);
      high = Math.max(high, c.at[d]);
    }
    if (high - low > 1e-4 * Math.abs(steps[d])) return false;
  }
  return true;
}
