/** Powers of ten that a double holds exactly. */
export const POWERS_OF_TEN: Float64Array = Float64Array.from({ length: 23 }, (_, k) => Number(`1e${k}`));

const TWO_53 = 9007199254740992;
/** Veltkamp's constant, which splits a double into two halves whose products are exact. */
const SPLITTER = 134217729;

/**
 * The double nearest to (a 10^k + b) / 10^scale, exactly rounded, or NaN where this way cannot be sure of the last bit.
 * a is whole and at most 2^53, b whole with 0 <= b < 10^k, k <= 9, scale <= 22.
 *
 * Up to 2^53 both sides of the division are exact, so it rounds once (W. D. Clinger 1990, "How to read floating point numbers
 * accurately"). Beyond, the quotient is improved by its exact remainder (T. J. Dekker 1971, Numer. Math. 18, 224), and the
 * answer is taken only if a slightly larger remainder would round to the same double (Ziv's test).
 */
export function exactDecimal(a: number, b: number, k: number, scale: number): number {
  const high = a * POWERS_OF_TEN[k];
  const sum = high + b;
  const p = POWERS_OF_TEN[scale];
  if (sum <= TWO_53) return sum / p;
  const highRest = productError(a, POWERS_OF_TEN[k], high);
  const bb = sum - high;
  const sumRest = high - (sum - bb) + (b - bb) + highRest;
  const q = sum / p;
  const qp = q * p;
  const c = (sum - qp - productError(q, p, qp) + sumRest) / p;
  const s = q + c;
  const rest = c - (s - q);
  return s + rest * 1.0000001 === s ? s : Number.NaN;
}

/** The rounding error of a product: x y - fl(x y), exact. */
function productError(x: number, y: number, product: number): number {
  const cx = SPLITTER * x;
  const xh = cx - (cx - x);
  const xl = x - xh;
  const cy = SPLITTER * y;
  const yh = cy - (cy - y);
  const yl = y - yh;
  return xl * yl - (product - xh * yh - xl * yh - xh * yl);
}

/** Whether a trimmed text is a decimal number as tables write it (no hexadecimal, no thousands separators). */
export function isNumberText(text: string): boolean {
  return /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/.test(text) || /^[+-]?inf(?:inity)?$/i.test(text);
}

/** The number that a text for which `isNumberText` holds stands for. */
export function numberOf(text: string): number {
  const value = Number(text);
  return Number.isNaN(value) ? (text[0] === '-' ? Number.NEGATIVE_INFINITY : Number.POSITIVE_INFINITY) : value;
}

/** Whether a number text is a whole number that a double cannot hold, such as a 19-digit star identifier. */
export function isTooLongInteger(text: string): boolean {
  return /^[+-]?\d{16,}$/.test(text) && !Number.isSafeInteger(Number(text));
}
