import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import type { Figure, FigureTrace } from '../../kernel-lib/diagrams/figure';
import { hrDiagram } from '../../kernel-lib/diagrams/hr-diagram';
import { zeroAge } from '../../kernel-lib/models/zero-age';
import { axisOf, inventedField } from './invented-field';

function starsAt(places: readonly [temperature: number, luminosity: number][]): Catalogue {
  const column = (k: 0 | 1) => Float64Array.from(places, (p) => Math.log10(p[k]));
  const columns = [
    { name: 'log_teff', values: column(0) },
    { name: 'log_l', values: column(1) },
  ];
  return new Catalogue({ source: 'stars', rowCount: places.length, columns });
}

function named(figure: Figure, start: string): FigureTrace {
  const trace = figure.data.find((t) => t.name?.startsWith(start));
  if (!trace) throw new Error(`no trace is named ${start}`);
  return trace;
}

describe('hrDiagram', () => {
  const { field } = inventedField();
  const figure = hrDiagram(field);

  it('runs from hot at the left to cool at the right, and faint to bright, both logarithmic', () => {
    const [x, y] = [axisOf(figure, 'xaxis'), axisOf(figure, 'yaxis')];
    expect([x.type, y.type]).toEqual(['log', 'log']);
    expect(x.range[0]).toBeGreaterThan(x.range[1]);
    expect(y.range[0]).toBeLessThan(y.range[1]);
    expect(x.title.text).toBe('effective temperature (K)');
  });

  it('holds spectral classes along the top, hot to cool, on the same temperatures', () => {
    const [bottom, top] = [axisOf(figure, 'xaxis'), axisOf(figure, 'xaxis2')];
    expect(top.range).toEqual(bottom.range);
    expect([top['side'], top['matches'], top['overlaying']]).toEqual(['top', 'x', 'x']);
    expect(top['ticktext']).toEqual(['B', 'A', 'F', 'G', 'K', 'M'].map((c) => `<b>${c}</b>`));
    const at = (top['tickvals'] as number[])[3];
    expect(at).toBeGreaterThan(5200);
    expect(at).toBeLessThan(6000);
  });

  it('puts the Sun at 5772 K and 1 solar luminosity (IAU 2015 Resolution B3), on the line of 1 solar radius', () => {
    expect([named(figure, 'Sun')['x'], named(figure, 'Sun')['y']]).toEqual([[5772], [1]]);
    const radii = named(hrDiagram(field, { radii: [1] }), 'equal radius');
    const [x, y] = [radii['x'] as number[], radii['y'] as number[]];
    const share = Math.log(5772 / x[0]) / Math.log(x[1] / x[0]);
    expect(Math.log(y[0]) + share * Math.log(y[1] / y[0])).toBeCloseTo(0, 3);
  });

  it('draws the zero-age main sequence of the models', () => {
    const line = named(figure, 'zero-age');
    const [x, y] = [line['x'] as number[], line['y'] as number[]];
    const star = zeroAge({ mass: 1 });
    const after = x.findIndex((t) => t > star.temperature);
    const share = Math.log(star.temperature / x[after - 1]) / Math.log(x[after] / x[after - 1]);
    // Half a per cent: straight pieces between 120 masses.
    expect(Math.abs((y[after - 1] * (y[after] / y[after - 1]) ** share) / star.luminosity - 1)).toBeLessThan(0.005);
  });

  it('tells groups apart by symbol as well as by colour, with their numbers', () => {
    const mixed = hrDiagram(
      starsAt([
        [5772, 1],
        [5000, 0.4],
        [4290, 170],
        [3600, 126000],
        [25000, 0.056],
        [6100, 9],
      ]),
    );
    const groups = mixed.data.filter((t) => /\(\d+\)$/.test(t.name ?? ''));
    expect(groups.map((t) => t.name)).toEqual([
      'main sequence (2)',
      'subgiants (1)',
      'giants (1)',
      'supergiants (1)',
      'white dwarfs (1)',
    ]);
    const looks = groups.map((t) => t['marker'] as { color: string; symbol: string });
    expect(new Set(looks.map((m) => m.symbol)).size).toBe(groups.length);
    expect(new Set(looks.map((m) => m.color)).size).toBe(groups.length);
  });

  it('says value and error when resting on a star, names written as text', () => {
    const trace = named(figure, 'main sequence');
    const first = (trace['customdata'] as unknown[][])[0];
    expect(first[0]).toBe('star &lt;0&gt; &amp; co');
    // 10,000 K times ln 10 times 0.006 dex = 138 K, to two digits.
    expect(first[1]).toBe(140);
    expect(trace['hovertemplate']).toMatch(/T = %\{x:,.0f\} ± %\{customdata\[1\]:,.0f\} K<br>L = %\{y\} ±/);
  });

  it('leaves resting on a point to the stars: no curve takes the box from them', () => {
    const curve = { logTeff: [3.7, 3.8], logL: [0, 1] };
    const lines = hrDiagram(field, { isochrones: [curve] }).data.filter((t) => t['mode'] === 'lines');
    expect(lines.map((t) => t['hoverinfo'])).toEqual(['skip', 'skip', 'skip']);
  });

  it('breaks an isochrone where a new piece starts, and names it by its age', () => {
    const curve = { logAge: 8.8451, logTeff: [3.7, 3.8, 3.6], logL: [0, 1, 2], breaks: [0, 2] };
    const trace = named(hrDiagram(field, { isochrones: [curve] }), '700 Myr');
    expect((trace['x'] as (number | null)[]).map((v) => v === null)).toEqual([false, false, true, false]);
  });

  it('keeps 10,000 stars below 500 kB', () => {
    const { field: many } = inventedField(10_000);
    const big = hrDiagram(many);
    expect(JSON.stringify(big).length).toBeLessThan(500_000);
    expect(big.data.filter((t) => t.type === 'scatter' && Array.isArray(t['x']) && t.xaxis !== 'x2')).toEqual([]);
  });

  it('leaves out stars without a place, and says so when none has one', () => {
    expect(
      named(
        hrDiagram(
          starsAt([
            [5772, 1],
            [Number.NaN, 1],
            [5000, Number.NaN],
          ]),
        ),
        'main',
      )?.name,
    ).toBe('main sequence (1)');
    expect(() => hrDiagram(starsAt([[Number.NaN, 1]]))).toThrow(/none of the 1 stars of stars has both/);
    expect(() => hrDiagram(starsAt([]))).toThrow(/none of the 0 stars/);
  });

  it('says what is missing or misspelt', () => {
    const bare = new Catalogue({ source: 'field.csv', rowCount: 0, columns: [] });
    expect(() => hrDiagram(bare)).toThrow(/field.csv has no column log_teff; call physicalProperties first/);
    expect(() => hrDiagram(field, { turnOff: 1 } as never)).toThrow(/unknown option "turnOff".*"turnoff"/);
  });
});
