import { describe, expect, it } from 'vitest';
import { bolometricCorrection } from '../../kernel-lib/photometry/bolometric-correction';
import { colourFromTemperature, temperatureFromColour } from '../../kernel-lib/photometry/colour-temperature';
import { STEFAN_BOLTZMANN, WIEN_DISPLACEMENT } from '../../kernel-lib/quantity/constants';

// Planck, Boltzmann and light speed, exact in SI (2019).
const H = 6.62607015e-34;
const K = 1.380649e-23;
const C = 299792458;

describe('the laws of black bodies', () => {
  it('have the Stefan-Boltzmann constant', () => {
    const sigma = (2 * Math.PI ** 5 * K ** 4) / (15 * H ** 3 * C ** 2);
    expect(STEFAN_BOLTZMANN / sigma).toBeCloseTo(1, 9);
  });

  it('have the Wien constant', () => {
    // x = 5 (1 - exp(-x)).
    let x = 5;
    for (let i = 0; i < 50; i++) x = 5 * (1 - Math.exp(-x));
    expect(WIEN_DISPLACEMENT / ((H * C) / (K * x))).toBeCloseTo(1, 9);
  });
});

describe('temperatureFromColour', () => {
  it('takes numbers and lists, and keeps missing values missing', () => {
    expect(temperatureFromColour(0.65)).toBeGreaterThan(5700);
    const list = temperatureFromColour([0, Number.NaN, 0.65, 9]);
    expect(list).toBeInstanceOf(Float64Array);
    expect(list[2]).toBe(temperatureFromColour(0.65));
    expect([...list].map(Number.isNaN)).toEqual([false, true, false, true]);
    expect(temperatureFromColour([])).toHaveLength(0);
  });

  it('reads a colour that turns back on the branch that holds the Sun', () => {
    // U-B 0.1 is met by K, F and A stars.
    const t = temperatureFromColour(0.1, { colour: 'U-B' });
    expect(t).toBeGreaterThan(5500);
    expect(t).toBeLessThan(6100);
    // A colour written the wrong way round is the same star.
    expect(temperatureFromColour(-0.65, { colour: 'V-B' })).toBeCloseTo(temperatureFromColour(0.65), 6);
  });

  it('refuses bad input with the choices', () => {
    expect(() => temperatureFromColour(0.6, { scale: 'flower' })).toThrow(/choose one of composite/);
    expect(() => temperatureFromColour(0.6, { scale: 'flower-1996', colour: 'BP-RP' })).toThrow(
      /no BP-RP, only B-V.*Scales with BP-RP: composite/,
    );
    expect(() => temperatureFromColour(0.6, { colour: 'B/V' as 'B-V' })).toThrow(/two bands/);
    expect(() => temperatureFromColour('0.6' as unknown as number)).toThrow(TypeError);
    expect(() => temperatureFromColour(null as unknown as number)).toThrow(/number or a list/);
    expect(() => temperatureFromColour(0.6, { color: 'B-V' } as never)).toThrow(/Did you mean "colour"/);
    expect(() => temperatureFromColour([0.6, 0.7], { logGravity: [4] })).toThrow(/logGravity has 1 values for 2/);
    expect(() => bolometricCorrection(5000, { scale: 'andrae-2018' })).toThrow(/no band V, only G/);
    expect(() => bolometricCorrection(5000, { band: 'X' as 'V' })).toThrow(/choose one of/);
  });

  it('is NaN for a metallicity outside the scale', () => {
    expect(temperatureFromColour(0.6, { metallicity: -3 })).toBeNaN();
    expect(temperatureFromColour(0.6, { metallicity: 0.6, scale: 'casagrande-2010' })).toBeNaN();
    expect(colourFromTemperature(-5)).toBeNaN();
    expect(colourFromTemperature(0)).toBeNaN();
  });
});
