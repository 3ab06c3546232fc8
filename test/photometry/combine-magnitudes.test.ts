import { expect, it } from 'vitest';
import { combineMagnitudes } from '../../kernel-lib/photometry/combine-magnitudes';
import { hipparcosMinusV } from '../../kernel-lib/photometry/hipparcos-magnitude';
import { randomStream } from '../../kernel-lib/quantity/random';

it('makes an equal pair 0.753 mag brighter', () => {
  expect(10 - combineMagnitudes(10, 10)).toBeCloseTo(2.5 * Math.log10(2), 12);
  expect(10 - combineMagnitudes(10, 10)).toBeCloseTo(0.753, 3);
});

it('adds fluxes, in any order, however faint', () => {
  const random = randomStream(3);
  for (let k = 0; k < 200; k++) {
    const a = 30 * random.uniform() - 10;
    const b = 30 * random.uniform() - 10;
    const flux = 10 ** (-0.4 * a) + 10 ** (-0.4 * b);
    expect(combineMagnitudes(a, b)).toBeCloseTo(-2.5 * Math.log10(flux), 10);
    expect(combineMagnitudes(a, b)).toBe(combineMagnitudes(b, a));
  }
  expect(combineMagnitudes(5, Number.POSITIVE_INFINITY)).toBe(5);
  expect(combineMagnitudes(5, Number.NaN)).toBeNaN();
  expect([...combineMagnitudes([5, 6], [5, 900])]).toEqual([combineMagnitudes(5, 5), 6]);
  expect(() => combineMagnitudes([5, 6], [5])).toThrow(/second has 1 values for 2/);
});

// Rows of the Hipparcos Catalogue (ESA 1997), from memory: HIP 3, 4, 5 with B-V, V and Hp. Its V is good to 0.01, the relation to 0.02.
it('gives V from Hp', () => {
  for (const [bv, v, hp] of [
    [-0.019, 6.61, 6.6081],
    [0.37, 8.06, 8.1498],
    [0.902, 8.55, 8.7077],
  ]) {
    expect(Math.abs(hp - hipparcosMinusV(bv) - v)).toBeLessThan(0.03);
  }
  expect(hipparcosMinusV(1.5)).toBeNaN();
});
