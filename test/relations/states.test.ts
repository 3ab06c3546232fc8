import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { evolve } from '../../kernel-lib/models/evolve';
import { mainSequenceLifetime, turnoffMass } from '../../kernel-lib/models/lifetime';
import { measuredFromSigma } from '../../kernel-lib/quantity/measured';
import { randomStream } from '../../kernel-lib/quantity/random';
import { ageCluster } from '../../kernel-lib/relations/age-cluster';
import { evolutionaryState } from '../../kernel-lib/relations/evolutionary-state';
import { oddities } from '../../kernel-lib/relations/oddities';

/** Stars of one age on the HR diagram, with small errors; extra stars at the end. */
function cluster(age: number, masses: number[], extra: { logTeff: number; logL: number }[] = []) {
  const state = evolve({ mass: masses, age });
  const s = randomStream(8);
  const logTeff = [...state.temperature].map((t) => Math.log10(t) + 0.003 * s.normal());
  const logL = [...state.luminosity].map((l) => Math.log10(l) + 0.01 * s.normal());
  const column = (name: string, values: number[]) => ({ name, values: Float64Array.from(values) });
  const all = [...logTeff, ...extra.map((e) => e.logTeff)];
  return new Catalogue({
    source: 'invented',
    rowCount: all.length,
    columns: [
      column('log_teff', all),
      column('log_l', [...logL, ...extra.map((e) => e.logL)]),
      column(
        'log_teff_error',
        all.map(() => 0.003),
      ),
      column(
        'log_l_error',
        all.map(() => 0.01),
      ),
    ],
  });
}

const masses = Array.from({ length: 60 }, (_, i) => 0.5 * 3.4 ** (i / 59));

describe('evolutionaryState', () => {
  it('says how far the Sun is', () => {
    const sun = evolutionaryState({ mass: [1] }, { age: 4.57 });
    expect(sun.phase[0]).toBe('main sequence');
    expect(sun.fractionSpent.value[0]).toBeCloseTo(4.57 / mainSequenceLifetime({ mass: 1 }), 9);
    expect(sun.timeToLeave.value[0]).toBeCloseTo(mainSequenceLifetime({ mass: 1 }) - 4.57, 9);
  });

  it('carries the errors of age and mass', () => {
    const one = evolutionaryState(
      { mass: [2], massError: [0.04] },
      { age: measuredFromSigma(0.5, 0.05), samples: 4000 },
    );
    const { value, lower, upper } = one.fractionSpent;
    // Lifetime falls about as M^-2.9 there, so 2 % of mass is 6 % of life; 10 % of age comes on top: 12 % together.
    const relative = (upper[0] - lower[0]) / 2 / value[0];
    expect(relative).toBeGreaterThan(0.1);
    expect(relative).toBeLessThan(0.135);
  });

  it('places stars on the isochrone, giants in their phase, and leaves strangers out', () => {
    const age = 1;
    const top = turnoffMass({ age });
    const stars = cluster(age, [0.7, 1, 1.5, 0.99 * top, 1.02 * top], [{ logTeff: 4.2, logL: 0 }]);
    const state = evolutionaryState(stars, { age });
    for (const [i, m] of [0.7, 1, 1.5].entries()) expect(Math.abs(state.mass[i] / m - 1)).toBeLessThan(0.03);
    expect(state.phase.slice(0, 4)).toEqual(Array(4).fill('main sequence'));
    expect(state.phase[4]).not.toBe('main sequence');
    expect(state.fractionSpent.value[4]).toBeGreaterThan(1);
    expect(state.timeToLeave.value[4]).toBeLessThan(0);
    expect(state.phase[5]).toBeNull();
    expect(state.fractionSpent.value[5]).toBeNaN();
    expect(state.notes.join(' ')).toMatch(/1 stars lie more than 4 sigma/);
    expect(String(state)).toContain('time to leave');
  });

  it('says what is wrong', () => {
    expect(() => evolutionaryState({ mass: [1] }, {} as never)).toThrow(/age must be Gyr/);
    expect(() => evolutionaryState({ mass: [1] }, { age: 50 })).toThrow(/age must lie in 0.001 to 20 Gyr/);
    expect(() => evolutionaryState({ mass: 3 as never }, { age: 1 })).toThrow(/list of solar masses/);
    const bare = new Catalogue({ source: 'bare', rowCount: 0, columns: [] });
    expect(() => evolutionaryState(bare, { age: 1 })).toThrow(
      /bare has no column log_teff; call physicalProperties first/,
    );
  });
});

describe('ageCluster', () => {
  it('moves stars along their lives, remnants included', () => {
    const later = ageCluster([0.8, 1, 2, 6, 20, 50], { age: 2 });
    expect(later.phaseCounts['main sequence']).toBe(2);
    expect(later.remnants).toBe(4);
    expect(later.phaseCounts['carbon-oxygen white dwarf']).toBe(2);
    const logL = later.catalogue.numbers('log_l');
    expect(logL[2]).toBeLessThan(0);
    expect(logL[5]).toBeNaN();
    expect(later.catalogue.numbers('mass')[2]).toBeLessThan(1);
    expect(logL[1]).toBeCloseTo(Math.log10(evolve({ mass: 1, age: 2 }).luminosity), 12);
  });

  it('places a catalogue on its isochrone first, and adds the dead in the number expected', () => {
    const stars = cluster(1, masses);
    const young = ageCluster(stars, { age: 0.01, presentAge: 1, addDead: 'salpeter1955' });
    expect(young.count).toBeGreaterThan(masses.length);
    const mass = young.catalogue.numbers('initial_mass');
    const heaviest = Math.max(...mass.slice(0, masses.length));
    const here = mass.slice(0, masses.length).filter((m) => m >= heaviest / 2).length;
    // Salpeter: numbers above heaviest to 60, over those from half of it, by the integral of M^-2.35.
    const integral = (a: number, b: number) => a ** -1.35 - b ** -1.35;
    const expected = (here * integral(heaviest, 60)) / integral(heaviest / 2, heaviest);
    expect(Math.abs(young.added - expected)).toBeLessThanOrEqual(1);
    expect(young.remnants + (young.phaseCounts['main sequence'] ?? 0)).toBeLessThanOrEqual(young.count);
    expect(() => ageCluster(stars, { age: 1 })).toThrow(/give presentAge/);
    expect(() => ageCluster([1], { age: 1, addDead: 'flat' as never })).toThrow(/choose one of salpeter1955/);
    expect(() => ageCluster('stars' as never, { age: 1 })).toThrow(/Catalogue or a list/);
  });
});

describe('oddities', () => {
  const age = 1;
  const top = turnoffMass({ age });
  const pair = evolve({ mass: 0.9, age });
  const straggler = evolve({ mass: 1.25 * top, age: 0.1 });
  const clumpMass = Array.from({ length: 400 }, (_, i) => top * (1 + i * 0.0005)).filter(
    (m) => evolve({ mass: m, age }).phase === 'core helium burning',
  );
  const clump = evolve({ mass: clumpMass[clumpMass.length >> 1], age });
  const at = (star: { temperature: number; luminosity: number }, up = 0) => ({
    logTeff: Math.log10(star.temperature),
    logL: Math.log10(star.luminosity) + up,
  });
  const stars = cluster(age, masses, [
    at(pair, Math.log10(2)),
    at(straggler),
    at(clump),
    { logTeff: 4.2, logL: -2.2 },
    { logTeff: 3.6, logL: 2.9 },
    { logTeff: 3.55, logL: 4.9 },
  ]);
  const found = oddities(stars, { age });
  const rows = (list: readonly { row: number }[]) => list.map((o) => o.row);

  it('lists each kind, with reason and probability', () => {
    expect(rows(found.equalMassBinaries)).toContain(60);
    expect(rows(found.blueStragglers)).toEqual([61]);
    expect(rows(found.redClump)).toEqual([62]);
    expect(rows(found.whiteDwarfs)).toEqual([63]);
    expect(rows(found.giants)).toContain(64);
    expect(rows(found.supergiants)).toEqual([65]);
    const best = found.equalMassBinaries.find((o) => o.row === 60);
    expect(best?.probability).toBeGreaterThan(0.5);
    expect(best?.reason).toMatch(/0\.3\d dex above the single-star sequence/);
    // Single stars are not called pairs.
    expect(found.equalMassBinaries.filter((o) => o.row < 60).length).toBeLessThanOrEqual(1);
    expect(found.blueStragglers[0].reason).toMatch(/hotter than the \d+ K at which single stars/);
    expect(String(found)).toContain('blue straggler');
  });

  it('checks the distance by the clump', () => {
    const c = found.clumpCheck;
    expect(c?.count).toBe(1);
    expect(Math.abs(c?.sigmas ?? 9)).toBeLessThan(2);
    // The same star taken 0.12 dex too faint is 0.3 mag farther away.
    const faint = oddities(cluster(age, masses, [at(clump, -0.12)]), { age }).clumpCheck;
    const shift = (faint?.modulusDifference.value ?? 0) - (c?.modulusDifference.value ?? 0);
    expect(Math.abs(shift - 0.3)).toBeLessThan(0.01);
  });

  it('weighs by membership and refuses what it does not know', () => {
    const half = stars.withColumns(
      [{ name: 'membershipProbability', values: new Float64Array(stars.rowCount).fill(0.5) }],
      'membership',
    );
    expect(oddities(half, { age }).whiteDwarfs[0].probability).toBeCloseTo(0.5 * found.whiteDwarfs[0].probability, 9);
    expect(oddities(half, { age, leastProbability: 0.6 }).whiteDwarfs).toEqual([]);
    expect(() => oddities(stars, { ages: 1 } as never)).toThrow(/unknown option "ages"/);
    expect(() => oddities(stars, { age, pairFraction: 2 })).toThrow(/pairFraction must lie in 0 to 1/);
  });
});
