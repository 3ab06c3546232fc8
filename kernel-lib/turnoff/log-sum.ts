/** Logarithm of a sum of exponentials; -Infinity for none. */
export function logSum(terms: readonly number[]): number {
  const top = Math.max(...terms);
  if (!Number.isFinite(top)) return Number.NEGATIVE_INFINITY;
  return top + Math.log(terms.reduce((s, t) => s + Math.exp(t - top), 0));
}
