/**
 * Numbers as a figure carries them: a fixed number of decimals keeps a notebook small, and missing is null, as JSON wants.
 * @param values   shape (n); NaN and infinities become null
 * @param decimals digits after the point
 */
export function rounded(values: ArrayLike<number>, decimals: number): (number | null)[] {
  const scale = 10 ** decimals;
  // Adding 0 makes -0, which JSON does not know, into 0.
  return Array.from(values, (v) => (Number.isFinite(v) ? Math.round(v * scale) / scale + 0 : null));
}

/** As `rounded`, but with a number of significant digits: for values that span decades. */
export function significant(values: ArrayLike<number>, digits: number): (number | null)[] {
  return Array.from(values, (v) => (Number.isFinite(v) ? Number(v.toPrecision(digits)) : null));
}

/** Smallest and largest finite value; null where there is none. */
export function finiteExtent(...lists: readonly ArrayLike<number | null>[]): [number, number] | null {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const list of lists) {
    for (let i = 0; i < list.length; i++) {
      const v = list[i];
      if (v === null || !Number.isFinite(v)) continue;
      if (v < low) low = v;
      if (v > high) high = v;
    }
  }
  return low <= high ? [low, high] : null;
}

/** The values at some rows. */
export function pick(values: ArrayLike<number>, rows: ArrayLike<number>): Float64Array {
  const out = new Float64Array(rows.length);
  for (let i = 0; i < rows.length; i++) out[i] = values[rows[i]];
  return out;
}
