import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { bandExtinction, colourExcessRatio } from '../../kernel-lib/extinction/band-coefficients';
import { deredden, redden } from '../../kernel-lib/extinction/deredden';
import { measured } from '../../kernel-lib/quantity/measured';

const field = new Catalogue({
  source: 'three stars',
  rowCount: 3,
  columns: [
    { name: 'v', values: Float64Array.from([10, 11, Number.NaN]), unit: 'mag', description: 'V magnitude' },
    { name: 'bv', values: Float64Array.from([0.5, 1, 0.2]), unit: 'mag' },
    { name: 'e_bv', values: Float64Array.from([0.01, 0.02, 0.03]), unit: 'mag' },
    { name: 'g', values: Float64Array.from([9.8, 10.7, 12]), unit: 'mag' },
    { name: 'bp', values: Float64Array.from([10.1, 11.3, 12.1]), unit: 'mag' },
    { name: 'rp', values: Float64Array.from([9.4, 10, 11.9]), unit: 'mag' },
    { name: 'own', values: Float64Array.from([0.1, 0.2, 0.3]), unit: 'mag' },
    { name: 'star', values: ['a', 'b', 'c'] },
  ],
  roles: {
    'magnitude.V': 'v',
    'colour.B-V': 'bv',
    'colour.B-V.error': 'e_bv',
    'magnitude.G': 'g',
    'magnitude.BP': 'bp',
    'magnitude.RP': 'rp',
    identifier: 'star',
  },
});

describe('deredden', () => {
  it('moves magnitudes and colours by their coefficients, and keeps the old columns', () => {
    const out = deredden(field, { ebv: 0.1 });
    expect(out.numbers('magnitude.V')[0]).toBeCloseTo(10 - 0.31, 12);
    expect(out.numbers('magnitude.G')[1]).toBeCloseTo(10.7 - 0.31 * bandExtinction('G'), 12);
    expect(out.numbers('colour.B-V')[0]).toBeCloseTo(0.4, 14);
    const shift =
      field.numbers('bp')[0] -
      field.numbers('rp')[0] -
      (out.numbers('magnitude.BP')[0] - out.numbers('magnitude.RP')[0]);
    expect(shift).toBeCloseTo(0.1 * colourExcessRatio('BP-RP'), 12);
    expect(out.numbers('magnitude.V')[2]).toBeNaN();
    expect(out.roles['magnitude.V']).toBe('v_0');
    expect(out.numbers('v')).toBe(field.numbers('v'));
  });

  it('leaves errors and all else alone', () => {
    const out = deredden(field, { ebv: 0.1 });
    expect(out.roles['colour.B-V.error']).toBe('e_bv');
    expect(out.numbers('colour.B-V.error')).toBe(field.numbers('e_bv'));
    expect(out.values('identifier')).toEqual(['a', 'b', 'c']);
  });

  it('says what it did', () => {
    const { action, note, rowsAfter } = deredden(field, { ebv: 0.1, law: 'F99' }).history[0];
    expect(action).toBe('deredden: E(B-V) 0.1 mag, F99, R_V 3.1');
    expect(note).toMatch(/A\(V\)\/A\(V\) 1.0000, A\(G\)\/A\(V\) 0.8\d+.*errors unchanged/);
    expect(rowsAfter).toBe(3);
    const twice = deredden(deredden(field, { ebv: 0.1 }), { ebv: 0.1 });
    expect(twice.history[1].note).toMatch(/done before, once: all count/);
    expect(twice.roles['magnitude.V']).toBe('v_0_0');
  });

  it('takes one reddening a star, by list or column, and a measured one', () => {
    const byColumn = deredden(field, { ebv: 'own' });
    expect(byColumn.numbers('colour.B-V')[1]).toBeCloseTo(0.8, 14);
    expect(deredden(field, { ebv: [0.1, 0.2, 0.3] }).numbers('magnitude.G')).toEqual(byColumn.numbers('magnitude.G'));
    expect(byColumn.history[0].action).toMatch(/0.1 to 0.3, one a star/);
    const one = deredden(field, { ebv: measured(0.1, 0.08, 0.12, 'mag') });
    expect(one.numbers('magnitude.V')).toEqual(deredden(field, { ebv: 0.1 }).numbers('magnitude.V'));
  });

  it('is undone by redden', () => {
    for (const options of [
      { ebv: 0.4 },
      { ebv: 0.4, rV: 5, law: 'O94' },
      { ebv: [0.1, 0.5, 1], law: 'F99' },
      { ebv: 0.9, colourTerms: true },
    ]) {
      const back = deredden(redden(field, options), options);
      for (const role of ['magnitude.V', 'magnitude.G', 'magnitude.BP', 'magnitude.RP', 'colour.B-V'] as const) {
        back.numbers(role).forEach((v, i) => {
          const from = field.numbers(role)[i];
          if (Number.isNaN(from)) expect(v).toBeNaN();
          else expect(v).toBeCloseTo(from, 9);
        });
      }
    }
  });

  it('by colour takes more from blue stars', () => {
    const out = deredden(field, { ebv: 0.3, colourTerms: true });
    const lost = field.numbers('g').map((g, i) => g - out.numbers('magnitude.G')[i]);
    // Stars of BP-RP 0.2, 0.7, 1.3.
    expect(lost[2]).toBeGreaterThan(lost[0]);
    expect(lost[0]).toBeGreaterThan(lost[1]);
    expect(out.history[0].note).toMatch(/A\(G\) by the star's colour/);
    expect(() => deredden(field, { ebv: 0.3, colourTerms: true, rV: 4 })).toThrow(/rV 3.1 only/);
    expect(() => deredden(field, { ebv: 3, colourTerms: true })).toThrow(/A0 0 to 5/);
  });

  it('refuses bad input', () => {
    expect(() => deredden(field, {} as never)).toThrow(/ebv must be E\(B-V\) in mag/);
    expect(() => deredden(field, { ebv: 50 })).toThrow(/ebv must lie in -1 to 20 mag/);
    expect(() => deredden(field, { ebv: [0.1] })).toThrow(/ebv has 1 values for 3 stars/);
    expect(() => deredden(field, { ebv: 'nix' })).toThrow(/no column or role "nix"/);
    expect(() => deredden(field, { ebv: 0.1, law: 'CCM' })).toThrow(/choose one of/);
    expect(() => deredden(field, { ebv: 0.1, rv: 3 } as never)).toThrow(/Did you mean "rV"/);
    const bare = new Catalogue({ source: 'bare', rowCount: 1, columns: [{ name: 'x', values: Float64Array.of(1) }] });
    expect(() => deredden(bare, { ebv: 0.1 })).toThrow(/bare has no magnitude or colour with a known role/);
  });
});
