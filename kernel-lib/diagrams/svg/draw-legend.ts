import { drawText, textWidth } from './draw-text';
import { color, strokeAttributes } from './draw-trace';
import type { Ink } from './ink';
import { markerPath } from './marker-path';
import type { LayoutSpec, TraceSpec } from './plotly-subset';

const SIZE = 12;
const ROW = 20;
const KEY = 30;

/** Traces that a legend names, one for each group. */
export function legendEntries(data: readonly TraceSpec[], layout: LayoutSpec): TraceSpec[] {
  if (layout.showlegend === false) return [];
  const groups = new Set<string>();
  return data.filter((trace) => {
    if (trace.showlegend === false || !trace.name || trace.visible === false || trace.type === 'heatmap') return false;
    if (trace.legendgroup === undefined) return true;
    if (groups.has(trace.legendgroup) && trace.showlegend !== true) return false;
    groups.add(trace.legendgroup);
    return true;
  });
}

/** Size of a legend set in one column, px. */
export function legendSize(entries: readonly TraceSpec[], title: string): { width: number; height: number } {
  if (entries.length === 0) return { width: 0, height: 0 };
  const widest = Math.max(textWidth(title, SIZE), ...entries.map((t) => KEY + 6 + textWidth(t.name ?? '', SIZE)));
  return { width: widest + 8, height: (entries.length + (title === '' ? 0 : 1)) * ROW };
}

/** Entries broken into rows that fit a width, for a legend beneath the plot. */
export function legendRows(entries: readonly TraceSpec[], width: number): TraceSpec[][] {
  const rows: TraceSpec[][] = [];
  let left = 0;
  for (const entry of entries) {
    const needs = entryWidth(entry);
    if (rows.length === 0 || left + needs > width) {
      rows.push([]);
      left = 0;
    }
    rows[rows.length - 1].push(entry);
    left += needs;
  }
  return rows;
}

export function legendRowHeight(): number {
  return ROW;
}

function entryWidth(entry: TraceSpec): number {
  return KEY + 6 + textWidth(entry.name ?? '', SIZE) + 18;
}

/** A legend in one column whose top left corner is given. */
export function drawLegendColumn(entries: readonly TraceSpec[], title: string, x: number, y: number, ink: Ink): string {
  const head = title === '' ? '' : drawText(title, x, y + SIZE, { size: SIZE, color: ink.text, bold: true });
  const top = title === '' ? y : y + ROW;
  return head + entries.map((entry, i) => drawEntry(entry, x, top + i * ROW, ink)).join('');
}

/** A legend in rows. */
export function drawLegendRows(rows: readonly (readonly TraceSpec[])[], x: number, y: number, ink: Ink): string {
  return rows
    .map((row, r) => {
      let left = x;
      return row
        .map((entry) => {
          const drawn = drawEntry(entry, left, y + r * ROW, ink);
          left += entryWidth(entry);
          return drawn;
        })
        .join('');
    })
    .join('');
}

function drawEntry(entry: TraceSpec, x: number, y: number, ink: Ink): string {
  const middle = y + ROW / 2;
  const mode = entry.type === 'bar' ? 'bar' : (entry.mode ?? 'markers');
  const parts: string[] = [];
  if (mode === 'bar' || (entry.fill && entry.fill !== 'none')) {
    const fill = mode === 'bar' ? (entry.marker?.color ?? ink.text) : (entry.fillcolor ?? '#80808040');
    parts.push(
      `<rect x="${x + 4}" y="${middle - 6}" width="${KEY - 8}" height="12" fill="${color(fill)}" fill-opacity="${entry.marker?.opacity ?? 1}"/>`,
    );
  }
  if (mode.includes('lines'))
    parts.push(`<path d="M${x},${middle}h${KEY}" ${strokeAttributes(entry.line, ink.text, 2)}/>`);
  if (mode.includes('markers')) {
    const marker = entry.marker ?? {};
    const size = Math.max(6, Math.min(12, marker.size ?? 6));
    const path = markerPath(
      Float64Array.of(x + KEY / 2),
      Float64Array.of(middle),
      marker.symbol ?? 'circle',
      size,
      1000,
    );
    const fill = color(marker.color ?? ink.text);
    parts.push(
      path.kind === 'outline'
        ? `<path d="${path.d}" fill="${fill}"/>`
        : `<path d="${path.d}" fill="none" stroke="${fill}" stroke-width="${path.kind === 'dots' ? size : 1.5}" stroke-linecap="round"/>`,
    );
  }
  parts.push(drawText(entry.name ?? '', x + KEY + 6, middle + SIZE * 0.35, { size: SIZE, color: ink.text }));
  return parts.join('');
}
