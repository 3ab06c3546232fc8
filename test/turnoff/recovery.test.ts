import { describe, expect, it } from 'vitest';
import { clusterDistance } from '../../kernel-lib/distance/cluster-distance';
import { findMembers } from '../../kernel-lib/membership/find-members';
import { simulateCluster } from '../../kernel-lib/simulate/simulate-cluster';
import { estimateReddening } from '../../kernel-lib/turnoff/main-sequence-fit';
import { turnoffAge } from '../../kernel-lib/turnoff/turnoff-age';

const SEEDS = 20;
const TRUTH = { age: 0.7, distance: 812, ebv: 0.11 };

/** The whole way on an invented field, as a user goes it. */
function analyse(seed: number) {
  const field = simulateCluster({ ...TRUTH, members: 460, fieldStars: 8200, whiteDwarfs: true, seed });
  const members = findMembers(field);
  const cluster = members.select(0.5);
  const distance = clusterDistance(cluster);
  const ebv = estimateReddening(cluster, { distanceModulus: distance.modulus });
  const age = turnoffAge(cluster, { distanceModulus: distance.modulus, ebv });
  return { members, distance, ebv, age };
}

describe('from a field to an age, on invented clusters', () => {
  it(`finds distance, reddening and age within their 95 % intervals for at least 17 of ${SEEDS} seeds`, () => {
    const within = { distance: 0, ebv: 0, age: 0 };
    let inside68 = 0;
    let bias = 0;
    for (let seed = 101; seed < 101 + SEEDS; seed++) {
      const { members, distance, ebv, age } = analyse(seed);
      expect(members.found).toBe(true);
      expect(Math.abs(members.expectedCount.value - 460)).toBeLessThan(15);
      // A 95 % interval is about 1.96 half-widths of the 68 % one for these near-Gaussian results.
      const near = (m: { value: number; lower: number; upper: number }, truth: number) =>
        Math.abs(m.value - truth) < 1.96 * (truth > m.value ? m.upper - m.value : m.value - m.lower);
      const hits = {
        distance: near(distance.distance, TRUTH.distance),
        ebv: near(ebv, TRUTH.ebv),
        age: age.age95[0] < TRUTH.age && TRUTH.age < age.age95[1],
      };
      for (const key of ['distance', 'ebv', 'age'] as const) within[key] += hits[key] ? 1 : 0;
      if (age.age.lower < TRUTH.age && TRUTH.age < age.age.upper) inside68++;
      bias += (age.logAge.value - 9 - Math.log10(TRUTH.age)) / SEEDS;
    }
    for (const count of [within.distance, within.ebv, within.age]) expect(count).toBeGreaterThanOrEqual(17);
    // 68 % of 20 is 13.7 with standard deviation 2.1; three of those.
    expect(inside68).toBeGreaterThanOrEqual(7);
    expect(Math.abs(bias)).toBeLessThan(0.03);
  }, 600_000);
});
