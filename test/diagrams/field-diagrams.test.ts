import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { memberClasses } from '../../kernel-lib/diagrams/member-classes';
import { parallaxHistogram } from '../../kernel-lib/diagrams/parallax-histogram';
import { properMotionDiagram } from '../../kernel-lib/diagrams/proper-motion-diagram';
import { skyMap } from '../../kernel-lib/diagrams/sky-map';
import { measuredFromSigma } from '../../kernel-lib/quantity/measured';
import { axisOf, inventedField } from './invented-field';

const { field, probability } = inventedField();

describe('memberClasses', () => {
  it('puts every star in one class, the field first', () => {
    const classes = memberClasses('test', 6, [0.95, 0.9, 0.5, 0.1, Number.NaN, 0.89]);
    expect(classes.map((c) => [c.name, Array.from(c.rows)])).toEqual([
      ['p &lt; 0.5 (2)', [3, 4]],
      ['0.5 \u2264 p &lt; 0.9 (2)', [2, 5]],
      ['members, p \u2265 0.9 (2)', [0, 1]],
    ]);
    expect(new Set(classes.map((c) => c.color)).size).toBe(3);
  });

  it('refuses probabilities of another length', () => {
    expect(() => skyMap(field, { probability: [1, 2] })).toThrow(/skyMap: probability must be a list of 400 numbers/);
  });
});

describe('properMotionDiagram', () => {
  it('has both motions to the same scale, increasing to the right and upward', () => {
    const figure = properMotionDiagram(field, { probability });
    const [x, y] = [axisOf(figure, 'xaxis'), axisOf(figure, 'yaxis')];
    expect(x['scaleanchor']).toBe('y');
    expect(x.range[0]).toBeLessThan(x.range[1]);
    expect(y.range[0]).toBeLessThan(y.range[1]);
    expect(x.range[1] - x.range[0]).toBeCloseTo(y.range[1] - y.range[0], 3);
  });

  it('shows the cluster even where it lies far from the field, or when asked for its surroundings', () => {
    for (const halfWidth of [undefined, 3]) {
      const x = axisOf(properMotionDiagram(field, { centre: { ra: -300, dec: 0 }, halfWidth }), 'xaxis');
      expect(x.range[0]).toBeLessThan(-300);
      expect(x.range[1]).toBeGreaterThan(-300);
    }
  });

  it('names the missing role', () => {
    const bare = new Catalogue({ source: 'field.csv', rowCount: 0, columns: [] });
    expect(() => properMotionDiagram(bare)).toThrow(/field.csv has no column or role "properMotionRa"/);
  });
});

describe('skyMap', () => {
  it('has right ascension increasing to the left, shrunk by the cosine of the declination', () => {
    const figure = skyMap(field);
    const [x, y] = [axisOf(figure, 'xaxis'), axisOf(figure, 'yaxis')];
    expect(x.range[0]).toBeGreaterThan(x.range[1]);
    expect(y.range[0]).toBeLessThan(y.range[1]);
    const middle = (y.range[0] + y.range[1]) / 2;
    expect(x['scaleratio']).toBeCloseTo(Math.cos((middle * Math.PI) / 180), 3);
  });

  it('holds a field across 0 h together', () => {
    const columns = [
      { name: 'ra', values: Float64Array.of(359, 359.5, 0.2, 1) },
      { name: 'dec', values: Float64Array.of(1, 2, 1, 2) },
    ];
    const roles = { rightAscension: 'ra', declination: 'dec' };
    const x = axisOf(skyMap(new Catalogue({ source: 'f', rowCount: 4, columns, roles })), 'xaxis');
    expect(x.range[0] - x.range[1]).toBeLessThan(3);
    expect(x['ticktext']).toContain('359.4');
    expect(x['ticktext']).toContain('0.6');
  });
});

describe('parallaxHistogram', () => {
  it('counts every star in range once, members by probability', () => {
    const figure = parallaxHistogram(field, {
      probability,
      range: [-2, 8],
      bins: 40,
      parallax: measuredFromSigma(5.3, 0.1, 'mas'),
    });
    const total = (k: number) => (figure.data[k]['y'] as number[]).reduce((a, b) => a + b, 0);
    const inside = Array.from(field.numbers('parallax')).map((v) => v >= -2 && v <= 8);
    expect(total(0)).toBe(inside.filter(Boolean).length);
    const expected = Array.from(probability).reduce((sum, p, i) => sum + (inside[i] ? p : 0), 0);
    expect(Math.abs(total(1) - expected)).toBeLessThan(0.2);
    expect(figure.data[2].name).toBe('cluster, 5.30 \u00b1 0.10 mas');
  });

  it('keeps the last bin closed and refuses a range turned round', () => {
    const columns = [{ name: 'plx', values: Float64Array.of(0, 1, 2) }];
    const three = new Catalogue({ source: 'f', rowCount: 3, columns, roles: { parallax: 'plx' } });
    expect(parallaxHistogram(three, { range: [0, 2], bins: 2 }).data[0]['y']).toEqual([1, 2]);
    expect(() => parallaxHistogram(three, { range: [2, 0] })).toThrow(/range must be \[low, high\].*got \[2, 0\]/);
    expect(() => parallaxHistogram(three, { bins: 0.5 })).toThrow(/bins must lie in 1 to 2000/);
  });
});
