import { describe, expect, it } from 'vitest';
import { isochrone } from '../../kernel-lib/models/isochrone';
import { isochroneTurnoff } from '../../kernel-lib/models/isochrone-turnoff';
import { measuredFromSigma } from '../../kernel-lib/quantity/measured';
import { turnoffPoint } from '../../kernel-lib/turnoff/turnoff-point';
import { cluster, MODULUS, only } from './clusters';

const PLACE = { ebv: 0.11, distanceModulus: MODULUS };
const half = (m: { lower: number; upper: number }) => 0.5 * (m.upper - m.lower);

describe('turnoffPoint', () => {
  for (const colour of ['BP-RP', 'B-V'] as const) {
    it(`lies at the bluest point of the isochrone in ${colour}, within its interval`, () => {
      for (const [age, distance] of [
        [0.7, 812],
        [2, 812],
        [5, 500],
      ]) {
        const truth = isochroneTurnoff(isochrone({ logAge: 9 + Math.log10(age), bands: ['G', 'BP', 'RP', 'B', 'V'] }), {
          colour,
        });
        let inside = 0;
        let bias = 0;
        const seeds = 8;
        for (let seed = 1; seed <= seeds; seed++) {
          const distanceModulus = 5 * Math.log10(distance) - 5;
          const p = turnoffPoint(cluster(seed, { age, distance }), { ebv: 0.11, distanceModulus, colour });
          expect(p.turned).toBe(true);
          if (p.colour.lower <= truth.colour && truth.colour <= p.colour.upper) inside++;
          bias += (p.colour.value - truth.colour) / seeds;
          expect(Math.abs(p.absoluteMagnitude.value - truth.magnitude)).toBeLessThan(0.35);
        }
        expect(Math.abs(bias), `${age} Gyr`).toBeLessThan(0.008);
        expect(inside, `${age} Gyr`).toBeGreaterThanOrEqual(4);
      }
    });
  }

  it('takes reddening and distance off, with their errors', () => {
    const plain = turnoffPoint(cluster(1), { ...PLACE, colour: 'B-V' });
    const wide = turnoffPoint(cluster(1), {
      colour: 'B-V',
      ebv: measuredFromSigma(0.11, 0.03, 'mag'),
      distanceModulus: measuredFromSigma(MODULUS, 0.1, 'mag'),
    });
    expect(plain.observedColour.value - plain.colour.value).toBeCloseTo(0.11, 9);
    // CCM89 gives A(V) = 3.1 E(B-V) within a hundredth for V.
    expect(plain.observedMagnitude.value - plain.absoluteMagnitude.value).toBeCloseTo(MODULUS + 3.1 * 0.11, 1);
    expect(wide.colour.value).toBe(plain.colour.value);
    expect(half(wide.colour)).toBeCloseTo(Math.hypot(half(plain.colour), 0.03), 3);
    expect(half(wide.absoluteMagnitude)).toBeCloseTo(Math.hypot(half(plain.absoluteMagnitude), 0.1, 0.093), 2);
  });

  it('is the same for the same seed, and its errors shrink with more stars', () => {
    const a = turnoffPoint(cluster(2), PLACE);
    expect(turnoffPoint(cluster(2), PLACE).colour).toEqual(a.colour);
    expect(turnoffPoint(cluster(2), { ...PLACE, seed: 5 }).colour.lower).not.toBe(a.colour.lower);
    const few = turnoffPoint(cluster(2, { members: 80 }), PLACE);
    expect(half(few.observedColour)).toBeGreaterThan(1.3 * half(a.observedColour));
  });

  it('says that it is only a limit where the sequence does not turn', () => {
    const faint = turnoffPoint(
      only(cluster(3), (g) => g > 13),
      PLACE,
    );
    expect(faint.turned).toBe(false);
    expect(faint.notes.join(' ')).toMatch(/does not turn off within the stars given/);
    expect(() => turnoffPoint(cluster(1, { members: 3 }), PLACE)).toThrow(/3 stars.*at least 12/);
    expect(() => turnoffPoint(cluster(1), { ...PLACE, resamples: 3 })).toThrow(/resamples must lie in 20 to 10000/);
  });
});
