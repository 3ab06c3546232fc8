import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { readCatalogue } from '../../kernel-lib/catalogue/read/read-catalogue';
import { writeCatalogue } from '../../kernel-lib/catalogue/write/write-catalogue';
import { isKnownUnit, unitConversion } from '../../kernel-lib/quantity/units';
import { pythonPath } from './helpers';

const folder = mkdtempSync(join(tmpdir(), 'coeval-astropy-'));
afterAll(() => rmSync(folder, { recursive: true }));

/** Writes random tables as ECSV with astropy, and beside each its values as JSON. */
const WRITE = `
import json, sys, warnings
import numpy as np
from astropy.table import Table, QTable, MaskedColumn, Column
from astropy import units as u
warnings.simplefilter('ignore')
folder = sys.argv[1]
rng = np.random.default_rng(42)
words = ['a', 'HD 1', 'x,y', 'say "hi"', 'α', 'NA', '12', 'x # y', "it's", 'two words']
units = [None, 'deg', 'mas', 'mas/yr', 'km/s', 'mag', 'solMass', 'Jy', 'erg / (s cm2)', '1 / d', 'dex(cm / s2)', 'K']
for k in range(60):
    n = int(rng.integers(1, 25))
    t = Table()
    t.meta = {'survey': 'invented', 'n': k, 'list': [1, 'two', 3.5], 'nested': {'on': 'yes'}}
    for j in range(int(rng.integers(1, 7))):
        kind = rng.integers(0, 6)
        if kind == 0: v = rng.normal(size=n) * 10.0 ** rng.integers(-8, 9)
        elif kind == 1: v = (rng.normal(size=n)).astype('f4')
        elif kind == 2: v = rng.integers(-2**31, 2**31, size=n)
        elif kind == 3: v = rng.integers(2**60, 2**62, size=n)
        elif kind == 4: v = rng.random(n) < 0.5
        else: v = np.array([words[i] for i in rng.integers(0, len(words), n)])
        masked = rng.random() < 0.4
        col = MaskedColumn(v, mask=rng.random(n) < 0.3) if masked else Column(v)
        name = ['y', 'n', '1e5', 'two words', 'x,y', 'q"q', 'yes'][j % 7]
        if kind < 3: col.unit = units[int(rng.integers(0, len(units)))]
        if rng.random() < 0.5: col.description = 'some "words", and: more'
        if rng.random() < 0.5: col.meta['ucd'] = 'meta.note'
        t[name] = col
    t.write(f'{folder}/a{k}.ecsv', format='ascii.ecsv', delimiter=[' ', ','][k % 2], overwrite=True,
            **({'serialize_method': 'data_mask'} if k % 3 == 0 else {}))
    def cell(v):
        if v is np.ma.masked: return None
        if isinstance(v, (np.floating, float)): return float(v).hex() if np.isfinite(v) else None
        if isinstance(v, (np.bool_, bool)): return bool(v)
        if isinstance(v, (np.integer, int)): return str(int(v))
        return str(v)
    json.dump({'columns': [{'name': c.name, 'dtype': c.dtype.kind, 'unit': str(c.unit or ''), 'description': c.description or '',
        'ucd': c.meta.get('ucd', ''), 'values': [cell(v) for v in c]} for c in t.columns.values()]}, open(f'{folder}/a{k}.json', 'w'))
q = QTable({'ra': [10.5, 20] * u.deg, 'plx': [0.001, 0.002] * u.arcsec})
q.write(f'{folder}/q.ecsv', format='ascii.ecsv')
`;

/** Reads ECSV files with astropy and prints their values as JSON. */
const READ = `
import json, sys, warnings
import numpy as np
from astropy.table import Table
warnings.simplefilter('ignore')
out = []
for path in sys.argv[1:]:
    t = Table.read(path, format='ascii.ecsv')
    def cell(v):
        if v is np.ma.masked: return None
        if isinstance(v, (np.floating, float)): return float(v).hex() if np.isfinite(v) else str(float(v))
        if isinstance(v, (np.bool_, bool)): return bool(v)
        return str(v)
    out.append({'columns': [{'name': c.name, 'unit': str(c.unit or ''), 'description': c.description or '', 'ucd': c.meta.get('ucd', ''),
        'values': [cell(v) for v in c]} for c in t.columns.values()], 'roles': t.meta['coeval']['roles'], 'survey': t.meta['survey']})
print(json.dumps(out))
`;

const UNITS_SCRIPT = `
import json, sys, warnings
from astropy import units as u
warnings.simplefilter('ignore')
pairs = json.loads(sys.argv[1])
print(json.dumps([float(u.Unit(a).to(u.Unit(b))) for a, b in pairs]))
`;

/** The double that a hexadecimal text of Python stands for. */
function fromHex(text: string): number {
  const m = /^(-?)0x([01])\.([0-9a-f]+)p([+-]\d+)$/.exec(text);
  if (!m) throw new Error(text);
  return (m[1] ? -1 : 1) * (Number(m[2]) + Number.parseInt(m[3], 16) / 16 ** m[3].length) * 2 ** Number(m[4]);
}

const python = (script: string, ...args: string[]) =>
  execFileSync(pythonPath(), ['-c', script, ...args], { encoding: 'utf8', maxBuffer: 1 << 26 });

interface Expected {
  columns: {
    name: string;
    dtype: string;
    unit: string;
    description: string;
    ucd: string;
    values: (string | boolean | null)[];
  }[];
  roles: Record<string, string>;
  survey: string;
}

describe('ECSV written by astropy', () => {
  beforeAll(() => python(WRITE, folder));

  it('reads identically: values to the last bit, masks, units, descriptions (60 tables)', async () => {
    for (let k = 0; k < 60; k++) {
      const expected = JSON.parse(readFileSync(join(folder, `a${k}.json`), 'utf8')) as Expected;
      const c = await readCatalogue(join(folder, `a${k}.ecsv`));
      expect(c.columns.map((x) => x.name)).toEqual(expected.columns.map((x) => x.name));
      expected.columns.forEach((e, j) => {
        const info = c.columns[j];
        expect([info.unit, info.description, info.ucd]).toEqual([e.unit, e.description, e.ucd]);
        const values: unknown[] = [...c.values(e.name)];
        const wanted = e.values.map((v, i) => {
          if (v === null) return typeof values[i] === 'number' ? Number.NaN : null;
          // Single precision is written in its own shortest form, whose nearest double is a little beside it.
          if (e.dtype === 'f') return fromHex(v as string);
          return e.dtype === 'i' && info.kind === 'number' ? Number(v) : v;
        });
        const single =
          e.dtype === 'f' && values.every((v, i) => Number.isNaN(v) || Math.fround(v as number) === wanted[i]);
        if (!single) expect(values, `table ${k}, column ${e.name}`).toEqual(wanted);
      });
      expect(c.meta.survey).toBe('invented');
      expect(c.meta.n).toBe(k);
    }
  });

  it('reads quantities with their units', async () => {
    const c = await readCatalogue(join(folder, 'q.ecsv'));
    expect(c.numbers('rightAscension')).toEqual(Float64Array.of(10.5, 20));
    expect(c.numbers('parallax')).toEqual(Float64Array.of(1, 2));
  });
});

describe('ECSV written by us', () => {
  it('is read identically by astropy', async () => {
    const c = new Catalogue({
      source: 'made up',
      rowCount: 4,
      columns: [
        { name: 'name, full', values: ['α "Tau"', 'two words', null, '12'], description: 'yes: "no"' },
        {
          name: 'ra',
          values: Float64Array.of(0.1, 359.99999999999994, Number.NaN, 1e-300),
          unit: 'deg',
          ucd: 'pos.eq.ra;meta.main',
        },
        { name: 'good', values: [true, false, null, true] },
        { name: 'logg', values: Float64Array.of(4.4, -0.5, 2, 1 / 3), unit: 'dex(cm/s2)' },
      ],
      roles: { rightAscension: 'ra' },
      meta: { survey: 'invented' },
      history: [{ action: 'made', rowsBefore: 4, rowsAfter: 4, note: '' }],
    });
    const path = join(folder, 'ours.ecsv');
    await writeCatalogue(c, path);
    const [read] = JSON.parse(python(READ, path)) as Expected[];
    expect(read.columns.map((x) => x.name)).toEqual(c.columns.map((x) => x.name));
    expect(read.columns.map((x) => x.unit)).toEqual(['', 'deg', '', 'dex(cm / s2)']);
    expect(read.columns[0].description).toBe('yes: "no"');
    expect(read.columns[1].ucd).toBe('pos.eq.ra;meta.main');
    expect(read.columns[0].values).toEqual(['α "Tau"', 'two words', null, '12']);
    expect(read.columns[1].values.map((v) => (v === null ? null : fromHex(v as string)))).toEqual([
      0.1,
      359.99999999999994,
      null,
      1e-300,
    ]);
    expect(read.columns[2].values).toEqual([true, false, null, true]);
    expect(read.columns[3].values.map((v) => fromHex(v as string))).toEqual([4.4, -0.5, 2, 1 / 3]);
    expect(read.roles).toEqual({ rightAscension: 'ra' });
    expect(read.survey).toBe('invented');
  });
});

describe('units against astropy', () => {
  it('give the same factors, to a few units in the last place', () => {
    const pairs: [string, string][] = [
      ['deg', 'mas'],
      ['rad', 'deg'],
      ['arcmin', 'arcsec'],
      ['uas', 'mas'],
      ['hourangle', 'deg'],
      ['rad/s', 'mas/yr'],
      ['arcsec/yr', 'mas/yr'],
      ['deg/yr', 'mas/yr'],
      ['mas.yr**-1', 'arcsec/yr'],
      ['km/s', 'm/s'],
      ['pc/Myr', 'km/s'],
      ['AU/yr', 'km/s'],
      ['kpc', 'pc'],
      ['lyr', 'pc'],
      ['AU', 'm'],
      ['Gyr', 'Myr'],
      ['Myr', 'd'],
      ['yr', 's'],
      ['d', 'h'],
      ['mmag', 'mag'],
      ['solRad', 'km'],
      ['solLum', 'erg/s'],
      ['Angstrom', 'nm'],
      ['micron', 'Angstrom'],
      ['mJy', 'Jy'],
      ['eV', 'J'],
      ['erg / (s cm2 Angstrom)', 'W / (m2 um)'],
      ['m(1/2)', 'cm(1/2)'],
      ['km2', 'pc2'],
      ['1/d', 'Hz'],
      ['10**3 km', 'Mm'],
      ['sr', 'arcsec2'],
      ['deg2', 'sr'],
      ['%', ''],
      ['G', 'T'],
      ['kK', 'K'],
    ];
    const theirs = JSON.parse(python(UNITS_SCRIPT, JSON.stringify(pairs))) as number[];
    pairs.forEach(([from, to], k) => {
      const { multiply, divide } = unitConversion(from, to);
      expect(multiply / divide / theirs[k], `${from} to ${to}`).toBeCloseTo(1, 13);
    });
    // The constant of gravitation is known to 2.2e-5 (CODATA 2018), and astropy rounds the solar mass further.
    const mass = JSON.parse(python(UNITS_SCRIPT, JSON.stringify([['solMass', 'kg']])))[0] as number;
    const own = unitConversion('solMass', 'kg');
    expect(Math.abs(own.multiply / own.divide / mass - 1)).toBeLessThan(2.2e-5);
    expect(pairs.flat().every(isKnownUnit)).toBe(true);
  });
});
