import { describe, expect, it } from 'vitest';
import { leastSquaresLine } from '../../kernel-lib/numeric/regression/least-squares';
import { studentLine } from '../../kernel-lib/numeric/regression/student-t';
import { theilSenLine } from '../../kernel-lib/numeric/regression/theil-sen';
import { yorkLine } from '../../kernel-lib/numeric/regression/york';
import { randomStream } from '../../kernel-lib/quantity/random';

// Pearson's data with York's weights: York et al. 2004, Am. J. Phys. 72, 367, Tables I and II (data from memory).
const PEARSON = {
  x: [0, 0.9, 1.8, 2.6, 3.3, 4.4, 5.2, 6.1, 6.5, 7.4],
  y: [5.9, 5.4, 4.4, 4.6, 3.5, 3.7, 2.8, 2.8, 2.4, 1.5],
  xError: [1000, 1000, 500, 800, 200, 80, 60, 20, 1.8, 1].map((w) => 1 / Math.sqrt(w)),
  yError: [1, 1.8, 4, 8, 20, 20, 70, 70, 100, 500].map((w) => 1 / Math.sqrt(w)),
};

function cloud(seed: number, n: number) {
  const s = randomStream(seed);
  const x = new Float64Array(n);
  const y = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    x[i] = 3 + 2 * s.normal();
    y[i] = 1 - 0.7 * x[i] + 0.5 * s.normal();
  }
  return { x, y };
}

describe('yorkLine', () => {
  it("gives the printed digits of York's worked example", () => {
    // York et al. 2004, Table II: slope -0.4805 +- 0.0580 (unified errors 0.05799), intercept 5.4799 +- 0.2950.
    const line = yorkLine(PEARSON);
    expect(line.slope).toBeCloseTo(-0.4805, 4);
    expect(line.intercept).toBeCloseTo(5.4799, 4);
    expect(line.slopeError).toBeCloseTo(0.058, 3);
    expect(line.interceptError).toBeCloseTo(0.295, 3);
    // Chi-square per degree of freedom 1.483 (same table).
    expect(line.chiSquare / line.degreesOfFreedom).toBeCloseTo(1.483, 3);
  });

  it('turns over when the axes are exchanged', () => {
    const line = yorkLine(PEARSON);
    const turned = yorkLine({ x: PEARSON.y, y: PEARSON.x, xError: PEARSON.yError, yError: PEARSON.xError });
    expect(turned.slope).toBeCloseTo(1 / line.slope, 9);
    expect(turned.intercept).toBeCloseTo(-line.intercept / line.slope, 8);
  });

  it('covers the truth with correlated errors in both axes', () => {
    const s = randomStream(8);
    let inside = 0;
    const trials = 1000;
    for (let t = 0; t < trials; t++) {
      const n = 30;
      const x = new Float64Array(n);
      const y = new Float64Array(n);
      const xError = new Float64Array(n);
      const yError = new Float64Array(n);
      const correlation = new Float64Array(n);
      for (let i = 0; i < n; i++) {
        xError[i] = 0.1 + 0.3 * s.uniform();
        yError[i] = 0.2 + 0.4 * s.uniform();
        correlation[i] = 1.6 * s.uniform() - 0.8;
        const truth = 10 * s.uniform();
        const a = s.normal();
        const b = correlation[i] * a + Math.sqrt(1 - correlation[i] ** 2) * s.normal();
        x[i] = truth + xError[i] * a;
        y[i] = 2 + 1.5 * truth + yError[i] * b;
      }
      const line = yorkLine({ x, y, xError, yError, correlation });
      if (Math.abs(line.slope - 1.5) < line.slopeError) inside++;
    }
    // 68.3 % of 1000 with standard deviation 1.5 %; three of those.
    expect(inside / trials).toBeGreaterThan(0.638);
    expect(inside / trials).toBeLessThan(0.728);
  });

  it('says what is wrong with its input', () => {
    expect(() => yorkLine({ ...PEARSON, yError: PEARSON.yError.map(() => 0) })).toThrow(/yError\[0\] is 0/);
    expect(() => yorkLine({ x: [1, 1, 1], y: [1, 2, 3], xError: [1, 1, 1], yError: [1, 1, 1] })).toThrow(/all x are 1/);
    expect(() => yorkLine({ x: [1], y: [1], xError: [1], yError: [1] })).toThrow(/1 points; at least 3/);
  });
});

describe('leastSquaresLine', () => {
  it('states errors that repeated sampling shows, for each kind', () => {
    for (const kind of ['y-on-x', 'x-on-y', 'bisector'] as const) {
      const slopes: number[] = [];
      const intercepts: number[] = [];
      let stated = 0;
      let statedIntercept = 0;
      for (let seed = 1; seed <= 800; seed++) {
        const { x, y } = cloud(seed, 80);
        const line = leastSquaresLine(x, y, kind);
        slopes.push(line.slope);
        intercepts.push(line.intercept);
        stated += line.slopeError / 800;
        statedIntercept += line.interceptError / 800;
      }
      const spread = (v: number[]) => {
        const mean = v.reduce((a, b) => a + b) / v.length;
        return Math.sqrt(v.reduce((a, b) => a + (b - mean) ** 2, 0) / (v.length - 1));
      };
      // A spread from 800 samples is good to 2.5 %; the formula is asymptotic, n = 80: 8 %.
      expect(Math.abs(stated / spread(slopes) - 1)).toBeLessThan(0.08);
      expect(Math.abs(statedIntercept / spread(intercepts) - 1)).toBeLessThan(0.08);
    }
  });

  it('lays the bisector between the two one-sided lines and refuses no correlation', () => {
    const { x, y } = cloud(3, 200);
    const slopes = (['y-on-x', 'bisector', 'x-on-y'] as const).map((k) => leastSquaresLine(x, y, k).slope);
    expect(slopes[0]).toBeGreaterThan(slopes[1]);
    expect(slopes[1]).toBeGreaterThan(slopes[2]);
    expect(() => leastSquaresLine([-1, 0, 1], [1, 0, 1], 'bisector')).toThrow(/not correlated/);
  });
});

describe('robust lines', () => {
  it('stand against a fifth of wrong points', () => {
    const { x, y } = cloud(4, 300);
    for (let i = 0; i < 60; i++) y[i * 5] += 20;
    const plain = leastSquaresLine(x, y, 'y-on-x');
    const sen = theilSenLine(x, y);
    const student = studentLine(x, y, new Float64Array(300).fill(0.5));
    expect(Math.abs(plain.intercept + 0.7 * 3 - 1 - 2.1)).toBeGreaterThan(1);
    for (const line of [sen, student]) {
      expect(Math.abs(line.slope + 0.7)).toBeLessThan(5 * line.slopeError);
      expect(Math.abs(line.intercept + line.slope * 3 - (1 - 0.7 * 3))).toBeLessThan(0.5);
    }
    expect(student.weights[5]).toBeLessThan(0.1 * student.weights[6]);
  });

  it('have 68 % intervals that hold the truth about two times in three', () => {
    let sen = 0;
    let student = 0;
    for (let seed = 1; seed <= 400; seed++) {
      const { x, y } = cloud(1000 + seed, 60);
      const [low, high] = theilSenLine(x, y).slopeInterval;
      if (low < -0.7 && -0.7 < high) sen++;
      const t = studentLine(x, y, new Float64Array(60).fill(0.5), { degreesOfFreedom: 30 });
      if (Math.abs(t.slope + 0.7) < t.slopeError) student++;
    }
    // Standard deviation of a share of 400: 2.3 %; three of those.
    expect(Math.abs(sen / 400 - 0.683)).toBeLessThan(0.07);
    expect(Math.abs(student / 400 - 0.683)).toBeLessThan(0.07);
  });
});
