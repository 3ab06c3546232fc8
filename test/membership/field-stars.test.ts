import { describe, expect, it } from 'vitest';
import { readAstrometry } from '../../kernel-lib/membership/astrometry';
import { fieldDensity } from '../../kernel-lib/membership/field-density';
import {
  fieldPass,
  firstField,
  improveField,
  splitField,
  withClusterShare,
} from '../../kernel-lib/membership/field-stars';
import { meanMotion } from '../../kernel-lib/membership/mean-motion';
import { fitMixture } from '../../kernel-lib/membership/mixture';
import { randomStream } from '../../kernel-lib/quantity/random';
import { fieldCatalogue, simulatedField } from './simulated-field';

function gaussianStars(seed: number, n: number, error: (u: number) => number) {
  const s = randomStream(seed);
  const names = ['pmra', 'pmdec', 'parallax', 'pmra_error', 'pmdec_error', 'parallax_error'];
  const c = Object.fromEntries(names.map((name) => [name, new Float64Array(n)]));
  for (let i = 0; i < n; i++) {
    const e = error(s.uniform());
    const shared = s.normal();
    c.pmra[i] = 1 + 6 * shared + e * s.normal();
    c.pmdec[i] = -2 + 4.5 * (0.6 * shared + 0.8 * s.normal()) + e * s.normal();
    c.parallax[i] = 0.7 + 0.3 * s.normal() + e * s.normal();
    for (const name of names.slice(3)) c[name][i] = e;
  }
  return readAstrometry('test', fieldCatalogue(c), { useParallax: true, positions: false }).stars;
}

describe('a field of one Gaussian', () => {
  it('without errors is the mean and covariance of the stars after one step from anywhere', () => {
    const stars = gaussianStars(1, 2000, () => 0);
    const start = firstField(stars);
    // Without the uniform layer every star belongs to the one component, so that the step is the textbook one.
    start.shares.fill(0);
    for (let c = 0; c < stars.classes; c++) start.shares[3 * c] = 1;
    const field = improveField(stars, start, fieldPass(stars, start, null, new Float64Array(stars.count)));
    const mean = [0, 1, 2].map((d) => average(stars.count, (i) => stars.values[3 * i + d]));
    let at = 0;
    for (let a = 0; a < 3; a++) {
      expect(field.means[a]).toBeCloseTo(mean[a], 10);
      for (let b = a; b < 3; b++) {
        const covariance = average(
          stars.count,
          (i) => (stars.values[3 * i + a] - mean[a]) * (stars.values[3 * i + b] - mean[b]),
        );
        expect(field.covariances[at++]).toBeCloseTo(covariance, 10);
      }
    }
  });

  it('with errors recovers what the errors have blurred', () => {
    const stars = gaussianStars(2, 20_000, (u) => 0.2 + 4 * u);
    const { field } = fitMixture(stars, { cluster: null, field: firstField(stars) }, 300, 1e-9);
    const truth = [36, 6 * 4.5 * 0.6, 0, 20.25, 0, 0.09];
    // 20,000 stars some 1.5 % of a variance; three of those (parallax errors are
    // several times the spread, hence its own tolerance).
    [0, 1, 3].forEach((k) => {
      expect(Math.abs(field.covariances[k] / truth[k] - 1)).toBeLessThan(0.06);
    });
    expect(Math.abs(field.covariances[5] - truth[5])).toBeLessThan(0.06);
    expect(Math.abs(field.means[0] - 1)).toBeLessThan(0.15);
    expect(Math.abs(field.means[2] - 0.7)).toBeLessThan(0.03);
  });
});

describe('the mixture', () => {
  const { catalogue, truth } = simulatedField({ seed: 4, stars: 380, members: 60, distance: 700, correlations: true });
  const { stars } = readAstrometry('test', catalogue, { useParallax: true, positions: false });
  const limits = { leastMotion: 1e-4, mostMotion: 1, leastParallax: 1e-5, mostParallax: 0.3 };
  const cluster = meanMotion(
    Float64Array.of(truth.pmRa + 0.1, truth.pmDec, truth.parallax, 0.1, 0.02, 0.1, 0.01),
    limits,
    true,
  );
  const field = withClusterShare(stars, splitField(stars, firstField(stars), 0, 'width'), 0.2);

  it('climbs with every iteration', () => {
    // One class of error size, hence plain expectation-maximisation, whose likelihood never falls.
    expect(stars.classes).toBe(1);
    const climb: number[] = [];
    fitMixture(stars, { cluster, field }, 100, 0, (_, logLikelihood) => climb.push(logLikelihood));
    // Five iterations let limits on widths, which can cost a little at the start, do their work.
    for (let k = 6; k < climb.length; k++) expect(climb[k]).toBeGreaterThan(climb[k - 1] - 1e-4);
    expect(climb.at(-1)).toBeGreaterThan(climb[0]);
  });

  it('has shares of 1 in all and probabilities from densities', () => {
    const density = new Float64Array(stars.count);
    cluster.density(stars, density);
    const probability = new Float64Array(stars.count);
    const { logLikelihood } = fieldPass(stars, field, density, probability);
    const alone = fieldDensity(stars, field);
    const share = field.shares[field.components + 1];
    let sum = 0;
    for (let i = 0; i < stars.count; i++) {
      const total = share * density[i] + (1 - share) * alone[i];
      expect(probability[i]).toBeCloseTo((share * density[i]) / total, 12);
      sum += Math.log(total);
    }
    expect(logLikelihood).toBeCloseTo(sum, 6);
    expect(field.shares.reduce((a, b) => a + b, 0)).toBeCloseTo(1, 12);
  });

  it('has densities that integrate to 1', () => {
    // One star moved over a grid that holds practically all of it.
    const steps = 50;
    const grid = Array.from({ length: steps }, (_, k) => -1 + (2 * (k + 0.5)) / steps);
    const names = ['pmra', 'pmdec', 'parallax', 'pmra_error', 'pmdec_error', 'parallax_error'];
    const c = Object.fromEntries(names.map((name) => [name, new Float64Array(steps ** 3)]));
    const reach = 2.5;
    grid.forEach((x, a) => {
      grid.forEach((y, b) => {
        grid.forEach((z, d) => {
          const i = (a * steps + b) * steps + d;
          c.pmra[i] = truth.pmRa + 0.1 + reach * x;
          c.pmdec[i] = truth.pmDec + reach * y;
          c.parallax[i] = truth.parallax + reach * z;
          c.pmra_error[i] = 0.3;
          c.pmdec_error[i] = 0.2;
          c.parallax_error[i] = 0.4;
        });
      });
    });
    const cells = readAstrometry('test', fieldCatalogue(c), { useParallax: true, positions: false }).stars;
    const density = new Float64Array(cells.count);
    cluster.density(cells, density);
    const volume = ((2 * reach) / steps) ** 3;
    expect(density.reduce((a, b) => a + b, 0) * volume).toBeCloseTo(1, 4);
  });
});

function average(n: number, f: (i: number) => number): number {
  let sum = 0;
  for (let i = 0; i < n; i++) sum += f(i);
  return sum / n;
}
