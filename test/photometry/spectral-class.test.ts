import { describe, expect, it } from 'vitest';
import { DWARF_ROWS } from '../../kernel-lib/photometry/dwarf-table';
import { SPECTRAL_CLASSES, spectralClass } from '../../kernel-lib/photometry/spectral-class';

describe('spectralClass', () => {
  it('names each type of the table at its temperature, and the Sun G2', () => {
    for (const row of DWARF_ROWS) expect(spectralClass(row[1])).toBe(row[0]);
    expect(spectralClass(5772)).toBe('G2');
    expect(spectralClass(5772, { luminosityClass: 'V' })).toBe('G2V');
  });

  it('names giants and supergiants at their temperatures', () => {
    // Drilling & Landolt 2000, Table 15.7 (from memory).
    expect(spectralClass(4660, { luminosityClass: 'III' })).toBe('K0III');
    expect(spectralClass(4050, { luminosityClass: 'III' })).toBe('K5III');
    expect(spectralClass(3690, { luminosityClass: 'III' })).toBe('M0III');
    expect(spectralClass(9980, { luminosityClass: 'I' })).toBe('A0I');
    expect(spectralClass(3620, { luminosityClass: 'I' })).toBe('M0I');
    expect(spectralClass(8600, { luminosityClass: 'III' })).toBe('A3III');
  });

  it('goes from O to M as stars cool', () => {
    const rank = (type: string) => 10 * 'OBAFGKM'.indexOf(type[0]) + Number.parseFloat(type.slice(1));
    for (const luminosityClass of ['V', 'III', 'I'] as const) {
      let last = -1;
      for (let t = 46000; t > 2340; t *= 0.997) {
        const type = spectralClass(t, { luminosityClass });
        if (type === '') continue;
        expect(rank(type)).toBeGreaterThanOrEqual(last);
        last = rank(type);
      }
      expect(last).toBeGreaterThan(60);
    }
  });

  it('is empty outside and refuses what is no temperature', () => {
    for (const t of [Number.NaN, 0, 2000, 60000]) expect(spectralClass(t)).toBe('');
    expect(() => spectralClass('5000' as unknown as number)).toThrow(/number in K/);
    expect(() => spectralClass(5000, { luminosityClass: 'IV' as 'V' })).toThrow(/choose one of V, III, I/);
  });

  it('bounds the letters without gaps', () => {
    expect(SPECTRAL_CLASSES.map((c) => c.letter).join('')).toBe('OBAFGKM');
    for (let i = 1; i < 7; i++) expect(SPECTRAL_CLASSES[i].hot).toBe(SPECTRAL_CLASSES[i - 1].cool);
    for (const { letter, cool, hot } of SPECTRAL_CLASSES) {
      expect(spectralClass(hot - 1)[0]).toBe(letter);
      expect(spectralClass(cool + 1)[0]).toBe(letter);
    }
    expect(Object.isFrozen(SPECTRAL_CLASSES)).toBe(true);
  });
});
