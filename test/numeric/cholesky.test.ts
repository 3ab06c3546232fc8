import { describe, expect, it } from 'vitest';
import { choleskyFactor, invertPositive } from '../../kernel-lib/numeric/cholesky';
import { randomStream } from '../../kernel-lib/quantity/random';

describe('invertPositive', () => {
  it('times the matrix is the unit matrix, for random positive definite matrices of 1 to 9 rows', () => {
    const s = randomStream(1);
    for (let n = 1; n <= 9; n++) {
      const b = Float64Array.from({ length: n * n }, () => s.normal());
      const a = new Float64Array(n * n);
      for (let i = 0; i < n; i++) {
        for (let j = 0; j < n; j++) {
          for (let k = 0; k < n; k++) a[i * n + j] += b[i * n + k] * b[j * n + k];
          if (i === j) a[i * n + j] += 0.1;
        }
      }
      const inverse = invertPositive(a, n) as Float64Array;
      for (let i = 0; i < n; i++) {
        for (let j = 0; j < n; j++) {
          let sum = 0;
          for (let k = 0; k < n; k++) sum += a[i * n + k] * inverse[k * n + j];
          expect(sum).toBeCloseTo(i === j ? 1 : 0, 9);
        }
      }
    }
  });

  it('refuses what is not positive definite', () => {
    expect(invertPositive(Float64Array.of(1, 2, 2, 1), 2)).toBeNull();
    expect(invertPositive(Float64Array.of(1, 0, 0, 0), 2)).toBeNull();
    expect(invertPositive(Float64Array.of(Number.NaN), 1)).toBeNull();
  });
});

describe('choleskyFactor', () => {
  it('gives the factor that can be had by hand', () => {
    expect(Array.from(choleskyFactor(Float64Array.of(4, 2, 2, 5), 2) as Float64Array)).toEqual([2, 0, 1, 2]);
  });
});
