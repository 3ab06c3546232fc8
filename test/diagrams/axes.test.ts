import { describe, expect, it } from 'vitest';
import { linearAxis, logAxis, logLabel, logTicks, padded } from '../../kernel-lib/diagrams/axes';
import { finiteExtent, rounded, significant } from '../../kernel-lib/diagrams/rounding';

describe('axes', () => {
  it('keeps the direction it is given, in log10 on logarithmic axes', () => {
    expect(logAxis('T', [20000, 3000]).range).toEqual([4.301, 3.4771]);
    expect(linearAxis('V', [16, 6]).range).toEqual([16, 6]);
  });

  it('labels temperatures in full, decades by powers', () => {
    expect(logTicks(3000, 20000)).toEqual([3000, 4000, 5000, 7000, 10000, 15000, 20000]);
    expect(logTicks(1e-4, 1e5)).toEqual([1e-4, 1e-3, 0.01, 0.1, 1, 10, 100, 1000, 10000, 1e5]);
    expect(['20000', 1000, 0.01, 1e-3, 1e5].map(Number).map(logLabel)).toEqual([
      '20,000',
      '1000',
      '0.01',
      '10<sup>\u22123</sup>',
      '10<sup>5</sup>',
    ]);
  });

  it('never puts two labels nearer than an eleventh of the axis', () => {
    for (const [low, high] of [
      [2500, 60000],
      [3800, 7200],
      [0.05, 20],
      [900, 1100],
    ]) {
      const values = logTicks(low, high);
      const room = Math.log10(high / low) / 11;
      expect(values.length).toBeLessThanOrEqual(10);
      values.forEach((v, i) => {
        if (i > 0) expect(Math.log10(v / values[i - 1])).toBeGreaterThanOrEqual(room);
      });
    }
  });

  it('rounds, and turns what is missing into null', () => {
    expect(rounded([1.23456, Number.NaN, Number.POSITIVE_INFINITY], 2)).toEqual([1.23, null, null]);
    expect(significant([12345, 0.00012345, Number.NaN], 3)).toEqual([12300, 0.000123, null]);
    expect(finiteExtent([Number.NaN, 3, 1], [null, 7])).toEqual([1, 7]);
    expect(finiteExtent([Number.NaN])).toBeNull();
    expect(padded([0, 10], 0.1)).toEqual([-1, 11]);
    expect(padded([2, 2])).toEqual([1.5, 2.5]);
  });
});
