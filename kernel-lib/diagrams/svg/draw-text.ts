import { escapeHtml } from '../../quantity/present';
import { textRuns } from '../plot-text';

/** How a piece of text is set. */
export interface TextStyle {
  readonly size: number;
  readonly color: string;
  readonly anchor?: 'start' | 'middle' | 'end';
  /** Degrees clockwise about the given point. */
  readonly angle?: number;
  readonly bold?: boolean;
}

const LINE_HEIGHT = 1.25;
const NARROW = new Set("iljtfrI.,:;'|!()[]/ ");
const WIDE = new Set('mwMW@%\u2609\u00b1');

/** Estimated width in px of the widest line of figure text; a pure room cannot ask a browser to measure. */
export function textWidth(markup: string, size: number): number {
  let widest = 0;
  let width = 0;
  for (const run of textRuns(markup)) {
    if (run.newLine) width = 0;
    const scale = size * (run.shift === 0 ? 1 : 0.7) * (run.bold ? 1.06 : 1);
    for (const c of run.text)
      width += scale * (NARROW.has(c) ? 0.33 : WIDE.has(c) ? 0.86 : c >= 'A' && c <= 'Z' ? 0.68 : 0.565);
    widest = Math.max(widest, width);
  }
  return widest;
}

/** Number of lines of figure text. */
export function lineCount(markup: string): number {
  return 1 + textRuns(markup).filter((run) => run.newLine).length;
}

/** Height in px of figure text. */
export function textHeight(markup: string, size: number): number {
  return lineCount(markup) * size * LINE_HEIGHT;
}

/** An SVG text element whose first line has its baseline at (x, y). Everything from the figure is escaped. */
export function drawText(markup: string, x: number, y: number, style: TextStyle): string {
  const anchor = style.anchor === undefined || style.anchor === 'start' ? '' : ` text-anchor="${style.anchor}"`;
  const turn = style.angle ? ` transform="rotate(${px(style.angle)} ${px(x)} ${px(y)})"` : '';
  const weight = style.bold ? ' font-weight="600"' : '';
  let shift = 0;
  const spans = textRuns(markup).map((run) => {
    const attributes: string[] = [];
    // Shifts are relative and last until undone, so each run states the difference from the run before.
    const wanted = run.shift === 0 ? 0 : run.shift === 1 ? -0.4 * style.size : 0.25 * style.size;
    const from = run.newLine ? 0 : shift;
    const move = wanted - from + (run.newLine ? style.size * LINE_HEIGHT - shift : 0);
    if (run.newLine) attributes.push(`x="${px(x)}"`);
    if (Math.abs(move) > 0.01) attributes.push(`dy="${px(move)}"`);
    if (run.shift !== 0) attributes.push(`font-size="${px(style.size * 0.7)}"`);
    if (run.bold) attributes.push('font-weight="600"');
    if (run.italic) attributes.push('font-style="italic"');
    shift = wanted;
    const text = escapeHtml(run.text);
    return attributes.length === 0 ? text : `<tspan ${attributes.join(' ')}>${text}</tspan>`;
  });
  return `<text x="${px(x)}" y="${px(y)}" font-size="${px(style.size)}" fill="${escapeHtml(style.color)}"${anchor}${weight}${turn}>${spans.join('')}</text>`;
}

/** A coordinate with one decimal, as short as it can be written. */
export function px(value: number): string {
  return String(Math.round(value * 10) / 10);
}
