import type { PlacedAxis } from './axis-geometry';
import { drawText, px, textHeight, textWidth } from './draw-text';
import type { Ink } from './ink';

export const TICK_SIZE = 12;
export const AXIS_TITLE_SIZE = 13;
const TICK_LENGTH = 5;
const GAP = 4;
/** Room for what hangs beneath the line of a title, subscripts included. */
const DESCENT = 6;

/** Room in px that labels and title of an axis take outside the plot. */
export function axisRoom(axis: { horizontal: boolean; ticks: PlacedAxis['ticks']; spec: PlacedAxis['spec'] }): number {
  if (axis.spec.visible === false) return 0;
  const title = axis.spec.title?.text ?? '';
  const titleRoom = title === '' ? 0 : textHeight(title, AXIS_TITLE_SIZE) + DESCENT;
  return tickRoom(axis) + titleRoom;
}

function tickRoom(axis: { horizontal: boolean; ticks: PlacedAxis['ticks']; spec: PlacedAxis['spec'] }): number {
  if (axis.ticks.length === 0 || axis.spec.showticklabels === false) return GAP;
  const size = axis.spec.tickfont?.size ?? TICK_SIZE;
  const widest = axis.horizontal ? size * 1.25 : Math.max(...axis.ticks.map((t) => textWidth(t.label, size)));
  return TICK_LENGTH + GAP + widest;
}

/** Grid lines across the axis this one is anchored to. */
export function drawGrid(axis: PlacedAxis, across: PlacedAxis, ink: Ink): string {
  if (axis.spec.showgrid === false || axis.spec.visible === false) return '';
  const low = Math.min(across.start, across.end);
  const length = Math.abs(across.end - across.start);
  const path = axis.ticks
    .map((t) => axis.toPx(t.value))
    .map((at) => (axis.horizontal ? `M${px(at)},${px(low)}v${px(length)}` : `M${px(low)},${px(at)}h${px(length)}`))
    .join('');
  return path === '' ? '' : `<path d="${path}" stroke="${ink.grid}" fill="none"/>`;
}

/** Axis line, ticks, labels and title, at the edge of the axis it is anchored to. */
export function drawAxis(axis: PlacedAxis, across: PlacedAxis, ink: Ink): string {
  if (axis.spec.visible === false) return '';
  const outward = axis.side === 'top' || axis.side === 'left' ? -1 : 1;
  const edges = [across.start, across.end];
  const edge = outward > 0 ? Math.max(...edges) : Math.min(...edges);
  const parts = [drawLine(axis, edge, outward, ink)];
  const size = axis.spec.tickfont?.size ?? TICK_SIZE;
  if (axis.spec.showticklabels !== false) {
    for (const tick of spacedTicks(axis, size)) {
      const at = axis.toPx(tick.value);
      const offset = outward * (TICK_LENGTH + GAP);
      parts.push(
        axis.horizontal
          ? drawText(tick.label, at, edge + offset + (outward > 0 ? size * 0.85 : 0), {
              size,
              color: axis.spec.tickfont?.color ?? ink.text,
              anchor: 'middle',
            })
          : drawText(tick.label, edge + offset, at + size * 0.35, {
              size,
              color: axis.spec.tickfont?.color ?? ink.text,
              anchor: outward > 0 ? 'start' : 'end',
            }),
      );
    }
  }
  const title = axis.spec.title?.text ?? '';
  if (title !== '') parts.push(drawTitle(title, axis, edge, outward, ink));
  return parts.join('');
}

function drawLine(axis: PlacedAxis, edge: number, outward: number, ink: Ink): string {
  const low = Math.min(axis.start, axis.end);
  const length = Math.abs(axis.end - axis.start);
  const tick = outward * TICK_LENGTH;
  const marks =
    axis.spec.ticks === ''
      ? ''
      : axis.ticks
          .map((t) => axis.toPx(t.value))
          .map((at) => (axis.horizontal ? `M${px(at)},${px(edge)}v${px(tick)}` : `M${px(edge)},${px(at)}h${px(tick)}`))
          .join('');
  const line = axis.horizontal ? `M${px(low)},${px(edge)}h${px(length)}` : `M${px(edge)},${px(low)}v${px(length)}`;
  return `<path d="${line}${marks}" stroke="${ink.axis}" fill="none"/>`;
}

/** The ticks whose labels do not run into the label before. */
function spacedTicks(axis: PlacedAxis, size: number): PlacedAxis['ticks'] {
  let last = Number.NEGATIVE_INFINITY;
  return [...axis.ticks]
    .sort((a, b) => axis.toPx(a.value) - axis.toPx(b.value))
    .filter((tick) => {
      const half = axis.horizontal ? textWidth(tick.label, size) / 2 : size / 2;
      const at = axis.toPx(tick.value);
      if (at - half < last + 3) return false;
      last = at + half;
      return true;
    });
}

function drawTitle(title: string, axis: PlacedAxis, edge: number, outward: number, ink: Ink): string {
  const middle = (axis.start + axis.end) / 2;
  const style = { size: AXIS_TITLE_SIZE, color: ink.text, anchor: 'middle' as const };
  const past = tickRoom(axis) + 2;
  const extra = textHeight(title, AXIS_TITLE_SIZE) - textHeight('', AXIS_TITLE_SIZE);
  if (axis.horizontal) {
    const y = outward > 0 ? edge + past + AXIS_TITLE_SIZE * 0.9 : edge - past - extra - DESCENT;
    return drawText(title, middle, y, style);
  }
  // Turned text has its baseline on the right of where it starts when it reads upward.
  const x = outward > 0 ? edge + past + AXIS_TITLE_SIZE * 0.85 : edge - past - extra - DESCENT;
  return drawText(title, x, middle, { ...style, angle: -90 });
}
