import { checkPoints, type Line } from './line';

/** Which residuals an unweighted line makes small. */
export type LeastSquaresKind = 'y-on-x' | 'x-on-y' | 'bisector';

/**
 * Unweighted least-squares line with standard errors that hold for scatter of any kind (heteroscedastic included).
 * @param x    shape (n), n >= 3
 * @param y    shape (n)
 * @param kind residuals in y, residuals in x, or the line that bisects the two
 * @returns slope, intercept, their standard errors and covariance
 * @throws RangeError on fewer than three points, values that are not finite, equal x, or (x-on-y, bisector) no correlation
 * @example leastSquaresLine([0, 1, 2, 3], [1, 3, 5, 7], 'y-on-x').slope // => 2
 * Source: Isobe, Feigelson, Akritas & Babu 1990, ApJ 364, 104, Table 1 and Appendix.
 */
export function leastSquaresLine(x: ArrayLike<number>, y: ArrayLike<number>, kind: LeastSquaresKind): Line {
  checkPoints('leastSquaresLine', x, y);
  const n = x.length;
  let meanX = 0;
  let meanY = 0;
  for (let i = 0; i < n; i++) {
    meanX += x[i] / n;
    meanY += y[i] / n;
  }
  let sxx = 0;
  let syy = 0;
  let sxy = 0;
  for (let i = 0; i < n; i++) {
    const u = x[i] - meanX;
    const v = y[i] - meanY;
    sxx += u * u;
    syy += v * v;
    sxy += u * v;
  }
  if (sxy === 0 && kind !== 'y-on-x') {
    throw new RangeError(`leastSquaresLine: x and y are not correlated, so the ${kind} line has no slope.`);
  }
  const b1 = sxy / sxx;
  const b2 = syy / sxy;
  const root = Math.sqrt((1 + b1 * b1) * (1 + b2 * b2));
  const b3 = (b1 * b2 - 1 + root) / (b1 + b2);
  const slope = kind === 'y-on-x' ? b1 : kind === 'x-on-y' ? b2 : b3;
  // Weights of the two one-sided slopes in the influence of a point on the chosen slope.
  const g1 = kind === 'y-on-x' ? 1 : kind === 'x-on-y' ? 0 : (b3 * (1 + b2 * b2)) / ((b1 + b2) * root);
  const g2 = kind === 'y-on-x' ? 0 : kind === 'x-on-y' ? 1 : (b3 * (1 + b1 * b1)) / ((b1 + b2) * root);
  let varSlope = 0;
  let varIntercept = 0;
  let covariance = 0;
  for (let i = 0; i < n; i++) {
    const u = x[i] - meanX;
    const v = y[i] - meanY;
    const first = g1 === 0 ? 0 : (g1 * u * (v - b1 * u)) / sxx;
    const second = g2 === 0 ? 0 : (g2 * v * (v - b2 * u)) / sxy;
    const onSlope = first + second;
    const onIntercept = (v - slope * u) / n - meanX * onSlope;
    varSlope += onSlope * onSlope;
    varIntercept += onIntercept * onIntercept;
    covariance += onSlope * onIntercept;
  }
  return Object.freeze({
    slope,
    intercept: meanY - slope * meanX,
    slopeError: Math.sqrt(varSlope),
    interceptError: Math.sqrt(varIntercept),
    covariance,
  });
}
