/** A peak of a log-likelihood in one variable, as a Gaussian. */
export interface Peak {
  readonly at: number;
  readonly sigma: number;
  /** Log of the height. */
  readonly top: number;
  /** False when the peak lies at an end of the range. */
  readonly inside: boolean;
}

/**
 * Finds a peak by walking up in steps and then fitting parabolas through ever closer points.
 * @param f     log-likelihood
 * @param start where to begin
 * @param step  first step
 * @param low   range
 * @param high  range
 */
export function findPeak(f: (x: number) => number, start: number, step: number, low: number, high: number): Peak {
  let x = Math.min(Math.max(start, low), high);
  let top = f(x);
  let h = step;
  for (let round = 0; round < 60 && h > step / 200; round++) {
    const left = x - h >= low ? f(x - h) : Number.NEGATIVE_INFINITY;
    const right = x + h <= high ? f(x + h) : Number.NEGATIVE_INFINITY;
    if (left > top || right > top) {
      x = left > right ? x - h : x + h;
      top = Math.max(left, right);
      continue;
    }
    // Half a unit of log-likelihood away is about one standard deviation: a good distance for a parabola.
    const fall = top - 0.5 * (Math.max(left, -1e300) + Math.max(right, -1e300));
    if (fall > 0.2 && fall < 4) break;
    h = fall >= 4 ? h / 2 : h * 1.5;
    if (fall <= 0.2 && h > (high - low) / 2) break;
  }
  const left = f(x - h);
  const right = f(x + h);
  const bend = left - 2 * top + right;
  if (!(bend < 0) || !Number.isFinite(bend)) {
    return { at: x, sigma: Number.isFinite(top) ? h : Number.NaN, top, inside: x - h > low && x + h < high };
  }
  const shift = (0.5 * h * (left - right)) / bend;
  // On a plateau the parabola means nothing: neither its vertex nor its height may leave what was seen.
  const trusted = Math.abs(shift) <= h;
  return {
    at: trusted ? x + shift : x,
    sigma: Math.min(h / Math.sqrt(-bend), (high - low) / 2),
    top: trusted ? top - (right - left) ** 2 / (8 * bend) : top,
    inside: x - h > low && x + h < high,
  };
}
