import { describe, expect, it } from 'vitest';
import { evolve } from '../../kernel-lib/models/evolve';
import { initialFinalMass } from '../../kernel-lib/models/initial-final-mass';
import { PHASE } from '../../kernel-lib/models/phases/phase';
import { track } from '../../kernel-lib/models/track';

describe('track', () => {
  it('runs from zero age to the end, with rising age and finite values', () => {
    for (const mass of [0.3, 0.8, 1, 1.7, 2.5, 5, 12, 30, 100]) {
      for (const z of [0.0001, 0.004, 0.03]) {
        const t = track({ mass, z });
        expect(t.count).toBe(400);
        expect(t.age[0]).toBe(0);
        for (let i = 1; i < t.count; i++) {
          expect(t.age[i]).toBeGreaterThanOrEqual(t.age[i - 1]);
          expect(t.phase[i]).toBeGreaterThanOrEqual(t.phase[i - 1]);
        }
        for (const column of [t.logL, t.logR, t.logTeff, t.logGravity, t.coreMass, t.mass]) {
          expect(column.every(Number.isFinite)).toBe(true);
        }
        expect(t.finalMass).toBeGreaterThan(0);
        expect(t.finalMass).toBeLessThanOrEqual(mass);
      }
    }
  });

  it('agrees with evolve along the way', () => {
    const t = track({ mass: 3, metallicity: -0.3 });
    for (let i = 5; i < t.count - 5; i += 11) {
      if (t.phase[i] !== t.phase[i - 1] || t.phase[i] !== t.phase[i + 1]) continue;
      const star = evolve({ mass: 3, metallicity: -0.3, age: t.age[i] });
      expect(Math.log10(star.luminosity)).toBeCloseTo(t.logL[i], 4);
      expect(Math.log10(star.radius)).toBeCloseTo(t.logR[i], 4);
    }
  });

  it('breaks at the helium flash only', () => {
    const light = track({ mass: 1 });
    expect(light.breaks).toHaveLength(2);
    expect(light.phase[light.breaks[1]]).toBe(PHASE.coreHelium);
    expect(track({ mass: 4 }).breaks).toHaveLength(1);
  });

  it('without winds ends at the observed white-dwarf mass', () => {
    // Cummings et al. 2018, ApJ 866, 21: our choice in place of the paper's winds, so exact where it rules.
    for (const mass of [1, 2, 2.9, 4]) {
      const t = track({ mass, z: 0.02 });
      expect(t.remnant).toBe('carbon-oxygen white dwarf');
      expect(t.finalMass).toBeCloseTo(initialFinalMass(mass), 9);
    }
  });

  it('outside the range is empty and says why; refuses nonsense', () => {
    expect(track({ mass: 0.01 }).count).toBe(0);
    expect(track({ mass: 0.01 }).note).toMatch(/mass 0\.01/);
    expect(() => track({ mass: [1] } as never)).toThrow(/mass must be one number/);
    expect(() => track({ mass: 1, point: 5 } as never)).toThrow(/Did you mean "points"/);
    expect(String(track({ mass: 1 }))).toContain('400 rows');
  });
});

describe('winds', () => {
  it('take away what they should', () => {
    // Hurley, Pols & Tout 2000, section 7.1: the Sun leaves a white dwarf of about 0.52 solar masses (from memory); cluster white dwarfs follow Cummings et al. 2018 with a scatter of 0.06.
    const sun = track({ mass: 1, z: 0.02, massLoss: 'winds' });
    expect(sun.finalMass).toBeGreaterThan(0.48);
    expect(sun.finalMass).toBeLessThan(0.6);
    for (const mass of [1.5, 2, 3, 4, 5, 6, 7]) {
      const t = track({ mass, z: 0.02, massLoss: 'winds' });
      // Above 6 solar masses the core at dredge-up alone is heavier than the relation.
      const observed = Math.max(initialFinalMass(mass), track({ mass, z: 0.02 }).finalMass);
      expect(Math.abs(t.finalMass - observed), `${mass}`).toBeLessThan(0.07);
    }
    const massive = track({ mass: 60, z: 0.02, massLoss: 'winds' });
    expect(massive.phase).toContain(PHASE.heliumMainSequence);
    expect(massive.mass[massive.phase.lastIndexOf(PHASE.mainSequence)]).toBeLessThan(50);
  });

  it('only ever lower the mass, and never below the core', () => {
    for (const mass of [0.8, 1, 1.9, 5, 9, 15, 25, 40, 100]) {
      for (const z of [0.0002, 0.004, 0.02]) {
        const t = track({ mass, z, massLoss: 'winds' });
        for (let i = 1; i < t.count; i++) {
          expect(t.mass[i]).toBeLessThanOrEqual(t.mass[i - 1] + 1e-9);
          expect(t.coreMass[i]).toBeLessThanOrEqual(t.mass[i] * 1.01);
        }
        expect(t.logR.every(Number.isFinite)).toBe(true);
        // A star that the superwind stripped ends at its core.
        expect(t.finalMass).toBeLessThanOrEqual(t.mass[t.count - 1] * 1.001);
      }
    }
  });

  it('without Reimers the light star keeps its mass up the giant branch', () => {
    const none = track({ mass: 1, massLoss: { reimers: 0 } });
    const tip = none.phase.lastIndexOf(PHASE.giantBranch);
    expect(none.mass[tip]).toBeGreaterThan(0.999);
    const full = track({ mass: 1, massLoss: 'winds' });
    expect(full.mass[full.phase.lastIndexOf(PHASE.giantBranch)]).toBeLessThan(0.85);
    expect(() => track({ mass: 1, massLoss: { reimer: 1 } as never })).toThrow(/Did you mean "reimers"/);
  });

  it('the steps are short enough: halving the wind roughly halves the loss', () => {
    const lost = (reimers: number) => {
      const t = track({ mass: 1.2, massLoss: { reimers } });
      return 1.2 - t.mass[t.phase.lastIndexOf(PHASE.giantBranch)];
    };
    const ratio = lost(0.2) / lost(0.1);
    expect(ratio).toBeGreaterThan(1.9);
    expect(ratio).toBeLessThan(2.2);
  });
});
