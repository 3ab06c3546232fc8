import { describe, expect, it } from 'vitest';
import { naturalSpline } from '../../kernel-lib/numeric/natural-spline';
import { polynomial } from '../../kernel-lib/numeric/polynomial';
import { smoothingSpline, smoothWithin } from '../../kernel-lib/numeric/smoothing-spline';
import { uniformSpline } from '../../kernel-lib/numeric/uniform-spline';
import { randomStream } from '../../kernel-lib/quantity/random';

const X = [0, 0.7, 1.1, 2.4, 3, 4.2, 5];

describe('naturalSpline', () => {
  it('goes through its points, and is a straight line where they lie on one', () => {
    const y = X.map((x) => Math.sin(x));
    const spline = naturalSpline(X, y);
    X.forEach((x, i) => {
      expect(spline(x)).toBeCloseTo(y[i], 14);
    });
    const line = naturalSpline(
      X,
      X.map((x) => 2 - 3 * x),
    );
    expect(line(1.77)).toBeCloseTo(2 - 3 * 1.77, 13);
  });

  // Worked by hand: y = 1.5 x - 0.5 x^3 on 0 to 1 has value 0 and 1 and no bend at 0.
  it('gives the value worked out by hand', () => {
    expect(naturalSpline([0, 1, 2], [0, 1, 0])(0.5)).toBeCloseTo(0.6875, 14);
  });

  it('is NaN outside, and refuses what is no function', () => {
    expect(naturalSpline([0, 1], [0, 1])(1.1)).toBeNaN();
    expect(() => naturalSpline([0, 0], [0, 1])).toThrow(/does not follow/);
    expect(() => naturalSpline([0, 1], [0])).toThrow(RangeError);
  });
});

describe('uniformSpline', () => {
  it('is the natural spline through equally spaced values', () => {
    const random = randomStream(5);
    const values = Float64Array.from({ length: 12 }, () => random.normal());
    const c = uniformSpline(values);
    const spline = naturalSpline([...values.keys()], values);
    for (let x = 0; x <= 11; x += 0.173) {
      const i = Math.min(10, Math.floor(x));
      const u = x - i;
      const value =
        (c[i] * (1 - u) ** 3 +
          c[i + 1] * (3 * u ** 3 - 6 * u * u + 4) +
          c[i + 2] * (-3 * u ** 3 + 3 * u * u + 3 * u + 1) +
          c[i + 3] * u ** 3) /
        6;
      expect(value).toBeCloseTo(spline(x), 12);
    }
  });

  it('needs three values', () => {
    expect(uniformSpline([0, 1, 2])).toEqual(Float64Array.from([-1, 0, 1, 2, 3]));
    expect(() => uniformSpline([0, 1])).toThrow(/at least 3/);
  });
});

describe('smoothingSpline', () => {
  const random = randomStream(8);
  const y = X.map((x) => 0.5 * x + random.normal());
  const weights = X.map(() => 0.5 + random.uniform());

  it('without stiffness is the natural spline, with all of it the weighted line', () => {
    const loose = smoothingSpline(X, y, weights, 0);
    const natural = naturalSpline(X, y);
    expect(loose(1.7)).toBeCloseTo(natural(1.7), 11);
    const stiff = smoothingSpline(X, y, weights, 1e7);
    // Weighted least squares.
    const sum = (f: (i: number) => number) => X.reduce((s, _, i) => s + weights[i] * f(i), 0);
    const w = sum(() => 1);
    const mx = sum((i) => X[i]) / w;
    const my = sum((i) => y[i]) / w;
    const slope = sum((i) => (X[i] - mx) * (y[i] - my)) / sum((i) => (X[i] - mx) ** 2);
    expect(stiff(1.7)).toBeCloseTo(my + slope * (1.7 - mx), 5);
    expect(stiff(9)).toBeCloseTo(my + slope * (9 - mx), 5);
  });

  it('is the least of what it makes least', () => {
    const stiffness = 0.3;
    const cost = (values: number[]) => {
      const s = naturalSpline(X, values);
      let bend = 0;
      const h = 1e-3;
      for (let x = h; x < 5; x += h) bend += ((s(x - h) - 2 * s(x) + s(Math.min(5, x + h))) / (h * h)) ** 2 * h;
      return values.reduce((sum, v, i) => sum + weights[i] * (v - y[i]) ** 2, 0) + stiffness * bend;
    };
    const spline = smoothingSpline(X, y, weights, stiffness);
    const best = X.map((x) => spline(x));
    const least = cost(best);
    for (let i = 0; i < X.length; i++) {
      for (const step of [-0.03, 0.03])
        expect(cost(best.map((v, j) => (i === j ? v + step : v)))).toBeGreaterThan(least);
    }
  });

  it('stays within a tolerance, and says when it cannot be', () => {
    const tolerance = X.map((_, i) => (i === 3 ? 0.02 : 0.3));
    const spline = smoothWithin(X, y, tolerance, 100);
    X.forEach((x, i) => {
      expect(Math.abs(spline(x) - y[i])).toBeLessThanOrEqual(tolerance[i]);
    });
    expect(() => smoothingSpline([0, 1, 1], [0, 0, 0], [1, 1, 1], 1)).toThrow(/does not follow/);
    expect(() =>
      smoothWithin(
        X,
        y,
        X.map(() => Number.NaN),
        1,
      ),
    ).toThrow(RangeError);
  });
});

it('polynomial sums powers from the lowest', () => {
  expect(polynomial([1, -2, 3], 2)).toBe(9);
});
