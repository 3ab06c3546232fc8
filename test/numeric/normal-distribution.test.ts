import { describe, expect, it } from 'vitest';
import { normalBetween, normalCumulative } from '../../kernel-lib/numeric/normal-distribution';

describe('normalCumulative', () => {
  it('agrees with tabulated values', () => {
    // Abramowitz & Stegun 1964, Table 26.1 (15 decimals), P(x); from memory, checked with SciPy's ndtr.
    const table: [number, number][] = [
      [0, 0.5],
      [0.5, 0.691462461274013],
      [1, 0.841344746068543],
      [1.96, 0.97500210485178],
      [3, 0.99865010196837],
    ];
    for (const [z, p] of table) {
      expect(normalCumulative(z)).toBeCloseTo(p, 13);
      expect(normalCumulative(-z)).toBeCloseTo(1 - p, 13);
    }
    // SciPy 1.17 ndtr(-8) and ndtr(-20).
    expect(normalCumulative(-8) / 6.220960574271785e-16).toBeCloseTo(1, 8);
    expect(normalCumulative(-20) / 2.753624118606237e-89).toBeCloseTo(1, 6);
    expect(normalCumulative(Number.NaN)).toBeNaN();
    expect(normalCumulative(Number.POSITIVE_INFINITY)).toBe(1);
  });

  it('keeps its digits between two bounds in the upper tail', () => {
    expect(normalBetween(8, Number.POSITIVE_INFINITY) / normalCumulative(-8)).toBeCloseTo(1, 12);
    expect(normalBetween(Number.NEGATIVE_INFINITY, Number.POSITIVE_INFINITY)).toBe(1);
    expect(normalBetween(-1, 1)).toBeCloseTo(0.682689492137086, 13);
  });
});
