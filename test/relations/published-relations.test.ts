import { describe, expect, it } from 'vitest';
import {
  MASS_LUMINOSITY_RELATIONS,
  publishedLuminosity,
  publishedRadius,
} from '../../kernel-lib/relations/published-relations';

describe('published relations', () => {
  it('say nothing outside their masses, and belong to one piece at each break', () => {
    for (const [name, { pieces, range, source }] of Object.entries(MASS_LUMINOSITY_RELATIONS)) {
      const relation = name as keyof typeof MASS_LUMINOSITY_RELATIONS;
      const at = (m: number) => publishedLuminosity(m, { relation });
      expect(at(range[0] * 0.999), name).toBeNaN();
      expect(at(range[1] * 1.001), name).toBeNaN();
      expect(source).toMatch(/from memory|common practice/);
      for (const [k, p] of pieces.entries()) {
        expect(at(p.to)).toBeCloseTo(10 ** (p.constant + p.exponent * Math.log10(p.to)), 10);
        if (k > 0) {
          expect(p.from).toBe(pieces[k - 1].to);
          // Neighbouring pieces were fitted apart: they meet within their scatter, 0.2 dex.
          expect(Math.abs(Math.log10(at(p.from * 1.0001) / at(p.from)))).toBeLessThan(0.2);
        }
      }
    }
  });

  it('give the Sun within their scatter', () => {
    expect(Math.abs(publishedLuminosity(1) - 1)).toBeLessThan(0.05);
    expect(Math.abs(publishedLuminosity(1, { relation: 'Eker2015' }) - 1)).toBeLessThan(0.1);
    expect(publishedLuminosity(1, { relation: 'textbook' })).toBe(1);
    expect(Math.abs(publishedRadius(1) - 1)).toBeLessThan(0.02);
    expect(Math.abs(publishedRadius(1, { relation: 'DemircanKahraman1991' }) - 1.06)).toBeLessThan(1e-9);
    expect(publishedRadius(2)).toBeNaN();
    expect(Array.from(publishedLuminosity([1, 200]))[1]).toBeNaN();
    expect(() => publishedLuminosity(1, { relation: 'mine' as never })).toThrow(/choose one of Eker2018/);
  });
});
