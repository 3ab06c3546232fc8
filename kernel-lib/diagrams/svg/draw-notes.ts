import type { Area, PlacedAxis } from './axis-geometry';
import { drawText, px, textHeight } from './draw-text';
import { color, strokeAttributes } from './draw-trace';
import type { Ink } from './ink';
import type { AnnotationSpec, ShapeSpec } from './plotly-subset';

type Axes = ReadonlyMap<string, PlacedAxis>;

/** A line or a rectangle. It is cut off at the plot's edge along the axes it is given in. */
export function drawShape(shape: ShapeSpec, axes: Axes, area: Area, ink: Ink): string {
  const at = (ref: string | undefined, value: number, fallback: string): number => {
    const axis = axes.get(ref ?? fallback);
    const [low, high] = axis ? [Math.min(axis.start, axis.end), Math.max(axis.start, axis.end)] : [0, 0];
    return axis ? Math.min(high, Math.max(low, axis.toPx(value))) : paper(fallback, value, area);
  };
  const [x0, x1] = [at(shape.xref, shape.x0, 'x'), at(shape.xref, shape.x1, 'x')];
  const [y0, y1] = [at(shape.yref, shape.y0, 'y'), at(shape.yref, shape.y1, 'y')];
  if (![x0, x1, y0, y1].every(Number.isFinite)) return '';
  const faint = shape.opacity === undefined ? '' : ` opacity="${shape.opacity}"`;
  if (shape.type === 'line') {
    const outside =
      axes.get(shape.xref ?? 'x') !== undefined &&
      shape.x0 === shape.x1 &&
      isOutside(shape.x0, axes.get(shape.xref ?? 'x'));
    return outside
      ? ''
      : `<path d="M${px(x0)},${px(y0)}L${px(x1)},${px(y1)}" ${strokeAttributes(shape.line, ink.axis, 1)}${faint}/>`;
  }
  const edge = shape.line?.width ? strokeAttributes(shape.line, ink.axis, 1) : '';
  const box = `x="${px(Math.min(x0, x1))}" y="${px(Math.min(y0, y1))}" width="${px(Math.abs(x1 - x0))}" height="${px(Math.abs(y1 - y0))}"`;
  return `<rect ${box} fill="${color(shape.fillcolor ?? 'none')}" ${edge}${faint}/>`;
}

function isOutside(value: number, axis: PlacedAxis | undefined): boolean {
  if (!axis) return false;
  const at = axis.toPx(value);
  return !(at >= Math.min(axis.start, axis.end) - 0.5 && at <= Math.max(axis.start, axis.end) + 0.5);
}

function paper(direction: string, value: number, area: Area): number {
  return direction === 'x' ? area.left + value * area.width : area.top + (1 - value) * area.height;
}

/** A note at a place of the plot, with a pointer if asked for. Left out when its place lies outside the axes. */
export function drawAnnotation(note: AnnotationSpec, axes: Axes, area: Area, ink: Ink): string {
  const at = (ref: string | undefined, value: number, fallback: string): number => {
    const axis = axes.get(ref ?? fallback);
    if (!axis) return paper(fallback, value, area);
    const data = axis.logarithmic ? 10 ** value : value;
    return isOutside(data, axis) ? Number.NaN : axis.toPx(data);
  };
  const tipX = at(note.xref, note.x, 'x');
  const tipY = at(note.yref, note.y, 'y');
  if (!Number.isFinite(tipX) || !Number.isFinite(tipY)) return '';
  const arrow = note.showarrow === true;
  const x = tipX + (arrow ? (note.ax ?? 0) : 0) + (note.xshift ?? 0);
  const y = tipY + (arrow ? (note.ay ?? -30) : 0) - (note.yshift ?? 0);
  const size = note.font?.size ?? 12;
  const height = textHeight(note.text, size);
  const anchor = note.xanchor === 'left' ? 'start' : note.xanchor === 'right' ? 'end' : 'middle';
  const top = note.yanchor === 'top' ? y : note.yanchor === 'bottom' ? y - height : y - height / 2;
  const text = drawText(note.text, x, top + size, {
    size,
    color: note.font?.color ?? ink.text,
    anchor,
    angle: note.textangle,
  });
  const pointer = arrow
    ? `<path d="M${px(x)},${px(y < tipY ? y + height / 2 : y - height / 2)}L${px(tipX)},${px(tipY)}" stroke="${ink.axis}" fill="none"/>`
    : '';
  return pointer + text;
}
