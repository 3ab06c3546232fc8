import type { RandomStream } from '../quantity/random';

/** Initial mass functions by name. */
export type InitialMassFunction = 'salpeter1955' | 'kroupa2001' | 'chabrier2003';

export const INITIAL_MASS_FUNCTIONS: readonly InitialMassFunction[] = ['salpeter1955', 'kroupa2001', 'chabrier2003'];

/**
 * Initial mass function: relative number of stars a unit of mass, not normalised.
 * @param name which
 * @param mass solar masses, positive
 * @example initialMassFunction('salpeter1955', 1) // => 1
 * Sources: Salpeter 1955, ApJ 121, 161 (slope 2.35); Kroupa 2001, MNRAS 322, 231, Eq. 2 (0.3 below 0.08, 1.3 to 0.5, 2.3 above);
 * Chabrier 2003, PASP 115, 763, Table 1 (single stars: lognormal about 0.079 with deviation 0.69 dex below 1, slope 2.3 above).
 */
export function initialMassFunction(name: InitialMassFunction, mass: number): number {
  if (!(mass > 0)) return Number.NaN;
  if (name === 'salpeter1955') return mass ** -2.35;
  if (name === 'kroupa2001') {
    if (mass >= 0.5) return mass ** -2.3;
    const atHalf = 0.5 ** -2.3 / 0.5 ** -1.3;
    if (mass >= 0.08) return atHalf * mass ** -1.3;
    return ((atHalf * 0.08 ** -1.3) / 0.08 ** -0.3) * mass ** -0.3;
  }
  const lognormal = (m: number) => Math.exp(-0.5 * ((Math.log10(m) - Math.log10(0.079)) / 0.69) ** 2) / m;
  return mass < 1 ? lognormal(mass) : lognormal(1) * mass ** -2.3;
}

/**
 * A drawer of masses from an initial mass function.
 * @param name   which
 * @param lowest least mass, solar, positive
 * @param highest greatest mass, solar
 * @returns function of a stream that gives one mass
 * @example makeMassDrawer('kroupa2001', 0.1, 100)(randomStream(1))
 */
export function makeMassDrawer(
  name: InitialMassFunction,
  lowest: number,
  highest: number,
): (stream: RandomStream) => number {
  const points = 4000;
  const logs = new Float64Array(points);
  const cumulative = new Float64Array(points);
  const step = Math.log(highest / lowest) / (points - 1);
  let before = 0;
  for (let i = 0; i < points; i++) {
    logs[i] = Math.log(lowest) + i * step;
    const mass = Math.exp(logs[i]);
    const density = initialMassFunction(name, mass) * mass;
    if (i > 0) cumulative[i] = cumulative[i - 1] + 0.5 * (density + before) * step;
    before = density;
  }
  const total = cumulative[points - 1];
  return (stream) => {
    const target = stream.uniform() * total;
    let low = 0;
    let high = points - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (cumulative[middle] <= target) low = middle;
      else high = middle;
    }
    const share = (target - cumulative[low]) / (cumulative[high] - cumulative[low]);
    return Math.exp(logs[low] + share * step);
  };
}
