import { spawnSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { venvPython } from '../../kernel-lib/commands/environment.mjs';
import { starDistances } from '../../kernel-lib/distance/star-distances';

function field(parallax: number[], error: number[]): Catalogue {
  return new Catalogue({
    source: 'made in a test',
    rowCount: parallax.length,
    columns: [
      { name: 'plx', values: Float64Array.from(parallax) },
      { name: 'e_plx', values: Float64Array.from(error) },
    ],
    roles: { parallax: 'plx', 'parallax.error': 'e_plx' },
  });
}

describe('starDistances', () => {
  it('agrees with a numerical integral (scipy.integrate.quad over the same posterior)', () => {
    const parallax = [10, 1, 0.2, -0.3, 0.05, 100];
    const error = [0.02, 0.1, 0.1, 0.2, 0.5, 1];
    const script = `
import json, sys, numpy as np
from scipy.integrate import quad
from scipy.optimize import brentq
out = []
for w, s in json.load(sys.stdin):
    L = 1350.0
    logf = lambda r: 2*np.log(r) - r/L - 0.5*((w - 1000/r)/s)**2
    grid = np.geomspace(1, 1e5, 200001)
    top = logf(grid).max()
    mode = grid[logf(grid).argmax()]
    keep = grid[logf(grid) > top - 30]
    lo, hi = keep[0], keep[-1]
    f = lambda r: np.exp(logf(r) - top)
    I = lambda a, b: quad(f, a, b, limit=500, epsabs=0, epsrel=1e-10)[0]
    total = I(lo, mode) + I(mode, hi)
    cum = lambda r: (I(lo, r) if r <= mode else I(lo, mode) + I(mode, r)) / total
    out.append([brentq(lambda r: cum(r) - q, lo, hi, xtol=1e-6) for q in (0.5, 0.158655, 0.841345)])
print(json.dumps(out))`;
    const run = spawnSync(venvPython, ['-c', script], {
      input: JSON.stringify(parallax.map((p, i) => [p, error[i]])),
      encoding: 'utf8',
    });
    expect(run.stderr).toBe('');
    const reference = JSON.parse(run.stdout) as number[][];
    const found = starDistances(field(parallax, error));
    for (let i = 0; i < parallax.length; i++) {
      ['distance', 'distance_lower', 'distance_upper'].forEach((name, k) => {
        // 400 points over the posterior: a thousandth is ample.
        expect(Math.abs(found.numbers(name)[i] / reference[i][k] - 1)).toBeLessThan(1e-3);
      });
    }
  });

  it('leaves missing values missing and counts them', () => {
    const found = starDistances(field([1, Number.NaN, 2], [0.1, 0.1, 0]));
    expect(Array.from(found.numbers('distance'), Number.isNaN)).toEqual([false, true, true]);
    expect(found.history.at(-1)?.note).toBe('2 rows without parallax or error');
    expect(() => starDistances(field([1], [1]), { lengthScale: -1 })).toThrow(/lengthScale must lie in/);
  });
});
