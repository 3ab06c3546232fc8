import { describe, expect, it } from 'vitest';
import { convergence } from '../../kernel-lib/numeric/convergence';
import { sampleEnsemble } from '../../kernel-lib/numeric/ensemble-sampler';
import { randomStream } from '../../kernel-lib/quantity/random';

function scattered(walkers: number, centre: readonly number[], width: number, seed: number): Float64Array {
  const s = randomStream(seed);
  return Float64Array.from(
    { length: walkers * centre.length },
    (_, i) => centre[i % centre.length] + width * s.normal(),
  );
}

function moments(samples: Float64Array, dimensions: number) {
  const n = samples.length / dimensions;
  const mean = new Float64Array(dimensions);
  for (let i = 0; i < samples.length; i++) mean[i % dimensions] += samples[i] / n;
  const covariance = new Float64Array(dimensions * dimensions);
  for (let k = 0; k < n; k++) {
    for (let a = 0; a < dimensions; a++) {
      for (let b = 0; b < dimensions; b++) {
        covariance[a * dimensions + b] +=
          ((samples[k * dimensions + a] - mean[a]) * (samples[k * dimensions + b] - mean[b])) / n;
      }
    }
  }
  return { mean, covariance };
}

/** Targets with known moments. */
const TARGETS = [
  {
    name: 'correlated Gaussian (r = 0.99)',
    logDensity: (v: Float64Array, o: number) => {
      const x = v[o] - 1;
      const y = (v[o + 1] + 2) / 3;
      return -(x * x - 2 * 0.99 * x * y + y * y) / (2 * (1 - 0.99 ** 2));
    },
    start: [1, -2],
    mean: [1, -2],
    variance: [1, 9],
  },
  {
    // x ~ N(0, 1), y | x ~ N(x^2, 0.5): mean of y 1, variance 2 + 0.25.
    name: 'banana',
    logDensity: (v: Float64Array, o: number) => -0.5 * v[o] ** 2 - 0.5 * ((v[o + 1] - v[o] ** 2) / 0.5) ** 2,
    start: [0, 1],
    mean: [0, 1],
    variance: [1, 2.25],
  },
  {
    // Equal mixture of N(-1.5, 1) and N(1.5, 1): variance 1 + 2.25; the other axis a unit normal.
    name: 'two modes',
    logDensity: (v: Float64Array, o: number) =>
      Math.log(Math.exp(-0.5 * (v[o] - 1.5) ** 2) + Math.exp(-0.5 * (v[o] + 1.5) ** 2)) - 0.5 * v[o + 1] ** 2,
    start: [0, 0],
    mean: [0, 0],
    variance: [3.25, 1],
  },
];

describe('sampleEnsemble', () => {
  for (const target of TARGETS) {
    it(`recovers the moments of a known target: ${target.name}`, () => {
      const chain = sampleEnsemble(target.logDensity, scattered(40, target.start, 0.5, 2), 2, randomStream(9), {
        steps: 12000,
        warmUp: 500,
      });
      const { mean, covariance } = moments(chain.samples, 2);
      for (let d = 0; d < 2; d++) {
        const { effectiveSampleSize, rHat } = convergence(chain.samples, 40, 2, d);
        expect(rHat).toBeLessThan(1.02);
        expect(effectiveSampleSize).toBeGreaterThan(800);
        const error = Math.sqrt(target.variance[d] / effectiveSampleSize);
        expect(Math.abs(mean[d] - target.mean[d])).toBeLessThan(4.5 * error);
        // Variance of a variance: 2 v^2 / n for a normal; heavier tails here, so eight of those.
        const error2 = target.variance[d] * Math.sqrt(2 / effectiveSampleSize);
        expect(Math.abs(covariance[d * 3] - target.variance[d])).toBeLessThan(8 * error2);
      }
      expect(chain.acceptance).toBeGreaterThan(0.2);
    });
  }

  it('gives the same chain for the same seed and stops when told to', () => {
    const run = (seed: number, stopAt = Number.POSITIVE_INFINITY) =>
      sampleEnsemble(TARGETS[1].logDensity, scattered(8, [0, 1], 0.1, 1), 2, randomStream(seed), {
        steps: 20,
        onProgress: (done) => done < stopAt,
      });
    expect(run(1).samples).toEqual(run(1).samples);
    expect(run(1).samples).not.toEqual(run(2).samples);
    const stopped = run(1, 7);
    expect(stopped.steps).toBe(7);
    expect(stopped.samples).toEqual(run(1).samples.slice(0, 7 * 16));
  });

  it('says what is wrong with its starts', () => {
    const flat = () => 0;
    expect(() => sampleEnsemble(flat, new Float64Array(6), 2, randomStream(1), { steps: 1 })).toThrow(/3 walkers/);
    expect(() =>
      sampleEnsemble(() => Number.NEGATIVE_INFINITY, new Float64Array(8), 2, randomStream(1), { steps: 1 }),
    ).toThrow(/walker 0 starts where/);
  });
});

describe('convergence', () => {
  it('counts independent draws fully and correlated ones by their correlation time', () => {
    const s = randomStream(4);
    const chains = 10;
    const steps = 4000;
    const white = Float64Array.from({ length: chains * steps }, () => s.normal());
    const free = convergence(white, chains, 1, 0);
    expect(free.rHat).toBeCloseTo(1, 2);
    expect(Math.abs(free.effectiveSampleSize / (chains * steps) - 1)).toBeLessThan(0.1);
    // First-order autoregression with coefficient 0.9: correlation time (1 + 0.9) / (1 - 0.9) = 19.
    const red = new Float64Array(chains * steps);
    for (let c = 0; c < chains; c++) {
      let x = s.normal();
      for (let t = 0; t < steps; t++) {
        red[t * chains + c] = x;
        x = 0.9 * x + Math.sqrt(1 - 0.81) * s.normal();
      }
    }
    const slow = convergence(red, chains, 1, 0).effectiveSampleSize;
    expect(Math.abs((slow * 19) / (chains * steps) - 1)).toBeLessThan(0.15);
  });

  it('sees chains that sit in different places', () => {
    const s = randomStream(4);
    const apart = Float64Array.from({ length: 4 * 500 }, (_, i) => (i % 4) + 0.1 * s.normal());
    const { rHat, effectiveSampleSize } = convergence(apart, 4, 1, 0);
    expect(rHat).toBeGreaterThan(5);
    expect(effectiveSampleSize).toBeLessThan(20);
    expect(convergence(new Float64Array(12), 4, 1, 0).rHat).toBeNaN();
  });
});
