import { describe, expect, it } from 'vitest';
import { bandExtinction, colourExcessRatio } from '../../kernel-lib/extinction/band-coefficients';
import { convertReddening } from '../../kernel-lib/extinction/convert-reddening';
import { gaiaExtinctionRatio, intrinsicGaiaColour } from '../../kernel-lib/extinction/gaia-extinction';
import { extinctionLaw, LAW_NAMES } from '../../kernel-lib/extinction/laws';
import { BANDS } from '../../kernel-lib/photometry/bands';
import { BAND_NAMES } from '../../kernel-lib/quantity/band';

describe('bandExtinction', () => {
  it('keeps the definition of R(V) exactly', () => {
    for (const law of LAW_NAMES) {
      for (const rV of [2.5, 3.1, 5]) {
        expect(bandExtinction('V', { law, rV })).toBe(1);
        expect(rV * (bandExtinction('B', { law, rV }) - bandExtinction('V', { law, rV }))).toBeCloseTo(1, 12);
        expect(colourExcessRatio('B-V', { law, rV })).toBe(1);
        // The law itself, read at the two wavelengths, misses it by a few per cent.
        const at = extinctionLaw(law, rV);
        expect(Math.abs(rV * (at(BANDS.B.wavelength) - at(BANDS.V.wavelength)) - 1)).toBeLessThan(0.06);
      }
    }
  });

  it('falls with wavelength over all bands', () => {
    const order = [...BAND_NAMES].sort((a, b) => BANDS[a].wavelength - BANDS[b].wavelength);
    for (const law of LAW_NAMES) {
      for (let i = 1; i < order.length; i++) {
        expect(bandExtinction(order[i], { law }), order[i]).toBeLessThan(bandExtinction(order[i - 1], { law }));
      }
    }
  });

  // Casagrande & VandenBerg 2018, MNRAS 479, L102, Table 2 (from memory): A/E(B-V) 2.74 in G, 3.374 in BP, 2.035 in RP for a star like the Sun, R 3.1.
  // Schlafly & Finkbeiner 2011 (from memory): 0.7 in J, 0.45 in H, 0.3 in Ks, 1.7 in Ic. All to 6 %: one wavelength stands for a band.
  it.each([
    ['G', 2.74],
    ['BP', 3.374],
    ['RP', 2.035],
    ['Ks', 0.35],
    ['Rc', 2.6],
    ['Ic', 1.86],
    ['U', 4.8],
  ] as const)('is near published coefficients in %s', (band, published) => {
    expect(Math.abs((3.1 * bandExtinction(band)) / published - 1)).toBeLessThan(0.06);
  });

  it('has the standard slope of reddening in U-B', () => {
    // E(U-B)/E(B-V) 0.72 (Hiltner & Johnson 1956; common practice).
    expect(Math.abs(colourExcessRatio('U-B') - 0.72)).toBeLessThan(0.05);
  });

  it('refuses bad input', () => {
    expect(() => bandExtinction('R' as 'Rc')).toThrow(/band is "R"; choose one of U, B/);
    expect(() => bandExtinction('G', { rv: 3 } as never)).toThrow(/Did you mean "rV"/);
    expect(() => bandExtinction('V', { rV: 9 })).toThrow(/2 to 6/);
    expect(() => colourExcessRatio('BV' as 'B-V')).toThrow(/two bands/);
  });
});

describe('convertReddening', () => {
  it('goes there and back exactly', () => {
    for (const law of LAW_NAMES) {
      for (const to of ['BP-RP', 'A0', 'A(V)', 'A(G)', 'V-Ks'] as const) {
        const there = convertReddening(0.123, { from: 'B-V', to, law, rV: 3.3 });
        expect(convertReddening(there, { from: to, to: 'B-V', law, rV: 3.3 })).toBeCloseTo(0.123, 14);
      }
    }
    expect(convertReddening(0.1, { from: 'B-V', to: 'A(V)' })).toBeCloseTo(0.31, 14);
    expect(convertReddening(0.1, { from: 'B-V', to: 'BP-RP' })).toBeCloseTo(0.1 * colourExcessRatio('BP-RP'), 14);
  });

  it('takes A0 as the extinction at 550 nm', () => {
    expect(convertReddening(1, { from: 'A(V)', to: 'A0', law: 'F99' })).toBeCloseTo(extinctionLaw('F99')(0.55), 12);
  });

  it('refuses what is no measure of reddening', () => {
    expect(() => convertReddening(1, { from: 'B-V', to: 'AV' as 'A0' })).toThrow(/no measure of reddening/);
    expect(() => convertReddening(1, { from: 'B-V', to: 'A(X)' as 'A0' })).toThrow(/no measure of reddening/);
    expect(() => convertReddening(1, { from: 'B-V' } as never)).toThrow(TypeError);
  });
});

describe('gaiaExtinctionRatio', () => {
  // Coefficients from memory, so held against the law of Fitzpatrick 1999 at the pivot wavelengths, where a star like the Sun should lie: they
  // agree to 0.001 in G and RP; in BP the band's light comes from 0.02 micron redder.
  it('agrees with the law at the colour of the Sun', () => {
    const law = extinctionLaw('F99');
    for (const [band, room] of [
      ['G', 0.005],
      ['RP', 0.005],
      ['BP', 0.05],
    ] as const) {
      expect(Math.abs(gaiaExtinctionRatio(band, 0.82, 0) - law(BANDS[band].wavelength) / law(0.55))).toBeLessThan(room);
    }
  });

  it('falls with colour and with extinction', () => {
    for (const band of ['G', 'BP', 'RP'] as const) {
      for (let c = 0; c < 1.9; c += 0.1) {
        expect(gaiaExtinctionRatio(band, c + 0.1, 0.5)).toBeLessThan(gaiaExtinctionRatio(band, c, 0.5));
        expect(gaiaExtinctionRatio(band, c, 3)).toBeLessThan(gaiaExtinctionRatio(band, c, 0.5));
      }
      expect(gaiaExtinctionRatio(band, -0.1, 0)).toBeNaN();
      expect(gaiaExtinctionRatio(band, 2.6, 0)).toBeNaN();
      expect(gaiaExtinctionRatio(band, 1, 5.1)).toBeNaN();
    }
  });

  it('finds the colour that was reddened', () => {
    for (const colour of [-0.3, -0.06, 0, 0.8, 1.7, 2.5, 3.2]) {
      for (const a0 of [0, 0.3, 2, 5]) {
        const held = Math.min(Math.max(colour, -0.06), 2.5);
        const seen = colour + a0 * (gaiaExtinctionRatio('BP', held, a0) - gaiaExtinctionRatio('RP', held, a0));
        expect(intrinsicGaiaColour(seen, a0)).toBeCloseTo(colour, 9);
      }
    }
  });
});
