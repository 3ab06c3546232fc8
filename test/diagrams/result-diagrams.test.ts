import { describe, expect, it } from 'vitest';
import { ageTurnoffDiagram } from '../../kernel-lib/diagrams/age-turnoff-diagram';
import { cornerDiagram } from '../../kernel-lib/diagrams/corner-diagram';
import { massLuminosityDiagram } from '../../kernel-lib/diagrams/mass-luminosity-diagram';
import { residualDiagram } from '../../kernel-lib/diagrams/residual-diagram';
import { measured } from '../../kernel-lib/quantity/measured';
import { randomStream } from '../../kernel-lib/quantity/random';
import { axisOf } from './invented-field';

const random = randomStream(12);
const normals = (n: number) => Float64Array.from({ length: n }, () => random.normal());

describe('residualDiagram', () => {
  it('is symmetric about zero, with a median and a 68 % band of unit normal residuals near 0 and 1', () => {
    const residual = normals(4000);
    const figure = residualDiagram({ x: Float64Array.from(residual.keys()), residual });
    const y = axisOf(figure, 'yaxis').range;
    expect(y[0]).toBe(-y[1]);
    const median = figure.data.find((t) => t.name === 'running median')?.['y'] as number[];
    // 200 stars a group: error of a median 1.25 / sqrt(200) = 0.09; five of them.
    for (const m of median) expect(Math.abs(m)).toBeLessThan(0.45);
    const band = figure.data.find((t) => t.name === '68 % of the stars')?.['y'] as number[];
    const upper = band.slice(0, median.length);
    expect(upper.reduce((a, b) => a + b, 0) / upper.length).toBeCloseTo(1, 1);
  });

  it('refuses lists of different length', () => {
    expect(() => residualDiagram({ x: [1, 2], residual: [1] })).toThrow(/x has 2 values, residual 1/);
  });
});

describe('ageTurnoffDiagram', () => {
  const curve = { age: [0.1, 1, 10], position: [0, 2.4, 4.2] };

  it('has magnitudes brighter up, ages logarithmic, the measured place as a band and a mark', () => {
    const figure = ageTurnoffDiagram([curve], { measured: measured(2, 1.8, 2.3), age: measured(0.7, 0.6, 0.9, 'Gyr') });
    const y = axisOf(figure, 'yaxis').range;
    expect(y[0]).toBeGreaterThan(y[1]);
    expect(axisOf(figure, 'xaxis').type).toBe('log');
    const bands = figure.layout['shapes'] as { x0: number; x1: number; y0: number; y1: number }[];
    expect([bands[0].y0, bands[0].y1]).toEqual([1.8, 2.3]);
    expect([bands[1].x0, bands[1].x1]).toEqual([0.6, 0.9]);
    const mark = figure.data[1] as unknown as { x: unknown; error_x: { array: number[]; arrayminus: number[] } };
    expect(mark.x).toEqual([0.7]);
    expect([mark.error_x.array[0], mark.error_x.arrayminus[0]]).toEqual([0.2, 0.1]);
  });

  it('takes masses, which grow upward', () => {
    const y = axisOf(ageTurnoffDiagram([curve], { brighterUp: false, positionTitle: 'turnoff mass' }), 'yaxis').range;
    expect(y[0]).toBeLessThan(y[1]);
  });

  it('refuses no curve, and a curve of unequal lists', () => {
    expect(() => ageTurnoffDiagram([])).toThrow(/at least one curve/);
    expect(() => ageTurnoffDiagram([{ age: [1, 2], position: [1] }])).toThrow(/2 ages and 1 positions/);
  });
});

describe('massLuminosityDiagram', () => {
  it('is logarithmic both ways, upward and to the right, and leaves out what has no logarithm', () => {
    const figure = massLuminosityDiagram({ mass: [0.5, 1, 5, -1], luminosity: [0.05, 1, 500, 3] });
    for (const key of ['xaxis', 'yaxis']) {
      const axis = axisOf(figure, key);
      expect(axis.type).toBe('log');
      expect(axis.range[0]).toBeLessThan(axis.range[1]);
    }
    expect(axisOf(figure, 'xaxis').range[0]).toBeGreaterThan(-0.5);
  });

  it('refuses lists of different length', () => {
    expect(() => massLuminosityDiagram({ mass: [1], luminosity: [1], massError: [1, 2] })).toThrow(
      /massError has 2 entries for 1 masses/,
    );
  });
});

describe('cornerDiagram', () => {
  const samples = { a: normals(2000), b: normals(2000), c: normals(2000) };

  it('has one panel a pair and one a parameter, those of a row and a column on the same range', () => {
    const figure = cornerDiagram(samples);
    expect(figure.data.map((t) => t.type)).toEqual(['bar', 'heatmap', 'bar', 'heatmap', 'heatmap', 'bar']);
    expect(axisOf(figure, 'xaxis').range).toEqual(axisOf(figure, 'xaxis4').range);
    expect(axisOf(figure, 'yaxis4').range).toEqual(axisOf(figure, 'xaxis6').range);
    expect(figure.layout['showlegend']).toBe(false);
  });

  it('states median and interval of each parameter', () => {
    const notes = cornerDiagram(samples, { units: { a: 'mag' } }).layout['annotations'] as { text: string }[];
    expect(notes[0].text).toMatch(/^a = -?0\.\d+ [±+]/);
  });

  it('counts every sample within its range once', () => {
    const z = cornerDiagram(samples).data[1]['z'] as (number | null)[][];
    const total = z.flat().reduce<number>((sum, v) => sum + (v ?? 0), 0);
    // 0.2 % is left out at each end of each parameter, less what the padding brings back.
    expect(total).toBeGreaterThan(1975);
    expect(total).toBeLessThanOrEqual(2000);
  });

  it('refuses one parameter, and lists of different length', () => {
    expect(() => cornerDiagram({ a: [1, 2] })).toThrow(/number of parameters must lie in 2 to 8, got 1/);
    expect(() => cornerDiagram({ a: [1, 2], b: [1] })).toThrow(/b has 1 samples, a has 2/);
  });
});
