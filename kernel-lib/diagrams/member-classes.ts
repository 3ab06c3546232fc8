import { describe } from '../quantity/options';
import { PALETTE } from './theme';

/** Stars drawn alike. */
export interface MemberClass {
  readonly name: string;
  readonly rows: Uint32Array;
  readonly color: string;
  readonly symbol: string;
  readonly opacity: number;
  /** Field stars: drawn smaller and beneath. */
  readonly background: boolean;
}

const CLASSES = [
  {
    from: Number.NEGATIVE_INFINITY,
    name: 'p < 0.5',
    color: PALETTE.slate,
    symbol: 'circle',
    opacity: 0.55,
    background: true,
  },
  { from: 0.5, name: '0.5 \u2264 p < 0.9', color: PALETTE.amber, symbol: 'diamond', opacity: 0.95, background: false },
  {
    from: 0.9,
    name: 'members, p \u2265 0.9',
    color: PALETTE.azure,
    symbol: 'circle',
    opacity: 0.85,
    background: false,
  },
] as const;

/**
 * Splits stars by membership probability, field first; without probabilities all stars are one class. Stars without a
 * probability count as field. Classes without stars are left out.
 * @param caller      name of the public function, for messages
 * @param count       number of stars
 * @param probability shape (count), or undefined
 * @throws RangeError when there is not one probability a star
 */
export function memberClasses(
  caller: string,
  count: number,
  probability: ArrayLike<number> | undefined,
): MemberClass[] {
  if (probability === undefined) {
    const rows = Uint32Array.from({ length: count }, (_, i) => i);
    return [
      { name: `stars (${count})`, rows, color: PALETTE.azure, symbol: 'circle', opacity: 0.8, background: false },
    ];
  }
  if (typeof probability !== 'object' || probability.length !== count) {
    throw new RangeError(
      `${caller}: probability must be a list of ${count} numbers, one for each row of the catalogue, got ${describe(probability)}.`,
    );
  }
  const rows: number[][] = CLASSES.map(() => []);
  for (let i = 0; i < count; i++) {
    const p = probability[i];
    rows[p >= CLASSES[2].from ? 2 : p >= CLASSES[1].from ? 1 : 0].push(i);
  }
  return CLASSES.map(({ name, color, symbol, opacity, background }, k) => ({
    name: `${name.replace('<', '&lt;').replace('<', '&lt;')} (${rows[k].length})`,
    rows: Uint32Array.from(rows[k]),
    color,
    symbol,
    opacity,
    background,
  })).filter((c) => c.rows.length > 0);
}
