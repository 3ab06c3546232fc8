/** A line across the HR diagram: pairs of log10 of temperature (K) and log10 of luminosity (solar), cool to hot. */
export interface HrLine {
  /** log10 K, ascending, shape (n). */
  readonly logTeff: ArrayLike<number>;
  /** log10 solar luminosities, shape (n). */
  readonly logL: ArrayLike<number>;
}

/**
 * Zero-age main sequence at Z = 0.0188, 0.1 to 60 solar masses, from the formulas of Tout et al. 1996, MNRAS 281, 257
 * (a test recomputes it with the models).
 */
export const ZERO_AGE_LINE: HrLine = {
  logTeff: [
    3.449, 3.492, 3.52, 3.551, 3.565, 3.576, 3.599, 3.634, 3.676, 3.718, 3.751, 3.774, 3.791, 3.808, 3.852, 3.901,
    3.962, 4.037, 4.092, 4.175, 4.235, 4.282, 4.351, 4.401, 4.483, 4.532, 4.587, 4.617, 4.648,
  ],
  logL: [
    -3.02, -2.536, -2.242, -1.882, -1.643, -1.417, -1.159, -0.883, -0.614, -0.366, -0.144, 0.056, 0.234, 0.395, 0.676,
    0.913, 1.21, 1.601, 1.909, 2.377, 2.728, 3.006, 3.429, 3.744, 4.28, 4.629, 5.072, 5.352, 5.706,
  ],
};

/**
 * End of the main sequence at Z = 0.0188, 0.9 to 30 solar masses, from the formulas of Hurley, Pols & Tout 2000, MNRAS 315,
 * 543, eqs 8 and 9 (a test recomputes it with the models).
 */
export const TERMINAL_AGE_LINE: HrLine = {
  logTeff: [
    3.725, 3.74, 3.754, 3.768, 3.783, 3.807, 3.835, 3.883, 3.954, 4.012, 4.099, 4.164, 4.215, 4.288, 4.337, 4.404,
    4.433, 4.445,
  ],
  logL: [
    0.172, 0.337, 0.49, 0.635, 0.773, 1.033, 1.271, 1.583, 1.997, 2.32, 2.811, 3.18, 3.474, 3.918, 4.241, 4.766, 5.089,
    5.487,
  ],
};

/** log10 L of a line at a temperature, straight between its points; NaN outside them. */
export function lineAt(line: HrLine, logTeff: number): number {
  const { logTeff: xs, logL: ys } = line;
  const last = xs.length - 1;
  if (!(logTeff >= xs[0] && logTeff <= xs[last])) return Number.NaN;
  let low = 0;
  let high = last;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (xs[middle] <= logTeff) low = middle;
    else high = middle;
  }
  return ys[low] + ((logTeff - xs[low]) / (xs[high] - xs[low])) * (ys[high] - ys[low]);
}
