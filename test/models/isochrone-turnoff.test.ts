import { describe, expect, it } from 'vitest';
import { isochrone } from '../../kernel-lib/models/isochrone';
import { isochroneTurnoff, turnoffTable } from '../../kernel-lib/models/isochrone-turnoff';
import { turnoffMass } from '../../kernel-lib/models/lifetime';

describe('isochroneTurnoff', () => {
  it('is the hottest point of the main sequence below the hook', () => {
    for (const logAge of [7, 8, 8.8, 9.2, 9.6, 10]) {
      const iso = isochrone({ logAge, bands: [], points: 2000 });
      const turnoff = isochroneTurnoff(iso, { colour: null });
      expect(turnoff.index).toBeGreaterThan(0);
      expect(turnoff.mass).toBeLessThan(turnoffMass({ age: 10 ** (logAge - 9) }));
      expect(turnoff.mass).toBeGreaterThan(0.7 * turnoffMass({ age: 10 ** (logAge - 9) }));
      const { logTeff } = iso;
      expect(turnoff.logTeff).toBeGreaterThanOrEqual(logTeff[turnoff.index] - 1e-9);
      expect(logTeff[turnoff.index - 3]).toBeLessThan(turnoff.logTeff);
      expect(logTeff[turnoff.index + 3]).toBeLessThan(turnoff.logTeff);
    }
  });

  it('hardly depends on the number of points', () => {
    for (const logAge of [8, 9, 9.7]) {
      const at = (points: number) =>
        isochroneTurnoff(isochrone({ logAge, bands: ['B', 'V'], points }), { colour: 'B-V', magnitude: 'V' });
      expect(Math.abs(at(300).colour - at(3000).colour)).toBeLessThan(0.003);
      expect(Math.abs(at(300).magnitude - at(3000).magnitude)).toBeLessThan(0.15);
    }
  });

  it('grows fainter and redder with age', () => {
    const logAges = Array.from({ length: 29 }, (_, i) => 7.2 + 0.1 * i);
    const table = turnoffTable({ logAges, colour: 'B-V', magnitude: 'V' });
    for (let i = 1; i < logAges.length; i++) {
      expect(table.magnitude[i], `log age ${logAges[i]}`).toBeGreaterThan(table.magnitude[i - 1]);
      expect(table.colour[i]).toBeGreaterThan(table.colour[i - 1]);
      expect(table.mass[i]).toBeLessThan(table.mass[i - 1]);
    }
    expect(table.model).toContain('Hurley');
  });

  it('says when there is none', () => {
    const young = isochroneTurnoff(isochrone({ logAge: 6 }), { colour: null });
    expect(young.mass).toBeNaN();
    expect(young.note).toMatch(/does not turn/);
    expect(isochroneTurnoff(isochrone({ logAge: 13 })).note).toMatch(/log age 13/);
    expect(() => isochroneTurnoff(isochrone({ logAge: 9 }), { colour: 'B-V' })).toThrow(
      /no band "B"; it holds G, BP, RP/,
    );
    expect(() => isochroneTurnoff(isochrone({ logAge: 9 }), { color: 'B-V' } as never)).toThrow(
      /Did you mean "colour"/,
    );
    expect(Number.isNaN(turnoffTable({ logAges: [12], colour: null }).mass[0])).toBe(true);
  });
});
