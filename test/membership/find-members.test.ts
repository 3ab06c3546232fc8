import { beforeAll, describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { findMembers } from '../../kernel-lib/membership/find-members';
import type { Membership } from '../../kernel-lib/membership/membership';
import type { Measured } from '../../kernel-lib/quantity/measured';
import { fieldCatalogue, type SimulatedField, simulatedField } from './simulated-field';

/** Cluster shares of 1 to 30 % from 300 pc to 3 kpc. */
const CASES = [
  { stars: 4950, members: 50, distance: 300 },
  { stars: 2100, members: 900, distance: 300 },
  { stars: 2850, members: 150, distance: 800 },
  { stars: 2700, members: 300, distance: 1500 },
  { stars: 3500, members: 1500, distance: 3000 },
  { stars: 5400, members: 600, distance: 3000 },
];

const pull = (m: Measured | undefined, truth: number) =>
  m === undefined ? Number.NaN : (2 * (m.value - truth)) / (m.upper - m.lower);

/** The columns of a field, each to be changed at will. */
function changed(field: SimulatedField, change: (c: Record<string, Float64Array>, i: number) => void): Catalogue {
  const columns = Object.fromEntries(
    field.catalogue.columns.map((c) => [c.name, Float64Array.from(field.catalogue.numbers(c.name))]),
  );
  for (let i = 0; i < field.catalogue.rowCount; i++) change(columns, i);
  return fieldCatalogue(columns, 'changed field');
}

describe('findMembers on simulated fields', () => {
  const fits: { field: SimulatedField; members: Membership }[] = [];
  beforeAll(() => {
    CASES.forEach((f, k) => {
      for (const s of [1, 2]) {
        const field = simulatedField({ ...f, seed: 100 * k + s, correlations: s === 2 });
        fits.push({ field, members: findMembers(field.catalogue) });
      }
    });
  }, 240_000);

  it('finds every cluster', () => {
    expect(fits.map((f) => f.members.found)).toEqual(fits.map(() => true));
  });

  it('gives calibrated probabilities', () => {
    const stars = new Float64Array(10);
    const expected = new Float64Array(10);
    const real = new Float64Array(10);
    for (const { field, members } of fits) {
      members.probability.forEach((p, i) => {
        const decile = Math.min(9, Math.floor(10 * p));
        stars[decile]++;
        expected[decile] += p;
        real[decile] += field.member[i];
      });
    }
    for (let d = 0; d < 10; d++) {
      // Chance alone scatters the share of n stars by sqrt(p (1 - p) / n); 0.05 beside three times that.
      const p = expected[d] / stars[d];
      const chance = 3 * Math.sqrt((p * (1 - p)) / stars[d]);
      expect(Math.abs(real[d] / stars[d] - p), `decile ${d} of ${stars[d]} stars`).toBeLessThan(0.05 + chance);
    }
  });

  it('has unbiased centre, spread and count, and errors that cover the truth', () => {
    const pulls = fits.map(({ field, members }) => {
      const { truth } = field;
      const c = members.cluster;
      return [
        pull(c?.properMotionRa, truth.pmRa),
        pull(c?.properMotionDec, truth.pmDec),
        pull(c?.parallax, truth.parallax),
        pull(c?.dispersionRa, truth.dispersion),
        pull(c?.dispersionDec, truth.dispersion),
        pull(members.expectedCount, truth.members),
      ];
    });
    for (let j = 0; j < 6; j++) {
      const column = pulls.map((p) => p[j]);
      const mean = column.reduce((a, b) => a + b, 0) / column.length;
      // Mean of 12 unit normal numbers: 0.29; three of those, and a little for a field that no mixture matches.
      expect(Math.abs(mean), `mean pull ${j}`).toBeLessThan(0.95);
    }
    const all = pulls.flat();
    const rms = Math.sqrt(all.reduce((a, b) => a + b * b, 0) / all.length);
    // Scatter of the root mean square of 72 unit normal numbers: 0.083; three of those below, more above for the field's shape.
    expect(rms).toBeGreaterThan(0.75);
    expect(rms).toBeLessThan(1.35);
    expect(Math.max(...all.map(Math.abs))).toBeLessThan(4);
  });

  it('counts within a few per cent', () => {
    for (const { field, members } of fits) {
      const { value } = members.expectedCount;
      expect(Math.abs(value / field.truth.members - 1)).toBeLessThan(0.04 + 1 / Math.sqrt(field.truth.members));
      let sum = 0;
      for (const p of members.probability) sum += p;
      expect(value).toBeCloseTo(sum, 6);
    }
  });

  it('foretells contamination and completeness of a selection', () => {
    let chosen = 0;
    let wrong = 0;
    let foretold = 0;
    for (const { field, members } of fits) {
      const quality = members.quality(0.5);
      foretold += quality.contamination * quality.selected;
      for (let i = 0; i < members.probability.length; i++) {
        if (members.probability[i] < 0.5) continue;
        chosen++;
        if (!field.member[i]) wrong++;
      }
      expect(quality.completeness).toBeGreaterThan(0.9);
    }
    expect(Math.abs(wrong - foretold) / chosen).toBeLessThan(0.01);
  });
});

describe('findMembers with very many stars', () => {
  it('searches on some of them and finishes on all', () => {
    const field = simulatedField({ seed: 8, stars: 44_000, members: 1000, distance: 900 });
    const stages: string[] = [];
    const members = findMembers(field.catalogue, {
      fieldComponents: 3,
      onProgress: (done, total, stage = '') => {
        expect(done).toBeGreaterThanOrEqual(0);
        expect(done).toBeLessThanOrEqual(total);
        if (stages.at(-1) !== stage) stages.push(stage);
      },
    });
    expect(stages).toEqual(['field', 'starts', 'fit', 'all stars', 'done']);
    expect(members.usable).toBe(45_000);
    expect(Math.abs(members.expectedCount.value - 1000)).toBeLessThan(30);
    // Every star has its probability, those that the search did without as well.
    let hits = 0;
    members.probability.forEach((p, i) => {
      if (field.member[i] && p > 0.5) hits++;
    });
    expect(hits).toBeGreaterThan(930);
  }, 60_000);
});

describe('findMembers without a cluster', () => {
  it('says that there is none', () => {
    for (const stars of [60, 300, 1500, 4000]) {
      for (const seed of [1, 2, 3]) {
        const { catalogue } = simulatedField({ seed: 7000 + seed, stars, members: 0, distance: 500 });
        const none = findMembers(catalogue);
        expect(none.found, `${stars} stars, seed ${seed}`).toBe(false);
        expect(none.expectedCount.value).toBe(0);
        expect(none.probability.every((p) => p === 0)).toBe(true);
        expect(none.cluster).toBeNull();
        expect(none.select().rowCount).toBe(0);
        expect(String(none)).toMatch(/^No cluster found among/);
      }
    }
  }, 60_000);

  it('says so of stars too few or all alike', () => {
    const base = simulatedField({ seed: 3, stars: 100, members: 20, distance: 500 });
    const three = base.catalogue.select(
      Uint8Array.from({ length: 120 }, (_, i) => (i < 3 ? 1 : 0)),
      'three',
    );
    expect(findMembers(three).notes[0]).toMatch(/Only 3 stars .* at least 20/);
    expect(findMembers(three.select([0, 0, 0], 'none')).found).toBe(false);
    const alike = changed(base, (c, i) => {
      for (const name of Object.keys(c)) c[name][i] = name.endsWith('error') ? 0 : 1;
    });
    expect(findMembers(alike).notes[0]).toMatch(/proper motions of nearly all stars are equal/);
    const flat = changed(base, (c, i) => {
      c.parallax[i] = 1;
    });
    expect(findMembers(flat).notes[0]).toMatch(/useParallax: false/);
  });
});

describe('findMembers with difficult data', () => {
  const base = simulatedField({ seed: 5, stars: 1900, members: 100, distance: 800 });
  const found = findMembers(base.catalogue);

  const expectSame = (catalogue: Catalogue, tolerance = 2, options = {}) => {
    const other = findMembers(catalogue, options);
    expect(other.found).toBe(true);
    expect(Math.abs(other.expectedCount.value - 100)).toBeLessThan(tolerance);
    expect(Math.abs(pull(other.cluster?.properMotionRa, base.truth.pmRa))).toBeLessThan(3.5);
    return other;
  };

  it('gives the same answer twice, and with another seed the same within its error', () => {
    const again = findMembers(base.catalogue);
    expect(Array.from(again.probability)).toEqual(Array.from(found.probability));
    expect(again.logLikelihood).toBe(found.logLikelihood);
    const other = findMembers(base.catalogue, { seed: 2 });
    expect(Math.abs(other.expectedCount.value - found.expectedCount.value)).toBeLessThan(0.5);
  });

  it('is not moved by gross outliers', () => {
    const wild = changed(base, (c, i) => {
      if (i % 300 !== 7) return;
      c.pmra[i] = 1e6;
      c.parallax[i] = -1e5;
    });
    const members = expectSame(wild);
    expect(members.probability[7]).toBeLessThan(1e-6);
    expect(members.outlierShare).toBeGreaterThan(0.002);
  });

  it('takes errors of zero, and counts stars with errors so large that they say nothing by the share alone', () => {
    expectSame(
      changed(base, (c, i) => {
        for (const name of ['pmra_error', 'pmdec_error', 'parallax_error']) c[name][i] = 0;
      }),
      4,
    );
    const members = expectSame(
      changed(base, (c, i) => {
        if (i % 20 === 3) c.pmra_error[i] = c.pmdec_error[i] = c.parallax_error[i] = 1e8;
      }),
      6,
    );
    expect(members.probability[3]).toBeLessThan(0.2);
  });

  it('marks rows that lack a value or a sound error as missing, and counts them', () => {
    const holes = changed(base, (c, i) => {
      if (i % 20 === 3) c.parallax[i] = Number.NaN;
      if (i % 20 === 4) c.pmra_error[i] = -1;
      if (i % 20 === 5) c.pmdec[i] = Number.POSITIVE_INFINITY;
    });
    const members = expectSame(holes);
    expect(Array.from(members.probability.slice(3, 6))).toEqual([Number.NaN, Number.NaN, Number.NaN]);
    expect(members.usable).toBe(1700);
    const text = members.notes.join(' ');
    expect(text).toMatch(/200 of 2000 rows lack a value/);
    expect(text).toMatch(/100 of 2000 rows have a missing, negative or infinite error/);
    expect(members.withProbability().numbers('membershipProbability')[3]).toBeNaN();
  });

  it('finds the cluster where all parallaxes are negative, and doubts them', () => {
    const members = expectSame(
      changed(base, (c, i) => {
        c.parallax[i] -= 30;
      }),
    );
    expect(members.notes.join(' ')).toMatch(/More than half of the parallaxes are negative/);
  });

  it('finds the cluster in a close cut about its motion', () => {
    const { pmRa, pmDec } = base.truth;
    const ra = base.catalogue.numbers('pmra');
    const dec = base.catalogue.numbers('pmdec');
    const near = Uint8Array.from(ra, (x, i) => (Math.abs(x - pmRa) < 2 && Math.abs(dec[i] - pmDec) < 2 ? 1 : 0));
    expectSame(base.catalogue.select(near, 'box'));
  });

  it('does without parallaxes, and starts from a guess', () => {
    const motions = expectSame(base.catalogue, 12, { useParallax: false });
    expect(motions.cluster?.parallax.value).toBeNaN();
    const { pmRa, pmDec } = base.truth;
    expectSame(base.catalogue, 2, { guess: { properMotionRa: pmRa + 0.3, properMotionDec: pmDec } });
    const astray = findMembers(base.catalogue, { guess: { properMotionRa: 60, properMotionDec: 60 } });
    expect(astray.found).toBe(false);
    expect(astray.notes.join(' ')).toMatch(/Searched only near the guess/);
  });

  it('uses correlations where the catalogue has them, and stands in for impossible ones', () => {
    const field = simulatedField({ seed: 9, stars: 900, members: 100, distance: 800, correlations: true });
    expect(findMembers(field.catalogue).notes.join(' ')).toMatch(/Correlations of a star's errors used: 3 of 3/);
    const broken = changed(field, (c, i) => {
      if (i < 10) c.pmra_pmdec_corr[i] = i < 5 ? 1 : Number.NaN;
    });
    const members = findMembers(broken);
    expect(members.notes.join(' ')).toMatch(/10 rows have missing or impossible correlations/);
    expect(members.found).toBe(true);
    expect(members.probability.every((p) => p >= 0 && p <= 1)).toBe(true);
  });

  it('selects, with the probability as a column and a line of history', () => {
    const chosen = found.select(0.7);
    expect(chosen.rowCount).toBe(found.quality(0.7).selected);
    expect(chosen.numbers('membershipProbability').every((p) => p >= 0.7)).toBe(true);
    expect(chosen.history.at(-2)?.action).toMatch(/^findMembers, one mean motion: .* members expected$/);
    expect(chosen.history.at(-1)?.action).toBe('membership probability >= 0.7');
    expect(chosen.history.at(-1)?.note).toMatch(/contamination .* %, completeness .* %/);
    expect(base.catalogue.has('membershipProbability')).toBe(false);
    expect(() => found.select(1.2)).toThrow(/threshold must lie in 0 to 1/);
    expect(Object.isFrozen(found)).toBe(true);
  });

  it('shows itself as text', () => {
    const text = String(found);
    expect(text).toMatch(/^\d+(\.\d+)? ± \S+ members among 2000 stars of simulated field, one mean motion\n/);
    expect(text).toMatch(/proper motion in ra .* mas\/yr/);
    expect(text).toMatch(/evidence for a cluster .*: \d+; .* seed 1\./);
  });
});

describe('findMembers refuses', () => {
  const { catalogue } = simulatedField({ seed: 5, stars: 90, members: 10, distance: 800 });
  const without = (name: string) => {
    const roles = Object.fromEntries(Object.entries(catalogue.roles).filter(([, column]) => column !== name));
    return new Catalogue({ source: 'f.csv', rowCount: catalogue.rowCount, columns: catalogue.columnData(), roles });
  };

  it('a catalogue without the columns it needs, saying how to name them', () => {
    expect(() => findMembers(without('pmra'))).toThrow(
      /f\.csv has no column for properMotionRa\. .*roles: \{ "properMotionRa"/,
    );
    expect(() => findMembers(without('parallax_error'))).toThrow(
      /no standard errors of parallax\. .*roles: \{ "parallax\.error": "column" \}, .*errors: \{ parallax: 0\.1 \}/,
    );
    expect(() => findMembers(without('ra'), { motion: 'space-velocity' })).toThrow(/no column for rightAscension/);
    expect(findMembers(without('ra')).usable).toBe(100);
    expect(findMembers(without('parallax_error'), { errors: { parallax: 0.1 } }).usable).toBe(100);
  });

  it('options it does not know or that are out of range', () => {
    expect(() => findMembers(catalogue, { start: 3 } as never)).toThrow(
      /unknown option "start"\. Did you mean "starts"/,
    );
    expect(() => findMembers(catalogue, { motion: 'moving' as never })).toThrow(/choose one of mean, space-velocity/);
    expect(() => findMembers(catalogue, { fieldComponents: 2.5 })).toThrow(/fieldComponents must be a whole number/);
    expect(() => findMembers(catalogue, { maxIterations: 0 })).toThrow(/maxIterations must lie in 1/);
    expect(() => findMembers(catalogue, { errors: { parallaxes: 1 } as never })).toThrow(/Did you mean "parallax"/);
    expect(() => findMembers(catalogue, { guess: { parallax: 3 } })).toThrow(/guess needs properMotionRa and/);
    expect(() => findMembers(catalogue, { motion: 'space-velocity', guess: {} })).toThrow(/guess needs velocity/);
    expect(() => findMembers(catalogue, { motion: 'space-velocity', useParallax: false })).toThrow(/needs parallaxes/);
    expect(() => findMembers(catalogue, { correlations: { properMotions: 'rho' } })).toThrow(/column "rho"/);
    expect(() => findMembers({} as never)).toThrow(/must be a Catalogue/);
  });
});
