import { GUIDE } from './theme';

/** An axis as Plotly reads it. */
export type AxisObject = Readonly<Record<string, unknown>>;

const GRID = 'rgba(128,128,128,0.18)';
const LINE = 'rgba(128,128,128,0.7)';
/** What every axis shares. */
export const COMMON_AXIS: AxisObject = {
  gridcolor: GRID,
  linecolor: LINE,
  tickcolor: LINE,
  zeroline: false,
  showline: true,
  ticks: 'outside',
  ticklen: 5,
  automargin: true,
};

/**
 * A linear axis.
 * @param range from left to right or from bottom to top: [high, low] runs backward
 */
export function linearAxis(title: string, range: readonly [number, number], more: AxisObject = {}): AxisObject {
  const places = 4 - Math.floor(Math.log10(Math.abs(range[1] - range[0]) || 1));
  const round = (v: number) => Number(v.toFixed(Math.min(12, Math.max(0, places))));
  return {
    ...COMMON_AXIS,
    title: { text: title, standoff: 10 },
    type: 'linear',
    range: [round(range[0]), round(range[1])],
    ...more,
  };
}

/**
 * A logarithmic axis with labels in full (20,000) or, where the range spans many decades, as powers of ten.
 * @param range data values from left to right or from bottom to top
 */
export function logAxis(title: string, range: readonly [number, number], more: AxisObject = {}): AxisObject {
  const ends = [Math.log10(range[0]), Math.log10(range[1])].map((v) => Math.round(v * 1e4) / 1e4);
  const values = logTicks(Math.min(...range), Math.max(...range));
  return {
    ...COMMON_AXIS,
    title: { text: title, standoff: 10 },
    type: 'log',
    range: ends,
    tickmode: 'array',
    tickvals: values,
    ticktext: values.map(logLabel),
    ...more,
  };
}

const TICK_SETS: readonly (readonly number[])[] = [
  [1, 1.5, 2, 2.5, 3, 3.5, 4, 4.5, 5, 5.5, 6, 6.5, 7, 7.5, 8, 8.5, 9, 9.5],
  [1, 1.5, 2, 2.5, 3, 4, 5, 6, 7, 8, 9],
  [1, 1.5, 2, 3, 4, 5, 7],
  [1, 1.5, 2, 3, 5, 7],
  [1, 2, 5],
  [1, 3],
  [1],
];

/** Round values within a range on a logarithmic scale, at most 9 unless there are more decades; powers of ten beyond 4 decades. */
export function logTicks(low: number, high: number): number[] {
  const first = Math.floor(Math.log10(low));
  const last = Math.floor(Math.log10(high));
  const sets = Math.log10(high / low) > 4 ? TICK_SETS.slice(-1) : TICK_SETS;
  for (const digits of sets) {
    const values: number[] = [];
    for (let e = first; e <= last; e++) for (const d of digits) values.push(Number(`${d}e${e}`));
    const inside = values.filter((v) => v >= low * (1 - 1e-9) && v <= high * (1 + 1e-9));
    const room = Math.log10(high / low) / 11;
    const apart = inside.every((v, i) => i === 0 || Math.log10(v / inside[i - 1]) >= room);
    if ((inside.length <= 9 && apart) || digits.length === 1) return inside;
  }
  return [];
}

/** 20000 as 20,000; powers of ten from 10^5 up and below 0.001 with a raised exponent. */
export function logLabel(value: number): string {
  const exponent = Math.log10(value);
  if (Number.isInteger(Math.round(exponent * 1e9) / 1e9) && (exponent >= 5 || exponent < -2.5)) {
    return `10<sup>${String(Math.round(exponent)).replace('-', '\u2212')}</sup>`;
  }
  return value >= 10000 ? String(value).replace(/\B(?=(\d{3})+$)/g, ',') : String(value);
}

/** What every figure's layout shares: transparent, sized by its box, legend at the right. */
export function baseLayout(title: string, height = 560): Readonly<Record<string, unknown>> {
  return {
    title: { text: title, x: 0, xref: 'paper', xanchor: 'left', font: { size: 16 } },
    height,
    autosize: true,
    paper_bgcolor: 'rgba(0,0,0,0)',
    plot_bgcolor: 'rgba(0,0,0,0)',
    // A grey that reads on white and on black, for a page that does not set its own ink.
    font: { size: 13, color: '#767676' },
    hovermode: 'closest',
    margin: { l: 70, r: 20, t: 60, b: 60 },
    legend: { x: 1.02, y: 1, xanchor: 'left', yanchor: 'top' },
  };
}

/** A range widened by a part of its length at each end; a range of no length becomes 1 long. */
export function padded(range: readonly [number, number], part = 0.05): [number, number] {
  const pad = range[0] === range[1] ? 0.5 : (range[1] - range[0]) * part;
  return [range[0] - pad, range[1] + pad];
}

/** A vertical or horizontal mark across the plot. */
export function guideLine(direction: 'x' | 'y', value: number, dash = 'dash'): Readonly<Record<string, unknown>> {
  const line = { color: GUIDE, width: 1.2, dash };
  return direction === 'x'
    ? { type: 'line', x0: value, x1: value, y0: 0, y1: 1, yref: 'paper', line, layer: 'below' }
    : { type: 'line', y0: value, y1: value, x0: 0, x1: 1, xref: 'paper', line, layer: 'below' };
}
