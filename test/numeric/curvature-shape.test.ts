import { describe, expect, it } from 'vitest';
import { curvatureShape } from '../../kernel-lib/numeric/curvature-shape';

describe('curvatureShape', () => {
  it('finds the covariance of a Gaussian from steps of any size', () => {
    // Inverse covariance of standard deviations 0.1 and 3, correlation 0.6.
    const [a, b, r] = [0.1, 3, 0.6];
    const f = 1 / (1 - r * r);
    const density = (v: Float64Array) => {
      const [x, y] = [(v[0] - 2) / a, (v[1] + 1) / b];
      return -0.5 * f * (x * x - 2 * r * x * y + y * y) - 40;
    };
    for (const step of [1e-4, 0.1, 50]) {
      const shape = curvatureShape(density, Float64Array.of(2, -1), [step, step]) as Float64Array;
      expect(shape[0]).toBeCloseTo(a, 6);
      expect(shape[2]).toBeCloseTo(r * b, 5);
      expect(shape[3]).toBeCloseTo(b * Math.sqrt(1 - r * r), 5);
    }
  });

  it('says when there is no such shape', () => {
    expect(curvatureShape((v) => -v[0], Float64Array.of(0), [1])).toBeNull();
    expect(curvatureShape((v) => (v[0] >= 0 ? -v[0] : Number.NEGATIVE_INFINITY), Float64Array.of(0), [1])).toBeNull();
  });
});
