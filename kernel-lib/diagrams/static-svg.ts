import { checkChoice, checkOptions, checkRange } from '../quantity/options';
import { escapeHtml } from '../quantity/present';
import { plainText } from './plot-text';
import { type Area, type AxisPlan, type PlacedAxis, placeAxes, planAxes } from './svg/axis-geometry';
import { axisRoom, drawAxis, drawGrid } from './svg/draw-axis';
import {
  drawLegendColumn,
  drawLegendRows,
  legendEntries,
  legendRowHeight,
  legendRows,
  legendSize,
} from './svg/draw-legend';
import { drawAnnotation, drawShape } from './svg/draw-notes';
import { drawText, px } from './svg/draw-text';
import { drawTrace } from './svg/draw-trace';
import { INKS, type Ink, type StaticTheme } from './svg/ink';
import type { LayoutSpec, TraceSpec } from './svg/plotly-subset';

/** Options of `staticFigure`. */
export interface StaticFigureOptions {
  /** Width in px, 200 to 4000. Default 760. */
  readonly width?: number;
  /** Height in px, 150 to 4000. Default: the figure's own height, else 560. */
  readonly height?: number;
  /** Background it will stand on: `light`, `dark`, or `either` (greys that read on both). Default `either`. */
  readonly theme?: StaticTheme;
}

const TITLE_SIZE = 15;
const EDGE = 12;
/** Characters for all markers of a picture together. */
const MARKER_BUDGET = 90_000;
const FONT = "system-ui,'Segoe UI',Helvetica,Arial,'DejaVu Sans',sans-serif";

/**
 * A still picture of a figure, for places where no script runs. Transparent background; markers on nearly the same
 * place are drawn once, so that a picture of any number of stars stays near 100 kB.
 * @param figure  any figure made by the builders of this room
 * @param options size and background, see StaticFigureOptions
 * @returns an SVG document
 * @throws TypeError for an unknown option or a kind of trace the builders do not make
 * @throws RangeError for a size out of range
 * @example staticFigure(hrDiagram(stars), { width: 900, theme: 'light' }) // => '<svg xmlns=...'
 */
export function staticFigure(
  figure: { readonly data: readonly object[]; readonly layout: object },
  options: StaticFigureOptions = {},
): string {
  checkOptions('staticFigure', options, ['width', 'height', 'theme']);
  const data = figure.data as readonly TraceSpec[];
  const layout = figure.layout as LayoutSpec;
  const { width = 760, height = layout.height ?? 560, theme = 'either' } = options;
  checkRange('staticFigure', 'width', width, 200, 4000, 'px');
  checkRange('staticFigure', 'height', height, 150, 4000, 'px');
  checkChoice('staticFigure', 'theme', theme, ['light', 'dark', 'either']);
  const ink = INKS[theme];
  const plans = planAxes(data, layout);
  const entries = legendEntries(data, layout);
  const legendTitle = layout.legend?.title?.text ?? '';
  // A legend that would leave the plot too narrow goes beneath it.
  const below = layout.legend?.orientation === 'h' || legendSize(entries, legendTitle).width > width * 0.35;
  const rows = below ? legendRows(entries, width - 2 * EDGE - 50) : [];
  const column = below ? { width: 0, height: 0 } : legendSize(entries, legendTitle);
  const title = layout.title?.text ?? '';
  const rooms = outerRooms(plans);
  const area: Area = {
    left: EDGE + rooms.left,
    top: EDGE + rooms.top + (title === '' ? 0 : TITLE_SIZE * 1.7),
    width: width - 2 * EDGE - rooms.left - rooms.right - (column.width > 0 ? column.width + 14 : 0),
    height:
      height -
      2 * EDGE -
      rooms.top -
      rooms.bottom -
      (title === '' ? 0 : TITLE_SIZE * 1.7) -
      rows.length * legendRowHeight(),
  };
  const axes = placeAxes(plans, area);
  const all = [...axes.values()];
  const across = (axis: PlacedAxis): PlacedAxis =>
    axes.get(axis.anchor) ?? (axes.get(axis.horizontal ? 'y' : 'x') as PlacedAxis);
  const shapes = (where: 'below' | 'above') =>
    (layout.shapes ?? [])
      .filter((shape) => (shape.layer ?? 'above') === where)
      .map((shape) => drawShape(shape, axes, area, ink));
  const points = data.reduce((sum, trace) => sum + (trace.x?.length ?? 0), 0);
  const budgetOf = (trace: TraceSpec) => MARKER_BUDGET * Math.max(0.05, (trace.x?.length ?? 0) / Math.max(1, points));
  const notes = (layout.annotations ?? []).map((note) => drawAnnotation(note, axes, area, ink));
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" width="${px(width)}" height="${px(height)}" viewBox="0 0 ${px(width)} ${px(height)}" font-family="${FONT}" role="img">`,
    `<title>${escapeHtml(plainText(title))}</title>`,
    title === '' ? '' : drawText(title, EDGE, EDGE + TITLE_SIZE, { size: TITLE_SIZE, color: ink.text, bold: true }),
    ...all.filter((a) => a.spec.overlaying === undefined).map((axis) => drawGrid(axis, across(axis), ink)),
    ...shapes('below'),
    ...plots(data, axes).map((plot) => inClip(plot.area, drawPlot(plot, ink, budgetOf))),
    ...shapes('above'),
    ...all.map((axis) => drawAxis(axis, across(axis), ink)),
    ...notes,
    below
      ? drawLegendRows(rows, area.left, height - EDGE - rows.length * legendRowHeight(), ink)
      : drawLegendColumn(entries, legendTitle, width - EDGE - column.width, area.top, ink),
    '</svg>',
  ].join('');
}

/** Room that the outermost axes need on each side. */
function outerRooms(plans: ReadonlyMap<string, AxisPlan>): Record<'left' | 'right' | 'top' | 'bottom', number> {
  const rooms = { left: 0, right: 0, top: 0, bottom: 0 };
  for (const plan of plans.values()) {
    const [low, high] = plans.get(plan.anchor)?.domain ?? [0, 1];
    const outermost = plan.side === 'left' || plan.side === 'bottom' ? low === 0 : high === 1;
    if (outermost) rooms[plan.side] = Math.max(rooms[plan.side], axisRoom(plan));
  }
  return rooms;
}

interface Plot {
  readonly xAxis: PlacedAxis;
  readonly yAxis: PlacedAxis;
  readonly area: Area;
  readonly traces: readonly TraceSpec[];
}

/** Traces gathered by the pair of axes they are drawn on, in their order. */
function plots(data: readonly TraceSpec[], axes: ReadonlyMap<string, PlacedAxis>): Plot[] {
  const groups = new Map<string, TraceSpec[]>();
  for (const trace of data) {
    const key = `${trace.xaxis ?? 'x'} ${trace.yaxis ?? 'y'}`;
    groups.set(key, [...(groups.get(key) ?? []), trace]);
  }
  return Array.from(groups, ([key, traces]) => {
    const [xAxis, yAxis] = key.split(' ').map((id) => axes.get(id));
    if (!xAxis || !yAxis)
      throw new TypeError(`staticFigure: a trace names the axes ${key}, which the layout does not have.`);
    const area = {
      left: Math.min(xAxis.start, xAxis.end),
      top: Math.min(yAxis.start, yAxis.end),
      width: Math.abs(xAxis.end - xAxis.start),
      height: Math.abs(yAxis.end - yAxis.start),
    };
    return { xAxis, yAxis, area, traces };
  });
}

function drawPlot(plot: Plot, ink: Ink, budgetOf: (trace: TraceSpec) => number): string {
  return plot.traces
    .map((trace, i) => drawTrace(trace, plot.traces[i - 1], plot.xAxis, plot.yAxis, ink, budgetOf(trace)))
    .join('');
}

/** An inner document of the plot's size cuts off what lies outside, without ids that could clash between pictures. */
function inClip(area: Area, body: string): string {
  if (body === '') return '';
  const box = `${px(area.left)} ${px(area.top)} ${px(area.width)} ${px(area.height)}`;
  return `<svg x="${px(area.left)}" y="${px(area.top)}" width="${px(area.width)}" height="${px(area.height)}" viewBox="${box}" overflow="hidden">${body}</svg>`;
}
