import { describe, expect, it } from 'vitest';
import { colourMagnitudeDiagram } from '../../kernel-lib/diagrams/colour-magnitude-diagram';
import { staticFigure } from '../../kernel-lib/diagrams/static-svg';
import { isochrone } from '../../kernel-lib/models/isochrone';
import { axisOf, inventedField } from './invented-field';

const { field, probability } = inventedField();
const curve = isochrone({ logAge: 8.8, bands: ['B', 'V'] });

describe('colourMagnitudeDiagram', () => {
  it('has red stars at the right and bright ones up, with absolute magnitudes at the right when the distance is given', () => {
    const figure = colourMagnitudeDiagram(field, { probability, modulus: 6.4, ebv: 0.1 });
    const [x, y, right] = [axisOf(figure, 'xaxis'), axisOf(figure, 'yaxis'), axisOf(figure, 'yaxis2')];
    expect(x.range[1]).toBeGreaterThan(x.range[0]);
    expect(y.range[1]).toBeLessThan(y.range[0]);
    // The right axis is the left one with other labels: apparent less absolute magnitude is modulus and 3.1 E(B-V).
    expect(right.range).toEqual(y.range);
    const [places, labels] = [right['tickvals'] as number[], right['ticktext'] as string[]];
    expect(labels.length).toBeGreaterThan(3);
    labels.forEach((label, k) => {
      expect(places[k] - Number(label.replace('\u2212', '-'))).toBeCloseTo(6.4 + 0.31, 3);
    });
    expect(x.title.text).toBe('B-V (mag)');
  });

  it('moves isochrones to the cluster and names them by their age', () => {
    const figure = colourMagnitudeDiagram(field, { modulus: 6.4, ebv: 0.1, isochrones: [curve] });
    const drawn = figure.data.find((trace) => /Myr|Gyr/.test(String((trace as { name?: string }).name))) as unknown as {
      x: (number | null)[];
      y: (number | null)[];
      name: string;
    };
    expect(drawn.name).toBe('631 Myr');
    const [b, v] = [curve.magnitudes.B as Float64Array, curve.magnitudes.V as Float64Array];
    expect(drawn.x[10]).toBeCloseTo(b[10] - v[10] + 0.1, 3);
    expect(drawn.y[10]).toBeCloseTo(v[10] + 6.4 + 0.31, 3);
  });

  it('draws a still picture, names as text, and says what is missing', () => {
    const svg = staticFigure(colourMagnitudeDiagram(field, { probability, title: '<script>' }), {});
    expect(svg).toMatch(/^<svg/);
    expect(svg).not.toContain('<script');
    expect(() => colourMagnitudeDiagram(field, { isochrones: [curve] })).toThrow(/say how far the cluster is/);
    expect(() => colourMagnitudeDiagram(field, { color: 'B-V' } as never)).toThrow(/Did you mean "colour"/);
    const other = isochrone({ logAge: 9, bands: ['G'] });
    expect(() => colourMagnitudeDiagram(field, { modulus: 1, isochrones: [other] })).toThrow(/no B magnitudes/);
  });
});
