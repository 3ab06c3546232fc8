import { describe, expect, it } from 'vitest';
import { findPeak } from '../../kernel-lib/turnoff/peak';

describe('findPeak', () => {
  it('finds a correlated Gaussian exactly, from afar and with poor first steps', () => {
    // Precision matrix (4, -3; -3, 9); the integral of exp(-q/2) over the plane is 2 pi / sqrt(det).
    const f = (x: Float64Array) => {
      const [a, b] = [x[0] - 0.4, x[1] + 1.2];
      return 5 - 0.5 * (4 * a * a - 6 * a * b + 9 * b * b);
    };
    for (const first of [
      [0.01, 0.01],
      [3, 3],
    ]) {
      const peak = findPeak(f, [4, 5], first);
      expect(peak.at[0]).toBeCloseTo(0.4, 6);
      expect(peak.at[1]).toBeCloseTo(-1.2, 6);
      expect(peak.top).toBeCloseTo(5, 9);
      expect(peak.logIntegral).toBeCloseTo(5 + Math.log((2 * Math.PI) / Math.sqrt(27)), 6);
      const covariance = peak.covariance as Float64Array;
      for (const [k, v] of [9, 3, 3, 4].entries()) expect(covariance[k]).toBeCloseTo(v / 27, 5);
    }
  });

  it('climbs out of a flat, heavy-tailed slope', () => {
    const f = (x: Float64Array) => -2 * Math.log(1 + ((x[0] - 3) / 0.05) ** 2);
    const peak = findPeak(f, [2.2], [0.01]);
    expect(Math.abs(peak.at[0] - 3)).toBeLessThan(0.005);
  });

  it('takes no variables, and says when nothing is finite', () => {
    expect(findPeak(() => 7, [], []).logIntegral).toBe(7);
    expect(findPeak(() => Number.NEGATIVE_INFINITY, [0], [1]).logIntegral).toBe(Number.NEGATIVE_INFINITY);
  });
});
