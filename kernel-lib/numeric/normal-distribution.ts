/**
 * Cumulative standard normal distribution, to about 1e-15 absolute, without cancellation in the lower tail.
 * @param z any number
 * @returns probability of a value below z; NaN for NaN
 * @example normalCumulative(0) // => 0.5
 * Source: rational approximation of Hart et al. 1968, Computer Approximations, algorithm 5666 (coefficients from memory,
 * checked against 50-digit values in the tests).
 */
export function normalCumulative(z: number): number {
  const a = Math.abs(z);
  let tail: number;
  if (a > 37) {
    tail = 0;
  } else {
    const e = Math.exp((-a * a) / 2);
    if (a < 7.07106781186547) {
      let top = 3.52624965998911e-2 * a + 0.700383064443688;
      top = top * a + 6.37396220353165;
      top = top * a + 33.912866078383;
      top = top * a + 112.079291497871;
      top = top * a + 221.213596169931;
      top = top * a + 220.206867912376;
      let bottom = 8.83883476483184e-2 * a + 1.75566716318264;
      bottom = bottom * a + 16.064177579207;
      bottom = bottom * a + 86.7807322029461;
      bottom = bottom * a + 296.564248779674;
      bottom = bottom * a + 637.333633378831;
      bottom = bottom * a + 793.826512519948;
      bottom = bottom * a + 440.413735824752;
      tail = (e * top) / bottom;
    } else {
      // Continued fraction of the tail; 30 terms give full precision from here on.
      let fraction = a;
      for (let k = 30; k >= 1; k--) fraction = a + k / fraction;
      tail = e / fraction / 2.5066282746310002;
    }
  }
  return z > 0 ? 1 - tail : z <= 0 ? tail : Number.NaN;
}

/** Probability of a standard normal value between two bounds, exact in both tails. Bounds may be infinite. */
export function normalBetween(low: number, high: number): number {
  return low > 0 ? normalCumulative(-low) - normalCumulative(-high) : normalCumulative(high) - normalCumulative(low);
}
