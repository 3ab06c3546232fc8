import { checkOptions, describe } from '../../quantity/options';
import type { Cut } from './cut';
import { withoutValueNote } from './without-value';

/** A polygon in the plane of two columns. */
export interface PolygonOptions {
  /** Column or role along x. */
  readonly x: string;
  /** Column or role along y. */
  readonly y: string;
  /** Corners [x, y] in order, at least three; the last is joined to the first. */
  readonly vertices: readonly (readonly [number, number])[];
}

/**
 * Keeps stars inside a polygon drawn in any two columns, such as colour and magnitude or the two proper motions. A point is
 * inside when a ray from it crosses the outline an odd number of times; plane geometry, so not for positions near a pole
 * or across 0h. Rows without either value fail.
 * @throws TypeError when there are fewer than three corners or one is not a pair of finite numbers
 * @example field.keep(insidePolygon({ x: 'properMotionRa', y: 'properMotionDec', vertices: [[-38, -15], [-33, -15], [-35, -10]] }))
 */
export function insidePolygon(options: PolygonOptions): Cut {
  const caller = 'insidePolygon';
  checkOptions(caller, options, ['x', 'y', 'vertices']);
  const { x, y, vertices } = options;
  if (typeof x !== 'string' || typeof y !== 'string') {
    throw new TypeError(`${caller}: x and y must be names of columns or roles, got ${describe(x)} and ${describe(y)}.`);
  }
  if (!Array.isArray(vertices) || vertices.length < 3) {
    throw new TypeError(`${caller}: vertices must be at least three [x, y] pairs, got ${describe(vertices)}.`);
  }
  vertices.forEach((v, k) => {
    if (!Array.isArray(v) || v.length !== 2 || !v.every((c) => Number.isFinite(c))) {
      throw new TypeError(`${caller}: vertices[${k}] must be a pair of finite numbers, got ${JSON.stringify(v)}.`);
    }
  });
  const xs = Float64Array.from(vertices, (v) => v[0]);
  const ys = Float64Array.from(vertices, (v) => v[1]);
  return Object.freeze({
    description: `${x}, ${y} inside a polygon of ${vertices.length} corners: ${vertices.map((v) => `(${v[0]}, ${v[1]})`).join(' ')}`,
    apply(catalogue) {
      const px = catalogue.numbers(x);
      const py = catalogue.numbers(y);
      const mask = new Uint8Array(px.length);
      let without = 0;
      for (let i = 0; i < mask.length; i++) {
        if (Number.isNaN(px[i]) || Number.isNaN(py[i])) without++;
        else if (isInside(px[i], py[i], xs, ys)) mask[i] = 1;
      }
      return { mask, note: withoutValueNote(without, `${x} or ${y}`) };
    },
  } satisfies Cut);
}

function isInside(x: number, y: number, xs: Float64Array, ys: Float64Array): boolean {
  let inside = false;
  for (let k = 0, l = xs.length - 1; k < xs.length; l = k++) {
    if (ys[k] > y !== ys[l] > y && x < xs[k] + ((y - ys[k]) / (ys[l] - ys[k])) * (xs[l] - xs[k])) inside = !inside;
  }
  return inside;
}
