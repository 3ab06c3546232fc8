import { describe, expect, it } from 'vitest';
import { colourExcessRatio } from '../../kernel-lib/extinction/band-coefficients';
import { simulateCluster } from '../../kernel-lib/simulate/simulate-cluster';

const BASE = { age: 0.7, distance: 760, ebv: 0.1, members: 400, fieldStars: 2000, seed: 3 } as const;

describe('simulateCluster', () => {
  it('gives the same catalogue for the same seed, another for another', () => {
    const a = simulateCluster(BASE);
    const b = simulateCluster(BASE);
    for (const { name, kind } of a.columns) if (kind === 'number') expect(a.numbers(name)).toEqual(b.numbers(name));
    expect(a.numbers('ra')).not.toEqual(simulateCluster({ ...BASE, seed: 4 }).numbers('ra'));
    expect(a.rowCount).toBe(2400);
    expect(a.numbers('true_member').reduce((s, m) => s + m, 0)).toBe(400);
  });

  it('puts members at their distance and motion, with the errors it states', () => {
    const c = simulateCluster({ ...BASE, members: 3000, fieldStars: 0, velocityDispersion: 0 });
    const column = (name: string) => c.numbers(name);
    let parallax = 0;
    let chi2 = 0;
    let pm = 0;
    const n = c.rowCount;
    for (let i = 0; i < n; i++) {
      parallax += column('true_distance')[i] / n;
      chi2 += ((column('parallax')[i] - 1000 / column('true_distance')[i]) / column('parallax_error')[i]) ** 2 / n;
      pm += column('pm_ra')[i] / n;
    }
    // Depth of a few pc over 3000 stars: 0.1 pc; chi-square of 3000: 2.6 %; mean of errors of 0.1 mas/yr.
    expect(Math.abs(parallax - 760)).toBeLessThan(0.5);
    expect(Math.abs(chi2 - 1)).toBeLessThan(0.1);
    expect(Math.abs(pm + 6)).toBeLessThan(0.02);
  });

  it('brightens equal binaries by 0.753 mag and reddens by the law', () => {
    const plain = simulateCluster({
      ...BASE,
      fieldStars: 0,
      binaryFraction: 0,
      ebv: 0,
      photometricErrorScale: 0,
      radius: 0,
    });
    const pairs = simulateCluster({
      ...BASE,
      fieldStars: 0,
      binaryFraction: 1,
      massRatioSlope: 20,
      ebv: 0,
      photometricErrorScale: 0,
      radius: 0,
      magnitudeLimit: 25,
    });
    const alone = simulateCluster({
      ...BASE,
      fieldStars: 0,
      binaryFraction: 0,
      ebv: 0,
      photometricErrorScale: 0,
      radius: 0,
      magnitudeLimit: 25,
      members: 4000,
    });
    const byMass = new Map<number, number>();
    for (let i = 0; i < alone.rowCount; i++) byMass.set(alone.numbers('true_mass')[i], alone.numbers('mag_g')[i]);
    const masses = Float64Array.from(byMass.keys()).sort();
    let checked = 0;
    for (let i = 0; i < pairs.rowCount; i++) {
      const mass = pairs.numbers('true_mass')[i];
      if (pairs.numbers('true_mass_secondary')[i] / mass < 0.999) continue;
      const k = masses.findIndex((m) => m > mass);
      if (k < 1 || masses[k] - masses[k - 1] > 2e-3 * mass) continue;
      const single = byMass.get(masses[k]) as number;
      // 2.5 log10 2; nearest single star within 0.2 % in mass, so within 0.02 mag.
      expect(Math.abs(single - pairs.numbers('mag_g')[i] - 0.7526)).toBeLessThan(0.03);
      checked++;
    }
    expect(checked).toBeGreaterThan(5);
    const red = simulateCluster({
      ...BASE,
      fieldStars: 0,
      binaryFraction: 0,
      ebv: 0.3,
      photometricErrorScale: 0,
      radius: 0,
      magnitudeLimit: 25,
      members: 50,
    });
    const blue = simulateCluster({
      ...BASE,
      fieldStars: 0,
      binaryFraction: 0,
      ebv: 0,
      photometricErrorScale: 0,
      radius: 0,
      magnitudeLimit: 25,
      members: 50,
    });
    const sorted = (c: typeof red, name: string) => Float64Array.from(c.numbers(name)).sort();
    const excess = (c: typeof red) => {
      const [b, v] = [c.numbers('mag_b'), c.numbers('mag_v')];
      return new Map(Array.from(c.numbers('true_mass'), (m, i) => [m, b[i] - v[i]]));
    };
    const [before, after] = [excess(blue), excess(red)];
    for (const [mass, colour] of before) expect((after.get(mass) as number) - colour).toBeCloseTo(0.3, 9);
    expect(sorted(red, 'mag_v')[0] - sorted(blue, 'mag_v')[0]).toBeCloseTo(0.3 * 3.1, 2);
    expect(colourExcessRatio('B-V')).toBeCloseTo(1, 9);
    expect(plain.rowCount).toBe(400);
  });

  it('has a field that is not the cluster: motions and parallaxes of a disc', () => {
    const c = simulateCluster({ ...BASE, members: 0, fieldStars: 3000 });
    const near = c.numbers('true_distance');
    const sorted = Float64Array.from(near).sort();
    expect(sorted[1500]).toBeGreaterThan(700);
    expect(sorted[1500]).toBeLessThan(3500);
    let spread = 0;
    for (const pm of c.numbers('pm_ra')) spread += Math.min(pm * pm, 400) / 3000;
    expect(Math.sqrt(spread)).toBeGreaterThan(2);
    expect(Math.max(...c.numbers('mag_g'))).toBeLessThan(18.2);
    for (let i = 0; i < c.rowCount; i++) {
      const d = Math.hypot((c.numbers('ra')[i] - 118) * Math.cos((14 * Math.PI) / 180), c.numbers('dec')[i] + 14);
      expect(d).toBeLessThan(1.001);
    }
  });

  it('lets ended stars shine on as white dwarfs when asked', () => {
    const c = simulateCluster({ ...BASE, fieldStars: 0, members: 4000, whiteDwarfs: true, magnitudeLimit: 25 });
    const heavy = c.numbers('true_mass').filter((m) => m > 3);
    expect(heavy.length).toBeGreaterThan(5);
  });

  it('says what is wrong', () => {
    expect(() => simulateCluster({ ...BASE, agee: 1 } as never)).toThrow(/unknown option "agee".*"age"/);
    expect(() => simulateCluster({ ...BASE, age: -1 })).toThrow(/age must lie in 0.001 to 14 Gyr, got -1/);
    expect(() => simulateCluster({ ...BASE, bands: ['X'] as never })).toThrow(/choose one of U, B, V/);
    expect(() => simulateCluster({ ...BASE, magnitudeLimit: 1 })).toThrow(/raise magnitudeLimit/);
  });
});
