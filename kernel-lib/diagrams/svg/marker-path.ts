import { px } from './draw-text';

/** Symbols that builders may use, as closed outlines about the pen (relative commands) or as strokes. */
interface SymbolShape {
  /** Path relative to the centre, given the half size in px. */
  outline(half: number): string;
  readonly stroked?: boolean;
}

const SYMBOLS: Readonly<Record<string, SymbolShape>> = {
  'circle-open-dot': { stroked: true, outline: (r) => `${circle(r)}m${px(r)},0h0` },
  square: { outline: (r) => polygon([-0.89, -0.89, 0.89, -0.89, 0.89, 0.89, -0.89, 0.89], r) },
  diamond: { outline: (r) => polygon([0, -1.3, 1.3, 0, 0, 1.3, -1.3, 0], r) },
  'triangle-up': { outline: (r) => polygon([0, -1.25, 1.15, 0.75, -1.15, 0.75], r) },
  'triangle-down': { outline: (r) => polygon([0, 1.25, 1.15, -0.75, -1.15, -0.75], r) },
  star: { outline: (r) => polygon(starPoints(5, 1.4, 0.58), r) },
  cross: {
    outline: (r) =>
      polygon(
        [
          -0.4, -1.2, 0.4, -1.2, 0.4, -0.4, 1.2, -0.4, 1.2, 0.4, 0.4, 0.4, 0.4, 1.2, -0.4, 1.2, -0.4, 0.4, -1.2, 0.4,
          -1.2, -0.4, -0.4, -0.4,
        ],
        r,
      ),
  },
  'x-thin': {
    stroked: true,
    outline: (r) => `m${px(-r)},${px(-r)}l${px(2 * r)},${px(2 * r)}m0,${px(-2 * r)}l${px(-2 * r)},${px(2 * r)}`,
  },
};

function starPoints(arms: number, outer: number, inner: number): number[] {
  return Array.from({ length: 2 * arms }, (_, i) => {
    const angle = (Math.PI * i) / arms;
    const radius = i % 2 === 0 ? outer : inner;
    return [radius * Math.sin(angle), -radius * Math.cos(angle)];
  }).flat();
}

/** Closed relative path through corner points given in units of the half size. */
function polygon(corners: readonly number[], half: number): string {
  // Each step is the difference of two rounded places, so that the outline closes however small it is.
  const at = corners.map((c) => Math.round(c * half * 10) / 10);
  let path = `m${px(at[0])},${px(at[1])}l`;
  for (let i = 2; i < at.length; i += 2) {
    const step = `${px(at[i] - at[i - 2])},${px(at[i + 1] - at[i - 1])}`;
    path += i > 2 ? ` ${step}` : step;
  }
  return `${path}z`;
}

/** How the markers of a trace are drawn: one path, and the attributes that go with it. */
export interface MarkerPath {
  readonly d: string;
  readonly kind: 'dots' | 'outline' | 'stroke';
  /** Stroke width for dots. */
  readonly size: number;
  /** Points drawn after thinning. */
  readonly drawn: number;
}

/**
 * All markers of a trace as one path. Circles are round ends of strokes of no length, which costs a few characters each.
 * Markers that fall on nearly the same place are drawn once; the places grow coarser until the path fits its budget.
 * @param xs px, shape (n); NaN is left out
 * @param ys px, shape (n)
 * @param budget longest path, characters
 */
export function markerPath(
  xs: Float64Array,
  ys: Float64Array,
  symbol: string,
  size: number,
  budget: number,
): MarkerPath {
  const open = symbol.endsWith('-open');
  const name = open ? symbol.slice(0, -5) : symbol;
  const shape = SYMBOLS[name];
  const dots = shape === undefined && !open;
  const outline = dots ? 'h0' : shape === undefined ? circle(size / 2) : shape.outline(size / 2);
  const each = dots ? 9 : outline.length + 11;
  const kind = dots ? 'dots' : open || shape?.stroked ? 'stroke' : 'outline';
  let places: Uint32Array = Uint32Array.from(xs.keys());
  for (let cell = 0.1; ; cell *= 1.6) {
    places = distinctPlaces(xs, ys, places, cell);
    if (places.length * each > budget && cell < size) continue;
    const step = Math.max(1, Math.ceil((places.length * each) / budget));
    let d = '';
    let lastX = 0;
    let lastY = 0;
    let drawn = 0;
    for (let k = 0; k < places.length; k += step) {
      const x = Math.round(xs[places[k]] * 10) / 10;
      const y = Math.round(ys[places[k]] * 10) / 10;
      d += dots && d !== '' ? `m${px(x - lastX)} ${px(y - lastY)}h0` : `M${px(x)},${px(y)}${outline}`;
      lastX = x;
      lastY = y;
      drawn++;
    }
    return { d, kind, size, drawn };
  }
}

function circle(half: number): string {
  const r = px(half);
  return `m-${r},0a${r},${r} 0 1 0 ${px(2 * half)},0a${r},${r} 0 1 0 -${px(2 * half)},0`;
}

/** Indices of the first of some points in every occupied cell of a grid, in order of rows so that steps between them are short. */
function distinctPlaces(xs: Float64Array, ys: Float64Array, among: Uint32Array, cell: number): Uint32Array {
  const seen = new Map<number, number>();
  for (const i of among) {
    if (!Number.isFinite(xs[i]) || !Number.isFinite(ys[i])) continue;
    const key = Math.round(ys[i] / cell) * 1e6 + Math.round(xs[i] / cell);
    if (!seen.has(key)) seen.set(key, i);
  }
  const places = Uint32Array.from(seen.values());
  if (places.length > 500) places.sort((a, b) => ys[a] - ys[b] || xs[a] - xs[b]);
  return places;
}
