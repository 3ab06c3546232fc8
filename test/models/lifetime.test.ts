import { describe, expect, it } from 'vitest';
import { mainSequenceLifetime, turnoffMass } from '../../kernel-lib/models/lifetime';
import { randomStream } from '../../kernel-lib/quantity/random';

/** Mass (solar), lifetime (Myr) at Z = 0.02 of Schaller et al. 1992, A&AS 96, 269, core hydrogen burning; from memory. */
const SCHALLER: readonly (readonly [number, number])[] = [
  [0.8, 25028],
  [1, 9962],
  [1.5, 2695],
  [2, 1116],
  [3, 352.5],
  [5, 94.5],
  [9, 26.4],
  [12, 16.0],
  [15, 11.6],
  [20, 8.14],
  [25, 6.41],
  [40, 4.3],
  [60, 3.45],
];

describe('mainSequenceLifetime', () => {
  it('gives the published values', () => {
    // From Hurley, Pols & Tout 2000, Eqs 4-7, worked out independently, Z = 0.02; half of the last digit.
    const expected = [26.518, 11.003, 2.729, 1.164, 0.3775, 0.10402, 0.0295, 0.0177, 0.0126, 0.00868, 0.00684];
    SCHALLER.slice(0, expected.length).forEach(([mass], i) => {
      expect(Math.abs(mainSequenceLifetime({ mass, z: 0.02 }) / expected[i] - 1)).toBeLessThan(3e-3);
    });
    // The same, Z = 0.001.
    for (const [mass, myr] of [
      [0.8, 13959],
      [1, 6178],
      [1.5, 1730],
      [2, 789.7],
      [3, 284.8],
      [5, 91.46],
      [10, 25.82],
      [20, 9.96],
    ]) {
      expect(Math.abs(mainSequenceLifetime({ mass, z: 0.001 }) / (myr / 1000) - 1)).toBeLessThan(1e-3);
    }
  });

  it('lies near a published grid, and on the long side of it', () => {
    // That grid's models have more helium (Y 0.30 against 0.28), so shorter lives. 15 %: its figures are from memory.
    for (const [mass, myr] of SCHALLER) {
      const ratio = (1000 * mainSequenceLifetime({ mass, z: 0.02 })) / myr;
      expect(ratio, `${mass} solar masses`).toBeGreaterThan(1);
      expect(ratio, `${mass} solar masses`).toBeLessThan(1.15);
    }
  });

  it('falls with mass everywhere', () => {
    const mass = Float64Array.from({ length: 3000 }, (_, i) => 0.1 * 1000 ** (i / 2999));
    mass[2999] = 100;
    for (const z of [0.0001, 0.0003, 0.001, 0.004, 0.01, 0.02, 0.03]) {
      const life = mainSequenceLifetime({ mass, z });
      for (let i = 1; i < life.length; i++) expect(life[i]).toBeLessThan(life[i - 1]);
    }
  });

  it('outside the range gives NaN', () => {
    expect(mainSequenceLifetime({ mass: 0.05 })).toBeNaN();
    expect(mainSequenceLifetime({ mass: 1, metallicity: -3 })).toBeNaN();
    expect(() => mainSequenceLifetime({ mas: 1 } as never)).toThrow(/Did you mean "mass"/);
  });
});

describe('turnoffMass', () => {
  it('is the inverse of the lifetime', () => {
    const random = randomStream(11);
    for (let i = 0; i < 300; i++) {
      const mass = 0.1 * 1000 ** random.uniform();
      const z = 10 ** (-4 + 2.47 * random.uniform());
      const back = turnoffMass({ age: mainSequenceLifetime({ mass, z }), z });
      expect(Math.abs(back / mass - 1)).toBeLessThan(1e-10);
    }
    expect(turnoffMass({ age: [1, 10] })).toHaveLength(2);
  });

  it('gives NaN where no star ends its main sequence', () => {
    expect(turnoffMass({ age: 0.001 })).toBeNaN();
    expect(turnoffMass({ age: -1 })).toBeNaN();
    expect(turnoffMass({ age: Number.NaN })).toBeNaN();
    expect(turnoffMass({ age: 1, z: 0.05 })).toBeNaN();
    expect(() => turnoffMass({ age: '1' } as never)).toThrow(/age must be a number/);
  });
});
