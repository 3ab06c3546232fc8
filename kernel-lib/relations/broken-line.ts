/** A line of several straight pieces. Breaks ascend; piece k runs from breaks[k-1] to breaks[k]. */
export interface BrokenLine {
  /** shape (pieces - 1), ascending */
  readonly breaks: Float64Array;
  /** shape (pieces) */
  readonly slopes: Float64Array;
  /** shape (pieces): value of each piece extended to x = 0 */
  readonly intercepts: Float64Array;
}

/** The piece that a place lies on. */
export function pieceAt(breaks: ArrayLike<number>, x: number): number {
  let k = 0;
  while (k < breaks.length && x > breaks[k]) k++;
  return k;
}

/** Value of a broken line; each piece holds up to and including its upper break. */
export function brokenLineAt(line: BrokenLine, x: number): number {
  const k = pieceAt(line.breaks, x);
  return line.intercepts[k] + line.slopes[k] * x;
}

/**
 * Intercepts that join the pieces at the breaks, given the value at a pivot.
 * @param pivot  x where the line has the value `height`; it may lie on any piece
 * @param out    shape (slopes.length)
 */
export function joinPieces(
  breaks: ArrayLike<number>,
  slopes: ArrayLike<number>,
  pivot: number,
  height: number,
  out: Float64Array,
): void {
  const home = pieceAt(breaks, pivot);
  out[home] = height - slopes[home] * pivot;
  for (let k = home + 1; k < slopes.length; k++) out[k] = out[k - 1] + (slopes[k - 1] - slopes[k]) * breaks[k - 1];
  for (let k = home - 1; k >= 0; k--) out[k] = out[k + 1] + (slopes[k + 1] - slopes[k]) * breaks[k];
}
