import { describe, expect, it } from 'vitest';
import { initialFinalMass } from '../../kernel-lib/models/initial-final-mass';
import { track } from '../../kernel-lib/models/track';
import { whiteDwarfCooling, whiteDwarfRadius } from '../../kernel-lib/models/white-dwarf';
import { measuredFromSigma } from '../../kernel-lib/quantity/measured';
import { whiteDwarfCheck } from '../../kernel-lib/relations/white-dwarf-check';

/** A white dwarf from a star of 3.5 solar masses that has cooled for 0.4 Gyr. */
const initial = 3.5;
const mass = initialFinalMass(initial);
const life = track({ mass: initial, points: 60 });
const before = life.age[life.count - 1];
const dwarf = whiteDwarfCooling({ mass, age: 0.4 });
const total = before + 0.4;

describe('whiteDwarfCheck', () => {
  it('finds the total age of a star it was made from', () => {
    const exact = { coolingError: 0, relationScatter: 0, samples: 100 };
    const check = whiteDwarfCheck({ mass, luminosity: dwarf.luminosity, turnoffAge: total, ...exact });
    expect(check.coolingAge.value).toBeCloseTo(0.4, 6);
    expect(check.progenitorMass.value).toBeCloseTo(initial, 6);
    // The table of lifetimes is straight between its points in the logarithms: 0.5 %.
    expect(Math.abs(check.totalAge.value / total - 1)).toBeLessThan(0.005);
    const cooler = whiteDwarfCheck({ mass, temperature: dwarf.temperature, turnoffAge: total, ...exact });
    expect(cooler.coolingAge.value).toBeCloseTo(0.4, 3);
  });

  it('takes the mass from the radius when there is none', () => {
    const check = whiteDwarfCheck({
      temperature: measuredFromSigma(dwarf.temperature, 200),
      luminosity: dwarf.luminosity,
      turnoffAge: total,
      relationScatter: 0,
    });
    expect(Math.abs(check.mass.value - mass)).toBeLessThan(0.01);
    expect(check.radius.value).toBeCloseTo(whiteDwarfRadius(check.mass.value), 4);
  });

  it('agrees with the right turnoff age and not with a wrong one', () => {
    const seen = {
      mass: measuredFromSigma(mass, 0.01),
      luminosity: measuredFromSigma(dwarf.luminosity, 0.05 * dwarf.luminosity),
      relationScatter: 0.02,
    };
    const right = whiteDwarfCheck({ ...seen, turnoffAge: measuredFromSigma(total, 0.05) });
    expect(Math.abs(right.sigmas)).toBeLessThan(1);
    expect(right.agrees).toBe(true);
    expect(String(right)).toContain('agrees with the turnoff age');
    const wrong = whiteDwarfCheck({ ...seen, turnoffAge: measuredFromSigma(3 * total, 0.05) });
    expect(wrong.sigmas).toBeLessThan(-3);
    expect(wrong.agrees).toBe(false);
    expect(wrong.difference.value).toBeCloseTo(right.totalAge.value - 3 * total, 1);
  });

  it('says when no check is possible', () => {
    const heavy = whiteDwarfCheck({ mass: 1.35, luminosity: 1e-3, turnoffAge: 0.1 });
    expect(heavy.sigmas).toBeNaN();
    expect(heavy.agrees).toBe(false);
    expect(heavy.notes.join(' ')).toMatch(/no check is possible/);
    expect(() => whiteDwarfCheck({ mass: 0.6, turnoffAge: 1 })).toThrow(/give mass and one of luminosity/);
    expect(() => whiteDwarfCheck({ mass: 0.6, luminosity: 1, temperature: 1e4, turnoffAge: 1 })).toThrow(
      /give mass and one/,
    );
    expect(() => whiteDwarfCheck({ mass: 0.6, luminosity: 1e-3, turnoffAge: 'old' as never })).toThrow(
      /turnoffAge must be/,
    );
  });
});
