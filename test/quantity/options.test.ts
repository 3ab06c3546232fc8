import { describe, expect, it } from 'vitest';
import { checkChoice, checkOptions, checkRange, nearest, describe as picture } from '../../kernel-lib/quantity/options';

describe('options', () => {
  it('names the unknown option, the nearest known one and all known ones', () => {
    expect(() => checkOptions('isochrone', { metalicity: 0 }, ['logAge', 'metallicity'])).toThrow(
      'isochrone: unknown option "metalicity". Did you mean "metallicity"? Known options: logAge, metallicity.',
    );
    expect(() => checkOptions('f', [] as never, ['a'])).toThrow(/must be an object/);
    expect(() => checkOptions('f', undefined, ['a'])).not.toThrow();
    expect(() => checkOptions('f', JSON.parse('{"__proto__": 1}'), ['a'])).toThrow(/unknown option "__proto__"/);
  });

  it('shows range and choices', () => {
    expect(() => checkRange('f', 'age', -1, 0, 14, 'Gyr')).toThrow('f: age must lie in 0 to 14 Gyr, got -1.');
    expect(() => checkRange('f', 'age', Number.NaN, 0, 14)).toThrow(/got NaN/);
    expect(() => checkRange('f', 'age', '3' as never, 0, 14)).toThrow(/got "3"/);
    expect(() => checkChoice('f', 'law', 'CCM98', ['CCM89', 'F99'])).toThrow(/"CCM98"; choose one of CCM89, F99/);
    expect(nearest('paralax', ['declination', 'parallax'])).toBe('parallax');
    expect(nearest('zzz', ['declination', 'parallax'])).toBeNull();
    expect(picture('x'.repeat(100)).length).toBeLessThan(70);
  });
});
