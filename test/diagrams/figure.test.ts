import { inspect } from 'node:util';
import { describe, expect, it } from 'vitest';
import { Figure } from '../../kernel-lib/diagrams/figure';
import { presentationOf } from '../../kernel-lib/quantity/present';
import { allFigures } from './all-figures';

describe('Figure', () => {
  const figures = allFigures();

  it.each(Object.keys(figures))('%s: plain JSON without a missing number, frozen, as stored', (name) => {
    const figure = figures[name];
    const json = JSON.stringify(figure);
    expect(JSON.parse(json)).toEqual({ data: figure.data, layout: figure.layout });
    expect(Object.isFrozen(figure.data[0])).toBe(true);
    expect(shortened(JSON.parse(json))).toMatchSnapshot();
  });

  it.each(Object.keys(figures))(
    '%s: transparent, with titles on its axes and no ink of its own on the page',
    (name) => {
      const { layout } = figures[name];
      expect([layout['paper_bgcolor'], layout['plot_bgcolor']]).toEqual(['rgba(0,0,0,0)', 'rgba(0,0,0,0)']);
      expect(JSON.stringify(figures[name])).not.toMatch(/#000|black|white|#fff/i);
      expect((layout['title'] as { text: string }).text).not.toBe('');
    },
  );

  it('tells in a terminal what it shows', () => {
    const text = inspect(figures['hr']);
    expect(text).toMatch(
      /^Figure: Hertzsprung-Russell diagram\nx: effective temperature \(K\), 1\d{4} to 3\d{3}, logarithmic\ny: luminosity/,
    );
    expect(text).toContain('main sequence (');
    expect(String(figures['hr'])).toBe(text);
  });

  it('shows a still picture where no script runs, the title escaped', () => {
    const html = presentationOf(new Figure([], {}, 'a "b" <c>'))?.html() ?? '';
    expect(html).toMatch(
      /^<img alt="a &quot;b&quot; &lt;c&gt;" [^<>]*src="data:image\/svg\+xml;base64,[A-Za-z0-9+/=]+">$/,
    );
    const svg = Buffer.from(html.split('base64,')[1].split('"')[0], 'base64').toString('utf8');
    expect(svg.startsWith('<svg xmlns=') && svg.endsWith('</svg>')).toBe(true);
  });
});

/** A figure with long lists cut to their ends, so that a snapshot is short enough to be read. */
function shortened(value: unknown): unknown {
  if (Array.isArray(value)) {
    const items =
      value.length > 8 ? [...value.slice(0, 3), `... ${value.length} in all ...`, ...value.slice(-2)] : value;
    return items.map(shortened);
  }
  if (typeof value === 'number') return Number(value.toPrecision(6));
  if (value === null || typeof value !== 'object') return value;
  return Object.fromEntries(Object.entries(value).map(([k, v]) => [k, shortened(v)]));
}
