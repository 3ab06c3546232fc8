import { describe, expect, it } from 'vitest';
import { astrometricNoise } from '../../kernel-lib/catalogue/cuts/astrometric-noise';
import { cone } from '../../kernel-lib/catalogue/cuts/cone';
import type { Cut } from '../../kernel-lib/catalogue/cuts/cut';
import { hasBands } from '../../kernel-lib/catalogue/cuts/has-bands';
import { insidePolygon } from '../../kernel-lib/catalogue/cuts/inside-polygon';
import { magnitudeRange } from '../../kernel-lib/catalogue/cuts/magnitude-range';
import { parallaxSignal } from '../../kernel-lib/catalogue/cuts/parallax-signal';
import { where } from '../../kernel-lib/catalogue/cuts/where';
import { randomStream } from '../../kernel-lib/quantity/random';
import { table } from './helpers';

const NaN_ = Number.NaN;
const stars = table(
  {
    id: [0, 1, 2, 3, 4, 5],
    plx: [10, 5, -4, NaN_, 2, 3],
    e_plx: [1, 1, 1, 1, 0, NaN_],
    G: [8, 12, 18, NaN_, 7.5, 20],
    V: [8.1, NaN_, 18.2, 9, 7.9, NaN_],
    RUWE: [1, 1.4, 1.41, 0.9, NaN_, 3],
    astrometric_excess_noise: [0, 0.5, 0, 2, 0, 0],
    name: ['a', 'b', null, 'd', 'e', 'f'],
  },
  { parallax: 'plx', 'parallax.error': 'e_plx', 'magnitude.G': 'G', 'magnitude.V': 'V' },
);
const kept = (...cuts: Cut[]) => [...stars.keep(...cuts).numbers('id')];

describe('cuts', () => {
  it('parallaxSignal keeps parallax / error at the limit, fails rows without either', () => {
    expect(kept(parallaxSignal(5))).toEqual([0, 1]);
    const c = stars.keep(parallaxSignal(5));
    expect(c.history.at(-1)).toEqual({
      action: 'parallax / error >= 5',
      rowsBefore: 6,
      rowsAfter: 2,
      note: '3 rows without a parallax and a positive error do not pass',
    });
    expect(() => parallaxSignal(-1)).toThrow('parallaxSignal: min must lie in 0 to');
    expect(() => parallaxSignal(Number.NaN)).toThrow(/got NaN/);
  });

  it('astrometricNoise finds its columns by common names, or as given', () => {
    expect(kept(astrometricNoise({ maxRuwe: 1.4 }))).toEqual([0, 1, 3]);
    expect(kept(astrometricNoise({ maxRuwe: 1.4, maxExcessNoise: 0.4 }))).toEqual([0]);
    expect(kept(astrometricNoise({ maxExcessNoise: 8, excessNoiseColumn: 'G' }))).toEqual([0, 4]);
    expect(stars.keep(astrometricNoise({ maxRuwe: 1.4 })).history[0]).toMatchObject({
      action: 'unit weight error <= 1.4',
      note: '1 row without a value does not pass',
    });
    expect(() => astrometricNoise({})).toThrow(/give a limit/);
    expect(() => table({ a: [1] }).keep(astrometricNoise({ maxRuwe: 1 }))).toThrow(
      /has no column named ruwe .*Pass ruweColumn: 'column'/,
    );
    expect(() => table({ ruwe: [1], RUWE: [1] }).keep(astrometricNoise({ maxRuwe: 1 }))).toThrow(/several columns/);
  });

  it('hasBands and magnitudeRange', () => {
    expect(kept(hasBands('G', 'V'))).toEqual([0, 2, 4]);
    expect(stars.keep(hasBands('G', 'V')).history[0]).toMatchObject({
      action: 'has G, V',
      note: '1 without G, 2 without V',
    });
    expect(kept(magnitudeRange('G', 7.5, 12))).toEqual([0, 1, 4]);
    expect(stars.keep(magnitudeRange('G', 7.5, 12)).history[0]).toMatchObject({
      action: '7.5 <= G <= 12 mag',
      note: '1 row without G does not pass',
    });
    expect(() => magnitudeRange('G', 12, 7)).toThrow(/bright \(12 mag\) must be the smaller number/);
    expect(() => magnitudeRange('g' as never, 1, 2)).toThrow(/band is "g"; choose one of U, B, V/);
    expect(() => hasBands()).toThrow(/name at least one band/);
    expect(() => stars.keep(hasBands('B'))).toThrow(/no column or role "magnitude.B"/);
  });

  it('cuts are applied in turn, each with its own line of history', () => {
    const c = stars.keep(
      magnitudeRange('G', 0, 19),
      hasBands('V'),
      where('odd id', (row) => row.number('id') % 2 === 1),
    );
    expect(c.history.map((h) => [h.rowsBefore, h.rowsAfter])).toEqual([
      [6, 4],
      [4, 3],
      [3, 0],
    ]);
    expect(c.rowCount).toBe(0);
    expect(stars.rowCount).toBe(6);
  });

  it('where tests a row or a column; a missing value that was read fails', () => {
    expect(kept(where('bright', (row) => row.number('magnitude.G') < 13 || row.number('V') < 9.5))).toEqual([0, 1, 4]);
    expect(stars.keep(where('not faint', (row) => !(row.number('G') > 19))).history[0].note).toBe(
      '1 row without a value does not pass',
    );
    expect(kept(where('named b or later', (row) => (row.value('name') as string) >= 'b'))).toEqual([1, 3, 4, 5]);
    expect(kept(where('by number', (row) => row.index > 3))).toEqual([4, 5]);
    expect(kept(where('G', (v: number) => v < 12, 'G brighter than 12'))).toEqual([0, 4]);
    expect(stars.keep(where('name', (v: string) => v !== 'a', 'not a')).history[0]).toMatchObject({
      action: 'not a',
      note: '1 row without name does not pass',
    });
    expect(() => stars.keep(where('x', (row) => row.number('name') > 1))).toThrow(
      /column "name" holds string, not numbers/,
    );
    expect(() => where('x', 3 as never)).toThrow(/the test must be a function/);
    expect(() => where('', () => true)).toThrow(/say first what is cut/);
  });
});

describe('cone', () => {
  const sky = (positions: [number, number][]) =>
    table(
      { i: positions.map((_, i) => i), ra: positions.map((p) => p[0]), dec: positions.map((p) => p[1]) },
      { rightAscension: 'ra', declination: 'dec' },
    );
  const inCone = (positions: [number, number][], ra: number, dec: number, radiusDeg: number) => [
    ...sky(positions).keep(cone({ ra, dec, radiusDeg })).numbers('i'),
  ];

  it('holds through 0h, at the poles and for the antipode', () => {
    expect(
      inCone(
        [
          [359.5, 0],
          [0.5, 0],
          [1.5, 0],
          [180, 0],
        ],
        0,
        0,
        1,
      ),
    ).toEqual([0, 1]);
    expect(
      inCone(
        [
          [359.5, 0],
          [-0.5, 0],
          [719.6, 0],
        ],
        360,
        0,
        1,
      ),
    ).toEqual([0, 1, 2]);
    expect(
      inCone(
        [
          [0, 89.5],
          [180, 89.5],
          [90, 88.9],
          [270, -89.9],
        ],
        33,
        90,
        1,
      ),
    ).toEqual([0, 1]);
    expect(
      inCone(
        [
          [200, 89.8],
          [20, 89.3],
          [20, 89.1],
        ],
        200,
        89.9,
        0.81,
      ),
    ).toEqual([0, 1]);
    expect(
      inCone(
        [
          [10, 20],
          [190, -20],
          [190, -19],
        ],
        10,
        20,
        180,
      ),
    ).toEqual([0, 1, 2]);
    expect(
      inCone(
        [
          [190, -20],
          [190, -19],
        ],
        10,
        20,
        179.5,
      ),
    ).toEqual([1]);
    expect(
      inCone(
        [
          [NaN_, 0],
          [0, NaN_],
          [0, 0],
        ],
        0,
        0,
        1,
      ),
    ).toEqual([2]);
  });

  it('agrees with the angle between unit vectors on random skies, down to a tenth of an arcsecond', () => {
    const s = randomStream(4);
    for (const radius of [1 / 36000, 0.01, 1, 30, 120]) {
      const ra0 = s.uniform() * 360;
      const dec0 = s.uniform() * 180 - 90;
      const near: [number, number][] = Array.from({ length: 500 }, () => [
        ra0 + (s.uniform() - 0.5) * 4 * radius,
        Math.max(-90, Math.min(90, dec0 + (s.uniform() - 0.5) * 4 * radius)),
      ]);
      const rad = Math.PI / 180;
      const vector = (ra: number, dec: number) => [
        Math.cos(dec * rad) * Math.cos(ra * rad),
        Math.cos(dec * rad) * Math.sin(ra * rad),
        Math.sin(dec * rad),
      ];
      const c = vector(ra0, dec0);
      const expected = near.flatMap(([ra, dec], i) => {
        const v = vector(ra, dec);
        // The chord keeps small angles; its rounding, 1e-16 of a radian, decides nothing at these sizes.
        const chord = Math.hypot(v[0] - c[0], v[1] - c[1], v[2] - c[2]);
        return 2 * Math.asin(Math.min(1, chord / 2)) <= radius * rad ? [i] : [];
      });
      expect(inCone(near, ra0, dec0, radius)).toEqual(expected);
      expect(expected.length).toBeGreaterThan(20);
    }
  });

  it('refuses what is no circle on the sky', () => {
    expect(() => cone({ ra: 0, dec: 91, radiusDeg: 1 })).toThrow(/dec must lie in -90 to 90 deg, got 91/);
    expect(() => cone({ ra: 0, dec: 0, radiusDeg: 0 })).toThrow(/radiusDeg/);
    expect(() => cone({ ra: 0, dec: 0, radius: 1 } as never)).toThrow(
      /unknown option "radius". Known options: ra, dec, radiusDeg/,
    );
    expect(() => table({ ra: [1] }, { rightAscension: 'ra' }).keep(cone({ ra: 0, dec: 0, radiusDeg: 1 }))).toThrow(
      /no column or role "declination"/,
    );
  });
});

describe('insidePolygon', () => {
  it('keeps what lies inside, hollows left out', () => {
    const c = table({ x: [0.5, 1.5, 0.5, 2.5, NaN_, -1], y: [0.5, 0.5, 1.5, 2.5, 0, 0.5] });
    const shape: [number, number][] = [
      [0, 0],
      [3, 0],
      [3, 3],
      [2, 3],
      [2, 1],
      [1, 1],
      [1, 3],
      [0, 3],
    ];
    const inside = c.keep(insidePolygon({ x: 'x', y: 'y', vertices: shape }));
    expect([...inside.numbers('x')]).toEqual([0.5, 1.5, 0.5, 2.5]);
    expect(inside.history[0].note).toBe('1 row without x or y does not pass');
    expect(inside.history[0].action).toContain('inside a polygon of 8 corners: (0, 0) (3, 0)');
  });

  it('covers the area it should (100,000 random points in a triangle)', () => {
    const s = randomStream(8);
    const n = 100_000;
    const c = table({
      x: Array.from({ length: n }, () => s.uniform()),
      y: Array.from({ length: n }, () => s.uniform()),
    });
    const kept = c.keep(
      insidePolygon({
        x: 'x',
        y: 'y',
        vertices: [
          [0.1, 0.1],
          [0.9, 0.2],
          [0.4, 0.8],
        ],
      }),
    ).rowCount;
    // Area by the shoelace formula: 0.265; standard deviation of the count sqrt(n p (1 - p)) = 140, five of those.
    expect(Math.abs(kept - 26_500)).toBeLessThan(700);
  });

  it('refuses what is no polygon', () => {
    expect(() =>
      insidePolygon({
        x: 'a',
        y: 'b',
        vertices: [
          [0, 0],
          [1, 1],
        ],
      }),
    ).toThrow(/at least three \[x, y\] pairs/);
    expect(() =>
      insidePolygon({
        x: 'a',
        y: 'b',
        vertices: [
          [0, 0],
          [1, 1],
          [1, NaN_],
        ],
      }),
    ).toThrow(/vertices\[2\] must be a pair of finite numbers/);
    expect(() => insidePolygon({ x: 1 as never, y: 'b', vertices: [] })).toThrow(/x and y must be names/);
  });
});
