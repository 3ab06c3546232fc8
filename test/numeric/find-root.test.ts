import { describe, expect, it } from 'vitest';
import { findRoot } from '../../kernel-lib/numeric/find-root';
import { randomStream } from '../../kernel-lib/quantity/random';

describe('findRoot', () => {
  it('finds roots known in closed form', () => {
    expect(findRoot((x) => x * x - 2, 0, 2)).toBeCloseTo(Math.SQRT2, 12);
    expect(findRoot(Math.cos, 1, 2)).toBeCloseTo(Math.PI / 2, 12);
    expect(findRoot((x) => (x - 1) ** 9, 0.2, 3)).toBeCloseTo(1, 1);
    expect(findRoot((x) => x, 0, 5)).toBe(0);
  });

  it('finds the root of random cubics with one real root', () => {
    const random = randomStream(5);
    for (let i = 0; i < 200; i++) {
      const root = 10 * random.normal();
      const a = random.normal();
      const b = a * a + random.uniform() + 0.1;
      // (x - root)(x^2 + 2 a x + b) with b > a^2 has no other real root.
      const found = findRoot((x) => (x - root) * (x * x + 2 * a * x + b), root - 30, root + 17);
      expect(Math.abs(found - root)).toBeLessThan(1e-9);
    }
  });

  it('gives NaN without a change of sign', () => {
    expect(findRoot((x) => x * x + 1, -1, 1)).toBeNaN();
    expect(findRoot(() => Number.NaN, -1, 1)).toBeNaN();
  });
});
