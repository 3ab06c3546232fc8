import { describe, expect, it } from 'vitest';
import { absoluteMagnitudes } from '../../kernel-lib/photometry/absolute-magnitudes';
import { bolometricCorrection } from '../../kernel-lib/photometry/bolometric-correction';
import { colourFromTemperature, temperatureFromColour } from '../../kernel-lib/photometry/colour-temperature';
import { BAND_NAMES, type Band, type ColourName } from '../../kernel-lib/quantity/band';
import { randomStream } from '../../kernel-lib/quantity/random';

const STEP = 0.004;

/** Largest second difference of bolometric corrections over steps of 0.004 dex, mag. */
function sharpest(
  band: Band,
  from: number,
  to: number,
  options: { logGravity: number; metallicity: number; scale?: string },
): number {
  const n = Math.round((to - from) / STEP) + 1;
  const t = Float64Array.from({ length: n }, (_, i) => 10 ** (from + i * STEP));
  const bc =
    options.scale === undefined
      ? bolometricCorrection(t, { band, ...options })
      : bolometricCorrection(t, { band, scale: options.scale });
  let most = 0;
  for (let i = 1; i < n - 1; i++) {
    expect(Number.isFinite(bc[i]), `${band} ${t[i]}`).toBe(true);
    most = Math.max(most, Math.abs(bc[i - 1] - 2 * bc[i] + bc[i + 1]));
  }
  return most;
}

describe('composite scale: smooth', () => {
  const BANDS = BAND_NAMES.filter((b) => b !== 'Hp');
  // A change of slope by 1 mag/dex in one step is 0.004 mag. Above 4000 K the relations bend by up to 0.004 a step (0.011 in U, whose relations
  // agree least); where molecules set in, below, by 0.012 in dwarfs and 0.013 in giants. The table's B-V jumps by 0.14 mag from M4.5 to M5.
  const warm = (band: Band) => (band === 'U' ? 0.011 : 0.004);

  it('along dwarfs, at each metallicity', () => {
    for (const metallicity of [-2, -1, -0.5, 0, 0.3]) {
      for (const band of BANDS) {
        const dwarf = { logGravity: 4.6, metallicity };
        expect(sharpest(band, 3.6, 4.75, dwarf), `${band} ${metallicity}`).toBeLessThan(warm(band));
        const cool = band === 'B' || band === 'U' ? 0.02 : 0.012;
        expect(sharpest(band, 3.45, 3.6, dwarf), `${band} ${metallicity}`).toBeLessThan(cool);
      }
    }
  });

  it('along giants and supergiants', () => {
    for (const metallicity of [-2, -1, 0, 0.3]) {
      for (const logGravity of [3.3, 2.5, 1]) {
        for (const band of BANDS) {
          const giant = { logGravity, metallicity };
          const where = `${band} ${metallicity} ${logGravity}`;
          expect(sharpest(band, 3.64, 4.6, giant), where).toBeLessThan(warm(band));
          if (band !== 'U') expect(sharpest(band, 3.53, 3.64, giant), where).toBeLessThan(0.013);
        }
      }
    }
  });

  it('while the table itself, joined point by point, is not', () => {
    expect(sharpest('BP', 3.6, 4, { logGravity: 5, metallicity: 0, scale: 'pecaut-mamajek-2013' })).toBeGreaterThan(
      0.005,
    );
  });

  it('from dwarfs to giants', () => {
    for (const temperature of [4000, 5000, 6500, 9000, 20000]) {
      for (const band of BAND_NAMES) {
        if (band === 'Hp' && temperature < 4350) continue;
        const g = Float64Array.from({ length: 101 }, (_, i) => 5 - 0.05 * i);
        const bc = bolometricCorrection(
          g.map(() => temperature),
          { band, logGravity: g },
        );
        for (let i = 1; i < 100; i++) {
          expect(Math.abs(bc[i - 1] - 2 * bc[i] + bc[i + 1]), `${band} ${temperature} ${g[i]}`).toBeLessThan(0.004);
        }
      }
    }
  });

  it("in metallicity, and unchanged at the Sun's", () => {
    const f = Float64Array.from({ length: 61 }, (_, i) => -2.5 + 0.05 * i);
    const bc = bolometricCorrection(
      f.map(() => 5000),
      { band: 'B', metallicity: f },
    );
    for (let i = 1; i < 60; i++) expect(Math.abs(bc[i - 1] - 2 * bc[i] + bc[i + 1])).toBeLessThan(1e-3);
    expect(bolometricCorrection(5000, { band: 'B', metallicity: 0 })).toBeCloseTo(bc[50], 12);
  });
});

describe('composite scale: there and back', () => {
  it('reads back the temperature that made a colour', () => {
    const random = randomStream(11);
    for (const colour of ['B-V', 'BP-RP', 'V-Ic', 'V-Ks', 'G-RP'] as ColourName[]) {
      for (const metallicity of [-1, 0, 0.2]) {
        for (const logGravity of [5, 4.2, 3, 1.5]) {
          const cool = logGravity < 4 ? 3300 : 2800;
          const t = Float64Array.from({ length: 60 }, () => cool * (40000 / cool) ** random.uniform());
          const c = colourFromTemperature(t, { colour, metallicity, logGravity });
          const back = temperatureFromColour(c, { colour, metallicity, logGravity });
          for (let i = 0; i < 60; i++) expect(Math.abs(back[i] / t[i] - 1), `${colour} ${t[i]}`).toBeLessThan(1e-8);
        }
      }
    }
  });

  it('reads back luminosity and temperature from magnitudes', () => {
    const logL = [-1, 0, 1.5, 4];
    const logTeff = [3.65, 3.76, 3.95, 4.4];
    const m = absoluteMagnitudes({ logL, logTeff, bands: ['B', 'V', 'G', 'BP', 'RP'] });
    for (let i = 0; i < 4; i++) {
      const t = temperatureFromColour(m.B[i] - m.V[i]);
      expect(Math.log10(t)).toBeCloseTo(logTeff[i], 9);
      expect(-0.4 * (m.V[i] + bolometricCorrection(t) - 4.74)).toBeCloseTo(logL[i], 8);
      const gaia = temperatureFromColour(m.BP[i] - m.RP[i], { colour: 'BP-RP' });
      expect(-0.4 * (m.G[i] + bolometricCorrection(gaia, { band: 'G' }) - 4.74)).toBeCloseTo(logL[i], 8);
    }
  });

  it('takes gravity and metallicity one a star', () => {
    const logGravity = [4.5, 2, 3];
    const metallicity = [0, -1, 0.2];
    const together = temperatureFromColour([1, 1, 1], { logGravity, metallicity });
    for (let i = 0; i < 3; i++) {
      expect(together[i]).toBe(temperatureFromColour(1, { logGravity: logGravity[i], metallicity: metallicity[i] }));
    }
  });
});

describe('composite scale: gravity as it is seen', () => {
  // Schmidt-Kaler 1982 (from memory): intrinsic B-V of M0III 1.56, K0III 1.00, G8III 0.94, at 3850, 4750-4850 and 4900-4950 K.
  it('puts K and M giants at their colours', () => {
    expect(colourFromTemperature(4800, { logGravity: 2.5 })).toBeCloseTo(1, 1.3);
    expect(Math.abs(colourFromTemperature(3850, { logGravity: 1.5 }) - 1.56)).toBeLessThan(0.05);
    // M giants do not go on reddening in B-V; in V-Ks they do: Bessell & Brett 1988 (from memory), M5III 5.96 at 3400 K.
    expect(colourFromTemperature(3400, { logGravity: 0.5 })).toBeLessThan(1.8);
    expect(Math.abs(colourFromTemperature(3400, { logGravity: 0.5, colour: 'V-Ks' }) - 5.96)).toBeLessThan(0.2);
  });

  // Red clump: M_V 0.8, M_Ks -1.61, V-Ic 1.01 and BP-RP 1.23 at about 4800 K (common practice, no source).
  it('has the red clump in its place', () => {
    const m = absoluteMagnitudes({
      logL: [1.75],
      logTeff: [Math.log10(4800)],
      logGravity: [2.5],
      bands: ['V', 'Ks', 'Ic', 'G', 'BP', 'RP'],
    });
    expect(Math.abs(m.V[0] - m.Ks[0] - 2.4)).toBeLessThan(0.12);
    expect(Math.abs(m.V[0] - m.Ic[0] - 1.01)).toBeLessThan(0.06);
    expect(Math.abs(m.BP[0] - m.RP[0] - 1.2)).toBeLessThan(0.06);
    expect(Math.abs(m.V[0] - 0.75)).toBeLessThan(0.15);
  });

  it('gives metal-poor stars less ultraviolet light to lose', () => {
    // Karaali et al. 2003, MNRAS 343, 1013 (from memory): the excess of [Fe/H] -1 over the Sun's at B-V 0.6 is 0.145 mag; with the change of
    // B-V along the sequence, U-B at 5772 K changes by -0.25 mag. Their relation scatters by 0.05 mag, and the one used here by as much.
    const change = (colour: ColourName) =>
      colourFromTemperature(5772, { colour, metallicity: -1 }) - colourFromTemperature(5772, { colour });
    expect(Math.abs(change('U-B') + 0.25)).toBeLessThan(0.1);
    expect(change('B-V')).toBeLessThan(-0.05);
  });
});
