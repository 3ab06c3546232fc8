import type { ColumnData } from '../columns';
import type { Role } from '../roles';

/**
 * Sentences about values that a role cannot have, or that no field has: positions off the sphere, parallaxes that are all
 * negative, infinities. The rows are kept.
 */
export function implausibleValues(columns: readonly ColumnData[], roleOf: ReadonlyMap<string, Role>): string[] {
  const sentences: string[] = [];
  for (const { name, values } of columns) {
    const role = roleOf.get(name);
    if (role === undefined || !(values instanceof Float64Array)) continue;
    let infinite = 0;
    let off = 0;
    let positive = 0;
    let negative = 0;
    const limit = role === 'declination' ? 90 : role === 'rightAscension' ? 360 : Number.POSITIVE_INFINITY;
    for (let i = 0; i < values.length; i++) {
      const v = values[i];
      if (v > 0) positive++;
      else if (v < 0) negative++;
      if (Math.abs(v) === Number.POSITIVE_INFINITY) infinite++;
      else if (Math.abs(v) > limit) off++;
    }
    const rows = (n: number) => `${n} ${n === 1 ? 'row' : 'rows'}`;
    if (infinite > 0) sentences.push(`Column "${name}" (${role}) is infinite in ${rows(infinite)}.`);
    if (off > 0)
      sentences.push(`Column "${name}" (${role}) is beyond ${limit} deg in ${rows(off)}: is its unit right?`);
    if (role === 'parallax' && negative > 0 && positive === 0) {
      sentences.push(`Column "${name}" (parallax) has no positive value: is it the parallax, and is its sign right?`);
    }
  }
  return sentences;
}
