import { type InitialMassFunction, initialMassFunction } from '../models/initial-mass-function';
import type { RandomStream } from '../quantity/random';

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
