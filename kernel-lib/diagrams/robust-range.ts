import { sortedQuantile } from '../quantity/measured';

/** Range that holds all but a part of the values at each end. null when there is no finite value. */
export function robustRange(
  values: ArrayLike<number>,
  rows: ArrayLike<number> | null,
  part: number,
): [number, number] | null {
  const kept = rows === null ? Float64Array.from(values) : Float64Array.from(rows, (r) => values[r]);
  const sorted = kept.filter(Number.isFinite).sort();
  return sorted.length === 0 ? null : [sortedQuantile(sorted, part), sortedQuantile(sorted, 1 - part)];
}
