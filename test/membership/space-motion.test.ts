import { beforeAll, describe, expect, it } from 'vitest';
import { findMembers } from '../../kernel-lib/membership/find-members';
import type { Membership } from '../../kernel-lib/membership/membership';
import type { Measured } from '../../kernel-lib/quantity/measured';
import { type MovingCluster, movingCluster } from './moving-cluster';

const VELOCITY = [-6, 45, 5.5] as const;
const NEAR = { members: 150, stars: 850, distance: 47, velocity: VELOCITY, dispersion: 0.4, radius: 4, error: 0.6 };
const pull = (m: Measured, truth: number) => (2 * (m.value - truth)) / (m.upper - m.lower);

describe('one velocity in space', () => {
  const fits: { made: MovingCluster; members: Membership }[] = [];
  beforeAll(() => {
    for (let seed = 1; seed <= 6; seed++) {
      const made = movingCluster({ ...NEAR, seed });
      fits.push({ made, members: findMembers(made.catalogue, { motion: 'space-velocity' }) });
    }
  }, 120_000);

  it('is found from the data alone, with errors that cover the truth', () => {
    const pulls: number[] = [];
    for (const { members } of fits) {
      expect(members.found).toBe(true);
      const motion = members.spaceMotion as NonNullable<Membership['spaceMotion']>;
      const { velocity, convergentPoint } = motion;
      pulls.push(
        pull(velocity.x, VELOCITY[0]),
        pull(velocity.y, VELOCITY[1]),
        pull(velocity.z, VELOCITY[2]),
        pull(motion.speed, Math.hypot(...VELOCITY)),
        pull(convergentPoint.rightAscension, (Math.atan2(VELOCITY[1], VELOCITY[0]) * 180) / Math.PI),
        pull(convergentPoint.declination, (Math.asin(VELOCITY[2] / Math.hypot(...VELOCITY)) * 180) / Math.PI),
        pull(motion.dispersion, NEAR.dispersion),
        pull(members.expectedCount, NEAR.members),
      );
    }
    const rms = Math.sqrt(pulls.reduce((a, b) => a + b * b, 0) / pulls.length);
    // 48 numbers of which about 36 are independent: scatter of the root mean square 0.12; three of those.
    expect(rms).toBeGreaterThan(0.6);
    expect(rms).toBeLessThan(1.4);
    expect(Math.max(...pulls.map(Math.abs))).toBeLessThan(4);
  });

  it('sees members far from the centre that one mean motion loses', () => {
    const { made, members } = fits[0];
    const mean = findMembers(made.catalogue);
    const hits = (m: Membership) => made.member.reduce((n, is, i) => n + (is && m.probability[i] > 0.5 ? 1 : 0), 0);
    expect(hits(members)).toBeGreaterThan(0.93 * NEAR.members);
    expect(hits(members)).toBeGreaterThan(hits(mean));
  });

  it('betters the parallaxes of members by their motion, with honest errors', () => {
    let before = 0;
    let after = 0;
    let pulls = 0;
    let count = 0;
    for (const { made, members } of fits) {
      const all = members.withProbability();
      const kinematic = all.numbers('kinematicParallax');
      const error = all.numbers('kinematicParallaxError');
      const measured = all.numbers('parallax');
      for (let i = 0; i < NEAR.members; i++) {
        if (members.probability[i] < 0.9) continue;
        before += (measured[i] - made.parallax[i]) ** 2;
        after += (kinematic[i] - made.parallax[i]) ** 2;
        pulls += ((kinematic[i] - made.parallax[i]) / error[i]) ** 2;
        count++;
      }
    }
    // 0.4 km/s of 25 km/s across the line of sight is 1.6 % of 21 mas, or 0.35 mas, against 0.6 mas.
    expect(after).toBeLessThan(0.5 * before);
    // Mean of some 800 squares: scatter 0.05, and as much for the fitted velocity that all stars share.
    expect(Math.abs(pulls / count - 1)).toBeLessThan(0.25);
  });
});

describe('a cluster that moves much like the field', () => {
  it('has calibrated probabilities', () => {
    let expected = 0;
    let real = 0;
    let doubtful = 0;
    for (const seed of [31, 32, 33, 34]) {
      const made = movingCluster({
        ...NEAR,
        seed,
        members: 100,
        stars: 5000,
        velocity: [2, 8, -10],
        dispersion: 2,
        error: 1.5,
        radius: 9,
      });
      const members = findMembers(made.catalogue, { motion: 'space-velocity' });
      expect(members.found).toBe(true);
      members.probability.forEach((p, i) => {
        if (p < 0.05 || p > 0.95) return;
        doubtful++;
        expected += p;
        real += made.member[i];
      });
      expect(Math.abs(pull(members.expectedCount, 100))).toBeLessThan(3.5);
    }
    expect(doubtful).toBeGreaterThan(100);
    // Three times the chance scatter of so many stars with p about a half, and 0.05.
    expect(Math.abs(expected - real) / doubtful).toBeLessThan(0.05 + 1.5 / Math.sqrt(doubtful));
  });
});

describe('radial velocities', () => {
  it('sharpen the velocity along the line of sight', () => {
    const made = movingCluster({ ...NEAR, seed: 11, radialVelocities: 0.4 });
    const members = findMembers(made.catalogue, { motion: 'space-velocity' });
    // The same field without them: each star draws the same numbers either way.
    const blind = findMembers(movingCluster({ ...NEAR, seed: 11 }).catalogue, { motion: 'space-velocity' });
    const width = (m: Membership) => {
      const { upper, lower } = (m.spaceMotion as NonNullable<Membership['spaceMotion']>).radialVelocity;
      return upper - lower;
    };
    expect(width(members)).toBeLessThan(0.3 * width(blind));
    expect(members.notes.join(' ')).toMatch(/Radial velocities used for \d+ of 1000 stars/);
    const { velocity } = members.spaceMotion as NonNullable<Membership['spaceMotion']>;
    expect(Math.abs(pull(velocity.y, VELOCITY[1]))).toBeLessThan(3.5);
  });
});

describe('a field without a moving cluster', () => {
  it('is seen as such', () => {
    for (const seed of [21, 22, 23]) {
      const { catalogue } = movingCluster({ ...NEAR, members: 0, seed });
      const none = findMembers(catalogue, { motion: 'space-velocity' });
      expect(none.found).toBe(false);
      expect(none.spaceMotion).toBeNull();
    }
  });
});
