import type { Measured } from '../quantity/measured';
import type { FigureTrace } from './figure';
import { rounded, significant } from './rounding';
import { CURVE_COLORS, CURVE_DASHES } from './theme';

/** A value, with its interval if it has one. */
export type NumberOrMeasured = number | Measured;

/** The value itself. */
export function centralValue(quantity: NumberOrMeasured): number {
  return typeof quantity === 'number' ? quantity : quantity.value;
}

/** Lower and upper half of the interval; null for a plain number or an interval of no length. */
export function halvesOf(quantity: NumberOrMeasured): { minus: number; plus: number } | null {
  if (typeof quantity === 'number') return null;
  const minus = quantity.value - quantity.lower;
  const plus = quantity.upper - quantity.value;
  return minus > 0 || plus > 0 ? { minus, plus } : null;
}

/** A curve over the stars: the k-th of several, told apart by colour and by pattern. No hover box, which would hide those of the stars. */
export function curveTrace(
  name: string,
  x: (number | null)[],
  y: (number | null)[],
  k: number,
  more: Readonly<Record<string, unknown>> = {},
): FigureTrace {
  const line = { color: CURVE_COLORS[k % CURVE_COLORS.length], width: 2, dash: CURVE_DASHES[k % CURVE_DASHES.length] };
  return { type: 'scatter', mode: 'lines', name, x, y, line, hoverinfo: 'skip', ...more };
}

/** One marked place with the error bars it has. */
export function markTrace(
  name: string,
  x: NumberOrMeasured,
  y: NumberOrMeasured,
  color: string,
  symbol: string,
  unit: { readonly x: string; readonly y: string },
): FigureTrace {
  const bars = (quantity: NumberOrMeasured) => {
    const halves = halvesOf(quantity);
    if (halves === null) return undefined;
    const [array, arrayminus] = [significant([halves.plus], 4), significant([halves.minus], 4)];
    return { type: 'data', symmetric: false, array, arrayminus, color, thickness: 1.5, width: 4 };
  };
  const [ex, ey] = [bars(x), bars(y)];
  return {
    type: 'scatter',
    mode: 'markers',
    name,
    x: rounded([centralValue(x)], 6),
    y: rounded([centralValue(y)], 6),
    ...(ex ? { error_x: ex } : {}),
    ...(ey ? { error_y: ey } : {}),
    marker: { color, symbol, size: 12 },
    hovertemplate: `${name}<br>${unit.x}: %{x}<br>${unit.y}: %{y}<extra></extra>`,
  };
}

/** A curve's coordinates with a gap before each place at which a new piece starts. */
export function brokenAt(values: (number | null)[], breaks: ArrayLike<number> | undefined): (number | null)[] {
  const starts = new Set(Array.from(breaks ?? []));
  return values.flatMap((v, i) => (i > 0 && starts.has(i) ? [null, v] : [v]));
}
