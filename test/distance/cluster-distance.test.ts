import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { clusterDistance } from '../../kernel-lib/distance/cluster-distance';
import { randomStream } from '../../kernel-lib/quantity/random';

function members(seed: number, n: number, truth: number, scatter: number, error = 0.1, extra: object = {}): Catalogue {
  const s = randomStream(seed);
  const errors = Float64Array.from({ length: n }, () => error * (0.5 + s.uniform()));
  const values = errors.map((e) => truth + scatter * s.normal() + e * s.normal());
  return new Catalogue({
    source: 'made in a test',
    rowCount: n,
    columns: [
      { name: 'plx', values },
      { name: 'e_plx', values: errors },
    ],
    roles: { parallax: 'plx', 'parallax.error': 'e_plx' },
    ...extra,
  });
}

describe('clusterDistance', () => {
  it('holds the truth in its 68 % interval about two times in three, with and without depth', () => {
    for (const scatter of [0, 0.08]) {
      let inside = 0;
      let bias = 0;
      const trials = 400;
      for (let t = 0; t < trials; t++) {
        const d = clusterDistance(members(t + 1, 60, 1.3, scatter));
        if (d.parallax.lower < 1.3 && 1.3 < d.parallax.upper) inside++;
        bias += (d.parallax.value - 1.3) / trials;
      }
      // Standard deviation of a share of 400: 2.3 %; three of those. Mean of 400 fits of error 0.015: 0.0008.
      expect(Math.abs(inside / trials - 0.683)).toBeLessThan(0.07);
      expect(Math.abs(bias)).toBeLessThan(0.003);
    }
  });

  it('transforms the interval of the parallax exactly', () => {
    const d = clusterDistance(members(1, 200, 1.3, 0.05));
    expect(d.distance.value).toBeCloseTo(1000 / d.parallax.value, 9);
    expect(d.distance.upper).toBeCloseTo(1000 / d.parallax.lower, 9);
    // Definition of the modulus: 5 log10(d / 10 pc).
    expect(d.modulus.value).toBeCloseTo(5 * Math.log10(d.distance.value / 10), 12);
    expect(d.distance.upper - d.distance.value).toBeGreaterThan(d.distance.value - d.distance.lower);
    expect(d.intrinsicScatter.lower).toBeLessThan(0.05);
    expect(d.intrinsicScatter.upper).toBeGreaterThan(0.04);
    expect(d.meanSquare).toBeGreaterThan(0.7);
    expect(d.meanSquare).toBeLessThan(1.3);
  });

  it('takes the zero point off and carries its error', () => {
    const plain = clusterDistance(members(2, 200, 1.3, 0));
    const moved = clusterDistance(members(2, 200, 1.3, 0), { zeroPoint: -0.03, zeroPointError: 0.02 });
    expect(moved.parallax.value - plain.parallax.value).toBeCloseTo(0.03, 4);
    const half = (m: { lower: number; upper: number }) => (m.upper - m.lower) / 2;
    expect(half(moved.parallax)).toBeCloseTo(Math.hypot(half(plain.parallax), 0.02), 4);
    expect(plain.notes.join()).toMatch(/No parallax zero point/);
  });

  it('keeps the errors of chance apart from those of the zero point', () => {
    const d = clusterDistance(members(2, 200, 1.3, 0), { zeroPointError: 0.02 });
    const plain = clusterDistance(members(2, 200, 1.3, 0));
    expect(d.byChance.modulus.upper - d.byChance.modulus.lower).toBeCloseTo(
      plain.modulus.upper - plain.modulus.lower,
      4,
    );
    expect(d.modulus.upper - d.modulus.lower).toBeGreaterThan(
      1.5 * (d.byChance.modulus.upper - d.byChance.modulus.lower),
    );
    expect(String(d)).toMatch(/distance modulus, errors of chance alone/);
    expect(String(plain)).not.toMatch(/errors of chance alone/);
  });

  it('takes a known scatter as it is', () => {
    const d = clusterDistance(members(8, 100, 1.3, 0.08), { intrinsicScatter: 0.08 });
    expect(d.intrinsicScatter.value).toBe(0.08);
    // The weighted mean with that scatter, by hand.
    const plx = members(8, 100, 1.3, 0.08).numbers('parallax');
    const error = members(8, 100, 1.3, 0.08).numbers('parallax.error');
    const w = error.map((e) => 1 / (e * e + 0.0064));
    const sum = w.reduce((a, b) => a + b, 0);
    expect(d.parallax.value).toBeCloseTo(plx.reduce((a, p, i) => a + p * w[i], 0) / sum, 6);
    expect((d.parallax.upper - d.parallax.lower) / 2).toBeCloseTo(1 / Math.sqrt(sum), 6);
    expect(() => clusterDistance(members(8, 9, 1, 0), { intrinsicScatter: -1 })).toThrow(
      /intrinsicScatter must lie in/,
    );
  });

  it('is not biased by the depth of a near cluster', () => {
    // Stars about a centre at 46 pc with 6 pc in each direction: the mean distance is 1.6 % larger than that of the centre, the
    // inverse of the mean parallax is not.
    const s = randomStream(12);
    const n = 60_000;
    const error = new Float64Array(n).fill(0.5);
    const values = error.map((e) => {
      const place = [46, 0, 0].map((x) => x + 6 * s.normal());
      return 1000 / Math.hypot(...place) + e * s.normal();
    });
    const near = new Catalogue({
      source: 'near',
      rowCount: n,
      columns: [
        { name: 'plx', values },
        { name: 'e_plx', values: error },
      ],
      roles: { parallax: 'plx', 'parallax.error': 'e_plx' },
    });
    // 13 % of depth over the root of 60,000 is 0.05 %; three of those.
    expect(Math.abs(clusterDistance(near).distance.value / 46 - 1)).toBeLessThan(0.0016);
  });

  it('gives stars weight by their probability', () => {
    const base = members(3, 100, 2, 0);
    const bad = members(4, 100, 5, 0);
    const join = (name: string) => Float64Array.from([...base.numbers(name), ...bad.numbers(name)]);
    const mixed = new Catalogue({
      source: 'mixed',
      rowCount: 200,
      columns: [
        { name: 'plx', values: join('plx') },
        { name: 'e_plx', values: join('e_plx') },
        { name: 'membershipProbability', values: Float64Array.from({ length: 200 }, (_, i) => (i < 100 ? 1 : 0)) },
      ],
      roles: base.roles,
    });
    expect(clusterDistance(mixed).parallax.value).toBeCloseTo(clusterDistance(base).parallax.value, 9);
  });

  it('says when there is no distance', () => {
    const none = clusterDistance(members(5, 50, -0.5, 0));
    expect(none.distance.value).toBeNaN();
    expect(none.notes.join()).toMatch(/not positive: the distance is not determined/);
    expect(String(none.distance)).toBe('not determined pc');
    const barely = clusterDistance(members(6, 4, 0.02, 0, 0.5));
    if (barely.parallax.value > 0) expect(barely.distance.upper).toBe(Number.POSITIVE_INFINITY);
    expect(() => clusterDistance(members(7, 3, Number.NaN, 0))).toThrow(/none of the 3 rows/);
    expect(() => clusterDistance(members(7, 3, 1, 0), { zeropoint: 0 } as never)).toThrow(/Did you mean "zeroPoint"/);
    const noError = new Catalogue({
      source: 'f',
      rowCount: 1,
      columns: [{ name: 'p', values: new Float64Array(1) }],
      roles: { parallax: 'p' },
    });
    expect(() => clusterDistance(noError)).toThrow(/no parallax errors; give their column/);
  });
});
