import { describe, expect, it } from 'vitest';
import { SOLAR_LUMINOSITY_W, SOLAR_RADIUS_M, STEFAN_BOLTZMANN } from '../../kernel-lib/quantity/constants';
import { randomStream } from '../../kernel-lib/quantity/random';
import { absoluteMagnitude, distanceFromModulus, distanceModulus } from '../../kernel-lib/stars/distance-modulus';
import {
  luminosityFromMagnitude,
  luminosityFromRadius,
  magnitudeFromLuminosity,
  radiusFromLuminosity,
} from '../../kernel-lib/stars/luminosity';
import { surfaceGravity } from '../../kernel-lib/stars/surface-gravity';
import { wienPeak } from '../../kernel-lib/stars/wien-peak';

describe('luminosity, radius and gravity', () => {
  it('gives back the Sun for the Sun (IAU 2015 Resolutions B2 and B3, exact by definition)', () => {
    expect(luminosityFromMagnitude(4.74)).toBe(1);
    expect(magnitudeFromLuminosity(1)).toBe(4.74);
    expect(radiusFromLuminosity(1, 5772)).toBe(1);
    expect(luminosityFromRadius(1, 5772)).toBe(1);
    // log g of the Sun, 4.438: GM 1.3271244e20 m3/s2 and R 6.957e8 m of the resolution.
    expect(surfaceGravity(1, 1)).toBeCloseTo(4.438, 3);
  });

  it('agrees with the Stefan-Boltzmann law in watts (IAU 2015 B3: 5772 K follows from L and R to the last digit given)', () => {
    const watts = 4 * Math.PI * SOLAR_RADIUS_M ** 2 * STEFAN_BOLTZMANN * 5772 ** 4;
    // The nominal temperature is rounded to 1 K, that is 1 part in 5772, so luminosity holds to 4 / 5772 / 2.
    expect(Math.abs(watts / SOLAR_LUMINOSITY_W - 1)).toBeLessThan(2 / 5772);
    const other = 4 * Math.PI * (3 * SOLAR_RADIUS_M) ** 2 * STEFAN_BOLTZMANN * 9000 ** 4;
    expect(luminosityFromRadius(3, 9000)).toBeCloseTo(other / watts, 9);
  });

  it('puts the peak of a black body by the displacement constant (CODATA 2018: 2897.771955 micrometre K)', () => {
    expect(wienPeak(2897.771955)).toBeCloseTo(1, 12);
    expect(wienPeak(5772)).toBeCloseTo(0.50204, 5);
    expect(wienPeak([10000, -1, Number.NaN])[0]).toBeCloseTo(0.28978, 5);
    expect(Array.from(wienPeak([0, -1]))).toEqual([Number.NaN, Number.NaN]);
  });

  it('returns from a round trip, and falls and rises as it must', () => {
    const random = randomStream(11);
    for (let i = 0; i < 300; i++) {
      const t = 2500 + 40000 * random.uniform();
      const r = 10 ** (-2 + 4 * random.uniform());
      expect(radiusFromLuminosity(luminosityFromRadius(r, t), t) / r).toBeCloseTo(1, 12);
      const m = -8 + 25 * random.uniform();
      expect(magnitudeFromLuminosity(luminosityFromMagnitude(m))).toBeCloseTo(m, 10);
      const d = 10 ** (4 * random.uniform());
      expect(distanceFromModulus(distanceModulus(d)) / d).toBeCloseTo(1, 12);
      expect(luminosityFromMagnitude(m - 1)).toBeGreaterThan(luminosityFromMagnitude(m));
      expect(surfaceGravity(1, 2 * r)).toBeLessThan(surfaceGravity(1, r));
    }
  });

  it('takes lists, numbers and both together', () => {
    expect(Array.from(radiusFromLuminosity([1, 4], 5772))).toEqual([1, 2]);
    expect(Array.from(absoluteMagnitude([10, 11], [100, 10], 0.3))).toEqual([4.7, 10.7]);
    expect(absoluteMagnitude(10, 10)).toBe(10);
    expect(distanceModulus(10)).toBe(0);
  });

  it('gives NaN where the law has no value, and says what is wrong with what it cannot take', () => {
    expect(radiusFromLuminosity(-1, 5772)).toBeNaN();
    expect(magnitudeFromLuminosity(0)).toBeNaN();
    expect(distanceModulus(-5)).toBeNaN();
    expect(surfaceGravity(0, 1)).toBeNaN();
    expect(() => radiusFromLuminosity([1, 2], [5772])).toThrow(
      /radiusFromLuminosity: lists of different length, 2 and 1/,
    );
    expect(() => luminosityFromMagnitude('5' as never)).toThrow(/luminosityFromMagnitude: .*got "5"/);
  });
});
