import { describe, expect, it } from 'vitest';
import { randomStream } from '../../kernel-lib/quantity/random';

const draw = (seed: number, n: number) => {
  const s = randomStream(seed);
  return Array.from({ length: n }, () => s.uniform());
};

describe('randomStream', () => {
  it('gives the same numbers for the same seed and others for another', () => {
    expect(draw(1, 50)).toEqual(draw(1, 50));
    expect(draw(1, 5)).not.toEqual(draw(2, 5));
    expect(draw(1.5, 5)).not.toEqual(draw(1, 5));
    expect(() => randomStream(Number.NaN)).toThrow(/finite/);
  });

  it('forks streams by key whatever was drawn before, and unlike one another', () => {
    const a = randomStream(3);
    const b = randomStream(3);
    b.uniform();
    b.normal();
    expect(a.fork(7).uniform()).toBe(b.fork(7).uniform());
    const firsts = Array.from({ length: 1000 }, (_, k) => a.fork(k).uniform());
    expect(new Set(firsts).size).toBe(1000);
    const mean = firsts.reduce((x, y) => x + y) / 1000;
    // Standard error of the mean of 1000 uniforms: 0.0091; four of those.
    expect(Math.abs(mean - 0.5)).toBeLessThan(0.037);
  });

  it('is uniform over 100 cells (chi-square) and normal in its first four moments', () => {
    const s = randomStream(11);
    const n = 1_000_000;
    const cells = new Float64Array(100);
    let m1 = 0;
    let m2 = 0;
    let m3 = 0;
    let m4 = 0;
    let lag = 0;
    let before = 0;
    for (let i = 0; i < n; i++) {
      const u = s.uniform();
      cells[Math.floor(u * 100)]++;
      lag += (u - 0.5) * before;
      before = u - 0.5;
      const x = s.normal();
      m1 += x;
      m2 += x * x;
      m3 += x ** 3;
      m4 += x ** 4;
    }
    const chi2 = cells.reduce((sum, c) => sum + (c - n / 100) ** 2 / (n / 100), 0);
    // 99 degrees of freedom: mean 99, standard deviation 14.1; the bounds are 4.3 of those.
    expect(chi2).toBeGreaterThan(40);
    expect(chi2).toBeLessThan(160);
    // Standard errors 0.001, 0.0014, 0.0039, 0.0098; lag-one covariance 8.3e-5. Five of each.
    expect(Math.abs(m1 / n)).toBeLessThan(0.005);
    expect(Math.abs(m2 / n - 1)).toBeLessThan(0.007);
    expect(Math.abs(m3 / n)).toBeLessThan(0.02);
    expect(Math.abs(m4 / n - 3)).toBeLessThan(0.05);
    expect(Math.abs(lag / n)).toBeLessThan(4.2e-4);
  });
});
