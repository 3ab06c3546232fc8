import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { mainSequenceLifetime } from '../../kernel-lib/models/lifetime';
import { randomStream } from '../../kernel-lib/quantity/random';
import type { RelationMethod } from '../../kernel-lib/relations/line-methods';
import { mainSequencePlace, mainSequenceRadii, PLACE } from '../../kernel-lib/relations/main-sequence-stars';
import { fitMassLuminosity } from '../../kernel-lib/relations/mass-luminosity';
import { fitMassRadius } from '../../kernel-lib/relations/mass-radius';
import { MASS_LUMINOSITY_RELATIONS, publishedLuminosity } from '../../kernel-lib/relations/published-relations';
import { southworthStars } from './southworth-2015';

const binaries = southworthStars();
const { logTeff: _, logTeffError: __, ...known } = binaries;

/** Stars on log L = 4 log M with errors and scatter. */
function invented(n: number, seed: number, exponent = 4) {
  const s = randomStream(seed);
  const logMass = Float64Array.from({ length: n }, () => -0.3 + s.uniform());
  const logMassError = logMass.map(() => 0.01);
  const logLuminosityError = logMass.map(() => 0.05);
  const logLuminosity = logMass.map((m) => exponent * m + 0.05 * s.normal() + 0.05 * s.normal());
  return { logMass: logMass.map((m) => m + 0.01 * s.normal()), logMassError, logLuminosity, logLuminosityError };
}

describe('fitMassLuminosity on the eclipsing binaries of Southworth 2015', () => {
  const place = mainSequencePlace(binaries.logMass, binaries.logRadius, binaries.logRadiusError, 0);
  const onSequence = Array.from(place.keys()).filter((i) => place[i] === PLACE.on);

  it('takes at least 120 main-sequence stars over 0.2 to 25 solar masses', () => {
    expect(onSequence.length).toBeGreaterThanOrEqual(120);
    const masses = onSequence.map((i) => 10 ** binaries.logMass[i]);
    expect(Math.min(...masses)).toBeLessThan(0.22);
    expect(Math.max(...masses)).toBeGreaterThan(25);
    for (const evolved of ['TZ For A', 'AI Phe B', 'CF Tau A']) {
      expect(place[binaries.name.indexOf(evolved)], evolved).toBe(PLACE.larger);
    }
    // Not yet on the main sequence, in Upper Scorpius.
    expect(place[binaries.name.indexOf('UScoCTIO 5 A')]).toBe(PLACE.larger);
  });

  it('finds the exponents of Eker et al. 2018 in its six ranges of mass', { timeout: 60000 }, () => {
    const published = MASS_LUMINOSITY_RELATIONS.Eker2018.pieces;
    const fit = fitMassLuminosity(known, { breaks: published.slice(1).map((p) => p.from), resamples: 400 });
    let chiSquare = 0;
    for (const [k, exponent] of fit.exponents.entries()) {
      const error = Math.hypot((exponent.upper - exponent.lower) / 2, published[k].exponentError);
      const sigmas = (exponent.value - published[k].exponent) / error;
      // Six comparisons: one beyond 2 sigma in four such sets would be chance, beyond 2.5 in thirteen.
      expect(Math.abs(sigmas), `piece ${k + 1}: ${exponent} against ${published[k].exponent}`).toBeLessThan(2);
      chiSquare += sigmas * sigmas;
    }
    // 95 % point of chi-square with six degrees of freedom.
    expect(chiSquare).toBeLessThan(12.6);
    // The fit runs through the published luminosities: they scatter by 0.08-0.17 dex about theirs, so their means agree far better.
    for (const m of [0.3, 0.6, 0.9, 1.5, 4, 12]) {
      expect(Math.abs(Math.log10(fit.luminosity(m).value / publishedLuminosity(m))), `${m} solar masses`).toBeLessThan(
        0.1,
      );
    }
  });

  it('has 3.5 within the exponents found for 1 to 10 solar masses (common practice, no source)', {
    timeout: 60000,
  }, () => {
    const rows = onSequence.filter((i) => binaries.logMass[i] >= 0 && binaries.logMass[i] <= 1);
    const some = Object.fromEntries(
      Object.entries(known).map(([key, values]) => [key, rows.map((i) => values[i])]),
    ) as unknown as typeof known;
    const fit = fitMassLuminosity(some, { breaks: [2.4, 5], resamples: 300 });
    expect(Math.min(...fit.exponents.map((e) => e.lower))).toBeLessThan(3.5);
    expect(Math.max(...fit.exponents.map((e) => e.upper))).toBeGreaterThan(3.5);
  });

  it('chooses breaks by BIC and says what evolved stars do', { timeout: 60000 }, () => {
    const fit = fitMassLuminosity(known, { breaks: 'auto', resamples: 300 });
    expect(fit.bic.map((s) => s.breaks)).toEqual([0, 1, 2, 3]);
    const best = fit.bic.reduce((a, b) => (b.bic < a.bic ? b : a));
    expect(fit.breaks.length).toBe(best.breaks);
    expect(best.breaks).toBeGreaterThanOrEqual(2);
    const [evolved, pairs] = fit.comparison.others;
    expect(evolved.count).toBe(binaries.name.length);
    // Giants of 1-3 solar masses are up to 100 times too bright: the scatter must grow.
    expect(evolved.scatter.value).toBeGreaterThan(2 * fit.scatter.value);
    expect(pairs.count).toBeLessThan(fit.starCount);
    expect(fit.excluded.length + fit.starCount).toBe(binaries.name.length);
    expect(fit.comparison.bias.join(' ')).toMatch(/Evolved stars.*Unresolved pairs/);
    const text = String(fit);
    for (const words of [
      'exponent',
      'BIC',
      'intrinsic scatter',
      'Eker et al. 2018',
      'lifetime',
      'Outliers',
      'Not fitted',
    ]) {
      expect(text).toContain(words);
    }
  });

  it('gives lifetimes beside those of the models', () => {
    const fit = fitMassLuminosity(known, { breaks: [0.45, 2.4], resamples: 200 });
    for (const [k, e] of fit.exponents.entries()) {
      expect(fit.lifetimeExponents[k].value).toBeCloseTo(1 - e.value, 12);
      expect(fit.lifetimeExponents[k].lower).toBeCloseTo(1 - e.upper, 12);
    }
    const life = fit.lifetime(2);
    expect(life.model).toBe(mainSequenceLifetime({ mass: 2 }));
    expect(life.relation.value).toBeCloseTo(20 / fit.luminosity(2).value, 1);
    // Ten billion years times M / L is a rule of thumb: within a factor of 1.5 of the models near the Sun's mass.
    expect(Math.abs(Math.log(fit.lifetime(1.2).ratio))).toBeLessThan(Math.log(1.5));
    expect(fit.lifetime(60).relation.value).toBeNaN();
    expect(fit.lifetime(60).model).toBeGreaterThan(0.003);
  });

  it('fits the radii too', { timeout: 60000 }, () => {
    const fit = fitMassRadius(known, { breaks: 1, resamples: 300 });
    // Demircan & Kahraman 1991 (from memory): the slope falls from 0.945 to 0.555 at 1.66 solar masses.
    expect(fit.breaks[0].value).toBeGreaterThan(1.3);
    expect(fit.breaks[0].value).toBeLessThan(2.3);
    expect(fit.exponents[0].value).toBeGreaterThan(0.85);
    expect(fit.exponents[0].value).toBeLessThan(1.2);
    expect(fit.exponents[1].value).toBeGreaterThan(0.4);
    expect(fit.exponents[1].value).toBeLessThan(0.65);
  });
});

describe('fitMassLuminosity on invented stars', () => {
  const methods: RelationMethod[] = [
    'posterior',
    'errors-in-both-axes',
    'y-on-x',
    'x-on-y',
    'bisector',
    'theil-sen',
    'student-t',
  ];
  it.each(methods)('%s finds the exponent', (method) => {
    const fit = fitMassLuminosity(invented(150, 4), { method, resamples: 200 });
    const error = (fit.exponents[0].upper - fit.exponents[0].lower) / 2;
    expect(error).toBeGreaterThan(0.01);
    expect(error).toBeLessThan(0.05);
    // Four sigma: the seed is fixed, the ordinary lines are biased by the x errors by a fraction of a per cent.
    expect(Math.abs(fit.exponents[0].value - 4)).toBeLessThan(4 * error);
    expect(fit.scatter.value).toBeLessThan(0.1);
  });

  it('is the same again with the same seed, and not with another', () => {
    const stars = invented(60, 5);
    const at = (seed: number) => fitMassLuminosity(stars, { breaks: 1, seed, resamples: 100 }).exponents[0].value;
    expect(at(3)).toBe(at(3));
    expect(at(3)).not.toBe(at(4));
  });

  it('names an outlier and a star of high leverage', () => {
    const stars = { ...invented(80, 6), name: Array.from({ length: 80 }, (_, i) => `N${i}`) };
    stars.logLuminosity[17] += 1.5;
    stars.logMass[30] = 2.5;
    stars.logLuminosity[30] = 10;
    const fit = fitMassLuminosity(stars, { resamples: 100 });
    expect(fit.outliers[0].name).toBe('N17');
    expect(fit.outliers[0].row).toBe(17);
    expect(fit.outliers[0].residual).toBeGreaterThan(1);
    expect(fit.leverage[0].name).toBe('N30');
    expect(fit.leverage[0].timesAverage).toBeGreaterThan(3);
  });

  it('reads a catalogue by usual and by given names', () => {
    const stars = invented(40, 7);
    const columns = [
      { name: 'mass', values: stars.logMass.map((v) => 10 ** v) },
      { name: 'mass_error', values: stars.logMass.map((v) => 10 ** v * 0.01 * Math.LN10) },
      { name: 'log_l', values: stars.logLuminosity },
      { name: 'sigma', values: stars.logLuminosityError },
    ];
    const catalogue = new Catalogue({ source: 'invented', rowCount: 40, columns });
    const fit = fitMassLuminosity(catalogue, { columns: { logLuminosityError: 'sigma' }, resamples: 100 });
    expect(fit.exponents[0].value).toBeCloseTo(fitMassLuminosity(stars, { resamples: 100 }).exponents[0].value, 6);
    expect(() => fitMassLuminosity(catalogue, { columns: { luminosity: 'lum' } })).toThrow(/no column or role "lum"/);
    expect(() => fitMassRadius(catalogue)).toThrow(/invented has no column for radius.*columns: \{ radius/);
  });

  it('draws its curve through its own values and reports progress', () => {
    let calls = 0;
    const fit = fitMassLuminosity(invented(50, 8), { resamples: 100, onProgress: () => void calls++ });
    const curve = fit.curve(20);
    expect(curve.mass.length).toBe(20);
    expect(curve.luminosity[7]).toBe(fit.luminosity(curve.mass[7]).value);
    expect(curve.lower.every((v, i) => v < curve.upper[i])).toBe(true);
    expect(calls).toBeGreaterThan(0);
  });
});

describe('mainSequenceRadii', () => {
  it('leaves room for the Sun through its main sequence and not for giants', () => {
    const { least, greatest } = mainSequenceRadii([1]);
    expect(least[0]).toBeLessThan(0.85);
    expect(greatest[0]).toBeGreaterThan(1.3);
    expect(greatest[0]).toBeLessThan(2);
    expect(mainSequenceRadii([0.05]).least[0]).toBeNaN();
  });
});

describe('bad input', () => {
  const good = invented(30, 9);
  const plain = () => ({
    mass: good.logMass.map((v) => 10 ** v),
    massError: good.logMass.map((v) => 0.02 * 10 ** v),
    luminosity: good.logLuminosity.map((v) => 10 ** v),
    luminosityError: good.logLuminosity.map((v) => 0.1 * 10 ** v),
    name: Array.from(good.logMass, (_, i) => `S${i}`),
  });
  it('one star', () => {
    expect(() => fitMassLuminosity({ mass: [1], luminosity: [1], massError: [0.1], luminosityError: [0.1] })).toThrow(
      'fitMassLuminosity: 1 star left to fit; a relation needs at least 4.',
    );
  });
  it('identical masses', () => {
    expect(() => fitMassLuminosity({ ...plain(), mass: new Float64Array(30).fill(2) })).toThrow(
      /all 30 stars have mass 2; an exponent needs a range/,
    );
  });
  it('zero and missing errors', () => {
    const stars = plain();
    stars.massError[4] = 0;
    expect(() => fitMassLuminosity(stars)).toThrow(
      /error of the mass of S4 is zero; method "posterior" needs positive/,
    );
    const { luminosityError: _, ...less } = plain();
    expect(() => fitMassLuminosity(less)).toThrow(/error of the fitted quantity of S0 is missing/);
    expect(fitMassLuminosity(less, { method: 'y-on-x', resamples: 50 }).exponents[0].value).toBeCloseTo(4, 0);
    expect(() => fitMassLuminosity({ ...plain(), massError: new Float64Array(30).fill(-1) })).toThrow(
      /cannot be negative/,
    );
  });
  it('negative luminosity', () => {
    const stars = plain();
    stars.luminosity[11] = -3;
    expect(() => fitMassLuminosity(stars)).toThrow(/luminosity of S11 is -3; it must be positive/);
  });
  it('breaks outside the range, or with too few stars', () => {
    expect(() => fitMassLuminosity(plain(), { breaks: [50] })).toThrow(
      /break at 50 solar masses lies outside the stars, 0\.5/,
    );
    expect(() => fitMassLuminosity(plain(), { breaks: [4.4] })).toThrow(/\d stars on piece 2 of 2/);
    expect(() => fitMassLuminosity(plain(), { breaks: 1.5 })).toThrow(/give a whole one, or a list/);
    expect(() => fitMassLuminosity(plain(), { breaks: 'many' as never })).toThrow(
      /number of breaks, "auto", or a list/,
    );
    expect(() =>
      fitMassLuminosity(
        {
          mass: [1, 2, 3, 4, 5],
          massError: [1, 1, 1, 1, 1],
          luminosity: [1, 2, 3, 4, 5],
          luminosityError: [1, 1, 1, 1, 1],
        },
        { breaks: 1 },
      ),
    ).toThrow(/5 stars for 2 pieces/);
  });
  it('all stars evolved', () => {
    const stars = { ...plain(), radius: good.logMass.map((v) => 30 * 10 ** v) };
    expect(() => fitMassLuminosity(stars)).toThrow(/none of 30 stars is on the main sequence: 30 are larger/);
    expect(fitMassLuminosity(stars, { select: 'all', resamples: 50 }).starCount).toBe(30);
    expect(() => fitMassLuminosity(plain(), { select: 'main-sequence' })).toThrow(/no radii are given/);
  });
  it('options and lists that do not fit', () => {
    expect(() => fitMassLuminosity(plain(), { methods: 'york' } as never)).toThrow(/unknown option "methods".*method/);
    expect(() => fitMassLuminosity(plain(), { method: 'york' as never })).toThrow(
      /choose one of posterior, errors-in-both-axes/,
    );
    expect(() => fitMassLuminosity(plain(), { method: 'bisector', continuous: true })).toThrow(/fits each piece alone/);
    expect(() => fitMassLuminosity({ ...plain(), luminosity: [1, 2] })).toThrow(
      /luminosity has 2 values for 30 masses/,
    );
    expect(() => fitMassLuminosity({ ...plain(), correlation: new Float64Array(30).fill(1) })).toThrow(
      /must lie in -1 to 1/,
    );
    expect(() => fitMassLuminosity(null as never)).toThrow(/stars must be a Catalogue or lists/);
  });
});
