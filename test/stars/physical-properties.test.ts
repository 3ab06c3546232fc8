import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { evolve } from '../../kernel-lib/models/evolve';
import { measured, measuredFromSigma } from '../../kernel-lib/quantity/measured';
import { randomStream } from '../../kernel-lib/quantity/random';
import { simulateCluster } from '../../kernel-lib/simulate/simulate-cluster';
import { physicalProperties } from '../../kernel-lib/stars/physical-properties';

function johnson(v: number[], bV: number[], errors = [0.01, 0.01]): Catalogue {
  const column = (values: number[]) => Float64Array.from(values);
  return new Catalogue({
    source: 'made in a test',
    rowCount: v.length,
    columns: [
      { name: 'v', values: column(v) },
      { name: 'e_v', values: column(v.map(() => errors[0])) },
      { name: 'bv', values: column(bV) },
      { name: 'e_bv', values: column(v.map(() => errors[1])) },
    ],
    roles: { 'magnitude.V': 'v', 'magnitude.V.error': 'e_v', 'colour.B-V': 'bv', 'colour.B-V.error': 'e_bv' },
  });
}

describe('physicalProperties', () => {
  it('gives the Sun for the Sun seen from 10 pc and from far behind dust', () => {
    // Sun: M_V 4.81-4.83, B-V 0.653 (Ramirez et al. 2012, ApJ 752, 5; from memory); 5772 K, 1 Lsun, 1 Rsun: IAU 2015 Resolution B3.
    for (const [distance, ebv, scale] of [
      [10, 0, undefined],
      [1000, 0.3, undefined],
      [10, 0, 'flower-1996'],
    ] as const) {
      const modulus = 5 * Math.log10(distance) - 5;
      const seen = johnson([4.82 + modulus + 3.1 * ebv], [0.653 + ebv]);
      const star = physicalProperties(seen, { distance, ebv, scale });
      const at = (name: string) => star.numbers(name)[0];
      // The scales are good to about 50-100 K (zero points: composite -25 K, Flower -64 K); luminosity follows the bolometric
      // correction to 0.02 dex.
      expect(Math.abs(10 ** at('log_teff') - 5772)).toBeLessThan(scale === undefined ? 40 : 80);
      expect(Math.abs(at('log_l'))).toBeLessThan(0.02);
      expect(Math.abs(at('radius') - 1)).toBeLessThan(scale === undefined ? 0.03 : 0.04);
      expect(star.values('spectral_class')[0]).toMatch(/^G[1-3]/);
    }
  });

  it("states each star's own errors as repeated observation shows them", () => {
    const s = randomStream(2);
    const n = 4000;
    const [eV, eBV] = [0.02, 0.015];
    const many = johnson(
      Array.from({ length: n }, () => 12 + eV * s.normal()),
      Array.from({ length: n }, () => 0.45 + eBV * s.normal()),
      [eV, eBV],
    );
    const stars = physicalProperties(many, { distance: 300, ebv: 0.05 });
    for (const name of ['log_teff', 'log_l', 'radius']) {
      const values = stars.numbers(name);
      const mean = values.reduce((a, b) => a + b) / n;
      const spread = Math.sqrt(values.reduce((a, b) => a + (b - mean) ** 2, 0) / (n - 1));
      const stated = stars.numbers(`${name}_error`).reduce((a, b) => a + b) / n;
      // A spread of 4000 samples is good to 1.1 %; propagation is to first order: 5 %.
      expect(Math.abs(stated / spread - 1)).toBeLessThan(0.05);
    }
  });

  it('keeps the errors that all stars share apart: those of distance and reddening', () => {
    const seen = johnson([12], [0.6]);
    const at = (distance: number, ebv: number, name: string) =>
      physicalProperties(seen, { distance, ebv }).numbers(name)[0];
    const star = physicalProperties(seen, {
      distance: measured(500, 490, 510, 'pc'),
      ebv: measuredFromSigma(0.1, 0.02, 'mag'),
    });
    const byDistance = (at(510, 0.1, 'log_l') - at(490, 0.1, 'log_l')) / 2;
    const byDust = (at(500, 0.12, 'log_l') - at(500, 0.08, 'log_l')) / 2;
    expect(star.numbers('log_l_shared_error')[0]).toBeCloseTo(Math.hypot(byDistance, byDust), 3);
    expect(star.numbers('log_teff_shared_error')[0]).toBeCloseTo(
      Math.abs(at(500, 0.12, 'log_teff') - at(500, 0.08, 'log_teff')) / 2,
      4,
    );
  });

  it.each([0.1, 0.7, 4])('reads back what an invented cluster of %s Gyr was made with, giants too', (age) => {
    const truth = { age, distance: 700, ebv: 0.2, members: 1000, fieldStars: 0, binaryFraction: 0 } as const;
    const cluster = simulateCluster({ ...truth, radius: 0, photometricErrorScale: 0, seed: 2 });
    const model = evolve({ mass: cluster.numbers('true_mass'), age });
    for (const colour of ['BP-RP', 'B-V'] as const) {
      const stars = physicalProperties(cluster, { distance: 700, ebv: 0.2, colour });
      let giants = 0;
      for (let i = 0; i < stars.rowCount; i++) {
        if (model.logGravity[i] < 3.5) giants++;
        // The scales are those of the models, so only the estimate of gravity is off: 0.5 dex at most, see the doc comment.
        expect(Math.abs(stars.numbers('log_l')[i] - stars.numbers('true_log_l')[i])).toBeLessThan(0.015);
        expect(Math.abs(stars.numbers('log_teff')[i] - Math.log10(model.temperature[i]))).toBeLessThan(0.006);
      }
      expect(giants).toBeGreaterThan(5);
    }
  });

  it('knows that a magnitude and a colour made of it err together', () => {
    const s = randomStream(9);
    const n = 6000;
    const noisy = (mean: number, sigma: number) => Float64Array.from({ length: n }, () => mean + sigma * s.normal());
    const constant = (value: number) => new Float64Array(n).fill(value);
    const [eB, eV] = [0.01, 0.03];
    const columns = [
      { name: 'b', values: noisy(10.75, eB) },
      { name: 'v', values: noisy(10, eV) },
      { name: 'eb', values: constant(eB) },
      { name: 'ev', values: constant(eV) },
    ];
    const roles = { 'magnitude.B': 'b', 'magnitude.V': 'v', 'magnitude.B.error': 'eb', 'magnitude.V.error': 'ev' };
    const stars = physicalProperties(new Catalogue({ source: 'noise', rowCount: n, columns, roles }), {
      distance: 50,
      ebv: 0,
    });
    for (const name of ['log_l', 'log_teff', 'radius']) {
      const values = stars.numbers(name);
      const mean = values.reduce((a, b) => a + b) / n;
      const spread = Math.sqrt(values.reduce((a, b) => a + (b - mean) ** 2, 0) / (n - 1));
      const stated = stars.numbers(`${name}_error`).reduce((a, b) => a + b) / n;
      // 0.9 % from the number of samples, and first order: 4 %. Without the covariance the radius would be off by 8 %.
      expect([name, Math.abs(stated / spread - 1) < 0.04]).toEqual([name, true]);
    }
  });

  it('reads giants as giants: Aldebaran and Arcturus against interferometry', () => {
    // V, B-V, parallax (mas) and what angular diameters give (K, solar radii); from memory, rounded: Aldebaran 0.86, 1.54, 48.9, 3900 K,
    // 45; Arcturus -0.05, 1.23, 88.8, 4286 K, 25.4. Giants' scales are good to 100 K, so radii to 6 %, beside 0.04 mag in V of the
    // correction.
    const known: [number, number, number, number, number][] = [
      [0.86, 1.54, 48.9, 3900, 45],
      [-0.05, 1.23, 88.8, 4286, 25.4],
    ];
    for (const [v, bV, parallax, temperature, radius] of known) {
      const star = physicalProperties(johnson([v], [bV]), { distance: 1000 / parallax, ebv: 0 });
      expect(Math.abs(10 ** star.numbers('log_teff')[0] / temperature - 1)).toBeLessThan(0.035);
      expect(Math.abs(star.numbers('radius')[0] / radius - 1)).toBeLessThan(0.1);
      const asDwarf = physicalProperties(johnson([v], [bV]), { distance: 1000 / parallax, ebv: 0, logGravity: 5 });
      expect(asDwarf.numbers('radius')[0]).not.toBeCloseTo(star.numbers('radius')[0], 1);
    }
  });

  it("takes distances one a star, with their errors in each star's own", () => {
    const two = johnson([10, 10, 10], [0.6, 0.6, 0.6], [0, 0]);
    const stars = physicalProperties(two, { distance: [100, 200, -1], distanceError: [10, 0, 1], ebv: 0 });
    expect(stars.numbers('log_l')[1] - stars.numbers('log_l')[0]).toBeCloseTo(2 * Math.log10(2), 9);
    // 10 % in distance is 2 / ln 10 * 0.1 = 0.0869 dex in luminosity.
    expect(stars.numbers('log_l_error')[0]).toBeCloseTo(0.08686, 4);
    expect(stars.numbers('log_l_error')[1]).toBeCloseTo(0, 9);
    expect(stars.numbers('log_l')[2]).toBeNaN();
    expect(stars.history.at(-1)?.note).toContain('1 without a positive distance');
  });

  it('says which scales were used and how good they are, and uses the corrections of the same name', () => {
    const note = (scale?: string) => {
      const stars = physicalProperties(johnson([10, 3], [0.6, 1.2]), { distance: 100, ebv: 0, scale });
      return stars.history.at(-1)?.note ?? '';
    };
    expect(note()).toMatch(/temperatures by composite, accuracy .*giants 100 K.*; bolometric corrections by composite/);
    expect(note()).toContain('1 of low gravity by their place');
    expect(note('flower-1996')).toMatch(/temperatures by flower-1996.*corrections by flower-1996, accuracy 0.05 mag/);
    expect(note('casagrande-2010')).toContain('corrections by composite');
    expect(() => note('flower')).toThrow(/scale is "flower"; choose one of composite/);
  });

  it('counts what lies outside the relations, and says what is wrong', () => {
    const stars = physicalProperties(johnson([10, 10, Number.NaN], [0.6, 5, 0.6]), { distance: 100, ebv: 0 });
    expect(Array.from(stars.numbers('log_l'), Number.isNaN)).toEqual([false, true, true]);
    expect(stars.history.at(-1)?.note).toContain('1 without V; 1 with B-V outside the range of the temperature scale');
    const seen = johnson([10], [0.6]);
    expect(() => physicalProperties(seen, { distance: 5, ebv: 0, logGravity: [1, 2] })).toThrow(
      /logGravity has 2 values/,
    );
    expect(() => physicalProperties(seen, { distance: -5, ebv: 0 })).toThrow(/distance must be positive/);
    expect(() => physicalProperties(seen, { distance: 5 } as never)).toThrow(/ebv must be E\(B-V\)/);
    expect(() => physicalProperties(seen, { distance: [1, 2], ebv: 0 })).toThrow(/2 values for 1 stars/);
    expect(() => physicalProperties(seen, { distance: 5, ebv: 0, ebV: 1 } as never)).toThrow(/Did you mean "ebv"/);
    expect(() => physicalProperties(seen, { distance: 5, ebv: 0, colour: 'BP-RP' })).toThrow(/has no/);
  });
});
