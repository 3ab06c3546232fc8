/** A fitted straight line y = intercept + slope x with standard errors. */
export interface Line {
  readonly slope: number;
  readonly intercept: number;
  readonly slopeError: number;
  readonly interceptError: number;
  /** Covariance of slope and intercept; NaN where the method gives none. */
  readonly covariance: number;
}

/**
 * Refuses data that no line can be fitted to.
 * @throws RangeError when lengths differ, a value is not finite, fewer than `least` points remain or all x are equal
 */
export function checkPoints(caller: string, x: ArrayLike<number>, y: ArrayLike<number>, least = 3): void {
  if (x.length !== y.length) throw new RangeError(`${caller}: ${x.length} x values but ${y.length} y values.`);
  if (x.length < least) throw new RangeError(`${caller}: ${x.length} points; at least ${least} are needed.`);
  let same = true;
  for (let i = 0; i < x.length; i++) {
    if (!Number.isFinite(x[i]) || !Number.isFinite(y[i])) {
      throw new RangeError(`${caller}: point ${i} is (${x[i]}, ${y[i]}); drop or mend points that are not finite.`);
    }
    if (x[i] !== x[0]) same = false;
  }
  if (same) throw new RangeError(`${caller}: all x are ${x[0]}; a slope needs a spread in x.`);
}

/**
 * Refuses errors that are missing, negative or zero.
 * @throws RangeError naming the point
 */
export function checkErrors(caller: string, name: string, errors: ArrayLike<number>, n: number): void {
  if (errors.length !== n) throw new RangeError(`${caller}: ${errors.length} ${name} for ${n} points.`);
  for (let i = 0; i < n; i++) {
    if (!(errors[i] > 0) || !Number.isFinite(errors[i])) {
      throw new RangeError(`${caller}: ${name}[${i}] is ${errors[i]}; every error must be positive and finite.`);
    }
  }
}
