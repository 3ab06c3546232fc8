import type { RandomStream } from '../quantity/random';
import { choleskyFactor } from './cholesky';
import type { EnsembleChain } from './ensemble-sampler';

/**
 * Metropolis sampler whose proposals come from one fixed multivariate Student-t shaped like earlier samples. Where the
 * target is roughly of one hump its draws are nearly independent, so it refines what a short ensemble run has found.
 * @param logDensity logarithm of an unnormalised density at an offset in an array; -Infinity or NaN forbids a place
 * @param pilot      shape (any, dimensions): samples of the target, rough ones will do; at least 10 x dimensions
 * @param dimensions number of parameters
 * @param chains     number of independent chains, each started from a pilot sample
 * @param steps      draws a chain
 * @param stream     random numbers; each chain gets its own stream
 * @returns samples of shape (steps, chains, dimensions); acceptance below 0.1 means that the shape does not fit: distrust it
 * @throws RangeError when the pilot samples are too few or all alike
 * Source: Tierney 1994, Ann. Stat. 22, 1701, Section 2.3.3 (independence chains).
 */
export function sampleIndependence(
  logDensity: (values: Float64Array, offset: number) => number,
  pilot: Float64Array,
  dimensions: number,
  chains: number,
  steps: number,
  stream: RandomStream,
): EnsembleChain {
  const n = pilot.length / dimensions;
  if (n < 10 * dimensions) throw new RangeError(`sampleIndependence: ${n} pilot samples for ${dimensions} dimensions.`);
  const { mean, factor } = shapeOf(pilot, n, dimensions);
  const z = new Float64Array(dimensions);
  const proposal = new Float64Array(dimensions);
  const samples = new Float64Array(steps * chains * dimensions);
  const kept = new Float64Array(steps * chains);
  let accepted = 0;
  for (let c = 0; c < chains; c++) {
    const random = stream.fork(c);
    const current = pilot.slice((n - 1 - (c % n)) * dimensions, (n - (c % n)) * dimensions);
    let density = logDensity(current, 0);
    let importance = density - logStudent(current, mean, factor, z, dimensions);
    for (let t = 0; t < steps; t++) {
      drawStudent(proposal, mean, factor, z, dimensions, random);
      const next = logDensity(proposal, 0);
      const nextImportance = next - logStudent(proposal, mean, factor, z, dimensions);
      if (Math.log(random.uniform()) < nextImportance - importance) {
        current.set(proposal);
        density = next;
        importance = nextImportance;
        accepted++;
      }
      samples.set(current, (t * chains + c) * dimensions);
      kept[t * chains + c] = density;
    }
  }
  return { walkers: chains, dimensions, steps, samples, logDensity: kept, acceptance: accepted / (chains * steps) };
}

/** Few degrees of freedom: tails heavier than the target's, which the method needs. */
const FREEDOM = 5;

function shapeOf(pilot: Float64Array, n: number, d: number) {
  const mean = new Float64Array(d);
  for (let i = 0; i < pilot.length; i++) mean[i % d] += pilot[i] / n;
  const covariance = new Float64Array(d * d);
  for (let k = 0; k < n; k++) {
    for (let a = 0; a < d; a++) {
      for (let b = 0; b < d; b++) {
        covariance[a * d + b] += ((pilot[k * d + a] - mean[a]) * (pilot[k * d + b] - mean[b])) / (n - 1);
      }
    }
  }
  const factor = choleskyFactor(covariance, d);
  if (factor === null) throw new RangeError('sampleIndependence: the pilot samples span no volume.');
  return { mean, factor };
}

function drawStudent(
  out: Float64Array,
  mean: Float64Array,
  factor: Float64Array,
  z: Float64Array,
  d: number,
  random: RandomStream,
): void {
  let square = 0;
  for (let k = 0; k < FREEDOM; k++) square += random.normal() ** 2;
  const scale = Math.sqrt(FREEDOM / square);
  for (let a = 0; a < d; a++) z[a] = random.normal() * scale;
  for (let a = 0; a < d; a++) {
    let sum = mean[a];
    for (let b = 0; b <= a; b++) sum += factor[a * d + b] * z[b];
    out[a] = sum;
  }
}

/** Logarithm of the proposal density, without its constant. */
function logStudent(v: Float64Array, mean: Float64Array, factor: Float64Array, z: Float64Array, d: number): number {
  let square = 0;
  for (let a = 0; a < d; a++) {
    let rest = v[a] - mean[a];
    for (let b = 0; b < a; b++) rest -= factor[a * d + b] * z[b];
    z[a] = rest / factor[a * d + a];
    square += z[a] * z[a];
  }
  return -0.5 * (FREEDOM + d) * Math.log(1 + square / FREEDOM);
}
