import { describe, expect, it } from 'vitest';
import { monotoneCubic } from '../../kernel-lib/numeric/monotone-cubic';

describe('monotoneCubic', () => {
  it('passes through its points, keeps their order and is NaN outside', () => {
    // Fritsch & Carlson 1980, SIAM J. Numer. Anal. 17, 238, Table 1 (data set RPN 14; from memory): monotone data that ordinary splines
    // overshoot.
    const x = [7.99, 8.09, 8.19, 8.7, 9.2, 10, 12, 15, 20];
    const y = [0, 2.76429e-5, 4.37498e-2, 0.169183, 0.469428, 0.94374, 0.998636, 0.999919, 0.999994];
    const f = monotoneCubic(x, y);
    for (let i = 0; i < x.length; i++) expect(f(x[i])).toBeCloseTo(y[i], 14);
    let before = -1;
    for (let i = 0; i <= 2000; i++) {
      const v = f(Math.min(20, 7.99 + (i * 12.01) / 2000));
      expect(v).toBeGreaterThanOrEqual(before);
      before = v;
    }
    expect(f(7.9)).toBeNaN();
    expect(f(Number.NaN)).toBeNaN();
    expect(() => monotoneCubic([1, 1], [0, 1])).toThrow(/x\[1\] = 1 does not follow/);
    expect(() => monotoneCubic([1], [0])).toThrow(/two or more/);
  });
});
