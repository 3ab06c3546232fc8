import { describe, expect, it } from 'vitest';
import { measuredFromSigma } from '../../kernel-lib/quantity/measured';
import { estimateReddening, mainSequenceFit } from '../../kernel-lib/turnoff/main-sequence-fit';
import { cluster, MODULUS, only } from './clusters';

const half = (m: { lower: number; upper: number }) => 0.5 * (m.upper - m.lower);

describe('mainSequenceFit', () => {
  for (const colour of ['BP-RP', 'B-V'] as const) {
    it(`finds reddening and distance together in ${colour}`, () => {
      for (const seed of [1, 2]) {
        const fit = mainSequenceFit(cluster(seed), { colour });
        expect(Math.abs(fit.ebv.value - 0.11)).toBeLessThan(2 * half(fit.ebv));
        expect(Math.abs(fit.distanceModulus.value - MODULUS)).toBeLessThan(2 * half(fit.distanceModulus));
        expect(half(fit.distanceModulus)).toBeLessThan(0.05);
        expect(fit.correlation).toBeGreaterThan(0.3);
        expect(fit.foreignShare).toBeLessThan(0.05);
      }
    });
  }

  it('keeps what it is given', () => {
    const held = mainSequenceFit(cluster(1), { distanceModulus: MODULUS });
    expect([held.distanceModulus.value, held.distanceModulus.lower]).toEqual([MODULUS, MODULUS]);
    const distance = mainSequenceFit(cluster(1), { ebv: measuredFromSigma(0.11, 0.01, 'mag') }).distanceModulus;
    expect(Math.abs(distance.value - MODULUS)).toBeLessThan(2 * half(distance));
  });

  it('says when the stars are not on any sequence', () => {
    const field = only(cluster(5, { members: 0, fieldStars: 800 }), (g) => g < 17);
    const fit = mainSequenceFit(field, { distanceModulus: MODULUS });
    expect(fit.foreignShare > 0.2 || Number.isNaN(fit.ebv.value)).toBe(true);
    expect(fit.notes.join(' ')).toMatch(/fit no sequence|not determined/);
  });
});

describe('estimateReddening', () => {
  it('finds small and large reddening', () => {
    for (const [ebv, magnitudeLimit] of [
      [0, 18],
      [0.4, 18],
      [1.5, 20],
    ]) {
      const found = estimateReddening(cluster(2, { ebv, magnitudeLimit }), {
        distanceModulus: measuredFromSigma(MODULUS, 0.02, 'mag'),
      });
      expect(Math.abs(found.value - ebv), `E(B-V) ${ebv}`).toBeLessThan(2 * half(found));
      expect(half(found)).toBeLessThan(0.03);
    }
  });

  it('carries the error of the metallicity: 0.1 dex is worth some hundredths in B-V', () => {
    const options = { distanceModulus: MODULUS, colour: 'B-V' } as const;
    const sure = half(estimateReddening(cluster(3), options));
    const unsure = half(estimateReddening(cluster(3), { ...options, metallicityError: 0.1 }));
    const extra = Math.sqrt(unsure ** 2 - sure ** 2);
    // 0.1 dex makes a star of a colour about 0.1 mag brighter or fainter (the models); the sequence falls 5 to 6 mag a mag of B-V and the
    // reddening line 3.1, so the two meet 0.1 / (2 to 3) mag away; line blanketing adds to it.
    expect(extra).toBeGreaterThan(0.025);
    expect(extra).toBeLessThan(0.08);
  });

  it('works where hardly a star is unevolved', () => {
    const found = estimateReddening(
      only(cluster(7), (g) => g < 13),
      { distanceModulus: MODULUS },
    );
    expect(Math.abs(found.value - 0.11)).toBeLessThan(2 * half(found));
  });

  it('is not determined at the edge of its range', () => {
    const found = estimateReddening(cluster(1, { ebv: 0.6 }), { distanceModulus: MODULUS, range: [0, 0.2] });
    expect(found.value).toBeNaN();
    expect(String(found)).toMatch(/not determined/);
  });

  it('says what is wrong', () => {
    expect(() => estimateReddening(cluster(1), {} as never)).toThrow(/distanceModulus is missing/);
    expect(() => estimateReddening(cluster(1), { distanceModulus: 9.5, ebv: 0.1 } as never)).toThrow(
      /unknown option "ebv"/,
    );
    expect(() => estimateReddening(cluster(1), { distanceModulus: 9.5, metallicity: 9 })).toThrow(
      /metallicity must lie in/,
    );
    expect(() => estimateReddening(cluster(1, { members: 3 }), { distanceModulus: 9.5 })).toThrow(/at least 12/);
  });
});
