import { describe, expect, it } from 'vitest';
import { bolometricCorrection } from '../../kernel-lib/photometry/bolometric-correction';
import { colourFromTemperature, temperatureFromColour } from '../../kernel-lib/photometry/colour-temperature';
import { flowerCorrection } from '../../kernel-lib/photometry/scales/flower-1996';
import { bpMinusRp, gMinusRp, gMinusV } from '../../kernel-lib/photometry/scales/gaia-from-johnson';
import { TEMPERATURE_SCALES } from '../../kernel-lib/photometry/scales/temperature-scales';
import type { ColourName } from '../../kernel-lib/quantity/band';

const temperatures = (low: number, high: number, step = 250) =>
  Array.from({ length: Math.floor((high - low) / step) + 1 }, (_, i) => low + i * step);

/** Largest difference in mag of a scale from the default one, over temperatures (K) where both have a value. */
function apart(
  scale: string,
  colour: ColourName,
  low: number,
  high: number,
  logGravity?: number,
  metallicity = 0,
): number {
  let most = 0;
  for (const t of temperatures(low, high)) {
    const own = colourFromTemperature(t, { colour, scale, metallicity });
    const composite = colourFromTemperature(t, { colour, logGravity, metallicity });
    expect(Number.isFinite(own) && Number.isFinite(composite), `${scale} ${t}`).toBe(true);
    most = Math.max(most, Math.abs(own - composite));
  }
  return most;
}

describe('independent scales', () => {
  // Each pair of numbers: measured largest difference from the default, and the room left for it. All well within the quoted
  // accuracies of 60 to 100 K (0.03 to 0.05 mag of B-V in F to K).
  it.each([
    ['casagrande-2010', 'B-V', 4500, 7000, 0.028, 0.03],
    ['casagrande-2010', 'V-Ic', 4500, 6750, 0.025, 0.03],
    ['casagrande-2010', 'V-Ks', 4500, 7000, 0.027, 0.03],
    ['flower-1996', 'B-V', 4750, 12000, 0.02, 0.025],
    ['mucciarelli-2021-dwarfs', 'BP-RP', 4500, 7000, 0.049, 0.055],
  ] as const)(
    '%s %s from %i to %i K lies within %f mag of the dwarf sequence',
    (scale, colour, low, high, measured, room) => {
      const most = apart(scale, colour, low, high);
      expect(most).toBeLessThan(room);
      expect(most).toBeGreaterThan(measured * 0.5);
    },
  );

  it.each([
    ['alonso-1999', 'B-V', 4000, 6500, 0.03],
    ['gonzalez-hernandez-2009-giants', 'V-Ks', 4250, 5750, 0.06],
    ['mucciarelli-2021-giants', 'BP-RP', 4000, 6500, 0.04],
    ['mucciarelli-2021-giants', 'G-RP', 4000, 5750, 0.035],
    ['van-belle-1999', 'V-Ks', 3500, 4500, 0.2],
  ] as const)('%s %s from %i to %i K lies within %f mag of giants in the default', (scale, colour, low, high, room) => {
    expect(apart(scale, colour, low, high, 1.5)).toBeLessThan(room);
  });

  it('gives supergiants by Flower 1996', () => {
    expect(apart('flower-1996-supergiants', 'B-V', 6250, 12000, 1)).toBeLessThan(0.03);
  });

  it('carries metallicity as Casagrande et al. 2010 and Alonso et al. 1999 do', () => {
    // The default differs from each scale at another metallicity as it does at the Sun's, to 0.01 mag.
    for (const metallicity of [-2, -1.5, -1, -0.3, 0.3]) {
      for (const t of temperatures(4750, 6500)) {
        for (const colour of ['B-V', 'V-Ks', 'V-Ic'] as const) {
          const change = (scale: string) =>
            colourFromTemperature(t, { colour, scale, metallicity }) - colourFromTemperature(t, { colour, scale });
          expect(
            Math.abs(change('composite') - change('casagrande-2010')),
            `${colour} ${t} ${metallicity}`,
          ).toBeLessThan(0.01);
        }
      }
    }
    expect(apart('alonso-1999', 'B-V', 4250, 6250, 1.5, -1)).toBeLessThan(0.03);
  });

  it('holds pairs of remembered relations that must add up', () => {
    for (const t of temperatures(4250, 6750)) {
      const giant = (colour: ColourName) => colourFromTemperature(t, { colour, scale: 'mucciarelli-2021-giants' });
      expect(Math.abs(giant('BP-G') + giant('G-RP') - giant('BP-RP'))).toBeLessThan(0.015);
    }
    for (const vi of [-0.3, 0, 0.7, 1.5, 3]) {
      // BP - V of the same source, from memory.
      const bpMinusV = -0.0143 + 0.3564 * vi - 0.1332 * vi ** 2 + 0.01212 * vi ** 3;
      expect(bpMinusV - gMinusV(vi) + gMinusRp(vi)).toBeCloseTo(bpMinusRp(vi), 2.5);
    }
    // The pieces of Flower's correction meet at log Teff 3.7 and 3.9; a wrong digit would part them by tenths.
    for (const t of [3.7, 3.9]) expect(Math.abs(flowerCorrection(t - 1e-9) - flowerCorrection(t))).toBeLessThan(0.025);
    // Andrae's two polynomials meet at 4000 K.
    const andrae = (t: number) => bolometricCorrection(t, { band: 'G', scale: 'andrae-2018' });
    expect(Math.abs(andrae(3999.9) - andrae(4000.1))).toBeLessThan(0.01);
  });

  it('has bolometric corrections that agree', () => {
    for (const t of temperatures(4500, 8000)) {
      // Flower 1996 against the dwarf sequence.
      const v = bolometricCorrection(t) - bolometricCorrection(t, { scale: 'flower-1996' });
      expect(Math.abs(v), `${t}`).toBeLessThan(0.035);
    }
    for (const t of temperatures(4500, 7750)) {
      const g = bolometricCorrection(t, { band: 'G' }) - bolometricCorrection(t, { band: 'G', scale: 'andrae-2018' });
      expect(Math.abs(g), `${t}`).toBeLessThan(0.05);
    }
    // Three giants with measured bolometric fluxes (from memory; 0.05 mag and 50 K each): Pollux, Arcturus, Aldebaran.
    for (const [t, correction] of [
      [4865, -0.33],
      [4286, -0.69],
      [3920, -1.18],
    ]) {
      const own = bolometricCorrection(t, { logGravity: 1.5, metallicity: 0 });
      expect(Math.abs(own - correction), `${t}`).toBeLessThan(0.1);
    }
  });
});

describe('every scale', () => {
  it.each(TEMPERATURE_SCALES.map((s) => s.name))(
    '%s gives back what it made, and nothing outside its range',
    (name) => {
      const scale = TEMPERATURE_SCALES.find((s) => s.name === name) as (typeof TEMPERATURE_SCALES)[number];
      const colours = scale.colours === 'any' ? (['B-V', 'V-Ks', 'BP-RP', 'V-Ic'] as const) : scale.colours;
      for (const colour of colours) {
        const [low, high] = scale.relation(colour, 0, 5).range;
        expect(high).toBeGreaterThan(low);
        for (let k = 0; k <= 20; k++) {
          const value = low + (k / 20) * (high - low);
          const t = temperatureFromColour(value, { colour, scale: name });
          expect(t, `${colour} ${value}`).toBeGreaterThan(2000);
          // 1e-6 mag: the roots are found to rounding error where the relation is steep, and to that where it is flat.
          if (k > 0 && k < 20)
            expect(Math.abs(colourFromTemperature(t, { colour, scale: name }) - value)).toBeLessThan(1e-6);
        }
        expect(temperatureFromColour(low - 0.01, { colour, scale: name })).toBeNaN();
        expect(temperatureFromColour(high + 0.01, { colour, scale: name })).toBeNaN();
      }
    },
  );

  it('is cooler where it is redder', () => {
    for (const scale of TEMPERATURE_SCALES) {
      const colour = scale.colours === 'any' ? 'B-V' : scale.colours[0];
      const relation = scale.relation(colour, 0, 5);
      const [low, high] = relation.range;
      let last = Number.POSITIVE_INFINITY;
      for (let c = low + 1e-6; c < high; c += 0.01) {
        const t = relation.temperature(c);
        expect(t, `${scale.name} ${c}`).toBeLessThan(last);
        last = t;
      }
    }
  });
});
