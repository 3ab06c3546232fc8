import { attachPresentation, escapeHtml, textTable } from '../quantity/present';
import { base64Of } from './base64';
import { plainText } from './plot-text';
import { staticFigure } from './static-svg';

/** One trace of a figure, as Plotly reads it. Plain JSON. */
export interface FigureTrace {
  readonly type: string;
  readonly name?: string;
  readonly [key: string]: unknown;
}

/** The layout of a figure, as Plotly reads it. Plain JSON. */
export interface FigureLayout {
  readonly [key: string]: unknown;
}

/**
 * A drawing: plain data that Plotly draws (`data`, `layout`), with a title. As the last expression of a cell it draws
 * itself; in a terminal it says in a few lines what it shows. Immutable; `JSON.stringify(figure)` gives what Plotly takes.
 */
export class Figure {
  readonly data: readonly FigureTrace[];
  readonly layout: FigureLayout;
  readonly title: string;

  /**
   * @param data   Plotly traces; missing numbers as null, never NaN
   * @param layout Plotly layout
   * @param title  what the figure shows, plain text
   */
  constructor(data: readonly FigureTrace[], layout: FigureLayout, title: string) {
    this.data = deepFreeze([...data]);
    this.layout = deepFreeze({ ...layout });
    this.title = title;
    attachPresentation(this, { text: () => figureText(this), html: () => figureHtml(this) });
    Object.freeze(this);
  }

  /** What Plotly takes. */
  toJSON(): { data: readonly FigureTrace[]; layout: FigureLayout } {
    return { data: this.data, layout: this.layout };
  }
}

/** A few lines: title, axes with their ranges, traces with their number of points. */
export function figureText(figure: Figure): string {
  const axes = Object.keys(figure.layout)
    .filter((key) => /^[xy]axis\d*$/.test(key))
    .sort((a, b) => a.length - b.length || a.localeCompare(b))
    .map((key) => axisLine(key, figure.layout[key] as Record<string, unknown>))
    .filter((line) => line !== '');
  const drawn = figure.data.filter((trace) => trace.name !== undefined || pointCount(trace) > 0);
  const rows = drawn.map((trace) => [
    plainText(String(trace.name ?? '(unnamed)')),
    String(trace.type).replace('scattergl', 'scatter'),
    pointCount(trace),
  ]);
  return [`Figure: ${figure.title}`, ...axes, textTable(['trace', 'kind', 'points'], rows)].join('\n');
}

/** The figure as a still picture inside HTML; needs no script and no network. */
export function figureHtml(figure: Figure): string {
  const svg = staticFigure(figure);
  return `<img alt="${escapeHtml(figure.title)}" style="max-width:100%" src="data:image/svg+xml;base64,${base64Of(svg)}">`;
}

function axisLine(key: string, axis: Record<string, unknown>): string {
  const title = plainText(String((axis.title as { text?: string } | undefined)?.text ?? ''));
  if (title === '') return '';
  const range = axis.range as readonly number[] | undefined;
  const number = (v: number) => String(Number((axis.type === 'log' ? 10 ** v : v).toPrecision(4)));
  const span = range ? `, ${number(range[0])} to ${number(range[1])}` : '';
  const side = axis.side === 'top' || axis.side === 'right' ? ` (${axis.side})` : '';
  return `${key[0]}${side}: ${title}${span}${axis.type === 'log' ? ', logarithmic' : ''}`;
}

function pointCount(trace: FigureTrace): number {
  const values = trace.x ?? trace.z ?? trace.y;
  return Array.isArray(values) ? values.filter((v) => v !== null).length : 0;
}

function deepFreeze<T>(value: T): T {
  if (value === null || typeof value !== 'object' || Object.isFrozen(value)) return value;
  for (const part of Object.values(value)) deepFreeze(part);
  return Object.freeze(value);
}
