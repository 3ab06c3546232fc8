import { describe, expect, it } from 'vitest';
import { measured, measuredFromSamples, measuredFromSigma, sortedQuantile } from '../../kernel-lib/quantity/measured';
import { randomStream } from '../../kernel-lib/quantity/random';

describe('measured', () => {
  it('prints digits set by the error, both errors where they differ', () => {
    expect(String(measured(760.4, 738.1, 779.2, 'pc'))).toBe('760 +19 -22 pc');
    expect(String(measuredFromSigma(3.3271, 0.0312, 'mag'))).toBe('3.33 ± 0.03 mag');
    expect(String(measuredFromSigma(0.0314, 0.0012, 'mag'))).toBe('0.0314 ± 0.0012 mag');
    expect(String(measuredFromSigma(12345, 210, 'pc'))).toBe('12350 ± 210 pc');
    expect(String(measuredFromSigma(1.5, 0))).toBe('1.5');
    expect(String(measured(Number.NaN, Number.NaN, Number.NaN, 'Gyr'))).toBe('not determined Gyr');
    expect(String(measured(2, 1, Number.POSITIVE_INFINITY))).toBe('2.0 +inf -1.0');
  });

  it('refuses bounds that do not enclose the value, and cannot be changed', () => {
    expect(() => measured(1, 2, 3)).toThrow(/do not enclose/);
    const m = measuredFromSigma(1, 0.1, 'mag');
    expect(() => Object.assign(m, { value: 2 })).toThrow(TypeError);
    expect(Object.keys(m)).toEqual(['value', 'lower', 'upper', 'unit']);
  });

  it('takes median and 68 % bounds of samples', () => {
    const stream = randomStream(5);
    const samples = Float64Array.from({ length: 200_000 }, () => 10 + 2 * stream.normal());
    samples[0] = Number.NaN;
    const m = measuredFromSamples(samples, 'mag');
    // Standard error of a median is 1.2533 sigma / sqrt(n) = 0.0056; five of those.
    expect(Math.abs(m.value - 10)).toBeLessThan(0.028);
    expect(Math.abs(m.lower - 8)).toBeLessThan(0.035);
    expect(Math.abs(m.upper - 12)).toBeLessThan(0.035);
    expect(sortedQuantile([1, 2, 3, 4], 0.5)).toBe(2.5);
    expect(sortedQuantile([], 0.5)).toBeNaN();
  });
});
