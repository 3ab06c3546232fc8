/** Rises from 0 to 1 between two places with two continuous derivatives; falls when `to` is less than `from`. */
export function blend(x: number, from: number, to: number): number {
  const u = (x - from) / (to - from);
  return u <= 0 ? 0 : u >= 1 ? 1 : u * u * u * (10 + u * (6 * u - 15));
}

/** x held between two limits without a kink; `width` is how far from a limit it begins to be held. */
export function heldBetween(x: number, low: number, high: number, width: number): number {
  const raised = low + width * softplus((x - low) / width);
  return high - width * softplus((high - raised) / width);
}

function softplus(x: number): number {
  return x > 30 ? x : Math.log1p(Math.exp(x));
}
