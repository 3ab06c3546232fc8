import { curveLinear, curveStep, curveStepAfter, line as lineShape } from 'd3-shape';
import { escapeHtml } from '../../quantity/present';
import type { PlacedAxis } from './axis-geometry';
import { drawText, px } from './draw-text';
import type { Ink } from './ink';
import { markerPath } from './marker-path';
import type { ErrorSpec, LineSpec, TraceSpec } from './plotly-subset';

/** A trace inside its plot area. */
export function drawTrace(
  trace: TraceSpec,
  before: TraceSpec | undefined,
  xAxis: PlacedAxis,
  yAxis: PlacedAxis,
  ink: Ink,
  budget: number,
): string {
  if (trace.visible === false || trace.visible === 'legendonly') return '';
  const place = { xAxis, yAxis, ink, budget };
  let body: string;
  if (trace.type === 'bar') body = drawBars(trace, place);
  else if (trace.type === 'heatmap') body = drawHeatmap(trace, place);
  else if (trace.type === 'scatter' || trace.type === 'scattergl') body = drawScatter(trace, before, place);
  else
    throw new TypeError(
      `staticFigure: trace type "${trace.type}" is not drawn; known: scatter, scattergl, bar, heatmap.`,
    );
  return trace.opacity === undefined || body === '' ? body : `<g opacity="${trace.opacity}">${body}</g>`;
}

interface Place {
  readonly xAxis: PlacedAxis;
  readonly yAxis: PlacedAxis;
  readonly ink: Ink;
  /** Longest marker path, characters. */
  readonly budget: number;
}

function drawScatter(trace: TraceSpec, before: TraceSpec | undefined, place: Place): string {
  const mode = trace.mode ?? 'markers';
  const xs = toPixels(trace.x, place.xAxis);
  const ys = toPixels(trace.y, place.yAxis);
  const parts: string[] = [];
  if (trace.fill && trace.fill !== 'none') parts.push(drawFill(trace, before, xs, ys, place));
  if (trace.error_x) parts.push(drawErrors(trace.error_x, trace, xs, ys, place, true));
  if (trace.error_y) parts.push(drawErrors(trace.error_y, trace, xs, ys, place, false));
  if (mode.includes('lines')) {
    const d = linePath(xs, ys, trace.line);
    if (d !== '') parts.push(`<path d="${d}" fill="none" ${strokeAttributes(trace.line, place.ink.text, 2)}/>`);
  }
  if (mode.includes('markers')) parts.push(drawMarkers(trace, xs, ys, place));
  if (mode.includes('text')) parts.push(drawLabels(trace, xs, ys, place));
  return parts.join('');
}

function toPixels(values: TraceSpec['x'], axis: PlacedAxis): Float64Array {
  return Float64Array.from(values ?? [], (v) => (v === null ? Number.NaN : axis.toPx(v)));
}

function linePath(xs: Float64Array, ys: Float64Array, spec: LineSpec | undefined): string {
  const curve = spec?.shape === 'hv' ? curveStepAfter : spec?.shape === 'hvh' ? curveStep : curveLinear;
  const draw = lineShape<number>()
    .defined((_, i) => Number.isFinite(xs[i]) && Number.isFinite(ys[i]))
    .x((_, i) => xs[i])
    .y((_, i) => ys[i])
    .curve(curve)
    .digits(1);
  return draw(Array.from(xs)) ?? '';
}

function drawFill(
  trace: TraceSpec,
  before: TraceSpec | undefined,
  xs: Float64Array,
  ys: Float64Array,
  place: Place,
): string {
  let d = linePath(xs, ys, trace.line);
  if (d === '') return '';
  if (trace.fill === 'tonexty' && before) {
    const back = linePath(
      toPixels(before.x, place.xAxis).reverse(),
      toPixels(before.y, place.yAxis).reverse(),
      before.line,
    );
    d += back.replace(/^M/, 'L');
  } else if (trace.fill === 'tozeroy') {
    const zero = px(Math.min(place.yAxis.toPx(0), Math.max(place.yAxis.start, place.yAxis.end)));
    const finite = Array.from(xs.keys()).filter((i) => Number.isFinite(xs[i]) && Number.isFinite(ys[i]));
    d += `L${px(xs[finite[finite.length - 1]])},${zero}L${px(xs[finite[0]])},${zero}`;
  }
  return `<path d="${d}Z" fill="${color(trace.fillcolor ?? '#80808040')}"/>`;
}

function drawErrors(
  spec: ErrorSpec,
  trace: TraceSpec,
  xs: Float64Array,
  ys: Float64Array,
  place: Place,
  along: boolean,
): string {
  if (spec.visible === false || !spec.array) return '';
  const axis = along ? place.xAxis : place.yAxis;
  const values = (along ? trace.x : trace.y) ?? [];
  const cap = spec.width ?? 3;
  let d = '';
  for (let i = 0; i < values.length; i++) {
    const value = values[i];
    const up = spec.array[i];
    const down = (spec.symmetric === false ? spec.arrayminus : spec.array)?.[i];
    if (value === null || up == null || down == null || !Number.isFinite(xs[i]) || !Number.isFinite(ys[i])) continue;
    const high = axis.toPx(value + up);
    const low = axis.toPx(value - down);
    // A bar that reaches past zero on a logarithmic axis runs to the axis's end.
    const end = Number.isFinite(low) ? low : axis.start;
    d += along
      ? `M${px(end)},${px(ys[i] - cap)}v${2 * cap}m0,-${cap}H${px(high)}m0,-${cap}v${2 * cap}`
      : `M${px(xs[i] - cap)},${px(end)}h${2 * cap}m-${cap},0V${px(high)}m-${cap},0h${2 * cap}`;
  }
  if (d === '') return '';
  const ink = spec.color ?? trace.marker?.color ?? place.ink.text;
  return `<path d="${d}" fill="none" stroke="${color(ink)}" stroke-width="${spec.thickness ?? 1}"/>`;
}

function drawMarkers(trace: TraceSpec, xs: Float64Array, ys: Float64Array, place: Place): string {
  const marker = trace.marker ?? {};
  const path = markerPath(xs, ys, marker.symbol ?? 'circle', marker.size ?? 6, place.budget);
  if (path.d === '') return '';
  const ink = color(marker.color ?? place.ink.text);
  const edge = marker.line?.width ? strokeAttributes(marker.line, place.ink.text, 1) : '';
  const faint = marker.opacity === undefined || marker.opacity === 1 ? '' : ` opacity="${marker.opacity}"`;
  if (path.kind === 'outline') return `<path d="${path.d}" fill="${ink}" ${edge}${faint}/>`;
  if (path.kind === 'stroke')
    return `<path d="${path.d}" fill="none" stroke="${ink}" stroke-width="${marker.line?.width ?? 1.5}" stroke-linecap="round"${faint}/>`;
  const dots = `<path d="${path.d}" fill="none" stroke="${ink}" stroke-width="${px(path.size)}" stroke-linecap="round"${faint}/>`;
  // A round stroke end has no edge of its own: a wider one beneath it shows as the edge.
  if (edge === '') return dots;
  const wide = path.size + 2 * (marker.line?.width ?? 1);
  return `<path d="${path.d}" fill="none" stroke="${color(marker.line?.color ?? place.ink.text)}" stroke-width="${px(wide)}" stroke-linecap="round"/>${dots}`;
}

function drawLabels(trace: TraceSpec, xs: Float64Array, ys: Float64Array, place: Place): string {
  const size = trace.textfont?.size ?? 12;
  const style = { size, color: trace.textfont?.color ?? place.ink.text };
  const [vertical, horizontal] = (trace.textposition ?? 'middle center').split(' ');
  const gap = (trace.mode ?? '').includes('markers') ? (trace.marker?.size ?? 6) / 2 + 3 : 3;
  const anchor = horizontal === 'left' ? 'end' : horizontal === 'right' ? 'start' : 'middle';
  const dx = horizontal === 'left' ? -gap : horizontal === 'right' ? gap : 0;
  const dy = vertical === 'top' ? -gap : vertical === 'bottom' ? gap + size * 0.8 : size * 0.35;
  return Array.from(xs, (x, i) => {
    const text = typeof trace.text === 'string' ? trace.text : (trace.text?.[i] ?? '');
    return text === '' || !Number.isFinite(x) || !Number.isFinite(ys[i])
      ? ''
      : drawText(text, x + dx, ys[i] + dy, { ...style, anchor });
  }).join('');
}

function drawBars(trace: TraceSpec, place: Place): string {
  const xs = trace.x ?? [];
  const ys = trace.y ?? [];
  const zero = place.yAxis.logarithmic ? place.yAxis.start : place.yAxis.toPx(0);
  let d = '';
  for (let i = 0; i < xs.length; i++) {
    const x = xs[i];
    const y = ys[i];
    if (x === null || y == null || y === 0) continue;
    const width = typeof trace.width === 'number' ? trace.width : (trace.width?.[i] ?? 1);
    const left = place.xAxis.toPx(x - width / 2);
    const right = place.xAxis.toPx(x + width / 2);
    const top = place.yAxis.toPx(y);
    if (![left, right, top].every(Number.isFinite)) continue;
    d += `M${px(left)},${px(zero)}V${px(top)}H${px(right)}V${px(zero)}z`;
  }
  const edge = trace.marker?.line?.width ? strokeAttributes(trace.marker.line, place.ink.text, 1) : '';
  const faint = trace.marker?.opacity === undefined ? '' : ` fill-opacity="${trace.marker.opacity}"`;
  return d === '' ? '' : `<path d="${d}" fill="${color(trace.marker?.color ?? place.ink.text)}"${faint} ${edge}/>`;
}

const HEAT_LEVELS = 16;

/** Cells as runs along rows, one path for each of 16 levels of the colour scale. */
function drawHeatmap(trace: TraceSpec, place: Place): string {
  const z = trace.z ?? [];
  const flat = z.flat().filter((v): v is number => v !== null);
  const low = trace.zmin ?? flat.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY);
  const high = trace.zmax ?? flat.reduce((a, b) => Math.max(a, b), Number.NEGATIVE_INFINITY);
  const xEdges = edgesOf(trace.x ?? []).map((v) => place.xAxis.toPx(v));
  const yEdges = edgesOf(trace.y ?? []).map((v) => place.yAxis.toPx(v));
  const paths = new Array<string>(HEAT_LEVELS).fill('');
  for (let r = 0; r < z.length; r++) {
    for (let c = 0; c < z[r].length; ) {
      const level = heatLevel(z[r][c], low, high);
      let end = c + 1;
      while (end < z[r].length && heatLevel(z[r][end], low, high) === level) end++;
      if (level >= 0)
        paths[level] += `M${px(xEdges[c])},${px(yEdges[r])}H${px(xEdges[end])}V${px(yEdges[r + 1])}H${px(xEdges[c])}z`;
      c = end;
    }
  }
  const scale = trace.colorscale ?? [];
  return paths
    .map((d, level) => (d === '' ? '' : `<path d="${d}" fill="${scaleColor(scale, level / (HEAT_LEVELS - 1))}"/>`))
    .join('');
}

function heatLevel(value: number | null, low: number, high: number): number {
  if (value === null) return -1;
  return high > low ? Math.min(HEAT_LEVELS - 1, Math.floor(((value - low) / (high - low)) * HEAT_LEVELS)) : 0;
}

function edgesOf(centres: readonly (number | null)[]): number[] {
  const at = centres.map((v) => v ?? Number.NaN);
  const step = at.length > 1 ? at[1] - at[0] : 1;
  return [...at.map((v) => v - step / 2), at[at.length - 1] + step / 2];
}

/** Colour at a fraction of a scale whose stops are written rgba(r,g,b,a). */
function scaleColor(scale: NonNullable<TraceSpec['colorscale']>, fraction: number): string {
  const above = scale.findIndex(([at]) => at >= fraction);
  if (above <= 0) return color(scale[Math.max(0, above)]?.[1] ?? '#808080');
  const [from, to] = [scale[above - 1], scale[above]];
  const part = (fraction - from[0]) / (to[0] - from[0]);
  const [a, b] = [from[1], to[1]].map((c) => (c.match(/[\d.]+/g) ?? []).map(Number));
  const mixed = a.map((v, i) => v + (b[i] - v) * part);
  return `rgba(${mixed.map((v, i) => (i < 3 ? Math.round(v) : Math.round(v * 100) / 100)).join(',')})`;
}

/** Stroke attributes of a line. */
export function strokeAttributes(spec: LineSpec | undefined, fallback: string, width: number): string {
  const w = spec?.width ?? width;
  const dash = dashArray(spec?.dash, w);
  return `stroke="${color(spec?.color ?? fallback)}" stroke-width="${w}"${dash === '' ? '' : ` stroke-dasharray="${dash}"`}`;
}

function dashArray(dash: string | undefined, width: number): string {
  if (dash === undefined || dash === 'solid') return '';
  const named: Record<string, number[]> = { dot: [1, 2], dash: [3.5, 2.5], dashdot: [4, 2, 1, 2], longdash: [6, 3] };
  const lengths =
    named[dash]?.map((n) => n * Math.max(1.2, width)) ?? dash.split(/[\s,]+/).map((n) => Number.parseFloat(n));
  return lengths.map(px).join(' ');
}

/** A colour safe inside an attribute. */
export function color(value: string): string {
  return escapeHtml(value);
}
