import { describe, expect, it } from 'vitest';
import { randomStream } from '../../kernel-lib/quantity/random';
import { brokenLineAt, joinPieces } from '../../kernel-lib/relations/broken-line';
import { fitMassLuminosity } from '../../kernel-lib/relations/mass-luminosity';

const DATA_SETS = 500;
const STARS = 80;
const SCATTER = 0.08;
const LINE = { breaks: new Float64Array([0.1]), slopes: new Float64Array([4.5, 3]), intercepts: new Float64Array(2) };
joinPieces(LINE.breaks, LINE.slopes, 0, 0.02, LINE.intercepts);

/** Stars about the broken line with errors in both axes, correlated, and intrinsic scatter. */
function dataSet(seed: number) {
  const s = randomStream(seed);
  const column = () => new Float64Array(STARS);
  const stars = {
    logMass: column(),
    logMassError: column(),
    logLuminosity: column(),
    logLuminosityError: column(),
    correlation: column(),
  };
  for (let i = 0; i < STARS; i++) {
    const truth = -0.4 + 1.2 * s.uniform();
    const r = 0.6 * s.uniform() - 0.3;
    const sx = 0.01 + 0.02 * s.uniform();
    const sy = 0.03 + 0.05 * s.uniform();
    stars.correlation[i] = r;
    stars.logMassError[i] = sx;
    stars.logLuminosityError[i] = sy;
    const [a, b] = [s.normal(), s.normal()];
    stars.logMass[i] = truth + sx * a;
    stars.logLuminosity[i] = brokenLineAt(LINE, truth) + SCATTER * s.normal() + sy * (r * a + Math.sqrt(1 - r * r) * b);
  }
  return stars;
}

describe('68 % intervals of a broken relation', () => {
  it(`hold the truth in 62 to 74 % of ${DATA_SETS} data sets`, { timeout: 600000 }, () => {
    const held = { break: 0, 'lower exponent': 0, 'upper exponent': 0, scatter: 0 };
    for (let k = 0; k < DATA_SETS; k++) {
      const fit = fitMassLuminosity(dataSet(5000 + k), { breaks: 1, seed: k, resamples: 150 });
      const inside = (m: { lower: number; upper: number }, truth: number) =>
        Number(truth >= m.lower && truth <= m.upper);
      held.break += inside(fit.breaks[0], 10 ** LINE.breaks[0]);
      held['lower exponent'] += inside(fit.exponents[0], LINE.slopes[0]);
      held['upper exponent'] += inside(fit.exponents[1], LINE.slopes[1]);
      held.scatter += inside(fit.scatter, SCATTER);
    }
    // The binomial standard error of 500 data sets is 2.1 %, so the band is 68 % give or take 2.9 of it.
    for (const [what, count] of Object.entries(held)) {
      const share = (100 * count) / DATA_SETS;
      expect(share, `${what}: ${share} %`).toBeGreaterThanOrEqual(62);
      expect(share, `${what}: ${share} %`).toBeLessThanOrEqual(74);
    }
  });
});
