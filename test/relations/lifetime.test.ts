import { describe, expect, it } from 'vitest';
import { lifetimeFromMass } from '../../kernel-lib/relations/lifetime';

describe('lifetimeFromMass', () => {
  it('gives the trade figures', () => {
    // Common practice, no source: 1 solar mass lives about 1e10 yr; 10 solar masses 1e10 x 10^-2.5 = 3.2e7 yr.
    expect(lifetimeFromMass(1)).toBe(10);
    expect(lifetimeFromMass(10) * 1e9).toBeCloseTo(3.1623e7, -4);
  });

  it('takes arrays and other exponents, and refuses nonsense', () => {
    expect(Array.from(lifetimeFromMass([1, 2], { exponent: -3 }))).toEqual([10, 1.25]);
    expect(lifetimeFromMass(-1)).toBeNaN();
    expect(() => lifetimeFromMass(1, { power: 2 } as never)).toThrow(/unknown option "power"/);
    expect(() => lifetimeFromMass(1, { exponent: Number.NaN })).toThrow(/exponent must be a finite number/);
  });
});
