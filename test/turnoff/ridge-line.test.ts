import { describe, expect, it } from 'vitest';
import { sortedQuantile } from '../../kernel-lib/quantity/measured';
import { ridgeLine } from '../../kernel-lib/turnoff/ridge-line';
import { cluster, MODULUS, sequenceColour } from './clusters';

/** Distance of the ridge from the single stars, mag, a mag and more above the faint limit and below the turnoff. */
function deviations(colour: 'BP-RP' | 'B-V', binaryFraction: number): Float64Array {
  const truth = sequenceColour(colour, 0.7);
  const all: number[] = [];
  for (let seed = 1; seed <= 3; seed++) {
    const ridge = ridgeLine(cluster(seed, { ebv: 0, binaryFraction }), { colour });
    for (let k = 0; k < ridge.count; k++) {
      const d = ridge.colour[k] - truth(ridge.magnitude[k] - MODULUS);
      if (ridge.magnitude[k] > 11.5 && ridge.magnitude[k] < 17 && Number.isFinite(d)) all.push(d);
    }
  }
  return Float64Array.from(all).sort();
}

describe('ridgeLine', () => {
  it('follows the single stars, however many binaries lie beside them', () => {
    for (const colour of ['BP-RP', 'B-V'] as const) {
      for (const [binaryFraction, most] of [
        [0, 0.003],
        [0.35, 0.006],
        [0.7, 0.012],
      ]) {
        const d = deviations(colour, binaryFraction);
        expect(d.length).toBeGreaterThan(60);
        // Half of all binaries, at a mass ratio above 0.55, lie 0.02 to 0.2 mag redward: a mean would be off by 0.02 to 0.06.
        expect(Math.abs(sortedQuantile(d, 0.5)), `${colour} ${binaryFraction}`).toBeLessThan(most);
      }
    }
  });

  it('gives arrays of one length, bright to faint, with errors', () => {
    const ridge = ridgeLine(cluster(4), { colour: 'BP-RP' });
    for (const key of ['magnitude', 'colour', 'colourError', 'width', 'stars'] as const) {
      expect(ridge[key]).toHaveLength(ridge.count);
      for (const v of ridge[key]) expect(Number.isFinite(v)).toBe(true);
    }
    for (let k = 1; k < ridge.count; k++) expect(ridge.magnitude[k]).toBeGreaterThan(ridge.magnitude[k - 1]);
    expect(String(ridge)).toMatch(/Ridge line of 460 stars/);
  });

  it('says what is wrong', () => {
    expect(() => ridgeLine(cluster(1), { color: 'B-V' } as never)).toThrow(/unknown option "color".*"colour"/);
    expect(() => ridgeLine(cluster(1, { members: 3 }))).toThrow(/3 stars have BP-RP and G; at least 12 are needed/);
    expect(() => ridgeLine(cluster(1), { colour: 'V-Ic' })).toThrow(/no colour V-Ic.*magnitude\.Ic/);
  });
});
