import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { measuredFromSigma } from '../../kernel-lib/quantity/measured';
import { angularDiameter, RADII_PER_MAS_PARSEC, SURFACE_BRIGHTNESS } from '../../kernel-lib/relations/angular-diameter';
import { inferRadii } from '../../kernel-lib/relations/infer-radii';
import { fitMassLuminosity } from '../../kernel-lib/relations/mass-luminosity';
import { simulateCluster } from '../../kernel-lib/simulate/simulate-cluster';
import { radiusFromLuminosity } from '../../kernel-lib/stars/luminosity';
import { southworthStars } from './southworth-2015';

const distance = measuredFromSigma(150, 3, 'pc');
const ebv = measuredFromSigma(0.04, 0.01, 'mag');
const cluster = simulateCluster({
  age: 0.6,
  distance: 150,
  ebv: 0.04,
  members: 120,
  binaryFraction: 0,
  magnitudeLimit: 14.5,
  bands: ['G', 'BP', 'RP', 'B', 'V', 'Ks'],
  seed: 3,
});
const how = { distance, ebv, colour: 'B-V', magnitude: 'V', age: 0.6, samples: 200 } as const;

describe('Stefan-Boltzmann radii', () => {
  it('are the measured ones for the eclipsing binaries of Southworth 2015', () => {
    // The catalogue makes luminosities from radii and temperatures, so this tests constants and the law, not nature.
    const stars = southworthStars();
    const deviations: number[] = [];
    let beyond = 0;
    for (let i = 0; i < stars.name.length; i++) {
      const radius = radiusFromLuminosity(10 ** stars.logLuminosity[i], 10 ** stars.logTeff[i]);
      const dex = Math.log10(radius) - stars.logRadius[i];
      deviations.push(Math.abs(10 ** dex - 1));
      const sigma = Math.hypot(0.5 * stars.logLuminosityError[i], stars.logRadiusError[i], 2 * stars.logTeffError[i]);
      if (Math.abs(dex) > 3 * sigma) beyond++;
    }
    deviations.sort((a, b) => a - b);
    expect(deviations.length).toBeGreaterThan(300);
    expect(deviations[deviations.length >> 1]).toBeLessThan(0.03);
    // Luminosities of other authors and misprints: at most one star in a hundred.
    expect(beyond).toBeLessThanOrEqual(3);
  });
});

describe('angularDiameter', () => {
  it('gives the Sun within the scatter of each relation', () => {
    // Seen from 10 pc the nominal Sun has a diameter of 0.9301 mas. Solar colours: V-K 1.55, B-V 0.65, M_V 4.83 (common practice,
    // no source); they are uncertain by 0.03 mag, 2 % of the diameter.
    const truth = 1 / (10 * RADII_PER_MAS_PARSEC);
    expect(truth).toBeCloseTo(0.9301, 3);
    const of = {
      'Kervella2004 V-K': [1.55, 4.83 - 1.55],
      'Boyajian2014 V-K': [1.55, 4.83],
      'Boyajian2014 B-V': [0.65, 4.83],
    } as const;
    for (const [relation, [colour, magnitude]] of Object.entries(of)) {
      const name = relation as keyof typeof of;
      const found = angularDiameter(colour, magnitude, { relation: name });
      const allowed = Math.hypot(0.02, 1.5 * SURFACE_BRIGHTNESS[name].scatter);
      expect(Math.abs(found / truth - 1), relation).toBeLessThan(allowed);
    }
  });

  it('gives Vega and Sirius as interferometers see them', () => {
    // Limb-darkened diameters 3.28 and 6.04 mas (from memory; Vega's is of a fast rotator seen pole-on); V-K 0.0 and -0.10, K 0.02 and
    // -1.35 (from memory): 5 % for the relation's scatter of rotators and the photometry of so bright stars.
    expect(Math.abs(angularDiameter(0, 0.02) / 3.28 - 1)).toBeLessThan(0.05);
    expect(Math.abs(angularDiameter(-0.1, -1.35) / 6.04 - 1)).toBeLessThan(0.05);
  });

  it('says nothing outside its colours, and scales as the flux', () => {
    expect(angularDiameter(5, 1)).toBeNaN();
    expect(angularDiameter(1, 5) / angularDiameter(1, 0)).toBeCloseTo(0.1, 12);
    expect(() => angularDiameter(1, 1, { relation: 'other' as never })).toThrow(/choose one of Kervella2004 V-K/);
  });
});

describe('inferRadii', () => {
  const radii = inferRadii(cluster, how);

  it('gives three radii that agree, and the quantities that follow', () => {
    const n = radii.count;
    const truth = cluster.numbers('true_mass');
    let close = 0;
    let usable = 0;
    for (let i = 0; i < n; i++) {
      const R = radii.stefanBoltzmann.value[i];
      const T = radii.temperature.value[i];
      if (!(R > 0) || !(radii.mass.value[i] > 0.6)) continue;
      usable++;
      expect(radii.stefanBoltzmann.lower[i]).toBeLessThan(R);
      expect(radii.wienPeak.value[i]).toBeCloseTo(2897.771955 / T, 3);
      if (Math.abs(radii.mass.value[i] / truth[i] - 1) < 0.1) close++;
    }
    expect(usable).toBeGreaterThan(60);
    expect(close / usable).toBeGreaterThan(0.8);
    expect(radii.agreement.map((a) => [a.first, a.second])).toEqual([
      ['Stefan-Boltzmann', 'angular diameter'],
      ['Stefan-Boltzmann', 'model'],
      ['angular diameter', 'model'],
    ]);
    // Relations of different authors differ by a few per cent, cool dwarfs by more.
    for (const a of radii.agreement) expect(Math.abs(a.ratio.value - 1), `${a.first}, ${a.second}`).toBeLessThan(0.1);
    const text = String(radii);
    for (const words of ['angular diameter / Stefan-Boltzmann', 'beyond 3 sigma', 'Kervella'])
      expect(text).toContain(words);
  });

  it('carries the shared distance: it moves all radii together and cancels in the ratio of the first two', () => {
    const far = inferRadii(cluster, { ...how, distance: measuredFromSigma(150, 15, 'pc') });
    const i = radii.stefanBoltzmann.value.findIndex((v, k) => v > 0 && radii.mass.value[k] > 0.9);
    const width = (r: typeof far) =>
      (r.stefanBoltzmann.upper[i] - r.stefanBoltzmann.lower[i]) / 2 / r.stefanBoltzmann.value[i];
    // 10 % in distance is 10 % in radius; with 200 draws the width is known to 7 %.
    expect(width(far)).toBeGreaterThan(0.08);
    expect(width(far)).toBeLessThan(0.13);
    expect(width(radii)).toBeLessThan(0.05);
    const ratio = far.agreement[0].ratio;
    expect((ratio.upper - ratio.lower) / 2).toBeLessThan(0.02);
  });

  it('gives gravity, density and flux of the Sun to a star like it', () => {
    const columns = [
      { name: 'v', values: Float64Array.of(4.83, 4.83), unit: 'mag' },
      { name: 'bv', values: Float64Array.of(0.65, 0.65), unit: 'mag' },
      { name: 'e', values: Float64Array.of(0.001, 0.001), unit: 'mag' },
    ];
    const roles = { 'magnitude.V': 'v', 'colour.B-V': 'bv', 'magnitude.V.error': 'e', 'colour.B-V.error': 'e' };
    const sun = new Catalogue({ source: 'two suns', rowCount: 2, columns, roles });
    const found = inferRadii(sun, { distance: 10, ebv: 0, mass: [1, 1], age: 4.57 });
    // Colour scales differ by 1-2 % in temperature at the Sun's colour.
    expect(Math.abs(found.stefanBoltzmann.value[0] - 1)).toBeLessThan(0.05);
    expect(Math.abs(found.logGravity.value[0] - 4.438)).toBeLessThan(0.04);
    expect(Math.abs(found.density.value[0] / 1.41 - 1)).toBeLessThan(0.15);
    // The solar constant, 1361 W/m2, from 10 pc: divided by (206264.8 x 10) squared.
    expect(Math.abs(found.flux.value[0] / (1361 / 2062648 ** 2) - 1)).toBeLessThan(0.05);
    // The Sun now, by the models to 5 %.
    expect(Math.abs(found.model.value[0] - 1)).toBeLessThan(0.05);
    expect(Math.abs(found.diameter.value[0] / 0.93 - 1)).toBeLessThan(0.15);
    expect(found.mass.value[0]).toBeCloseTo(1, 9);
    expect(found.catalogue.numbers('radius_stefan_boltzmann')[1]).toBe(found.stefanBoltzmann.value[1]);
    expect(found.agreement.length).toBe(3);
  });

  it('takes masses from a fitted relation', () => {
    const { logTeff: _, logTeffError: __, ...known } = southworthStars();
    const fit = fitMassLuminosity(known, { breaks: [0.45, 2.4], resamples: 100 });
    const found = inferRadii(cluster, { ...how, mass: fit, samples: 100 });
    const i = radii.mass.value.findIndex((m) => m > 0.9 && m < 1.3);
    expect(Math.abs(found.mass.value[i] / radii.mass.value[i] - 1)).toBeLessThan(0.15);
    // The scatter of the relation, 0.1 dex in L, is 0.025 dex in mass.
    expect(found.mass.upper[i] - found.mass.lower[i]).toBeGreaterThan(radii.mass.upper[i] - radii.mass.lower[i]);
  });

  it('says what is wrong', () => {
    expect(() => inferRadii(cluster, { ...how, distances: 3 } as never)).toThrow(
      /unknown option "distances".*distance/,
    );
    expect(() => inferRadii(cluster, { ...how, distance: -4 })).toThrow(/distance must lie in/);
    expect(() => inferRadii(cluster, { ...how, ebv: 'much' as never })).toThrow(
      /ebv must be a number or a measured value/,
    );
    expect(() => inferRadii(cluster, { ...how, mass: [1, 2] })).toThrow(/mass has 2 values for 120 stars/);
    expect(() => inferRadii(cluster, { ...how, mass: 7 as never })).toThrow(
      /column's name, a list of solar masses, or a fit/,
    );
    const bare = new Catalogue({ source: 'bare', rowCount: 1, columns: [{ name: 'x', values: Float64Array.of(1) }] });
    expect(() => inferRadii(bare, { distance: 10, ebv: 0 })).toThrow(/bare has no colour/);
    const gaia = simulateCluster({ age: 1, distance: 100, members: 10, bands: ['G', 'BP', 'RP'], seed: 1 });
    expect(() => inferRadii(gaia, { distance: 100, ebv: 0, surfaceBrightness: 'Boyajian2014 B-V' })).toThrow(
      /needs B-V and V/,
    );
    expect(inferRadii(gaia, { distance: 100, ebv: 0, samples: 50 }).notes.join(' ')).toMatch(
      /No radius by angular diameter/,
    );
  });
});
