import { describe, expect, it } from 'vitest';
import { nelderMead } from '../../kernel-lib/numeric/nelder-mead';

describe('nelderMead', () => {
  it('finds the minimum of standard test functions', () => {
    // Rosenbrock 1960, Comput. J. 3, 175: minimum 0 at (1, 1).
    const valley = nelderMead((v) => 100 * (v[1] - v[0] ** 2) ** 2 + (1 - v[0]) ** 2, [-1.2, 1], [0.5, 0.5]);
    expect(valley.converged).toBe(true);
    expect(valley.at[0]).toBeCloseTo(1, 4);
    expect(valley.at[1]).toBeCloseTo(1, 4);
    // Powell 1962, Comput. J. 5, 147: minimum 0 at the origin, singular second derivatives.
    const powell = nelderMead(
      (v) => (v[0] + 10 * v[1]) ** 2 + 5 * (v[2] - v[3]) ** 2 + (v[1] - 2 * v[2]) ** 4 + 10 * (v[0] - v[3]) ** 4,
      [3, -1, 0, 1],
      [1, 1, 1, 1],
    );
    expect(powell.value).toBeLessThan(1e-6);
    const bowl = nelderMead(
      (v) => v.reduce((s, x, i) => s + (i + 1) * (x - i) ** 2, 0),
      new Float64Array(8),
      new Float64Array(8).fill(1),
    );
    for (let i = 0; i < 8; i++) expect(bowl.at[i]).toBeCloseTo(i, 3);
  });

  it('stays out of forbidden places and says when evaluations ran out', () => {
    const walled = nelderMead((v) => (v[0] < 2 ? Number.NaN : v[0] ** 2), [5], [1]);
    expect(walled.at[0]).toBeCloseTo(2, 4);
    expect(nelderMead((v) => v[0] ** 2, [50], [1], { maxEvaluations: 5 }).converged).toBe(false);
  });
});
