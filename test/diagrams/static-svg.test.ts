import { execFileSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import { Figure } from '../../kernel-lib/diagrams/figure';
import { staticFigure } from '../../kernel-lib/diagrams/static-svg';
import { placeAxes, planAxes } from '../../kernel-lib/diagrams/svg/axis-geometry';
import { markerPath } from '../../kernel-lib/diagrams/svg/marker-path';
import { randomStream } from '../../kernel-lib/quantity/random';
import { allFigures } from './all-figures';

/** Throws where a document is not well-formed XML. */
function parseXml(documents: readonly string[]): void {
  const check = 'import sys, json, xml.dom.minidom as m\nfor s in json.load(sys.stdin): m.parseString(s.encode())';
  execFileSync('python3', ['-c', check], { input: JSON.stringify(documents), stdio: 'pipe' });
}

const AREA = { left: 50, top: 20, width: 500, height: 400 };

describe('staticFigure', () => {
  it('is well-formed XML without a missing number, for every diagram and theme', () => {
    const documents = Object.values(allFigures()).flatMap((figure) =>
      (['light', 'dark', 'either'] as const).map((theme) => staticFigure(figure, { theme })),
    );
    parseXml(documents);
    expect(() => parseXml(['<svg><text></svg>'])).toThrow();
    for (const svg of documents) {
      expect(svg).not.toMatch(/NaN|undefined|Infinity|\[object/);
      expect(svg).not.toMatch(/<script|\son\w+=|https?:(?!\/\/www\.w3\.org)/);
    }
  });

  it('writes names from data as text', () => {
    const trace = { type: 'scatter', mode: 'markers', name: '&lt;b&gt; "x"', x: [1, 2], y: [1, 2] };
    const svg = staticFigure(new Figure([trace], { title: { text: 'a &lt; b &amp; c' } }, 'a < b & c'));
    parseXml([svg]);
    expect(svg).toContain('&lt;b&gt; &quot;x&quot;');
    expect(svg).toContain('a &lt; b &amp; c');
  });

  it('keeps any number of points small, and draws them all while they are few', () => {
    const random = randomStream(3);
    const cloud = (n: number) => {
      const x = Array.from({ length: n }, () => random.normal());
      const y = Array.from({ length: n }, () => random.normal());
      return staticFigure({ data: [{ type: 'scattergl', mode: 'markers', x, y, marker: { size: 3 } }], layout: {} });
    };
    for (const n of [10_000, 300_000]) expect(cloud(n).length).toBeLessThan(150_000);
    const few = markerPath(Float64Array.of(10, 20, Number.NaN, 30), Float64Array.of(1, 2, 3, 4), 'circle', 5, 5000);
    expect(few).toEqual({ d: 'M10,1h0m10 1h0m10 2h0', kind: 'dots', size: 5, drawn: 3 });
  });

  it('thins evenly: every part of a uniform field keeps its share of the markers', () => {
    const random = randomStream(4);
    const n = 40_000;
    const xs = Float64Array.from({ length: n }, () => 500 * random.uniform());
    const ys = Float64Array.from({ length: n }, () => 400 * random.uniform());
    const path = markerPath(xs, ys, 'diamond', 4, 60_000);
    const starts = [...path.d.matchAll(/M([\d.]+),/g)].map((m) => Number(m[1]));
    expect(starts.length).toBe(path.drawn);
    expect(path.drawn).toBeGreaterThan(800);
    const left = starts.filter((x) => x < 250).length / starts.length;
    expect(Math.abs(left - 0.5)).toBeLessThan(0.06);
  });

  it('draws reversed and logarithmic axes where they belong', () => {
    const layout = { xaxis: { type: 'log', range: [4, 3] }, yaxis: { range: [12, 2] } } as const;
    const axes = placeAxes(planAxes([], layout), AREA);
    expect(axes.get('x')?.toPx(10000)).toBeCloseTo(50);
    expect(axes.get('x')?.toPx(1000)).toBeCloseTo(550);
    expect(axes.get('x')?.toPx(Math.sqrt(1e7))).toBeCloseTo(300);
    expect(axes.get('x')?.toPx(-1)).toBeNaN();
    expect(axes.get('y')?.toPx(2)).toBeCloseTo(20);
    expect(axes.get('y')?.toPx(12)).toBeCloseTo(420);
  });

  it('gives scale-bound axes the same px a unit', () => {
    const layout = { xaxis: { range: [10, 0], scaleanchor: 'y', scaleratio: 0.5 }, yaxis: { range: [0, 4] } } as const;
    const axes = placeAxes(planAxes([], layout), AREA);
    const perUnit = (id: string) => Math.abs((axes.get(id)?.toPx(1) ?? 0) - (axes.get(id)?.toPx(0) ?? 0));
    expect(perUnit('x') / perUnit('y')).toBeCloseTo(0.5, 9);
    expect(axes.get('x')?.toPx(5)).toBeCloseTo(300);
  });

  it('puts the legend beneath a plot that it would leave too narrow', () => {
    const trace = {
      type: 'scatter',
      mode: 'lines',
      name: 'a name that is rather long for so small a picture',
      x: [0, 1],
      y: [0, 1],
    };
    const svg = staticFigure({ data: [trace], layout: {} }, { width: 320, height: 240 });
    const plot = /<svg x="[\d.]+" y="[\d.]+" width="([\d.]+)"/.exec(svg);
    expect(Number(plot?.[1])).toBeGreaterThan(200);
  });

  it('refuses what it cannot draw', () => {
    const figure = { data: [], layout: {} };
    expect(() => staticFigure(figure, { widht: 3 } as never)).toThrow(/unknown option "widht"/);
    expect(() => staticFigure(figure, { width: 10 })).toThrow(/width must lie in 200 to 4000 px, got 10/);
    expect(() => staticFigure(figure, { theme: 'blue' as never })).toThrow(/choose one of light, dark, either/);
    expect(() => staticFigure({ data: [{ type: 'pie' }], layout: {} })).toThrow(/trace type "pie" is not drawn/);
    expect(() => staticFigure({ data: [{ type: 'scatter', xaxis: 'x7' }], layout: {} })).toThrow(/axes x7 y/);
  });
});
