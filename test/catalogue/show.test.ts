import { inspect } from 'node:util';
import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { summariseColumn } from '../../kernel-lib/catalogue/column-summary';
import { magnitudeRange } from '../../kernel-lib/catalogue/cuts/magnitude-range';
import { presentationOf } from '../../kernel-lib/quantity/present';
import { randomStream } from '../../kernel-lib/quantity/random';
import { table } from './helpers';

function big(rows: number): Catalogue {
  const s = randomStream(1);
  const numbers = (f: () => number) => Float64Array.from({ length: rows }, f);
  const V = numbers(() => 15 + 2 * s.normal());
  V[0] = Number.NaN;
  V[rows - 1] = 99.999;
  return new Catalogue({
    source: 'field.csv',
    rowCount: rows,
    columns: [
      { name: 'source_id', values: Array.from({ length: rows }, (_, i) => `58534987131905${i}`) },
      ...Array.from({ length: 12 }, (_, k) => ({ name: `c${k}`, values: numbers(() => s.normal()), unit: 'mas' })),
      { name: 'V', values: V, unit: 'mag', description: 'a "quoted" word' },
    ],
    roles: { 'magnitude.V': 'V', identifier: 'source_id' },
    warnings: ['watch <b>out</b>'],
  });
}

describe('a catalogue shows itself', () => {
  it('with units, roles, ranges, missing counts and histograms, light at 1e5 rows', () => {
    const c = big(100_000).keep(magnitudeRange('V', -30, 100));
    const html = presentationOf(c)?.html() ?? '';
    expect(html.length).toBeLessThan(100_000);
    expect(html).toContain('<b>field.csv</b>: 99999 rows, 14 columns');
    expect(html).toContain('magnitude.V');
    expect(
      html.match(/<img alt="histogram of [^"]+" width="96" height="20" src="data:image\/svg\+xml;base64,/g)?.length,
    ).toBe(13);
    expect(html).toContain('-30 &lt;= V &lt;= 100 mag: 100000 -&gt; 99999 rows');
    expect(html).toContain('first 5 rows');
    expect(html).not.toMatch(/<svg|<script|<style|https?:/);
    const svg = atob(/base64,([^"]+)"/.exec(html)?.[1] ?? '');
    expect(svg).toMatch(
      /^<svg xmlns="http:\/\/www\.w3\.org\/2000\/svg" width="96" height="20"><path fill="#5b8db8" d="M0 20(V[\d.]+h4){24}V20z"\/><\/svg>$/,
    );
  });

  it('as tidy text in a terminal', () => {
    const text = inspect(
      table(
        { V: [9, 9.5, 10, 10, 10, 11, Number.NaN], n: ['a', 'b', null, 'a', 'a', 'c', 'd'] },
        { 'magnitude.V': 'V' },
      ),
    );
    expect(text.split('\n')).toEqual([
      'test: 7 rows, 2 columns',
      'column  role         unit  middle 98 %   missing  histogram',
      'V       magnitude.V        9 to 11       1        ▃  ▃  █    ▃',
      'n                          a, b, c, ...  1',
    ]);
  });

  it('says so when there is nothing to show', () => {
    const text = String(table({ x: new Float64Array(3).fill(Number.NaN), t: [null, null, null], same: [2, 2, 2] }));
    expect(text).toMatch(/x +no value +3\n/);
    expect(text).toMatch(/t +no value +3\n/);
    expect(text).toMatch(/same +2$/);
    const none = table({ V: [1] }, { 'magnitude.V': 'V' }).keep(magnitudeRange('V', 5, 6));
    expect(presentationOf(none)?.html()).toContain('0 rows');
    expect(String(none)).toContain('1. 5 <= V <= 6 mag: 1 -> 0 rows');
  });

  it('escapes everything that comes from data', () => {
    const evil = '<img src=x onerror=alert(1)>"\'&';
    const c = new Catalogue({
      source: evil,
      rowCount: 2,
      columns: [
        { name: evil, values: Float64Array.of(1, 2), unit: evil, description: evil },
        { name: 't', values: [evil, null] },
      ],
      warnings: [evil],
      history: [{ action: evil, rowsBefore: 1, rowsAfter: 1, note: evil }],
    });
    const html = presentationOf(c)?.html() ?? '';
    expect(html).not.toContain('<img src=x');
    expect(html.match(/<img/g)?.length).toBe(1);
    expect(html).not.toMatch(/="[^"]*<img/);
  });

  it('shows a table of thousands of columns in part', () => {
    const c = table(Object.fromEntries(Array.from({ length: 3000 }, (_, k) => [`c${k}`, [1, 2]])));
    expect(String(c)).toContain('and 2900 more columns in .columns');
    expect(presentationOf(c)?.html().length).toBeLessThan(100_000);
  });
});

describe('summariseColumn', () => {
  it('keeps outliers out of the histogram and in the extremes', () => {
    const s = randomStream(2);
    const values = Float64Array.from({ length: 50_000 }, () => s.normal());
    values[100] = -9999;
    values[200] = Number.POSITIVE_INFINITY;
    const { min, max, low, high, counts } = summariseColumn(values);
    expect([min, max]).toEqual([-9999, Number.POSITIVE_INFINITY]);
    // 1 % and 99 % points of the normal distribution are -2.3263 and 2.3263 (any table); standard error of a sample of 20,000: 0.026.
    expect(Math.abs(low + 2.3263)).toBeLessThan(0.13);
    expect(Math.abs(high - 2.3263)).toBeLessThan(0.13);
    expect(counts.length).toBe(24);
    expect(counts.reduce((a, b) => a + b)).toBeGreaterThan(19_500);
  });
});
