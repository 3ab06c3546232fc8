/**
 * Natural cubic spline that weighs closeness to points against bending: it makes sum w (y - s)^2 + stiffness x integral s''^2 least.
 * Beyond the points it goes on straight.
 * @param x         strictly rising, shape (n), n >= 3
 * @param y         shape (n)
 * @param weights   positive, shape (n)
 * @param stiffness >= 0; 0 goes through the points
 * @returns function of a place
 * @throws RangeError when x does not rise, lengths differ or n < 3
 * @example smoothingSpline([0, 1, 2, 3], [0, 1, 0, 1], [1, 1, 1, 1], 1e6)(1.5) // => 0.5
 * Source: Reinsch 1967, Numer. Math. 10, 177; Green & Silverman 1994, Nonparametric Regression, section 2.3.
 */
export function smoothingSpline(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  weights: ArrayLike<number>,
  stiffness: number,
): (at: number) => number {
  const n = x.length;
  if (n < 3 || y.length !== n || weights.length !== n) {
    throw new RangeError(`smoothingSpline: ${n} x, ${y.length} y, ${weights.length} weights; three or more of each.`);
  }
  const h = new Float64Array(n - 1);
  for (let i = 0; i < n - 1; i++) {
    h[i] = x[i + 1] - x[i];
    if (!(h[i] > 0)) throw new RangeError(`smoothingSpline: x[${i + 1}] = ${x[i + 1]} does not follow ${x[i]}.`);
  }
  const second = bends(h, y, weights, stiffness);
  // Values from bends: each point gives way by stiffness/weight times the jump of slope differences there.
  const s = Float64Array.from(y);
  for (let i = 0; i < n; i++) {
    const pull =
      (i > 0 ? (second[i - 1] - second[i]) / h[i - 1] : 0) + (i < n - 1 ? (second[i + 1] - second[i]) / h[i] : 0);
    s[i] -= (stiffness / weights[i]) * pull;
  }
  const first = (s[1] - s[0]) / h[0] - (h[0] * second[1]) / 6;
  const last = (s[n - 1] - s[n - 2]) / h[n - 2] + (h[n - 2] * second[n - 2]) / 6;
  return (at) => {
    if (at <= x[0]) return s[0] + first * (at - x[0]);
    if (at >= x[n - 1]) return s[n - 1] + last * (at - x[n - 1]);
    let low = 0;
    let high = n - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (x[middle] <= at) low = middle;
      else high = middle;
    }
    const w = h[low];
    const a = (x[high] - at) / w;
    const b = (at - x[low]) / w;
    return a * s[low] + b * s[high] + (((a * a - 1) * a * second[low] + (b * b - 1) * b * second[high]) * w * w) / 6;
  };
}

/** Second derivatives at the points: (R + stiffness Q' W^-1 Q) second = Q' y, a system with five diagonals. */
function bends(h: Float64Array, y: ArrayLike<number>, weights: ArrayLike<number>, stiffness: number): Float64Array {
  const n = y.length;
  const m = n - 2;
  const diagonal = new Float64Array(m);
  const one = new Float64Array(m);
  const two = new Float64Array(m);
  const right = new Float64Array(m);
  for (let j = 0; j < m; j++) {
    const a = 1 / h[j];
    const c = 1 / h[j + 1];
    const b = -a - c;
    const slack = (i: number) => stiffness / weights[i];
    diagonal[j] = (h[j] + h[j + 1]) / 3 + slack(j) * a * a + slack(j + 1) * b * b + slack(j + 2) * c * c;
    if (j + 1 < m) {
      const nextB = -1 / h[j + 1] - 1 / h[j + 2];
      one[j] = h[j + 1] / 6 + slack(j + 1) * b * c + slack(j + 2) * c * nextB;
    }
    if (j + 2 < m) two[j] = (slack(j + 2) * c) / h[j + 2];
    right[j] = (y[j + 2] - y[j + 1]) * c - (y[j + 1] - y[j]) * a;
  }
  // L D L' elimination.
  for (let j = 0; j < m; j++) {
    const d = diagonal[j];
    if (j + 1 < m) {
      const l1 = one[j] / d;
      diagonal[j + 1] -= l1 * one[j];
      right[j + 1] -= l1 * right[j];
      if (j + 2 < m) {
        one[j + 1] -= l1 * two[j];
        const l2 = two[j] / d;
        diagonal[j + 2] -= l2 * two[j];
        right[j + 2] -= l2 * right[j];
      }
    }
  }
  const second = new Float64Array(n);
  for (let j = m - 1; j >= 0; j--) {
    let sum = right[j];
    if (j + 1 < m) sum -= one[j] * second[j + 2];
    if (j + 2 < m) sum -= two[j] * second[j + 3];
    second[j + 1] = sum / diagonal[j];
  }
  return second;
}

/**
 * A smoothing spline that stays within a tolerance of every point: where the given stiffness leaves a point too far away, that point's
 * weight is raised until it is near enough. Weights start as 1 / tolerance^2 in units of the median tolerance.
 * @param tolerance positive, shape (n)
 * @returns function of a place
 * @throws RangeError as smoothingSpline, or when no weights bring it within the tolerance
 * @example smoothWithin([0, 1, 2, 3], [0, 1.1, 1.9, 3], [0.2, 0.2, 0.2, 0.2], 10)(3) // => 2.97
 */
export function smoothWithin(
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  tolerance: ArrayLike<number>,
  stiffness: number,
): (at: number) => number {
  const middle = Float64Array.from(tolerance).sort()[tolerance.length >> 1];
  const weights = Float64Array.from(tolerance, (t) => (middle / t) ** 2);
  for (let round = 0; round < 500; round++) {
    const spline = smoothingSpline(x, y, weights, stiffness);
    let worst = 0;
    for (let i = 0; i < x.length; i++) {
      const ratio = Math.abs(spline(x[i]) - y[i]) / tolerance[i];
      worst = Math.max(worst, ratio);
      if (ratio > 0.98) weights[i] *= (1 + 2 * (ratio - 0.98)) ** 2;
    }
    if (worst <= 1) return spline;
  }
  throw new RangeError(
    'smoothWithin: the points cannot be met within their tolerances; widen them or lower the stiffness.',
  );
}
