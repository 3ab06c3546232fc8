/**
 * Colours of figures, Coeval's own. Each has a contrast of at least 2.9 to 1 against white and against near black, so the same
 * figure reads in a light and in a dark page; a test holds that any two stay apart with each kind of colour blindness.
 * Meaning never hangs on colour alone: symbols and line patterns differ too.
 */
export const PALETTE = {
  azure: '#246ee5',
  amber: '#d17918',
  teal: '#52a586',
  crimson: '#ca2c52',
  orchid: '#c374d3',
  slate: '#7d8590',
} as const;

/** Lines and labels that are not data: zero-age line, equal radii, marks. */
export const GUIDE = '#858c95';

/** Colours for a series of curves, in order. */
export const CURVE_COLORS: readonly string[] = [
  PALETTE.crimson,
  PALETTE.teal,
  PALETTE.amber,
  PALETTE.orchid,
  PALETTE.azure,
];

/** Line patterns for a series of curves, in order, so that curves differ without colour. */
export const CURVE_DASHES: readonly string[] = ['solid', 'dash', 'dashdot', 'dot', 'longdash'];

/** Above this many points a trace is drawn by WebGL; a page allows few such figures. */
const WEBGL_POINTS = 5000;

/** Trace type for a number of points. */
export function scatterType(points: number): 'scatter' | 'scattergl' {
  return points > WEBGL_POINTS ? 'scattergl' : 'scatter';
}

/**
 * Traces of one figure drawn by one means: Plotly lays WebGL over everything else, so where one trace needs it, all markers
 * and lines use it, or marks would vanish beneath the stars.
 */
export function drawnAlike<T extends { readonly type: string; readonly [key: string]: unknown }>(
  data: readonly T[],
): T[] {
  if (!data.some((trace) => trace.type === 'scattergl')) return [...data];
  return data.map((trace) => (trace.type === 'scatter' ? { ...trace, type: 'scattergl' } : trace));
}

/** Marker size in px that suits a number of points: 7 for a few hundred, down to 3 for tens of thousands. */
export function markerSize(points: number): number {
  if (points <= 300) return 7;
  if (points <= 1500) return 5.5;
  return points <= 5000 ? 4.5 : 3;
}

/** A colour with an opacity, as rgba. */
export function translucent(hex: string, opacity: number): string {
  const part = (i: number) => Number.parseInt(hex.slice(i, i + 2), 16);
  return `rgba(${part(1)},${part(3)},${part(5)},${opacity})`;
}
