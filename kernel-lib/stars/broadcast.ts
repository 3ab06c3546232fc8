import { describe } from '../quantity/options';

/** A number, or one number a star. */
export type NumberOrArray = number | ArrayLike<number>;

/** Numbers give a number, anything with a list in it gives a list. */
export type Broadcast<T extends readonly NumberOrArray[]> = T[number] extends number ? number : Float64Array;

/**
 * A formula over numbers or lists: lists go star by star, numbers stand for all stars.
 * @param caller name of the public function, for messages
 * @throws TypeError for an argument that is neither, RangeError when lists differ in length
 */
export function broadcast<T extends readonly NumberOrArray[]>(
  caller: string,
  values: T,
  formula: (...each: number[]) => number,
): Broadcast<T> {
  let length = -1;
  for (const value of values) {
    if (typeof value === 'number') continue;
    if (value === null || typeof value !== 'object' || typeof value.length !== 'number') {
      throw new TypeError(`${caller}: expected numbers or lists of numbers, got ${describe(value)}.`);
    }
    if (length >= 0 && value.length !== length) {
      throw new RangeError(
        `${caller}: lists of different length, ${length} and ${value.length}; give one value a star in each.`,
      );
    }
    length = value.length;
  }
  const each = new Array<number>(values.length);
  const at = (i: number): number => {
    for (let k = 0; k < values.length; k++) {
      const value = values[k];
      each[k] = typeof value === 'number' ? value : value[i];
    }
    return formula(...each);
  };
  if (length < 0) return at(0) as Broadcast<T>;
  const out = new Float64Array(length);
  for (let i = 0; i < length; i++) out[i] = at(i);
  return out as Broadcast<T>;
}
