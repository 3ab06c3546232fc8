import { spawnSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import { propagateEpoch } from '../../kernel-lib/catalogue/epoch';
import { withGalactic } from '../../kernel-lib/catalogue/galactic-columns';
import { equatorialOf } from '../../kernel-lib/numeric/galactic-frame';
import { randomStream } from '../../kernel-lib/quantity/random';
import { pythonPath, table } from './helpers';

function python(script: string, input: unknown): number[][] {
  const run = spawnSync(pythonPath(), ['-c', script], { input: JSON.stringify(input), encoding: 'utf8' });
  expect(run.status, run.stderr).toBe(0);
  return JSON.parse(run.stdout) as number[][];
}

const ROLES = {
  rightAscension: 'ra',
  declination: 'dec',
  parallax: 'plx',
  properMotionRa: 'pmra',
  properMotionDec: 'pmdec',
  radialVelocity: 'rv',
} as const;

function randomStars(n: number): Record<string, number[]> {
  const s = randomStream(4);
  const make = (f: (i: number) => number) => Array.from({ length: n }, (_, i) => f(i));
  return {
    ra: make((i) => (i % 4 === 0 ? (i % 8 === 0 ? 1e-5 : 359.99999) : 360 * s.uniform())),
    dec: make((i) => (i % 5 === 0 ? 89.999 : i % 5 === 1 ? -89.999 : (Math.asin(2 * s.uniform() - 1) * 180) / Math.PI)),
    plx: make(() => 0.5 + 20 * s.uniform()),
    pmra: make(() => 100 * s.normal()),
    pmdec: make(() => 100 * s.normal()),
    rv: make(() => 50 * s.normal()),
  };
}

describe('propagateEpoch', () => {
  it('agrees with astropy.coordinates apply_space_motion to 1e-9 deg, also at the poles and through 0h', () => {
    const stars = randomStars(400);
    const reference = python(
      `
import json, sys, numpy as np, warnings
warnings.simplefilter('ignore')
import astropy.units as u
from astropy.coordinates import SkyCoord
from astropy.time import Time
d = {k: np.array(v) for k, v in json.load(sys.stdin).items()}
c = SkyCoord(d['ra']*u.deg, d['dec']*u.deg, distance=(1000/d['plx'])*u.pc, pm_ra_cosdec=d['pmra']*u.mas/u.yr,
    pm_dec=d['pmdec']*u.mas/u.yr, radial_velocity=d['rv']*u.km/u.s, obstime=Time(1991.25, format='jyear', scale='tdb'))
m = c.apply_space_motion(new_obstime=Time(2016.0, format='jyear', scale='tdb'))
print(json.dumps([list(map(float, v)) for v in (m.ra.deg, m.dec.deg, 1000/m.distance.pc, m.pm_ra_cosdec.value, m.pm_dec.value, m.radial_velocity.value)]))`,
      stars,
    );
    const moved = propagateEpoch(table(stars, ROLES), { from: 1991.25, to: 2016 });
    const names = ['ra', 'dec', 'plx', 'pmra', 'pmdec', 'rv'];
    const worst = names.map((name, k) => {
      const own = moved.numbers(name);
      return own.reduce((most, value, i) => {
        let gap = Math.abs(value - reference[k][i]);
        if (k === 0) gap = Math.min(gap, 360 - gap) * Math.cos((reference[1][i] * Math.PI) / 180);
        return Math.max(most, gap);
      }, 0);
    });
    expect(worst[0]).toBeLessThan(1e-9);
    expect(worst[1]).toBeLessThan(1e-9);
    // astropy adds light-time terms, of relative order velocity / c times the angle moved.
    expect(worst[2]).toBeLessThan(1e-6);
    expect(worst[3]).toBeLessThan(1e-5);
    expect(worst[4]).toBeLessThan(1e-5);
    expect(worst[5]).toBeLessThan(1e-3);
  });

  it('there and back again is the same catalogue; errors of position grow with the years', () => {
    const stars = randomStars(50);
    const start = table(
      { ...stars, e: stars.ra.map(() => 3), epm: stars.ra.map(() => 0.4) },
      { ...ROLES, 'rightAscension.error': 'e', 'properMotionRa.error': 'epm' },
    );
    const there = propagateEpoch(start, { from: 2000, to: 2010 });
    expect(there.numbers('rightAscension.error')[7]).toBeCloseTo(5, 12);
    const back = propagateEpoch(there, { from: 2010, to: 2000 });
    for (const name of ['dec', 'plx', 'pmra', 'pmdec', 'rv']) {
      const own = back.numbers(name);
      for (let i = 0; i < own.length; i++) expect(Math.abs(own[i] - stars[name][i])).toBeLessThan(1e-9);
    }
  });

  it('keeps rows without proper motion and says so; refuses bad options', () => {
    const few = table(
      { ra: [10, 20], dec: [5, 6], pmra: [1000, Number.NaN], pmdec: [0, 1] },
      { rightAscension: 'ra', declination: 'dec', properMotionRa: 'pmra', properMotionDec: 'pmdec' },
    );
    const moved = propagateEpoch(few, { from: 2000, to: 2010 });
    expect(moved.numbers('ra')[1]).toBe(20);
    expect(moved.numbers('ra')[0]).toBeGreaterThan(10.002);
    expect(moved.history.at(-1)?.note).toContain('1 rows without proper motion kept their position');
    expect(() => propagateEpoch(few, { from: 2000, to: Number.NaN })).toThrow(/to must lie in 0 to 4000/);
    expect(() => propagateEpoch(few, { from: 2000, till: 1 } as never)).toThrow(/unknown option "till"/);
  });
});

describe('withGalactic', () => {
  it('agrees with the ERFA library of astropy to 1e-9 deg in both directions, with SkyCoord to 25 mas', () => {
    const stars = randomStars(400);
    const [l, b, skyL, skyB] = python(
      `
import json, sys, erfa, numpy as np
import astropy.units as u
from astropy.coordinates import SkyCoord
d = json.load(sys.stdin)
g = SkyCoord(d['ra']*u.deg, d['dec']*u.deg).galactic
l, b = np.degrees(erfa.icrs2g(np.radians(d['ra']), np.radians(d['dec'])))
print(json.dumps([l.tolist(), b.tolist(), g.l.deg.tolist(), g.b.deg.tolist()]))`,
      stars,
    );
    const own = withGalactic(table(stars, ROLES));
    for (let i = 0; i < l.length; i++) {
      expect(arc(own.numbers('galactic_l')[i] - l[i], b[i])).toBeLessThan(1e-9);
      expect(Math.abs(own.numbers('galactic_b')[i] - b[i])).toBeLessThan(1e-9);
      // SkyCoord goes by way of FK5, whose axes lie some 20 mas from the ICRS; the definition above is in the ICRS.
      expect(arc(own.numbers('galactic_l')[i] - skyL[i], b[i])).toBeLessThan(25 / 3.6e6);
      expect(Math.abs(own.numbers('galactic_b')[i] - skyB[i])).toBeLessThan(25 / 3.6e6);
      const back = equatorialOf(l[i], b[i]);
      expect(arc(back.ra - stars.ra[i], stars.dec[i])).toBeLessThan(1e-9);
      expect(Math.abs(back.dec - stars.dec[i])).toBeLessThan(1e-9);
    }
  });
});

/** Size of a difference of longitudes on the sky, deg. */
function arc(difference: number, latitude: number): number {
  const wrapped = Math.abs(((difference + 540) % 360) - 180);
  return wrapped * Math.cos((latitude * Math.PI) / 180);
}
