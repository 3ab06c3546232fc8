import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import * as nodeFiles from '../../kernel-lib/catalogue/files';
import * as browserFiles from '../../kernel-lib/catalogue/files-browser';
import { readCatalogue } from '../../kernel-lib/catalogue/read/read-catalogue';
import { bytes, gzip } from './helpers';

const folder = mkdtempSync(join(tmpdir(), 'coeval-bad-'));
afterAll(() => rmSync(folder, { recursive: true }));

const utf16 = (text: string, mark: boolean, big = false) => {
  const out = new Uint8Array(2 * text.length + (mark ? 2 : 0));
  const view = new DataView(out.buffer);
  if (mark) view.setUint16(0, 0xfeff, !big);
  for (let i = 0; i < text.length; i++) view.setUint16(2 * i + (mark ? 2 : 0), text.charCodeAt(i), !big);
  return out;
};
const latin1 = (text: string) => Uint8Array.from(text, (c) => c.charCodeAt(0));

describe('bad input is a clear error', () => {
  it.each<[string, Uint8Array, RegExp]>([
    ['empty', bytes(''), /the file is empty/],
    ['byte-order mark only', bytes('\uFEFF'), /the file is empty/],
    ['blank lines only', bytes('\n\n  \n'), /the file is empty/],
    ['comments only', bytes('# a\n# b\n'), /holds only comments/],
    ['header only', bytes('ra,dec\n'), /has column names but no rows/],
    ['header only, no line end', bytes('ra,dec'), /has column names but no rows/],
    ['no header', bytes('1,2\n3,4\n'), /line 1: expected column names, found numbers \("1, 2"\).*columnNames/],
    ['duplicate names', bytes('ra,dec,ra\n1,2,3\n'), /line 1: columns 1 and 3 are both named "ra".*columnNames/],
    ['ragged, short', bytes('a,b,c\n1,2,3\n4,5\n'), /line 3: expected 3 cells, found 2/],
    ['ragged, long', bytes('a,b\n\n1,2\n4,5,6\n'), /line 4: expected 2 cells, found 3/],
    ['unclosed quote', bytes('a,b\n1,2\n3,"x\n4,5\n'), /line 3: a double quote is opened and never closed/],
    ['unclosed quote in the header', bytes('a,"b\n1,2\n'), /line 1: a double quote is opened and never closed/],
    ['text after a quote', bytes('a,b\n"x"y,2\n'), /line 2: text follows a closing double quote/],
    ['UTF-16, little end first', utf16('ra,dec\n1,2\n', true), /UTF-16 text. Save it as UTF-8/],
    ['UTF-16, big end first', utf16('ra,dec\n1,2\n', true, true), /UTF-16 text. Save it as UTF-8/],
    ['UTF-16 without mark', utf16('ra,dec\n1,2\n', false), /looks like UTF-16/],
    ['Latin-1 text cell', latin1('name,ra\nx,1\nÉtoile,2\n'), /line 3, column "name": bytes that are not UTF-8/],
    ['Latin-1 column name', latin1('étoile,ra\n1,1\n'), /line 1: the column names are not UTF-8/],
    ['binary', Uint8Array.from({ length: 300 }, (_, i) => (i * 37) % 256), /not a text file \(byte 0x00 at offset 0\)/],
    [
      'FITS',
      bytes(`SIMPLE  =                    T${' '.repeat(50)}`),
      /this is a FITS file; Coeval reads CSV, TSV and ECSV/,
    ],
    ['Parquet', bytes('PAR1\0\0'), /this is a Parquet file/],
    ['spreadsheet', latin1('PK\x03\x04abc'), /zip archive or spreadsheet/],
    ['VOTable', bytes('<?xml version="1.0"?><VOTABLE>'), /XML document/],
    [
      'text in numbers',
      bytes('v_mag,x\n1,1\n2,1\n3,1\n4,1\nbright,1\n6,1\n'),
      /line 6, column "v_mag": "bright" is not a number.*missing: \{ v_mag: \["bright"\] \}.*badCells/,
    ],
  ])('%s', async (_, content, message) => {
    await expect(readCatalogue(content)).rejects.toThrow(message);
    await expect(readCatalogue(content)).rejects.toThrow(/^readCatalogue: the bytes given/);
    await expect(readCatalogue(await gzip(content))).rejects.toThrow(message);
  });

  it('gzip cut short or damaged', async () => {
    const rows = Array.from({ length: 3000 }, (_, i) => `${i},${(i * 7919) % 1000}`).join('\n');
    const packed = await gzip(bytes(`a,b\n${rows}\n`));
    await expect(readCatalogue(packed.subarray(0, packed.length - 200))).rejects.toThrow(
      /gzip data are cut short or damaged/,
    );
    const damaged = packed.slice();
    damaged[Math.floor(packed.length / 2)] ^= 0xff;
    await expect(readCatalogue(damaged)).rejects.toThrow(/gzip data are cut short or damaged/);
  });

  it('a path that is no file, with the name that was meant', async () => {
    writeFileSync(join(folder, 'field.csv'), 'ra\n1\n');
    await expect(readCatalogue(join(folder, 'feild.csv'))).rejects.toThrow(
      /there is no file .*feild\.csv\. Did you mean "field\.csv"\?/,
    );
    await expect(readCatalogue(folder)).rejects.toThrow(/is a folder, not a file/);
    await expect(readCatalogue(join(folder, 'no', 'x.csv'))).rejects.toThrow(/the folder .*no does not exist/);
    await expect(readCatalogue('')).rejects.toThrow(/the path is empty/);
    await expect(readCatalogue(3 as never)).rejects.toThrow(/expected a path, a Uint8Array or an ArrayBuffer, got 3/);
  });

  it('names file, line, column and value of a bad cell', async () => {
    const path = join(folder, 'stars.csv');
    writeFileSync(path, `ra,plx\n${'1,2\n'.repeat(30)}1,faint\n`);
    await expect(readCatalogue(path)).rejects.toThrow(
      'readCatalogue: stars.csv, line 32, column "plx": "faint" is not a number. If it means that there is no value, pass missing: { plx: ["faint"] }; ' +
        'badCells: \'missing\' takes every such cell as missing; text: ["plx"] keeps the column as text.',
    );
  });

  it('unknown units, options, roles and columns', async () => {
    const content = bytes('ra,plx,x\n1,2,3\n');
    const rejects = (options: object, message: string | RegExp) =>
      expect(readCatalogue(content, options)).rejects.toThrow(message);
    await rejects(
      { units: { plx: 'mass' } },
      'column "plx": unknown unit "mass"; did you mean "mas"? Pass units: { plx: "mas" }.',
    );
    await rejects(
      { units: { plx: 'km' } },
      'column "plx": role parallax needs a unit like mas, the column is in "km". Pass units: { plx: "mas" }',
    );
    await rejects(
      { units: { pxl: 'mas' } },
      'units names column "pxl", which the file does not have. Did you mean "plx"? Columns: ra, plx, x.',
    );
    await rejects({ roles: { paralax: 'plx' } }, /unknown role "paralax". Did you mean "parallax"\?/);
    await rejects({ roles: { parallax: 'px' } }, /roles names column "px"/);
    await rejects({ missing: { plx: 99 } }, /missing.plx must be a list such as \[99.999\], got 99/);
    await rejects({ units: { plx: 3 } }, "units must be like { plx: 'mas' }, got plx: 3");
    await rejects({ roles: ['plx'] }, "roles must be like { parallax: 'plx' }, got an array of 1");
    await rejects({ text: 'plx' }, 'text must be a list of column names, got "plx"');
    await rejects({ missing: 99 }, 'missing must be a list, or a list a column');
    await rejects({ fromat: 'csv' }, /unknown option "fromat". Did you mean "format"\?/);
    await rejects({ format: 'fits' }, /format is "fits"; choose one of csv, tsv, ecsv/);
    await rejects({ columnNames: ['a', 'b'] }, /columnNames has 2 names, the file has 3 columns/);
    await expect(readCatalogue(bytes('ra,plx\n1,one\n2,two\n'), { roles: { parallax: 'plx' } })).rejects.toThrow(
      'column "plx": role parallax needs numbers, the column holds text ("one").',
    );
    const ecsv = '# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a, datatype: float64, unit: parsecks}\na\n1\n';
    await expect(readCatalogue(bytes(ecsv))).rejects.toThrow(
      'column "a": unknown unit "parsecks"; did you mean "parsecs"? Pass units: { a: "" } (\'\' for none).',
    );
  });

  it('names given for a file whose own cannot be used', async () => {
    const names = { columnNames: ['ra', 'dec', 'ra_2'] };
    expect((await readCatalogue(bytes('ra,dec,ra\n1,2,3\n'), names)).numbers('ra_2')[0]).toBe(3);
    expect((await readCatalogue(bytes('1,2,3\n4,5,6\n'), names)).rowCount).toBe(2);
    await expect(readCatalogue(bytes('1,2\n4,5\n'), names)).rejects.toThrow(
      /columnNames has 3 names, the file has 2 columns/,
    );
  });

  it('mutated files: an error or a catalogue, never anything else', async () => {
    const start = bytes('name,ra,dec,plx,V\n"Smith, ""B""",0,-90,1.5,9\nb,359.9,+12.25,1e-3,\nc,1,2,0.003,99.999\n');
    let state = 12345;
    const next = (n: number) => {
      state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
      return Math.floor((state / 2 ** 32) * n);
    };
    let read = 0;
    for (let k = 0; k < 3000; k++) {
      const content = start.slice(0, next(4) === 0 ? next(start.length) : start.length);
      for (let m = next(4); m >= 0; m--)
        if (content.length > 0) content[next(content.length)] = next(2) ? next(256) : ',"\n\r# '.charCodeAt(next(6));
      try {
        const c = await readCatalogue(content);
        expect(c.rowCount).toBeGreaterThan(0);
        read++;
      } catch (error) {
        expect((error as Error).message).toMatch(/^readCatalogue: the bytes given/);
      }
    }
    expect(read).toBeGreaterThan(300);
  });
});

describe('in a page', () => {
  it('a path is refused with the way to pass bytes; both files export the same', async () => {
    expect(Object.keys(browserFiles).sort()).toEqual(Object.keys(nodeFiles).sort());
    await expect(browserFiles.readFileBytes('readCatalogue', 'a.csv')).rejects.toThrow(
      /cannot open the path "a.csv". Pass the file's bytes/,
    );
    await expect(browserFiles.writeFileBytes('writeCatalogue', 'a.csv', [], false)).rejects.toThrow(/cannot write/);
    expect(browserFiles.fileTitle('x/y.csv')).toBe('y.csv');
  });
});

describe('values that look like missing ones', () => {
  const column = (name: string, values: readonly (number | string)[]) =>
    bytes(`id,${name}\n${values.map((v, i) => `${i},${v}`).join('\n')}\n`);
  const good = Array.from({ length: 40 }, (_, i) => 8 + i / 5);

  it.each<[string, number]>([
    ['v_mag', 99.999],
    ['v_mag', 99.99],
    ['v_mag', 99],
    ['v_mag', -1],
    ['v_mag', -999],
    ['v_mag', -9999],
    ['v_mag', 0],
    ['b-v', 99.999],
    ['parallax', -999],
    ['parallax', 999],
    ['pmra', -9999],
  ])('%s of %d are reported with the way to declare them, and then gone', async (name, value) => {
    const content = column(name, [...good, value, value, value]);
    const c = await readCatalogue(content);
    expect(c.numbers(name)[40]).toBe(value);
    expect(c.warnings.join('\n')).toContain(`holds ${value} in 3 rows`);
    expect(c.warnings.join('\n')).toContain(`missing: { ${name === 'b-v' ? '"b-v"' : name}: [${value}] }`);
    const declared = await readCatalogue(content, { missing: { [name]: [value] } });
    expect(declared.columns[1].missing).toBe(3);
    expect(declared.warnings.join('\n')).not.toContain('missing: {');
    expect(declared.history[0].note).toContain(`${name}: 3 values of ${value} taken as missing`);
  });

  it('errors of zero or less, and a value beyond what the quantity can be, even once', async () => {
    const c = await readCatalogue(bytes('parallax,parallax_error,Vmag\n1,0.1,9\n2,0,99.999\n3,-9,10\n'));
    expect(c.warnings.join('\n')).toMatch(/"parallax_error" \(parallax.error\) holds .*an error is positive/);
    expect(c.warnings.join('\n')).toContain(
      '"Vmag" (magnitude.V) holds 99.999 in 1 row: beyond what the quantity can be',
    );
  });

  it('are compared as the file writes them, before units are converted', async () => {
    const content = column('parallax', [...good.map((v) => v / 1000), -999, -999]);
    const c = await readCatalogue(content, { units: { parallax: 'arcsec' } });
    expect(c.warnings.join('\n')).toContain('holds -999 in 2 rows');
    const declared = await readCatalogue(content, { units: { parallax: 'arcsec' }, missing: { parallax: [-999] } });
    expect(declared.columns[1].missing).toBe(2);
  });

  it('positions off the sphere, infinities and parallaxes all negative are told', async () => {
    const c = await readCatalogue(bytes('ra,dec,parallax,V\n361,95,-1,inf\n1,2,-2,3\n2,-91,,4\n'));
    const told = c.warnings.join('\n');
    expect(told).toContain('"ra" (rightAscension) is beyond 360 deg in 1 row');
    expect(told).toContain('"dec" (declination) is beyond 90 deg in 2 rows');
    expect(told).toContain('"parallax" (parallax) has no positive value');
    expect(told).toContain('"V" (magnitude.V) is infinite in 1 row');
    expect(c.rowCount).toBe(3);
  });

  it('leaves alone what belongs to the column', async () => {
    for (const values of [
      [...good, 9.999, 9.99],
      [-1, -1, -0.5, 0, 0.4, 1, 2, 3, 5, 6],
      [-1.46, -0.7, -0.05, 0.1, 0.4, 1, 2],
    ]) {
      const c = await readCatalogue(column('v_mag', values));
      expect(c.warnings.filter((w) => w.includes('missing:'))).toEqual([]);
    }
    const pm = await readCatalogue(column('pmra', [-9, -5, 3, 9, 99, 20, 0, 0, 60]));
    expect(pm.warnings.filter((w) => w.includes('missing:'))).toEqual([]);
  });

  it('declared for all columns, or all others', async () => {
    const content = bytes('a,b,c\n-9,1,-9\n1,-9,x\n2,3,y\n4,5,z\n');
    const all = await readCatalogue(content, { missing: [-9] });
    expect(all.columns.map((c) => c.missing)).toEqual([1, 1, 1]);
    const others = await readCatalogue(content, { missing: { a: [1], '*': [-9] } });
    expect(others.columns.map((c) => c.missing)).toEqual([1, 1, 1]);
    expect(others.numbers('a')[0]).toBe(-9);
  });
});
