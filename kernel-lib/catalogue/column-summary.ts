import type { ColumnValues } from './columns';

/** What a column looks like at a glance. */
export interface ColumnSummary {
  /** Extremes of the whole column; NaN without values or in text. */
  readonly min: number;
  readonly max: number;
  /** Bounds of the middle 98 % of a sample of evenly spaced rows. */
  readonly low: number;
  readonly high: number;
  /** Counts in equal bins from low to high; empty in text or where all values are equal. */
  readonly counts: readonly number[];
  /** Words of a text column, most frequent first, with their number in the sample. */
  readonly words: readonly (readonly [string, number])[];
}

/** Rows looked at a column: enough for a histogram a finger wide, the same effort for any catalogue. */
const SAMPLE = 20_000;
const BINS = 24;

/** Range and histogram of a column, in one pass and from a sample. */
export function summariseColumn(values: ColumnValues): ColumnSummary {
  return values instanceof Float64Array ? summariseNumbers(values) : summariseWords(values);
}

function summariseNumbers(values: Float64Array): ColumnSummary {
  let min = Number.POSITIVE_INFINITY;
  let max = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < values.length; i++) {
    if (values[i] < min) min = values[i];
    if (values[i] > max) max = values[i];
  }
  const sample = sampled(values.length)
    .map((i) => values[i])
    .filter(Number.isFinite);
  if (sample.length === 0) {
    const none = min > max;
    return {
      min: none ? Number.NaN : min,
      max: none ? Number.NaN : max,
      low: Number.NaN,
      high: Number.NaN,
      counts: [],
      words: [],
    };
  }
  const sorted = Float64Array.from(sample).sort();
  const low = sorted[Math.floor(0.01 * (sorted.length - 1))];
  const high = sorted[Math.ceil(0.99 * (sorted.length - 1))];
  const counts = high > low ? new Array<number>(BINS).fill(0) : [];
  if (counts.length > 0) {
    for (const v of sorted) {
      if (v >= low && v <= high) counts[Math.min(BINS - 1, Math.floor(((v - low) / (high - low)) * BINS))]++;
    }
  }
  return { min, max, low, high, counts, words: [] };
}

function summariseWords(values: readonly (string | boolean | null)[]): ColumnSummary {
  const words = new Map<string, number>();
  for (const i of sampled(values.length)) {
    const v = values[i];
    if (v !== null) words.set(String(v), (words.get(String(v)) ?? 0) + 1);
  }
  return {
    min: Number.NaN,
    max: Number.NaN,
    low: Number.NaN,
    high: Number.NaN,
    counts: [],
    words: [...words].sort((a, b) => b[1] - a[1]),
  };
}

/** Evenly spaced row numbers, at most SAMPLE of them. */
function sampled(length: number): number[] {
  const step = Math.max(1, length / SAMPLE);
  return Array.from({ length: Math.floor(length / step) }, (_, k) => Math.floor(k * step));
}
