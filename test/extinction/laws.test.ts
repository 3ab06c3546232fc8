import { describe, expect, it } from 'vitest';
import { EXTINCTION_LAWS, extinctionLaw, LAW_NAMES } from '../../kernel-lib/extinction/laws';

/** a(x) and b(x) of a law that is a + b/R, from two values of R. */
function parts(x: number): [number, number] {
  const at2 = extinctionLaw('CCM89', 2)(1 / x);
  const at5 = extinctionLaw('CCM89', 5)(1 / x);
  const b = (at2 - at5) / (1 / 2 - 1 / 5);
  return [at2 - b / 2, b];
}

describe('CCM89', () => {
  // Cardelli, Clayton & Mathis 1989, ApJ 345, 245, Table 3: a(x), b(x) and A/A(V) at R 3.1 (from memory). The wavelengths of U, B, R, I and
  // H there are rounded; these are the ones at which both a and b are met.
  it.each([
    ['U', 2.78, 0.953, 1.909, 1.569],
    ['B', 2.29, 0.9982, 1.0495, 1.337],
    ['V', 1.82, 1, 0, 1],
    ['R', 1.429, 0.8686, -0.366, 0.751],
    ['I', 1.111, 0.68, -0.6239, 0.479],
    ['J', 0.8, 0.4008, -0.3679, 0.282],
    ['H', 0.625, 0.2693, -0.2473, 0.19],
    ['K', 0.455, 0.1615, -0.1483, 0.114],
  ])('gives Table 3 in %s', (_band, x, a, b, ratio) => {
    const [ownA, ownB] = parts(x);
    // To the four digits of the table; in R and I the wavelength is known to three digits.
    expect(Math.abs(ownA - a)).toBeLessThan(3e-4);
    expect(Math.abs(ownB - b)).toBeLessThan(5e-4);
    expect(Math.abs(extinctionLaw('CCM89')(1 / x) - ratio)).toBeLessThan(6e-4);
  });

  it('joins its branches', () => {
    // The paper's pieces meet to 0.02 A(V) at 1.1, 3.3 and 8 per micron; at 5.9 the extra terms begin at nought.
    const law = extinctionLaw('CCM89');
    for (const x of [1.1, 3.3, 5.9, 8])
      expect(Math.abs(law(1 / (x - 1e-9)) - law(1 / (x + 1e-9))), `${x}`).toBeLessThan(0.02);
  });

  it('has the bump at 217 nm', () => {
    const law = extinctionLaw('CCM89');
    expect(law(0.2175)).toBeGreaterThan(law(0.19));
    expect(law(0.2175)).toBeGreaterThan(law(0.25));
    // A(2175 A)/A(V) is 3.2 at R 3.1 (Figure 4 of the paper, from memory).
    expect(Math.abs(law(0.2175) - 3.2)).toBeLessThan(0.15);
  });
});

describe('O94', () => {
  it('is unity where V is, meets CCM89 at both ends of its range, and differs little between', () => {
    const own = extinctionLaw('O94');
    const old = extinctionLaw('CCM89');
    expect(own(1 / 1.82)).toBeCloseTo(1, 12);
    // O'Donnell's coefficients were made to join at 1.1 and 3.3 per micron.
    expect(Math.abs(own(1 / 1.1001) - old(1 / 1.1001))).toBeLessThan(0.01);
    expect(Math.abs(own(1 / 3.2999) - old(1 / 3.2999))).toBeLessThan(0.02);
    for (let x = 1.1; x < 3.3; x += 0.05) expect(Math.abs(own(1 / x) - old(1 / x))).toBeLessThan(0.05);
    expect(own(2.2)).toBe(old(2.2));
  });
});

describe('F99', () => {
  // Fitzpatrick 1999, PASP 111, 63, Table 3: A(lambda)/E(B-V) at R 3.1, at the anchors of his spline (from memory).
  it.each([
    [2.65, 0.265],
    [1.22, 0.829],
    [0.6, 2.688],
    [0.547, 3.055],
    [0.467, 3.806],
    [0.411, 4.315],
    [0.27, 6.265],
    [0.26, 6.591],
  ])('gives Table 3 at %f micron', (micron, excess) => {
    expect(Math.abs(3.1 * extinctionLaw('F99')(micron) - excess)).toBeLessThan(6e-4);
  });

  it('is continuous where the spline meets the ultraviolet', () => {
    for (const rV of [2.3, 3.1, 5.5]) {
      const law = extinctionLaw('F99', rV);
      expect(law(0.27 + 1e-9)).toBeCloseTo(law(0.27 - 1e-9), 5);
    }
  });
});

describe('every law', () => {
  it.each([...LAW_NAMES])(
    '%s is positive, falls from blue to red beyond 400 nm, and is NaN outside its range',
    (name) => {
      const [low, high] = EXTINCTION_LAWS[name].range;
      for (const rV of [2.2, 3.1, 5.5]) {
        const law = extinctionLaw(name, rV);
        let last = Number.POSITIVE_INFINITY;
        for (let micron = 0.4; micron < high; micron += 0.01) {
          expect(law(micron)).toBeGreaterThan(0);
          expect(law(micron), `${micron}`).toBeLessThan(last);
          last = law(micron);
        }
        // F99's V band lies at shorter wavelength, the more so at small R: 0.032.
        expect(Math.abs(law(0.55) - 1)).toBeLessThan(0.035);
        expect(law(low * 0.99)).toBeNaN();
        expect(law(high * 1.01)).toBeNaN();
        expect(law(low * 1.01)).toBeGreaterThan(1);
        for (const bad of [0, -1, Number.NaN, Number.POSITIVE_INFINITY]) expect(law(bad)).toBeNaN();
      }
    },
  );

  it('refuses what it does not know', () => {
    expect(() => extinctionLaw('CCM')).toThrow(/choose one of CCM89, O94, F99/);
    expect(() => extinctionLaw('CCM89', 1)).toThrow(/rV must lie in 2 to 6, got 1/);
    expect(() => extinctionLaw('F99', Number.NaN)).toThrow(RangeError);
  });
});
