import { describe, expect, it } from 'vitest';
import { absoluteMagnitudes } from '../../kernel-lib/photometry/absolute-magnitudes';
import { bolometricCorrection } from '../../kernel-lib/photometry/bolometric-correction';
import { colourFromTemperature, temperatureFromColour } from '../../kernel-lib/photometry/colour-temperature';
import { photometricScales } from '../../kernel-lib/photometry/photometric-scales';
import { SOLAR_COLOURS, SOLAR_MAGNITUDES } from '../../kernel-lib/photometry/solar-photometry';
import type { ColourName } from '../../kernel-lib/quantity/band';
import { SOLAR_LOG_GRAVITY, SOLAR_TEMPERATURE } from '../../kernel-lib/quantity/constants';

const SUN = { logL: [0], logTeff: [Math.log10(SOLAR_TEMPERATURE)], logGravity: [SOLAR_LOG_GRAVITY], metallicity: 0 };

describe('solar values in, solar values out', () => {
  const magnitudes = absoluteMagnitudes({ ...SUN, bands: ['V', 'G', 'Ks'] });

  it('has the absolute magnitudes', () => {
    // M_V 4.81 from V = -26.76 +- 0.03 (Torres 2010, AJ 140, 1158); 4.83 in older tables.
    expect(magnitudes.V[0]).toBeGreaterThan(4.81);
    expect(magnitudes.V[0]).toBeLessThan(4.83);
    // 4.67 (Casagrande & VandenBerg 2018, MNRAS 479, L102), 0.01 for the rounding of the value.
    expect(Math.abs(magnitudes.G[0] - SOLAR_MAGNITUDES.G.value)).toBeLessThan(0.01);
    // 3.27 in 2MASS Ks (Willmer 2018, ApJS 236, 47, from memory), whose error is 0.02.
    expect(Math.abs(magnitudes.Ks[0] - 3.27)).toBeLessThan(0.02);
  });

  it('has the colours', () => {
    // Three times the error of the observed colours, or the 0.012 mag within which the sequence is held near the Sun.
    for (const [colour, { value, error }] of Object.entries(SOLAR_COLOURS)) {
      const off = Math.abs(colourFromTemperature(SOLAR_TEMPERATURE, { colour: colour as ColourName }) - value);
      expect(off, colour).toBeLessThan(Math.max(0.015, 3 * error));
    }
    expect(colourFromTemperature(SOLAR_TEMPERATURE)).toBeCloseTo(0.65, 1.9);
    expect(colourFromTemperature(SOLAR_TEMPERATURE, { colour: 'BP-RP' })).toBeCloseTo(0.82, 1.9);
  });

  it('has the temperature and the correction', () => {
    // B-V 0.653 +- 0.005 (Ramirez et al. 2012) is 5772 K within the 2 % of the scale; the difference is stated in photometricScales.
    expect(Math.abs(temperatureFromColour(0.653) - 5772)).toBeLessThan(40);
    expect(Math.abs(temperatureFromColour(0.82, { colour: 'BP-RP' }) - 5772)).toBeLessThan(40);
    // Table 5 of Pecaut & Mamajek 2013 has -0.085 for G2V.
    expect(bolometricCorrection(SOLAR_TEMPERATURE)).toBeCloseTo(-0.085, 2);
    // Torres 2010, Table 1: -0.080 for the corrected coefficients of Flower 1996.
    expect(bolometricCorrection(SOLAR_TEMPERATURE, { scale: 'flower-1996' })).toBeCloseTo(-0.08, 2);
    // Andrae et al. 2018 fix 0.06 by construction.
    expect(bolometricCorrection(SOLAR_TEMPERATURE, { scale: 'andrae-2018', band: 'G' })).toBeCloseTo(0.06, 12);
  });
});

describe('photometricScales', () => {
  const { entries } = photometricScales();

  it('states range, accuracy, source and zero point of each scale', () => {
    for (const entry of entries) {
      for (const word of [entry.name, entry.quantity, entry.stars, entry.range, entry.accuracy, entry.source]) {
        expect(word).not.toBe('');
        expect(word).not.toMatch(/NaN|undefined/);
      }
    }
    // Every dwarf scale that reaches the Sun says how far off it is, and none by more than 100 K.
    const dwarfs = entries.filter(
      (e) => /casagrande|pecaut|composite|mucciarelli-2021-dwarfs/.test(e.name) && e.sun.endsWith(' K'),
    );
    expect(dwarfs.length).toBeGreaterThan(20);
    for (const e of dwarfs) expect(Math.abs(Number.parseFloat(e.sun)), `${e.name} ${e.quantity}`).toBeLessThan(100);
  });

  it('shows itself', () => {
    expect(String(photometricScales())).toMatch(/casagrande-2010 +B-V +dwarfs/);
  });
});
