import { describe } from '../quantity/options';

/** A number for all stars, or one a star. */
export type OneOrEach = number | ArrayLike<number>;

/** Entry i, or the one for all. */
export function entry(value: OneOrEach, i: number): number {
  return typeof value === 'number' ? value : value[i];
}

/**
 * A function over a number or over every entry of a list.
 * @param caller name of the public function, for messages
 * @param name   of the argument
 * @param others what goes with it, each a number or a list of the same length
 * @throws TypeError when the argument is neither, RangeError when lengths differ
 */
export function overEach(
  caller: string,
  name: string,
  value: OneOrEach,
  others: Readonly<Record<string, OneOrEach>>,
  formula: (x: number, i: number) => number,
): number | Float64Array {
  const isList = checkNumbers(caller, name, value);
  for (const [key, other] of Object.entries(others)) {
    if (!checkNumbers(caller, key, other)) continue;
    const n = isList ? (value as ArrayLike<number>).length : 1;
    const m = (other as ArrayLike<number>).length;
    if (!isList || m !== n) throw new RangeError(`${caller}: ${key} has ${m} values for ${n} of ${name}.`);
  }
  if (!isList) return formula(value as number, 0);
  const list = value as ArrayLike<number>;
  const out = new Float64Array(list.length);
  for (let i = 0; i < out.length; i++) out[i] = formula(list[i], i);
  return out;
}

/** Whether it is a list; refuses what is neither a number nor a list. */
function checkNumbers(caller: string, name: string, value: unknown): boolean {
  if (typeof value === 'number') return false;
  if (value !== null && typeof value === 'object' && typeof (value as ArrayLike<number>).length === 'number')
    return true;
  throw new TypeError(`${caller}: ${name} must be a number or a list of numbers, got ${describe(value)}.`);
}
