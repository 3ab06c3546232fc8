import { describe, expect, it } from 'vitest';
import { evolve } from '../../kernel-lib/models/evolve';

describe('evolve', () => {
  it('makes the Sun', () => {
    // Age 4.57 Gyr: Bonanno & Froehlich 2015, A&A 580, A130; L, R, Teff nominal solar, IAU 2015 Resolution B3. Tolerances are
    // the accuracy of the fits, well within the 5 % that their authors state; [Fe/H] = 0 is Z = 0.0188.
    const sun = evolve({ mass: 1, age: 4.57 });
    expect(sun.z).toBe(0.0188);
    expect(Math.abs(sun.luminosity - 1)).toBeLessThan(0.02);
    expect(Math.abs(sun.radius - 1)).toBeLessThan(0.02);
    expect(Math.abs(sun.temperature / 5772 - 1)).toBeLessThan(0.01);
    expect(Math.abs(sun.logGravity - 4.438)).toBeLessThan(0.02);
    expect(sun.phase).toBe('main sequence');
    // The fits' own reference gives a fainter Sun.
    expect(evolve({ mass: 1, age: 4.57, z: 0.02 }).luminosity).toBeCloseTo(0.956, 3);
  });

  it('goes through the phases in order and names what is left', () => {
    const phases = (mass: number, ages: number[]) => ages.map((age) => evolve({ mass, age, z: 0.02 }).phase);
    expect(phases(1, [0, 11.2, 12, 12.4, 12.459, 12.4617, 13])).toEqual([
      'main sequence',
      'Hertzsprung gap',
      'first giant branch',
      'core helium burning',
      'early asymptotic giant branch',
      'thermally pulsing asymptotic giant branch',
      'carbon-oxygen white dwarf',
    ]);
    expect(evolve({ mass: 0.4, age: 500 }).phase).toBe('helium white dwarf');
    expect(evolve({ mass: 7, age: 1, z: 0.02 }).phase).toBe('oxygen-neon white dwarf');
    expect(evolve({ mass: 12, age: 1, z: 0.02 }).phase).toBe('neutron star');
    expect(evolve({ mass: 40, age: 1, z: 0.02 }).phase).toBe('black hole');
  });

  it('takes many masses and answers as for each alone', () => {
    const mass = [0.3, 1, 2.2, 5, 30];
    const many = evolve({ mass, age: 0.1, metallicity: -1 });
    mass.forEach((m, i) => {
      const one = evolve({ mass: m, age: 0.1, metallicity: -1 });
      expect(many.luminosity[i]).toBe(one.luminosity);
      expect(many.phaseNames[many.phase[i]]).toBe(one.phase);
    });
    expect(String(many)).toContain('5 rows');
  });

  it('outside the range gives NaN and says why', () => {
    expect(evolve({ mass: 200, age: 1 }).note).toMatch(/mass 200/);
    expect(evolve({ mass: 1, age: -1 }).note).toMatch(/age -1/);
    expect(evolve({ mass: 1, age: 1, z: 0.1 }).luminosity).toBeNaN();
    expect(evolve({ mass: 1, age: 1, z: 0.1 }).phase).toBe('');
    const some = evolve({ mass: [0.01, 1], age: 1 });
    expect(Array.from(some.phase)).toEqual([255, 0]);
  });

  it('refuses what it cannot understand', () => {
    expect(() => evolve({ mass: 1, age: 1, massloss: 'none' } as never)).toThrow(/Did you mean "massLoss"/);
    expect(() => evolve({ mass: 1, age: '1' } as never)).toThrow(/age must be a number/);
    expect(() => evolve({ mass: 1, age: 1, massLoss: 'some' } as never)).toThrow(/'none', 'winds' or/);
  });

  it('says which mass loss was chosen', () => {
    expect(evolve({ mass: 1, age: 1 }).massLoss).toBe('none');
    expect(evolve({ mass: 1, age: 1, massLoss: { reimers: 0.3 } }).massLoss).toBe('winds, Reimers eta 0.3');
  });
});
