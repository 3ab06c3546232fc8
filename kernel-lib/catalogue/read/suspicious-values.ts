import type { ColumnData } from '../columns';
import type { Role } from '../roles';

/** Values that tables use for "no value". */
const SENTINELS: readonly number[] = [
  99.999, 99.99, 99.9, 99, 999, 9999, 99999, 999.9, 999.99, 999.999, 9.999, 9.99, 9.9999, 99.9999, 0, -1, -9, -9.99,
  -9.999, -99, -99.9, -99.99, -99.999, -999, -999.9, -999.99, -999.999, -9999, -99999,
];

/**
 * Sentences about values that look as if they stood for "missing": one exact value far off the rest of its column, or one
 * that the quantity cannot have. Only columns with a role are looked at, since only they have a meaning to judge by.
 */
export function suspiciousValues(columns: readonly ColumnData[], roleOf: ReadonlyMap<string, Role>): string[] {
  const sentences: string[] = [];
  for (const column of columns) {
    const role = roleOf.get(column.name);
    if (role === undefined || role === 'identifier' || !(column.values instanceof Float64Array)) continue;
    const found = suspects(column.values, role);
    if (found.length === 0) continue;
    const list = found.map(({ value, count }) => `${value} in ${count} ${count === 1 ? 'row' : 'rows'}`).join(', ');
    sentences.push(
      `Column "${column.name}" (${role}) holds ${list}: ${reason(role, found)}. If that means that there is no value, read with missing: { ${JSON.stringify(column.name)}: [${found.map((f) => f.value).join(', ')}] }.`,
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

function suspects(values: Float64Array, role: Role): Suspect[] {
  const counts = new Map<number, number>(SENTINELS.map((v) => [v, 0]));
  const rest = new Float64Array(values.length);
  let n = 0;
  for (let i = 0; i < values.length; i++) {
    const v = values[i];
    if (Number.isNaN(v)) continue;
    // Sentinels have at most four decimals and begin with 9, or are 0 or -1: a cheap test before the look-up.
    const seen = counts.get(v);
    if (seen === undefined) rest[n++] = v;
    else counts.set(v, seen + 1);
  }
  const sorted = rest.subarray(0, n).sort();
  const low = sorted[0];
  const high = sorted[n - 1];
  const spread = n > 0 ? sorted[Math.floor(0.75 * (n - 1))] - sorted[Math.floor(0.25 * (n - 1))] : 0;
  const found: Suspect[] = [];
  for (const [value, count] of counts) {
    if (count === 0) continue;
    const impossible = isImpossible(value, role);
    const outside = n > 0 ? Math.max(low - value, value - high, 0) : 0;
    const lonely =
      n >= 3 && outside > 0 && (count > 1 ? outside > Math.max(spread, 2) : outside > Math.max(3 * spread, 5));
    if (impossible || lonely) found.push({ value, count, impossible });
  }
  return found;
}

function isImpossible(value: number, role: Role): boolean {
  if (role.endsWith('.error')) return value <= 0;
  if (role.startsWith('magnitude.')) return value > 40 || value < -30;
  if (role.startsWith('colour.')) return Math.abs(value) > 20;
  if (role === 'parallax') return value >= 999 || value <= -999;
  if (role === 'rightAscension' || role === 'declination') return Math.abs(value) > 360;
  return false;
}
