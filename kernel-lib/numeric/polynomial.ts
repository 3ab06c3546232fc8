/** Sum of c[k] x^k. */
export function polynomial(c: readonly number[], x: number): number {
  let sum = 0;
  for (let k = c.length - 1; k >= 0; k--) sum = sum * x + c[k];
  return sum;
}
