import { spawnSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import { crossMatch } from '../../kernel-lib/catalogue/cross-match';
import { randomStream } from '../../kernel-lib/quantity/random';
import { pythonPath, table } from './helpers';

const ROLES = { rightAscension: 'ra', declination: 'dec' } as const;

interface Sky {
  ra: number[];
  dec: number[];
}

/** Places crowded at both poles, on both sides of 0h and over the sky. */
function sky(n: number, seed: number): Sky {
  const s = randomStream(seed);
  const ra: number[] = [];
  const dec: number[] = [];
  for (let i = 0; i < n; i++) {
    if (i % 4 === 0) {
      ra.push(360 * s.uniform());
      dec.push((i % 8 === 0 ? 1 : -1) * (90 - 0.5 * Math.sqrt(s.uniform())));
    } else if (i % 4 < 3) {
      ra.push((359.5 + s.uniform()) % 360);
      dec.push((i % 4 === 1 ? 0 : 70) + s.uniform());
    } else {
      ra.push(360 * s.uniform());
      dec.push((Math.asin(2 * s.uniform() - 1) * 180) / Math.PI);
    }
  }
  return { ra, dec };
}

const withRow = (s: Sky) => table({ ...s, row: s.ra.map((_, i) => i) }, ROLES);

describe('crossMatch', () => {
  const left = sky(4000, 1);
  const right = sky(4400, 2);

  it('pairs as astropy does, best, all and symmetric, over the sky with poles and 0h', () => {
    const radii = [3, 30, 300, 1000];
    const script = `
import json, sys, numpy as np
import astropy.units as u
from astropy.coordinates import SkyCoord, match_coordinates_sky, search_around_sky
d = json.load(sys.stdin)
a, b = [SkyCoord(s['ra']*u.deg, s['dec']*u.deg) for s in d['skies']]
near, sep, _ = match_coordinates_sky(a, b)
back, _, _ = match_coordinates_sky(b, a)
out = []
for r in d['radii']:
    i, j, s, _ = search_around_sky(a, b, r*u.arcsec)
    o = np.lexsort((s.arcsec, i))
    out.append([i[o].tolist(), j[o].tolist(), s.arcsec[o].tolist()])
print(json.dumps({'near': near.tolist(), 'sep': sep.arcsec.tolist(), 'back': back.tolist(), 'all': out}))`;
    const run = spawnSync(pythonPath(), ['-c', script], {
      input: JSON.stringify({ skies: [left, right], radii }),
      encoding: 'utf8',
      maxBuffer: 1 << 30,
    });
    expect(run.status, run.stderr).toBe(0);
    const reference = JSON.parse(run.stdout) as { near: number[]; sep: number[]; back: number[]; all: number[][][] };
    radii.forEach((radiusArcsec, k) => {
      const all = crossMatch(withRow(left), withRow(right), { radiusArcsec, mode: 'all' });
      expect(Array.from(all.numbers('row'))).toEqual(reference.all[k][0]);
      expect(Array.from(all.numbers('row_right'))).toEqual(reference.all[k][1]);
      const gap = all.numbers('separation_arcsec').map((s, i) => Math.abs(s - reference.all[k][2][i]));
      expect(Math.max(0, ...gap.subarray(0, 10000))).toBeLessThan(1e-8);

      const best = crossMatch(withRow(left), withRow(right), { radiusArcsec, join: 'left' });
      const expected = reference.near.map((j, i) => (reference.sep[i] <= radiusArcsec ? j : Number.NaN));
      expect(Array.from(best.numbers('row_right'))).toEqual(expected);

      const mutual = crossMatch(withRow(left), withRow(right), { radiusArcsec, mode: 'symmetric', join: 'left' });
      const both = expected.map((j, i) => (reference.back[j] === i ? j : Number.NaN));
      expect(Array.from(mutual.numbers('row_right'))).toEqual(both);
    });
    expect(reference.all[1][0].length).toBeGreaterThan(100);
  });

  it('keeps roles of the left, renames clashing columns, writes the history, leaves missing text missing', () => {
    const a = table({ ra: [10, 20, Number.NaN], dec: [0, 0, 0], name: ['a', 'b', 'c'] }, ROLES);
    const b = table({ ra: [10.0001, 350], dec: [0, 1], name: ['x', 'y'], mag: [5, 6] }, ROLES);
    const found = crossMatch(a, b, { radiusArcsec: 1, join: 'left', suffix: '_b' });
    expect(found.columns.map((c) => c.name)).toEqual([
      ...['ra', 'dec', 'name', 'ra_b', 'dec_b', 'name_b', 'mag'],
      ...['separation_arcsec', 'chance_probability', 'match_probability'],
    ]);
    expect(found.values('name_b')).toEqual(['x', null, null]);
    expect(found.numbers('separation_arcsec')[0]).toBeCloseTo(0.36, 9);
    expect(found.roles).toEqual(ROLES);
    expect(found.history.at(-1)?.note).toContain('1 left rows matched by 1 pairs; 2 unmatched kept');
    expect(found.history.at(-1)?.note).toContain('without a position: 1 left, 0 right');
  });

  it('measures in sigmas along both axes', () => {
    const roles = { ...ROLES, 'rightAscension.error': 'ea', 'declination.error': 'ed' } as const;
    const a = table({ ra: [10], dec: [60], ea: [300], ed: [30] }, roles);
    // 0.9 arcsec east: 1.8 sigma of hypot(300, 400) mas; 0.9 arcsec north: 18 sigma of hypot(30, 40).
    const b = table({ ra: [10 + 0.0005, 10], dec: [60, 60.00025], ea: [400, 400], ed: [40, 40] }, roles);
    const rows = (sigmas: number) => crossMatch(a, b, { radiusArcsec: 5, sigmas, mode: 'all' }).rowCount;
    expect([rows(1.79), rows(1.81), rows(17.9), rows(18.1)]).toEqual([0, 1, 1, 2]);
  });

  it('moves one side by its proper motion', () => {
    const a = table(
      { ra: [10], dec: [0], pmra: [1000], pmdec: [0] },
      { ...ROLES, properMotionRa: 'pmra', properMotionDec: 'pmdec' },
    );
    const b = table({ ra: [10 + 10 / 3600], dec: [0] }, ROLES);
    expect(crossMatch(a, b, { radiusArcsec: 0.1 }).rowCount).toBe(0);
    const found = crossMatch(a, b, { radiusArcsec: 0.1, epochs: { left: 2000, right: 2010 } });
    expect(found.numbers('separation_arcsec')[0]).toBeLessThan(1e-6);
    expect(found.numbers('ra')[0]).toBe(10);
    expect(crossMatch(b, a, { radiusArcsec: 0.1, epochs: { left: 2010, right: 2000 } }).rowCount).toBe(1);
    expect(() => crossMatch(b, b, { radiusArcsec: 1, epochs: { left: 2000, right: 2010 } })).toThrow(/properMotionRa/);
  });

  it('gives probabilities that tell true pairs from chance ones', () => {
    const s = randomStream(8);
    const n = 20000;
    const make = (f: (i: number) => number) => Array.from({ length: n }, (_, i) => f(i));
    const ra = make(() => 180 + s.uniform());
    const dec = make(() => s.uniform() - 0.5);
    const errors = { ea: make(() => 300), ed: make(() => 300) };
    const roles = { ...ROLES, 'rightAscension.error': 'ea', 'declination.error': 'ed' } as const;
    const shift = () => (0.3 * s.normal()) / 3600;
    // Half of the right rows are the left ones measured again, half are unrelated.
    const ra2 = make((i) => (i % 2 ? ra[i] + Math.SQRT2 * shift() : 180 + s.uniform()));
    const dec2 = make((i) => (i % 2 ? dec[i] + Math.SQRT2 * shift() : s.uniform() - 0.5));
    const row = make((i) => i);
    const found = crossMatch(
      table({ ra, dec, row, ...errors }, roles),
      table({ ra: ra2, dec: dec2, row, ...errors }, roles),
      {
        radiusArcsec: 5,
      },
    );
    const p = found.numbers('match_probability');
    const truth = found.numbers('row').map((i, k) => (i === found.numbers('row_right')[k] ? 1 : 0));
    const sum = (v: Float64Array) => v.reduce((a, b) => a + b, 0);
    expect(sum(truth)).toBeGreaterThan(9500);
    // The number of true pairs that the probabilities promise; choosing the nearest of several costs a few percent.
    expect(Math.abs(sum(p) / sum(truth) - 1)).toBeLessThan(0.05);
    const sure = truth.filter((_, k) => p[k] > 0.9);
    expect(sum(sure) / sure.length).toBeGreaterThan(0.95);
    const doubtful = truth.filter((_, k) => p[k] < 0.1);
    expect(sum(doubtful) / doubtful.length).toBeLessThan(0.1);
  });

  it('takes empty catalogues, refuses bad input with the cure', () => {
    const one = table({ ra: [1], dec: [2] }, ROLES);
    const none = table({ ra: new Float64Array(0), dec: new Float64Array(0) }, ROLES);
    expect(crossMatch(one, none, { radiusArcsec: 1 }).rowCount).toBe(0);
    expect(crossMatch(one, none, { radiusArcsec: 1, join: 'left' }).rowCount).toBe(1);
    expect(crossMatch(none, one, { radiusArcsec: 1, mode: 'all' }).rowCount).toBe(0);
    const infinite = table({ ra: [Number.POSITIVE_INFINITY], dec: [2] }, ROLES);
    expect(crossMatch(one, infinite, { radiusArcsec: 1 }).rowCount).toBe(0);
    expect(() => crossMatch(one, one, { radiusArcsec: 0 })).toThrow(/radiusArcsec must lie/);
    expect(() => crossMatch(one, one, { radiusArcsec: 1, mode: 'nearest' as never })).toThrow(
      /choose one of best, all/,
    );
    expect(() => crossMatch(one, one, { radius: 1 } as never)).toThrow(/Did you mean|Known options/);
    expect(() => crossMatch(one, one, { radiusArcsec: 1, sigmas: 3 })).toThrow(/rightAscension.error/);
    expect(() => crossMatch(one, one, { radiusArcsec: 1, suffix: '' })).toThrow(/suffix/);
    expect(() => crossMatch(one, table({ ra: [1], dec: [91] }, ROLES), { radiusArcsec: 1 })).toThrow(
      /right row 0 .* 91/,
    );
    const negative = table(
      { ra: [1], dec: [2], e: [-1] },
      { ...ROLES, 'rightAscension.error': 'e', 'declination.error': 'e' },
    );
    expect(() => crossMatch(negative, one, { radiusArcsec: 1 })).toThrow(/position error of left row 0/);
  });
});
