import { describe, expect, it } from 'vitest';
import { convertUnits, isKnownUnit, parseUnit, unitConversion } from '../../kernel-lib/quantity/units';

const factor = (from: string, to: string) => {
  const { multiply, divide } = unitConversion(from, to);
  return multiply / divide;
};

describe('units', () => {
  it.each([
    ['mas/yr', 'mas.yr-1'],
    ['mas/yr', 'mas yr-1'],
    ['mas/yr', 'mas.yr**-1'],
    ['mas/yr', 'mas*yr^-1'],
    ['mas/yr', 'mas yr**(-1)'],
    ['mas/yr', 'mas / yr'],
    ['mas/yr', '(mas)/(yr)'],
    ['km/s', 'km.s^-1'],
    ['km/s', 'km s-1'],
    ['km/s', '10+3m/s'],
    ['km/s', '1e3 m/s'],
    ['km/s', '10**3 m s**-1'],
    ['erg/(s cm2)', 'erg.s-1.cm-2'],
    ['erg/s/cm2', 'erg cm**-2 s**-1'],
    ['m', 'sqrt(m2)'],
    ['m(3/2)', 'm**1.5'],
    ['Msun', 'solMass'],
    ['M_sun', 'Msol'],
    ['Rsun', 'solRad'],
    ['Lsun', 'solLum'],
    ['µas', 'uas'],
    ['μm', 'micron'],
    ['Å', 'Angstrom'],
    ['degrees', 'deg'],
    ['year', 'a'],
    ["'electron'/s", 'electron s-1'],
    ['', '-'],
    ['---', 'none'],
    ['log(cm/s2)', 'dex(cm / s2)'],
    ['[cm/s2]', 'log(cm.s-2)'],
    ['1/d', 'd-1'],
    ['mag(AB)', 'mag'],
    ['"', 'arcsec'],
  ])('%s is %s', (a, b) => {
    expect(unitConversion(a, b)).toEqual({ multiply: 1, divide: 1, add: 0 });
  });

  it('are exact where the factor is a whole number', () => {
    expect(unitConversion('arcsec', 'mas')).toEqual({ multiply: 1000, divide: 1, add: 0 });
    expect(unitConversion('mas', 'arcsec')).toEqual({ multiply: 1, divide: 1000, add: 0 });
    expect(unitConversion('hourangle', 'deg')).toEqual({ multiply: 15, divide: 1, add: 0 });
    expect(unitConversion('arcmin', 'deg')).toEqual({ multiply: 1, divide: 60, add: 0 });
    expect(unitConversion('Gyr', 'Myr')).toEqual({ multiply: 1000, divide: 1, add: 0 });
    expect(unitConversion('yr', 'd').multiply).toBe(365.25);
    expect(unitConversion('deg', 'mas').multiply).toBe(3_600_000);
    expect([...convertUnits([1, Number.NaN, -2.5], 'kpc', 'pc')]).toEqual([1000, Number.NaN, -2500]);
  });

  it('hold their defining values', () => {
    // IAU 2012 Resolution B2: 1 au = 149597870700 m; IAU 2015 Resolution B2, note 4: 1 pc = 648000/pi au = 3.085677581e16 m.
    expect(factor('AU', 'm')).toBe(149597870700);
    expect(factor('pc', 'AU')).toBeCloseTo(648000 / Math.PI, 8);
    expect(factor('pc', 'm') / 3.085677581e16).toBeCloseTo(1, 9);
    // SI 2019: speed of light 299792458 m/s; a light year is that times the Julian year of 31557600 s.
    expect(factor('lyr', 'm')).toBe(9460730472580800);
    // IAU 2015 Resolution B3: nominal solar radius and luminosity.
    expect(factor('solRad', 'm')).toBe(6.957e8);
    expect(factor('solLum', 'W')).toBe(3.828e26);
  });

  it('shift logarithms, and never mix them with plain values', () => {
    expect(unitConversion('log(m/s2)', 'dex(cm/s2)')).toEqual({ multiply: 1, divide: 1, add: 2 });
    expect(unitConversion('log(yr)', 'log(Gyr)').add).toBe(-9);
    expect(() => unitConversion('log(yr)', 'yr')).toThrow(/cannot be converted/);
    expect(() => unitConversion('dex', 'mag')).toThrow(/cannot be converted/);
    expect(() => unitConversion('mas', 'mas/yr')).toThrow('unit "mas" cannot be converted to "mas/yr"');
    expect(() => unitConversion('ct', 'ph')).toThrow();
  });

  it('return what went in after a way there and back', () => {
    for (const [a, b] of [
      ['deg', 'rad'],
      ['mas/yr', 'rad/s'],
      ['pc', 'lyr'],
      ['solMass', 'g'],
      ['erg', 'J'],
      ['K', 'kK'],
    ]) {
      expect(factor(a, b) * factor(b, a)).toBeCloseTo(1, 14);
    }
  });

  it.each([
    ['mass', 'unknown unit "mass"; did you mean "mas"?'],
    ['km/furlong', /^unknown unit "km\/furlong" \(at "furlong"\)/],
    ['mas/yr)', /unknown unit "mas\/yr\)" \(at "\)"\)/],
    ['(mas', /unknown unit/],
    ['mas//yr', /unknown unit/],
    ['mas/', /unknown unit/],
    ['**2', /unknown unit/],
    ['log(log(yr))', /logarithm of a logarithm/],
    ['constructor', /unknown unit "constructor"/],
    ['__proto__', /unknown unit "__proto__"/],
    ['mas\u0000', /unknown unit/],
  ])('%j is an error', (text, message) => {
    expect(() => parseUnit(text)).toThrow(message);
    expect(isKnownUnit(text)).toBe(false);
  });

  it('say what they are made of', () => {
    expect(parseUnit('mas.yr**-1').dimensions).toEqual({ arcsec: 1, s: -1 });
    expect(parseUnit('m/m').dimensions).toEqual({});
    expect(parseUnit('min').exponent).toBe(0);
    expect(parseUnit('Pa').dimensions).toEqual({ g: 1, m: -1, s: -2 });
  });
});
