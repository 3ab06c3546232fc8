import { describe, expect, it } from 'vitest';
import { zeroAge } from '../../kernel-lib/models/zero-age';

describe('zeroAge', () => {
  it('gives the published values', () => {
    // Worked out from Tout et al. 1996, MNRAS 281, 257, Tables 1 and 2, at Z = 0.02.
    const one = zeroAge({ mass: 1, z: 0.02 });
    expect(one.luminosity).toBeCloseTo(0.69772, 4);
    expect(one.radius).toBeCloseTo(0.8882, 4);
    expect(one.temperature).toBeCloseTo(5772 * (one.luminosity / one.radius ** 2) ** 0.25, 8);
  });

  it('luminosity and temperature rise with mass at every metallicity', () => {
    const mass = Float64Array.from({ length: 400 }, (_, i) => 0.1 * 1000 ** (i / 399));
    for (const z of [0.0001, 0.001, 0.01, 0.03]) {
      const stars = zeroAge({ mass, z });
      for (let i = 1; i < mass.length; i++) {
        expect(stars.luminosity[i]).toBeGreaterThan(stars.luminosity[i - 1]);
        expect(stars.temperature[i]).toBeGreaterThan(stars.temperature[i - 1] * 0.999);
      }
    }
  });

  it('outside the range gives NaN and says why', () => {
    expect(zeroAge({ mass: 0.05 }).luminosity).toBeNaN();
    expect(zeroAge({ mass: 0.05 }).note).toMatch(/mass 0\.05 lies outside .* 0\.1 to 100/);
    expect(zeroAge({ mass: 1, metallicity: 0.5 }).note).toMatch(/Z = 0\.059.*\[Fe\/H\] 0\.50/);
    const some = zeroAge({ mass: [0.01, 1, Number.NaN] });
    expect(Array.from(some.radius, Number.isNaN)).toEqual([true, false, true]);
  });

  it('refuses what it cannot understand', () => {
    expect(() => zeroAge({ mass: 1, feh: 0 } as never)).toThrow(/unknown option "feh".*mass, metallicity, z/);
    expect(() => zeroAge({ mass: '1' } as never)).toThrow(/mass must be a number or an array/);
    expect(() => zeroAge({ mass: 1, z: 0.02, metallicity: 0 })).toThrow(/not both/);
  });

  it('shows itself and cannot be changed', () => {
    const star = zeroAge({ mass: 1 });
    expect(String(star)).toMatch(/luminosity .* solar/);
    expect(Object.isFrozen(star)).toBe(true);
  });
});
