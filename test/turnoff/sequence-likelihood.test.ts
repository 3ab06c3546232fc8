import { describe, expect, it } from 'vitest';
import { isochrone } from '../../kernel-lib/models/isochrone';
import { sequenceOf } from '../../kernel-lib/turnoff/sequence';
import {
  BINARY_SHARES,
  FOREIGN_SHARES,
  makeWorkspace,
  meanShares,
  readyStars,
  sequenceLogLikelihood,
} from '../../kernel-lib/turnoff/sequence-likelihood';

const sequence = sequenceOf(isochrone({ logAge: 8.85, bands: ['B', 'V'] }), 'B', 'V', 'V');
if (sequence === null) throw new Error('no main sequence');
const region = { bright: 0, faint: 5, blueEdge: -0.3, redEdge: 1.2, giantColour: 9, giantMagnitude: -9 };
const ERROR = 0.03;

/** Stars at places, all with one error. */
function starsAt(colour: number[], magnitude: number[], probability = 1) {
  const column = (v: number) => new Float64Array(colour.length).fill(v);
  return readyStars(
    {
      count: colour.length,
      colour: Float64Array.from(colour),
      magnitude: Float64Array.from(magnitude),
      colourError: column(ERROR),
      magnitudeError: column(ERROR),
      covariance: column(0.3 * ERROR * ERROR),
      probability: column(probability),
    },
    region,
    0,
  );
}

describe('the sequence of an isochrone', () => {
  it('has single stars and binaries that each add up to one', () => {
    const sum = (from: number, to: number) => sequence.weight.subarray(from, to).reduce((s, w) => s + w, 0);
    expect(sum(0, sequence.singles)).toBeCloseTo(1, 9);
    expect(sum(sequence.singles, sequence.count)).toBeCloseTo(1, 9);
  });

  it('puts pairs of equals up to 0.753 mag above single stars and none below', () => {
    const brightest = (from: number, to: number) => Math.min(...sequence.y.subarray(from, to));
    const gain = brightest(0, sequence.singles) - brightest(sequence.singles, sequence.count);
    // The brightest star stands beyond the turnoff, where a mass ratio of 0.968, the highest of the grid, is well short of equal light.
    expect(gain).toBeGreaterThan(0.4);
    expect(gain).toBeLessThanOrEqual(2.5 * Math.log10(2));
  });
});

describe('sequenceLogLikelihood', () => {
  it('is a density: over the region it adds up to one', () => {
    // One star at each place of a fine grid in turn; the mean over shares of a density is a density.
    const step = 0.01;
    const work = makeWorkspace(1);
    let total = 0;
    for (let x = region.blueEdge + step / 2; x < region.redEdge; x += step) {
      for (let y = region.bright + step / 2; y < region.faint; y += 2 * step) {
        const star = starsAt([x], [y]);
        total += Math.exp(sequenceLogLikelihood(star, sequence, 0, 0, region, work)) * 2 * step * step;
      }
    }
    // Some light is blurred over the bright and faint edges: an error of 0.03 mag there is worth half a per cent.
    expect(Math.abs(total - 1)).toBeLessThan(0.01);
  }, 60_000);

  it('moves with the stars', () => {
    const [x, y] = [
      [0.2, 0.35, 0.5, 0.62],
      [1.5, 2.8, 3.6, 4.4],
    ];
    const work = makeWorkspace(4);
    const before = sequenceLogLikelihood(starsAt(x, y), sequence, 0, 0, region, work);
    const moved = { ...region, bright: 0.4, faint: 5.4, blueEdge: -0.2, redEdge: 1.3 };
    const shifted = readyStars(
      {
        count: 4,
        colour: Float64Array.from(x, (v) => v + 0.1),
        magnitude: Float64Array.from(y, (v) => v + 0.4),
        colourError: new Float64Array(4).fill(ERROR),
        magnitudeError: new Float64Array(4).fill(ERROR),
        covariance: new Float64Array(4).fill(0.3 * ERROR * ERROR),
        probability: new Float64Array(4).fill(1),
      },
      moved,
      0,
    );
    expect(sequenceLogLikelihood(shifted, sequence, 0.1, 0.4, moved, work)).toBeCloseTo(before, 8);
  });

  it('learns the shares: stars far off the sequence are foreign', () => {
    const n = 60;
    const colour = Array.from({ length: n }, (_, i) => (i % 2 === 0 ? -0.2 : 1.1));
    const magnitude = Array.from({ length: n }, (_, i) => 0.5 + (4 * i) / n);
    const work = makeWorkspace(n);
    sequenceLogLikelihood(starsAt(colour, magnitude), sequence, 0, 0, region, work);
    expect(meanShares(work).foreign).toBeGreaterThan(0.9 * Math.max(...FOREIGN_SHARES));
    expect(meanShares(work).binary).toBeGreaterThanOrEqual(Math.min(...BINARY_SHARES));
    // Stars that surely do not belong say nothing of the sequence.
    const none = starsAt([0.2], [1.5], 0);
    const here = sequenceLogLikelihood(none, sequence, 0, 0, region, work);
    expect(sequenceLogLikelihood(none, sequence, 0.3, 1, region, work)).toBeCloseTo(here, 9);
  });
});
