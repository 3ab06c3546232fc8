import { describe, expect, it } from 'vitest';
import { yorkLine } from '../../kernel-lib/numeric/regression/york';
import { yorkResampler } from '../../kernel-lib/numeric/regression/york-resampler';
import { randomStream } from '../../kernel-lib/quantity/random';

describe('yorkResampler', () => {
  it('gives the line of yorkLine on any resample, correlated errors included', () => {
    const s = randomStream(11);
    const n = 60;
    const column = (f: () => number) => Float64Array.from({ length: n }, f);
    const truth = column(() => 5 + 2 * s.uniform());
    const xError = column(() => 0.05 + 0.3 * s.uniform());
    const yError = column(() => 0.1 + 0.5 * s.uniform());
    const correlation = column(() => 1.6 * s.uniform() - 0.8);
    const x = truth.map((t, i) => t + xError[i] * s.normal());
    const y = truth.map((t, i) => 4 * t - 7 + yError[i] * s.normal());
    const points = { x, y, xError, yError, correlation };
    const start = yorkLine(points).slope;
    const resampler = yorkResampler(points);
    const out = new Float64Array(4);
    for (let t = 0; t < 40; t++) {
      const rows = Uint32Array.from({ length: t % 2 === 0 ? n : 90 }, () => s.below(n));
      const take = (values: Float64Array) => Float64Array.from(rows, (i) => values[i]);
      const plain = yorkLine({
        x: take(x),
        y: take(y),
        xError: take(xError),
        yError: take(yError),
        correlation: take(correlation),
      });
      expect(resampler.fit(rows, start, out)).toBe(true);
      // The last steps are summed as a geometric series: good to 1e-8 here, where the x errors are large.
      expect(Math.abs(out[0] - plain.slope)).toBeLessThan(1e-7);
      expect(Math.abs(out[1] - plain.intercept)).toBeLessThan(1e-6);
      let square = 0;
      let variance = 0;
      for (const i of rows) {
        square += (y[i] - out[1] - out[0] * x[i]) ** 2 / rows.length;
        const cross = correlation[i] * xError[i] * yError[i];
        variance += (yError[i] ** 2 + (out[0] * xError[i]) ** 2 - 2 * out[0] * cross) / rows.length;
      }
      expect(out[2]).toBeCloseTo(square, 9);
      expect(out[3]).toBeCloseTo(variance, 9);
    }
  });
});
