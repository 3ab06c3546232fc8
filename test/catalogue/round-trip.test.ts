import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import type { ColumnData, ColumnValues } from '../../kernel-lib/catalogue/columns';
import { magnitudeRange } from '../../kernel-lib/catalogue/cuts/magnitude-range';
import { readCatalogue } from '../../kernel-lib/catalogue/read/read-catalogue';
import { writeCatalogue } from '../../kernel-lib/catalogue/write/write-catalogue';
import { type RandomStream, randomStream } from '../../kernel-lib/quantity/random';
import { table } from './helpers';

const folder = mkdtempSync(join(tmpdir(), 'coeval-write-'));
afterAll(() => rmSync(folder, { recursive: true }));

const WORDS = [
  '',
  ' ',
  'NA',
  'nan',
  'null',
  '--',
  '-',
  '\\N',
  '#x',
  '# no comment',
  'a,b',
  'tab\there',
  'say "hi"',
  '"',
  '""',
  'two\nlines',
  'two\r\nlines',
  ' edge ',
  'α Centauri',
  '星',
  '12',
  '1e5',
  '-3.5',
  'inf',
  'True',
  'false',
  '5853498713190525696',
  '0012',
  'x',
  'HD 1',
  "it's",
  ': {',
  '[1,2]',
  '\u00a0',
  '\ufeff',
  '0x1f',
  '__proto__',
  'a;b|c',
];
const NAMES = [
  'a',
  'b b',
  'c,d',
  'e"f',
  '#g',
  '__proto__',
  'constructor',
  'ra',
  'dec',
  'V',
  '12',
  'yes',
  'on',
  ' pad ',
  'α',
  'two\nlines',
  'x: y',
  '- z',
  '~',
  'null',
  'parallax',
  'parallax_error',
  'unit [odd]',
  "'",
  '&h',
  '*i',
  '!j',
  '%k',
  '@l',
  '`m',
  'n\tn',
  '0x1f',
  '1:30',
];
const UNITS = ['', 'mas', 'deg', 'km/s', 'mag', 'Jy', 'solMass', 'dex(cm/s2)'];

const below = (s: RandomStream, n: number) => Math.floor(s.uniform() * n);
const pick = <T>(s: RandomStream, list: readonly T[]): T => list[below(s, list.length)];

function randomNumber(s: RandomStream): number {
  switch (below(s, 8)) {
    case 0:
      return Number.NaN;
    case 1:
      return pick(s, [0, -0, 1, -1, Number.MAX_VALUE, 5e-324, Infinity, -Infinity, 2 ** 53 - 1, 1e21, 1e-7, 0.1]);
    case 2:
      return below(s, 1e6) - 5e5;
    case 3: {
      const bits = Uint32Array.of(s.uniform() * 2 ** 32, s.uniform() * 2 ** 32);
      const v = new Float64Array(bits.buffer)[0];
      return Number.isInteger(v) && !Number.isSafeInteger(v) && Math.abs(v) < 1e21 ? 0.5 : v;
    }
    default:
      return s.normal() * 10 ** (below(s, 12) - 6);
  }
}

function randomColumn(s: RandomStream, name: string, rows: number): ColumnData {
  const kind = below(s, 4);
  const values: ColumnValues =
    kind === 0
      ? Array.from({ length: rows }, () => (below(s, 5) === 0 ? null : pick(s, WORDS)))
      : kind === 1
        ? Array.from({ length: rows }, () => (below(s, 5) === 0 ? null : below(s, 2) === 1))
        : Float64Array.from({ length: rows }, () => randomNumber(s));
  return {
    name,
    values,
    unit: kind > 1 ? pick(s, UNITS) : '',
    description: below(s, 2) ? pick(s, ['plain words', 'odd: "quoted" # and, more', 'ünicode', 'yes']) : '',
    ucd: below(s, 4) ? '' : 'meta.note',
  };
}

function randomTable(seed: number): Catalogue {
  const s = randomStream(seed);
  const names = new Set<string>();
  const count = 1 + below(s, 6);
  while (names.size < count) names.add(pick(s, NAMES));
  const rowCount = 1 + below(s, 30);
  const columns = [...names].map((name) => randomColumn(s, name, rowCount));
  const number = columns.find((c) => c.values instanceof Float64Array && c.unit === 'mag');
  return new Catalogue({
    source: pick(s, ['made up', 'a: "b"', '__proto__']),
    rowCount,
    columns,
    roles: number ? { 'magnitude.V': number.name } : {},
    history: [
      {
        action: 'made: by "hand"',
        rowsBefore: 100,
        rowsAfter: rowCount,
        note: pick(s, ['', 'a note # with, odd [things]']),
      },
    ],
    meta: { survey: 'invented', list: [1, 2.5, 'yes', null, true], nested: { a: { b: '1:30' } } },
  });
}

/** Kinds of a column of nothing but missing values are free. */
function sameValues(a: ColumnValues, b: ColumnValues): boolean {
  const gone = (v: unknown) => v === null || (typeof v === 'number' && Number.isNaN(v));
  return a.length === b.length && [...a].every((v: unknown, i) => (gone(v) ? gone(b[i]) : Object.is(v, b[i])));
}

describe('what we write', () => {
  it('reads back identical from ECSV: values, kinds, units, descriptions, UCDs, roles, history, keywords (300 tables)', async () => {
    const path = join(folder, 't.ecsv');
    for (let seed = 1; seed <= 300; seed++) {
      const before = randomTable(seed);
      await writeCatalogue(before, seed % 10 === 0 ? `${path}.gz` : path, { overwrite: true });
      const after = await readCatalogue(seed % 10 === 0 ? `${path}.gz` : path);
      expect(after.columns, `seed ${seed}`).toEqual(before.columns);
      for (const { name } of before.columns) {
        if (!sameValues(before.values(name), after.values(name))) {
          expect(after.values(name), `seed ${seed}, column ${name}`).toEqual(before.values(name));
        }
      }
      expect(after.roles).toEqual(before.roles);
      expect(after.history.slice(0, -1)).toEqual(before.history);
      expect(JSON.parse(JSON.stringify(after.meta))).toEqual(before.meta);
    }
  });

  it('reads back the same values from CSV and TSV (200 tables)', async () => {
    for (let seed = 1001; seed <= 1200; seed++) {
      const before = randomTable(seed);
      const path = join(folder, seed % 2 ? 't.csv' : 't.tsv');
      await writeCatalogue(before, path, { overwrite: true });
      // The format holds no types: say which columns are text, as a user would where a text looks like a number.
      const text = before.columns.filter((c) => c.kind === 'text').map((c) => c.name);
      const units = Object.fromEntries(before.columns.map((c) => [c.name, '']));
      const after = await readCatalogue(path, { text, units });
      expect(after.columns.map((c) => c.name)).toEqual(before.columns.map((c) => c.name));
      for (const { name } of before.columns) {
        if (!sameValues(before.values(name), after.values(name))) {
          expect(after.values(name), `seed ${seed}, column ${name}`).toEqual(before.values(name));
        }
      }
    }
  });

  it('keeps the history of cuts and adds the reading to it', async () => {
    const path = join(folder, 'cut.ecsv');
    const cut = table({ V: [8, 9, 14] }, { 'magnitude.V': 'V' }).keep(magnitudeRange('V', 7, 10));
    await writeCatalogue(cut, path);
    const back = await readCatalogue(path);
    expect(back.history.map((h) => h.action)).toEqual(['7 <= V <= 10 mag', 'read cut.ecsv (ECSV, comma-separated)']);
    expect(back.history[0]).toEqual(cut.history[0]);
    expect(back.roles).toEqual({ 'magnitude.V': 'V' });
  });

  it('never replaces a file unless told to, and says what is wrong with a path', async () => {
    const path = join(folder, 'kept.csv');
    const c = table({ a: [1, 2] });
    await writeCatalogue(c, path);
    await expect(writeCatalogue(table({ a: [3] }), path)).rejects.toThrow(
      /kept\.csv exists. Choose another name, or pass overwrite: true/,
    );
    expect(readFileSync(path, 'utf8')).toBe('a\n1\n2\n');
    await writeCatalogue(table({ a: [3] }), path, { overwrite: true });
    expect(readFileSync(path, 'utf8')).toBe('a\n3\n');
    await expect(writeCatalogue(c, join(folder, 'x.fits'))).rejects.toThrow(
      /does not say the format; end it in \.csv, \.tsv, \.ecsv or pass format/,
    );
    await expect(writeCatalogue(c, join(folder, 'no', 'x.csv'))).rejects.toThrow(/folder .*no does not exist/);
    await expect(writeCatalogue(c, folder, { format: 'csv', overwrite: true })).rejects.toThrow(
      /cannot be written \(EISDIR\)/,
    );
    await expect(writeCatalogue(c, path, { force: true } as never)).rejects.toThrow(/unknown option "force"/);
    await expect(writeCatalogue({} as never, path)).rejects.toThrow(/expected a Catalogue first/);
  });
});
