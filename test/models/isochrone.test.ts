import { describe, expect, it } from 'vitest';
import { analyticModel, analyticModelWith } from '../../kernel-lib/models/analytic-model';
import { evolve } from '../../kernel-lib/models/evolve';
import { isochrone } from '../../kernel-lib/models/isochrone';
import { turnoffMass } from '../../kernel-lib/models/lifetime';
import { PHASE } from '../../kernel-lib/models/phases/phase';
import type { Isochrone } from '../../kernel-lib/models/stellar-model';
import { absoluteMagnitudes } from '../../kernel-lib/photometry/absolute-magnitudes';
import { randomStream } from '../../kernel-lib/quantity/random';

const columns = (iso: Isochrone) => [
  iso.initialMass,
  iso.mass,
  iso.logL,
  iso.logTeff,
  iso.logGravity,
  iso.weight,
  ...Object.values(iso.magnitudes),
];

function settings(): { logAge: number; z: number }[] {
  const random = randomStream(3);
  const some = Array.from({ length: 120 }, () => ({
    logAge: 6 + 4.3 * random.uniform(),
    z: Math.min(0.03, Math.max(1e-4, 10 ** (-4 + 2.5 * random.uniform()))),
  }));
  // Ages at which helium burning below the flash limit makes two pieces of one phase.
  for (let i = 0; i <= 12; i++) some.push({ logAge: 9.14 + i * 0.004, z: 0.0188 });
  return some;
}

describe('isochrone', () => {
  it('is finite, ordered and whole at every age and metallicity', () => {
    for (const { logAge, z } of settings()) {
      const iso = isochrone({ logAge, z, bands: ['V'] });
      const where = `log age ${logAge}, Z ${z}`;
      expect(iso.count, where).toBe(400);
      for (const column of columns(iso)) {
        expect(column).toHaveLength(400);
        expect(column.every(Number.isFinite), where).toBe(true);
      }
      let total = 0;
      for (let i = 0; i < iso.count; i++) {
        total += iso.weight[i];
        if (i > 0) expect(iso.initialMass[i], where).toBeGreaterThanOrEqual(iso.initialMass[i - 1]);
      }
      expect(iso.initialMass[0]).toBe(0.1);
      // The spans of mass add up to all stars that still shine.
      const gaps = Array.from(iso.breaks.slice(1), (b) => iso.initialMass[b] - iso.initialMass[b - 1]);
      const all = iso.initialMass[399] - iso.initialMass[0] - gaps.reduce((a, b) => a + b, 0);
      expect(Math.abs(total - all)).toBeLessThan(1e-9 * all);
      expect(iso.weight.every((w) => w >= 0)).toBe(true);
    }
  });

  it('phases follow one another, and luminosity rises along the lower main sequence and the giant branch', () => {
    for (const { logAge, z } of settings().slice(0, 60)) {
      const iso = isochrone({ logAge, z, bands: [] });
      for (let i = 1; i < iso.count; i++) {
        if (iso.phase[i] < iso.phase[i - 1]) expect(Array.from(iso.breaks)).toContain(i);
        if (iso.phase[i] !== iso.phase[i - 1]) continue;
        if (iso.phase[i] === PHASE.giantBranch) expect(iso.logL[i]).toBeGreaterThan(iso.logL[i - 1]);
        const unevolved = iso.initialMass[i] < (turnoffMass({ age: 5 * 10 ** (logAge - 9), z }) || 0.1);
        if (unevolved) {
          expect(iso.logL[i]).toBeGreaterThan(iso.logL[i - 1]);
          expect(iso.logTeff[i]).toBeGreaterThan(iso.logTeff[i - 1]);
        }
      }
    }
  });

  it('takes equal steps on the diagram within a phase, so that points crowd where the curve bends', () => {
    for (const logAge of [7, 8, 9, 10]) {
      const iso = isochrone({ logAge, bands: [] });
      const steps = new Map<number, number[]>();
      for (let i = 1; i < iso.count; i++) {
        if (iso.phase[i] !== iso.phase[i - 1] || iso.breaks.includes(i)) continue;
        const step = Math.hypot(8 * (iso.logTeff[i] - iso.logTeff[i - 1]), iso.logL[i] - iso.logL[i - 1]);
        steps.set(iso.phase[i], [...(steps.get(iso.phase[i]) ?? []), step]);
        // No gap that a line could not bridge.
        expect(step).toBeLessThan(0.2);
      }
      for (const own of steps.values()) {
        const sorted = own.sort((a, b) => a - b);
        const middle = sorted[Math.floor(sorted.length / 2)];
        expect(sorted[Math.floor(0.9 * sorted.length)]).toBeLessThan(1.8 * middle);
      }
    }
  });

  it('its stars are those that evolve gives', () => {
    const iso = isochrone({ logAge: 9.3, metallicity: -0.4, bands: [] });
    for (let i = 0; i < iso.count; i += 13) {
      if (i > 0 && iso.phase[i] !== iso.phase[i - 1]) continue;
      if (i + 1 < iso.count && iso.phase[i] !== iso.phase[i + 1]) continue;
      const star = evolve({ mass: iso.initialMass[i], age: 10 ** 0.3, metallicity: -0.4 });
      expect(star.phase).toBe(iso.phaseNames[iso.phase[i]]);
      expect(Math.log10(star.luminosity)).toBeCloseTo(iso.logL[i], 6);
      expect(Math.log10(star.temperature)).toBeCloseTo(iso.logTeff[i], 6);
      expect(star.logGravity).toBeCloseTo(iso.logGravity[i], 6);
    }
  });

  it('its main sequence ends at the turnoff mass', () => {
    for (const logAge of [7, 8.5, 9.7]) {
      const iso = isochrone({ logAge });
      const last = iso.phase.lastIndexOf(PHASE.mainSequence);
      expect(Math.abs(iso.initialMass[last] / turnoffMass({ age: 10 ** (logAge - 9) }) - 1)).toBeLessThan(1e-9);
    }
  });

  it('gives magnitudes in the bands asked for', () => {
    const iso = isochrone({ logAge: 8.5, metallicity: 0.1, bands: ['B', 'V', 'Ks'] });
    expect(Object.keys(iso.magnitudes)).toEqual(['B', 'V', 'Ks']);
    const { logL, logTeff, logGravity } = iso;
    const direct = absoluteMagnitudes({ logL, logTeff, logGravity, metallicity: 0.1, bands: ['V'] });
    for (let i = 0; i < 400; i += 17) expect(iso.magnitudes.V?.[i]).toBeCloseTo((direct.V as Float64Array)[i], 9);
    expect(Object.keys(isochrone({ logAge: 8 }).magnitudes)).toEqual(['G', 'BP', 'RP']);
  });

  it('marks the helium flash as a break', () => {
    const old = isochrone({ logAge: 10 });
    expect(old.breaks).toHaveLength(2);
    expect(old.phase[old.breaks[1]]).toBe(PHASE.coreHelium);
    expect(old.phase[old.breaks[1] - 1]).toBe(PHASE.giantBranch);
    expect(isochrone({ logAge: 8 }).breaks).toHaveLength(1);
  });

  it('takes other numbers of points', () => {
    for (const points of [60, 1000]) expect(isochrone({ logAge: 9.5, points }).count).toBe(points);
    expect(() => isochrone({ logAge: 9, points: 10 })).toThrow(/points must lie in 60 to 5000/);
  });

  it('outside the range is empty and says why', () => {
    const empty = isochrone({ logAge: 12, bands: ['V'] });
    expect(empty.count).toBe(0);
    expect(empty.note).toMatch(/log age 12 lies outside/);
    expect(empty.magnitudes.V).toHaveLength(0);
    expect(isochrone({ logAge: 9, metallicity: 1 }).note).toMatch(/\[Fe\/H\] 1\.00/);
    expect(isochrone({ logAge: Number.NaN }).count).toBe(0);
  });

  it('refuses what it cannot understand', () => {
    expect(() => isochrone({ logAge: 9, band: ['V'] } as never)).toThrow(/Did you mean "bands"/);
    expect(() => isochrone({ logAge: 9, bands: ['X'] } as never)).toThrow(/bands must be an array of U, B, V/);
    expect(() => isochrone({} as never)).toThrow(/logAge must be a number/);
  });

  it('shows itself and is frozen', () => {
    const iso = isochrone({ logAge: 9 });
    expect(String(iso)).toMatch(/log age 9 \(1 Gyr\).*mass loss: none/);
    expect(String(iso)).toContain('core helium burning');
    expect(Object.isFrozen(iso)).toBe(true);
  });
});

describe('analyticModel', () => {
  it('is the isochrone function with its ranges', () => {
    expect(analyticModel.isochrone({ logAge: 9, bands: [] }).logL).toEqual(isochrone({ logAge: 9, bands: [] }).logL);
    const [least, greatest] = analyticModel.metallicityRange;
    for (const metallicity of [least, greatest]) {
      for (const logAge of analyticModel.logAgeRange) {
        expect(analyticModel.isochrone({ logAge, metallicity, bands: [] }).count).toBe(400);
      }
    }
    expect(String(analyticModel)).toContain('Hurley');
  });

  it('comes with winds too', () => {
    const model = analyticModelWith({ reimers: 0.3 });
    expect(model.name).toContain('eta 0.3');
    const iso = model.isochrone({ logAge: 10, bands: [] });
    expect(iso.massLoss).toBe('winds, Reimers eta 0.3');
    expect(iso.mass[iso.count - 1]).toBeLessThan(0.8 * iso.initialMass[iso.count - 1]);
  });
});
