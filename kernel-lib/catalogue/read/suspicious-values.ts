import type { ColumnData } from '../columns';
import type { Role } from '../roles';
import { optionKey } from './delimited-columns';

/** Values that tables use for "no value". */
const SENTINELS: ReadonlySet<number> = new Set([
  99.999, 99.99, 99.9, 99, 999, 9999, 99999, 999.9, 999.99, 999.999, 9.999, 9.99, 9.9999, 99.9999, 0, -1, -9, -9.99,
  -9.999, -99, -99.9, -99.99, -99.999, -999, -999.9, -999.99, -999.999, -9999, -99999,
]);

/**
 * Sentences about values that look as if they stood for "missing": one exact value far off the rest of its column, or one
 * that the quantity cannot have. `columns` are as read, `converted` the same in Coeval's units. Only columns with a role are looked at, since only they have a meaning to judge by.
 */
export function suspiciousValues(
  columns: readonly ColumnData[],
  converted: readonly ColumnData[],
  roleOf: ReadonlyMap<string, Role>,
): string[] {
  const sentences: string[] = [];
  for (const [j, column] of columns.entries()) {
    const role = roleOf.get(column.name);
    if (role === undefined || role === 'identifier' || !(column.values instanceof Float64Array)) continue;
    // Compared as the file writes them; what a quantity can be is known in Coeval's unit only.
    const found = suspects(column.values, role, column.values === converted[j].values);
    if (found.length === 0) continue;
    const list = found.map(({ value, count }) => `${value} in ${count} ${count === 1 ? 'row' : 'rows'}`).join(', ');
    sentences.push(
      `Column "${column.name}" (${role}) holds ${list}: ${reason(role, found)}. If that means that there is no value, read with missing: { ${optionKey(column.name)}: [${found.map((f) => f.value).join(', ')}] }.`,
    );
  }
  return sentences;
}

interface Suspect {
  readonly value: number;
  readonly count: number;
  /** Whether the quantity cannot have that value. */
  readonly impossible: boolean;
}

function reason(role: Role, found: readonly Suspect[]): string {
  if (role.endsWith('.error') && found.every((f) => f.value <= 0)) return 'an error is positive';
  return found.every((f) => f.impossible) ? 'beyond what the quantity can be' : 'far from the rest of the column';
}

/** Values looked at for the spread of a column: enough for quartiles, few enough to sort. */
const SAMPLE = 4096;

function suspects(values: Float64Array, role: Role, isOwnUnit: boolean): Suspect[] {
  const counts = countSentinels(values);
  if (counts.size === 0) return [];
  // The rest of the column: its ends exactly, its quartiles from evenly spaced rows.
  const step = Math.max(1, Math.floor(values.length / SAMPLE));
  const sample: number[] = [];
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  const sentinels = Float64Array.from(counts.keys());
  for (let i = 0; i < values.length; i++) {
    const v = values[i];
    let isSentinel = false;
    for (let k = 0; k < sentinels.length; k++) if (v === sentinels[k]) isSentinel = true;
    if (isSentinel || Number.isNaN(v)) continue;
    if (v < low) low = v;
    if (v > high) high = v;
    if (i % step === 0) sample.push(v);
  }
  const sorted = Float64Array.from(sample).sort();
  const last = sorted.length - 1;
  const spread = last > 0 ? sorted[Math.floor(0.75 * last)] - sorted[Math.floor(0.25 * last)] : 0;
  const found: Suspect[] = [];
  for (const [value, count] of counts) {
    const impossible = (isOwnUnit || value <= 0) && isImpossible(value, role);
    const outside = Math.max(low - value, value - high);
    const lonely = last >= 2 && outside > (count > 1 ? Math.max(spread, 2) : Math.max(3 * spread, 5));
    if (impossible || lonely) found.push({ value, count, impossible });
  }
  return found.sort((a, b) => b.count - a.count);
}

/** How often each value that tables use for "no value" stands in a column. */
function countSentinels(values: Float64Array): Map<number, number> {
  const counts = new Map<number, number>();
  for (let i = 0; i < values.length; i++) {
    const v = values[i];
    // Ranges without a sentinel, so that few values need the look-up; it is several times slower.
    if (
      v > 0
        ? v < 9.99 || (v >= 10 && v < 99) || (v >= 100 && v < 999)
        : v < -1
          ? v > -9 || (v <= -10 && v > -99)
          : v !== 0 && v !== -1
    ) {
      continue;
    }
    if (SENTINELS.has(v)) counts.set(v, (counts.get(v) ?? 0) + 1);
  }
  return counts;
}

function isImpossible(value: number, role: Role): boolean {
  if (role.endsWith('.error')) return value <= 0;
  if (role.startsWith('magnitude.')) return value > 40 || value < -30;
  if (role.startsWith('colour.')) return Math.abs(value) > 20;
  if (role === 'parallax') return value >= 999 || value <= -999;
  if (role === 'rightAscension' || role === 'declination') return Math.abs(value) > 360;
  return false;
}
