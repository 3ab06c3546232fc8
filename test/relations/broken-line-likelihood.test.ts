import { describe, expect, it } from 'vitest';
import { randomStream } from '../../kernel-lib/quantity/random';
import { brokenLineAt, joinPieces } from '../../kernel-lib/relations/broken-line';
import { brokenLineLikelihood } from '../../kernel-lib/relations/broken-line-likelihood';
import { spreadOfX } from '../../kernel-lib/relations/spread-of-x';

const LINE = { breaks: new Float64Array([0.1]), slopes: new Float64Array([4.5, 2.5]), intercepts: new Float64Array(2) };
joinPieces(LINE.breaks, LINE.slopes, 0, 0.02, LINE.intercepts);

describe('broken line', () => {
  it('joins its pieces at the breaks, from a pivot on any piece', () => {
    const breaks = [-0.2, 0.1, 0.8];
    const slopes = [2, 4, 3, 1];
    for (const pivot of [-1, 0, 0.5, 2]) {
      const intercepts = new Float64Array(4);
      joinPieces(breaks, slopes, pivot, 0.7, intercepts);
      const line = { breaks: Float64Array.from(breaks), slopes: Float64Array.from(slopes), intercepts };
      expect(brokenLineAt(line, pivot)).toBeCloseTo(0.7, 12);
      for (const b of breaks) expect(brokenLineAt(line, b + 1e-12)).toBeCloseTo(brokenLineAt(line, b), 9);
    }
  });
});

describe('brokenLineLikelihood', () => {
  it('equals a brute-force integral over the true x', () => {
    const points = {
      x: [0.08, -0.4, 0.13],
      y: [0.5, -1.7, 0.6],
      xError: [0.03, 0.02, 0.05],
      yError: [0.1, 0.05, 0.2],
      correlation: [0.4, -0.3, 0],
    };
    const spread = {
      weights: new Float64Array([0.3, 0.7]),
      means: new Float64Array([0.1, -0.2]),
      deviations: new Float64Array([0.2, 0.4]),
    };
    const scatter = 0.05;
    let brute = 0;
    for (let i = 0; i < 3; i++) {
      let integral = 0;
      const step = 1e-5;
      const vy = points.yError[i] ** 2 + scatter ** 2;
      const vx = points.xError[i] ** 2;
      const c = points.correlation[i] * points.xError[i] * points.yError[i];
      const det = vx * vy - c * c;
      for (let t = -2; t < 2; t += step) {
        const dx = points.x[i] - t;
        const dy = points.y[i] - brokenLineAt(LINE, t);
        const data =
          Math.exp(-0.5 * ((vy * dx * dx - 2 * c * dx * dy + vx * dy * dy) / det)) / (2 * Math.PI * Math.sqrt(det));
        let prior = 0;
        for (let j = 0; j < 2; j++) {
          prior +=
            (spread.weights[j] * Math.exp(-0.5 * ((t - spread.means[j]) / spread.deviations[j]) ** 2)) /
            (spread.deviations[j] * Math.sqrt(2 * Math.PI));
        }
        integral += data * prior * step;
      }
      brute += Math.log(integral);
    }
    const value = brokenLineLikelihood(points, spread)(LINE.breaks, LINE.slopes, LINE.intercepts, scatter);
    expect(value).toBeCloseTo(brute, 5);
  });
});

describe('spreadOfX', () => {
  it('takes the errors out of the spread', () => {
    const s = randomStream(1);
    const xError = Float64Array.from({ length: 4000 }, () => 0.3);
    const x = xError.map((e) => (s.uniform() < 0.5 ? -1 : 1) + 0.2 * s.normal() + e * s.normal());
    const { weights, means, deviations } = spreadOfX(x, xError);
    expect(weights.length).toBe(2);
    expect(Math.abs(means[0] + 1)).toBeLessThan(0.05);
    expect(Math.abs(means[1] - 1)).toBeLessThan(0.05);
    for (const d of deviations) expect(Math.abs(d - 0.2)).toBeLessThan(0.04);
  });
});
