import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import type { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { readCatalogue } from '../../kernel-lib/catalogue/read/read-catalogue';
import { bytes, gzip } from './helpers';

const folder = mkdtempSync(join(tmpdir(), 'coeval-read-'));
afterAll(() => rmSync(folder, { recursive: true }));

const ECSV = [
  '# %ECSV 1.0',
  '# ---',
  '# datatype:',
  '# - {name: name, datatype: string, description: catalogue name}',
  '# - {name: ra, unit: deg, datatype: float64, meta: !!omap [{ucd: pos.eq.ra;meta.main}]}',
  '# - {name: dec, unit: deg, datatype: float64, meta: {ucd: pos.eq.dec;meta.main}}',
  '# - {name: plx, unit: arcsec, datatype: float64}',
  '# - {name: V, unit: mag, datatype: float32}',
  'DELIMITER',
  '# meta: {survey: invented, epoch: 2016.0}',
  '# schema: astropy-2.0',
].join('\n');

/** The same four stars in every form that the readers know. */
const FORMS: readonly (readonly [string, string, string])[] = [
  [
    'csv',
    'CSV',
    'name,ra,dec,plx,V\nα Tau,68.98,16.5,0.0489,0.85\n"Smith, ""B""",0,-90,,9\n,359.9,+12.25,1e-3,\nd,1,2,0.003,12.5\n',
  ],
  [
    'tsv',
    'TSV',
    'name\tra\tdec\tplx\tV\nα Tau\t68.98\t16.5\t0.0489\t0.85\n"Smith, ""B"""\t0\t-90\t\t9\n\t359.9\t+12.25\t1e-3\t\nd\t1\t2\t0.003\t12.5\n',
  ],
  [
    'csv',
    'CSV',
    'name;ra;dec;plx;V\nα Tau;68.98;16.5;0.0489;0.85\nSmith, "B";0;-90;;9\n;359.9;+12.25;1e-3;\nd;1;2;0.003;12.5\n',
  ],
  [
    'csv',
    'CSV',
    'name|ra|dec|plx|V\nα Tau|68.98|16.5|0.0489|0.85\nSmith, "B"|0|-90|nan|9\n|359.9|+12.25|1e-3|\nd|1|2|0.003|12.5\n',
  ],
  [
    'ecsv',
    'ECSV',
    `${ECSV.replace('DELIMITER', "# delimiter: ','")}\nname,ra,dec,plx,V\nα Tau,68.98,16.5,0.0489,0.85\n"Smith, ""B""",0,-90,,9\n,359.9,+12.25,1e-3,\nd,1,2,0.003,12.5\n`,
  ],
  [
    'ecsv',
    'ECSV',
    `${ECSV.replace('DELIMITER\n', '')}\nname ra dec plx V\n"α Tau" 68.98 16.5 0.0489 0.85\n"Smith, ""B""" 0 -90 nan 9\n"" 359.9 +12.25 1e-3 nan\nd 1 2 0.003 12.5\n`,
  ],
];

const UNITS = { plx: 'arcsec' };

function expectStars(c: Catalogue): void {
  expect(c.rowCount).toBe(4);
  expect(c.columns.map((x) => x.name)).toEqual(['name', 'ra', 'dec', 'plx', 'V']);
  expect(c.columns.map((x) => x.unit)).toEqual(['', 'deg', 'deg', 'mas', 'mag']);
  expect(c.columns.map((x) => x.missing).slice(1)).toEqual([0, 0, 1, 1]);
  expect([...c.values('name')].map((v: unknown) => v || null)).toEqual(['α Tau', 'Smith, "B"', null, 'd']);
  expect(c.numbers('rightAscension')).toEqual(Float64Array.of(68.98, 0, 359.9, 1));
  expect(c.numbers('declination')).toEqual(Float64Array.of(16.5, -90, 12.25, 2));
  expect(c.numbers('parallax')).toEqual(Float64Array.of(48.9, Number.NaN, 1, 3));
  expect(c.numbers('magnitude.V')).toEqual(Float64Array.of(0.85, 9, Number.NaN, 12.5));
  expect(c.history[0].note).toContain('plx from arcsec to mas');
}

describe.each(FORMS)('reader of %s (%s)', (format, form, text) => {
  it('reads the stars, plain and gzipped, from bytes and from a path', async () => {
    expectStars(await readCatalogue(bytes(text), { units: UNITS }));
    expectStars(await readCatalogue(bytes(text).buffer as ArrayBuffer, { units: UNITS, format: format as 'csv' }));
    expectStars(await readCatalogue(await gzip(bytes(text)), { units: UNITS }));
    const path = join(folder, `stars.${format}`);
    writeFileSync(path, text);
    const read = await readCatalogue(path, { units: UNITS });
    expectStars(read);
    expect(read.source).toBe(`stars.${format}`);
    expect(read.history[0].action).toContain(`read stars.${format} (${form}`);
  });

  it('takes any line end, a byte-order mark, a last line without end, blank lines and comments', async () => {
    expectStars(await readCatalogue(bytes(text.replaceAll('\n', '\r\n')), { units: UNITS }));
    expectStars(await readCatalogue(bytes(text.replaceAll('\n', '\r')), { units: UNITS }));
    expectStars(await readCatalogue(bytes(`\uFEFF${text}`), { units: UNITS }));
    expectStars(await readCatalogue(bytes(text.slice(0, -1)), { units: UNITS }));
    expectStars(await readCatalogue(bytes(`${text}\n\r\n# that was all\n\n`), { units: UNITS }));
  });

  it('names the line of a ragged row', async () => {
    const sep = text.includes('\t') ? '\t' : (/ra(.)dec/.exec(text)?.[1] ?? ',');
    const line = text.trimEnd().split('\n').length + 1;
    await expect(readCatalogue(bytes(`${text}x${sep}1${sep}2\n`), { units: UNITS })).rejects.toThrow(
      `line ${line}: expected 5 cells, found 3`,
    );
    const long = ['x', 1, 2, 3, 4, 5].join(sep);
    await expect(readCatalogue(bytes(`${text}${long}\n`), { units: UNITS })).rejects.toThrow(
      `line ${line}: expected 5 cells, found 6`,
    );
  });

  it('names line and column of a bad cell, takes it as missing on request', async () => {
    const sep = text.includes('\t') ? '\t' : (/ra(.)dec/.exec(text)?.[1] ?? ',');
    const good = Array.from({ length: 10 }, () => `x${sep}1${sep}2${sep}3${sep}4\n`).join('');
    const line = text.trimEnd().split('\n').length + 1;
    const content = bytes(`${text}x${sep}1${sep}2${sep}3.5a${sep}4\n${good}`);
    await expect(readCatalogue(content, { units: UNITS })).rejects.toThrow(
      `line ${line}, column "plx": "3.5a" is not a number`,
    );
    const c = await readCatalogue(content, { units: UNITS, badCells: 'missing' });
    expect(c.numbers('plx')[4]).toBeNaN();
    expect(c.warnings.join()).toContain(`(first on line ${line}: "3.5a")`);
    const declared = await readCatalogue(content, { units: UNITS, missing: { plx: ['3.5A'] } });
    expect(declared.numbers('plx')[4]).toBeNaN();
  });
});

describe('ECSV', () => {
  it('keeps description, UCD and keywords; the UCD gives the role', async () => {
    const c = await readCatalogue(bytes(FORMS[4][2]));
    expect(c.columns[0].description).toBe('catalogue name');
    expect(c.columns[1].ucd).toBe('pos.eq.ra;meta.main');
    expect(c.meta).toEqual({ survey: 'invented', epoch: 2016 });
    expect(c.roles).toMatchObject({ rightAscension: 'ra', declination: 'dec', parallax: 'plx', 'magnitude.V': 'V' });
  });

  it('tells an empty text from a missing one in files of our own, where quotes say which', async () => {
    const head =
      "# %ECSV 1.0\n# ---\n# delimiter: ','\n# datatype:\n# - {name: a, datatype: string}\n# - {name: b, datatype: bool}\n";
    const c = await readCatalogue(bytes(`${head}a,b\n"",True\n,False\nNA,\n12,True\n`));
    expect(c.values('a')).toEqual([null, null, 'NA', '12']);
    const own = await readCatalogue(bytes(`${head}# meta: {coeval: {}}\na,b\n"",True\n,False\nNA,\n12,True\n`));
    expect(own.values('a')).toEqual(['', null, 'NA', '12']);
    expect(c.values('b')).toEqual([true, false, null, true]);
  });

  it('keeps cells of several values as their JSON text', async () => {
    const head = "# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a, datatype: string, subtype: 'float64[2]'}\n";
    const c = await readCatalogue(bytes(`${head}a\n[1.5,2.5]\n"[3, ""x""]"\n`));
    expect(c.values('a')).toEqual(['[1.5,2.5]', '[3, "x"]']);
  });

  it('applies masks that stand in columns of their own', async () => {
    const head = [
      '# %ECSV 1.0',
      '# ---',
      '# datatype:',
      '# - {name: x, datatype: float64}',
      '# - {name: x.mask, datatype: bool}',
      '# meta: !!omap',
      '# - __serialized_columns__:',
      '#     x:',
      '#       __class__: astropy.table.column.MaskedColumn',
      '#       data: !astropy.table.SerializedColumn {name: x}',
      '#       mask: !astropy.table.SerializedColumn {name: x.mask}',
      '# schema: astropy-2.0',
      'x x.mask',
    ].join('\n');
    const c = await readCatalogue(bytes(`${head}\n1.5 False\n2.5 True\n`));
    expect(c.columns.map((x) => x.name)).toEqual(['x']);
    expect(c.numbers('x')).toEqual(Float64Array.of(1.5, Number.NaN));
  });

  it.each([
    ['# %ECSV 1.0\n# ---\n# datatype: [\na\n1\n', /not valid YAML/],
    ['# %ECSV 1.0\n# ---\n# meta: {}\na\n1\n', /no list "datatype"/],
    [
      '# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a, datatype: float64}\nb\n1\n',
      /column names \("b"\) differ from those of the header \("a"\)/,
    ],
    [
      '# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a, datatype: float65}\na\n1\n',
      /column "a": unknown datatype "float65"/,
    ],
    [
      '# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a, datatype: bool}\na\nmaybe\n',
      /row 1, column "a": "maybe" is neither True nor False/,
    ],
    [
      '# %ECSV 1.0\n# ---\n# delimiter: ;\n# datatype:\n# - {name: a, datatype: int64}\na\n1\n',
      /declares the delimiter ";"/,
    ],
    [
      '# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a, datatype: int64}\n',
      /line of column names after the header is missing/,
    ],
    ['# %ECSV 1.0\n# ---\n# datatype:\n# - {datatype: int64}\na\n1\n', /column 1 of the ECSV header has no name/],
    [
      '# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a, datatype: float64}\na\nx\n',
      /line 6, column "a": "x" is not a number/,
    ],
  ])('refuses a broken header: %j', async (text, message) => {
    await expect(readCatalogue(bytes(text))).rejects.toThrow(message);
  });

  it('does not expand aliases without end', async () => {
    let yaml = '# a0: &a0 [x, x, x, x, x, x, x, x, x, x]\n';
    for (let k = 1; k < 9; k++)
      yaml += `# a${k}: &a${k} [${Array(10)
        .fill(`*a${k - 1}`)
        .join(', ')}]\n`;
    const text = `# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a, datatype: float64}\n# meta:\n${yaml.replaceAll('# ', '#   ')}a\n1\n`;
    await expect(readCatalogue(bytes(text))).rejects.toThrow(/ECSV header/);
  });
});

describe('CSV', () => {
  it('takes the last comment as names, units over a line of dashes, and units in brackets', async () => {
    const commented = await readCatalogue(bytes('# made by hand\n# ra, dec\n1.5,2\n3,4\n'));
    expect(commented.numbers('rightAscension')).toEqual(Float64Array.of(1.5, 3));
    const dashed = await readCatalogue(bytes('#c\nRAdeg\tPlx\tN\ndeg\tarcsec\t \n-----\t---\t--\n1.5\t0.25\t7\n'));
    expect(dashed.numbers('parallax')).toEqual(Float64Array.of(250));
    expect(dashed.roles.rightAscension).toBe('RAdeg');
    const bracketed = await readCatalogue(bytes('ra (deg),parallax [arcsec],flux [Jy],note [see text]\n1,0.1,2,x\n'));
    expect(bracketed.columns.map((c) => c.unit)).toEqual(['deg', 'mas', 'Jy', '']);
    expect(bracketed.numbers('parallax')).toEqual(Float64Array.of(100));
    const hours = await readCatalogue(bytes('ra_hours,dec_deg\n12,0\n'));
    expect(hours.numbers('rightAscension')).toEqual(Float64Array.of(180));
  });

  it('counts every usual word for missing, and keeps quoted ones in a text column', async () => {
    const words = ['', ' ', 'nan', 'NaN', 'NULL', 'null', 'None', 'NA', 'N/A', '--', '-', '\\N', '...', 'INDEF'];
    const c = await readCatalogue(bytes(`v,w\n1,0\n${words.map((w) => `${w},0`).join('\n')}\n2,0\n`));
    expect(c.columns[0]).toMatchObject({ kind: 'number', missing: words.length });
    const t = await readCatalogue(bytes('name,w\nHD 1,0\nNA,0\n"NA",0\n"",0\n,0\n\\N,0\n'));
    expect(t.values('name')).toEqual(['HD 1', null, 'NA', '', null, null]);
    const all = await readCatalogue(bytes('"name","w"\n"HD 1","0"\n"NA","1"\n"","2"\n'));
    expect(all.values('name')).toEqual(['HD 1', null, null]);
  });

  it('says so when a comment line could be a row', async () => {
    const c = await readCatalogue(bytes('a,x\n1,2\n#3,4\n# a word on this\n5,6\n"#7",8\n'), { text: ['a'] });
    expect(c.values('a')).toEqual(['1', '5', '#7']);
    expect(c.warnings).toEqual([
      '1 line that begins with # among the rows is taken as comments (first on line 3). If they are rows, put the first cell in double quotes.',
    ]);
  });

  it('reads booleans, and keeps text that only looks odd', async () => {
    const c = await readCatalogue(bytes('a,b\ntrue,x\nFalse,y\n,z\n'));
    expect(c.values('a')).toEqual([true, false, null]);
    const multi = await readCatalogue(bytes('a,b\n"two\nlines",1\n"a ""q"", b",2\n5" tube,3\n'));
    expect(multi.values('a')).toEqual(['two\nlines', 'a "q", b', '5" tube']);
    expect([...multi.numbers('b')]).toEqual([1, 2, 3]);
  });

  it('counts lines inside quoted cells when it names one', async () => {
    const rows = Array.from({ length: 20 }, () => '"a\nb",1\n').join('');
    await expect(readCatalogue(bytes(`n,v\n${rows}x,bad\n`))).rejects.toThrow('line 42, column "v": "bad"');
  });

  it('reads names that could trip a program', async () => {
    const c = await readCatalogue(
      bytes('__proto__,constructor,"a,b","say ""hi""","two\nlines",toString\n1,2,3,4,5,6\n'),
    );
    expect(c.columns.map((x) => x.name)).toEqual([
      '__proto__',
      'constructor',
      'a,b',
      'say "hi"',
      'two\nlines',
      'toString',
    ]);
    expect(c.numbers('__proto__')).toEqual(Float64Array.of(1));
    expect(c.numbers('constructor')).toEqual(Float64Array.of(2));
    expect(c.columns.map((x) => x.unit)).toEqual(['', '', '', '', '', '']);
    expect(c.table.numRows()).toBe(1);
    expect([...(c.table.array('constructor') as Iterable<number>)]).toEqual([2]);
    expect(() => c.numbers('hasOwnProperty')).toThrow(/no column or role "hasOwnProperty"/);
    const declared = await readCatalogue(bytes('constructor,__proto__\n1,-9\n'), { missing: { constructor: [1] } });
    expect(declared.numbers('constructor')).toEqual(Float64Array.of(Number.NaN));
    expect(declared.numbers('__proto__')).toEqual(Float64Array.of(-9));
  });

  it('reads positions in hours or degrees, minutes and seconds', async () => {
    const c = await readCatalogue(
      bytes('RAJ2000,DEJ2000\n04:30:00,+16 30 36\n04 30 00.0,-00:30:00\n,\n12h00m36s,-10d15m00s\n'),
    );
    expect(c.numbers('rightAscension')).toEqual(Float64Array.of(67.5, 67.5, Number.NaN, 180.15));
    expect(c.numbers('declination')).toEqual(Float64Array.of(16.51, -0.5, Number.NaN, -10.25));
    expect(c.columns.map((x) => x.unit)).toEqual(['deg', 'deg']);
    expect(c.history[0].note).toContain('RAJ2000 from hours, minutes and seconds to deg');
    const degrees = await readCatalogue(bytes('ra,x\n180:30:00,1\n'), { units: { ra: 'deg' } });
    expect(degrees.numbers('rightAscension')).toEqual(Float64Array.of(180.5));
    const odd = await readCatalogue(bytes('ra,x\n12:61:00,1\n12:30:00,1\n'));
    expect(odd.roles).toEqual({});
    expect(odd.warnings).toEqual([
      'Role rightAscension is not assigned: column "ra" holds text ("12:61:00"), not numbers.',
    ]);
  });

  it('reads a table of ten thousand columns, and gzip in several members', async () => {
    const names = Array.from({ length: 10_000 }, (_, k) => `c${k}`);
    const wide = await readCatalogue(bytes(`${names.join(',')}\n${names.map((_, k) => k).join(',')}\n`));
    expect(wide.numbers('c9999')).toEqual(Float64Array.of(9999));
    const parts = [await gzip(bytes('a,x\n1,2\n')), await gzip(bytes('3,4\n'))];
    const both = new Uint8Array(parts[0].length + parts[1].length);
    both.set(parts[0]);
    both.set(parts[1], parts[0].length);
    expect([...(await readCatalogue(both)).numbers('a')]).toEqual([1, 3]);
  });

  it('decides between text and numbers on the whole column', async () => {
    const rows = (n: number, f: (i: number) => string) => Array.from({ length: n }, (_, i) => `${f(i)},0`).join('\n');
    const names = await readCatalogue(bytes(`star,x\n${rows(500, (i) => (i % 2 ? `HD ${i}` : String(i)))}\n`));
    expect(names.columns[0].kind).toBe('text');
    const late = await readCatalogue(bytes(`star,x\n${rows(1000, (i) => (i > 300 ? `HD ${i}` : String(i)))}\n`));
    expect(late.columns[0].kind).toBe('text');
    expect(late.values('star')[0]).toBe('0');
    const mixed = await readCatalogue(bytes(`v,x\n${rows(100, (i) => (i % 3 ? String(i) : `>${i}`))}\n`));
    expect(mixed.columns[0].kind).toBe('text');
    expect(mixed.warnings.join()).toContain(
      'Column "v" is read as text: 34 of its 100 cells are not numbers (first in row 1: ">0")',
    );
    // Numbers below a first stretch of words: still named, not turned to text in silence.
    const early = await readCatalogue(bytes(`v,x\n${rows(2000, (i) => (i < 150 ? 'unknown' : String(i)))}\n`), {
      badCells: 'missing',
    });
    expect(early.columns[0]).toMatchObject({ kind: 'number', missing: 150 });
  });
});
