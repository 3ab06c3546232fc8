/** Variances of what was measured of each star, and the covariance of the two, shape (n). */
export interface PhotometricErrors {
  /** mag^2. */
  readonly colourVariance: Float64Array;
  readonly magnitudeVariance: Float64Array;
  /** Not zero where the magnitude is one of the two that the colour was made of. */
  readonly covariance: Float64Array;
}

/**
 * Standard error of a quantity that depends on a colour and a magnitude, to first order.
 * @param byColour    derivative with respect to the colour, shape (n)
 * @param byMagnitude derivative with respect to the magnitude, the same for all stars
 * @returns shape (n); NaN where a derivative or a variance is NaN
 */
export function propagated(errors: PhotometricErrors, byColour: Float64Array, byMagnitude: number): Float64Array {
  const { colourVariance, magnitudeVariance, covariance } = errors;
  const out = new Float64Array(byColour.length);
  for (let i = 0; i < out.length; i++) {
    const c = byColour[i];
    const variance =
      c * c * colourVariance[i] +
      byMagnitude * byMagnitude * magnitudeVariance[i] +
      2 * c * byMagnitude * covariance[i];
    // Rounding can take a variance that cancels to nothing just below zero.
    out[i] = Math.sqrt(Math.max(0, variance));
  }
  return out;
}

/**
 * Slope of a tabulated or fitted function from its values at both sides of a point; from one side where the other lies outside
 * its range.
 * @param below, at, above values at x - step, x, x + step, shape (n)
 */
export function slope(below: Float64Array, at: Float64Array, above: Float64Array, step: number): Float64Array {
  const out = new Float64Array(at.length);
  for (let i = 0; i < out.length; i++) {
    if (Number.isNaN(below[i])) out[i] = (above[i] - at[i]) / step;
    else if (Number.isNaN(above[i])) out[i] = (at[i] - below[i]) / step;
    else out[i] = (above[i] - below[i]) / (2 * step);
  }
  return out;
}
