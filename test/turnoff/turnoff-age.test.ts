import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import type { ColumnValues } from '../../kernel-lib/catalogue/columns';
import { measuredFromSigma } from '../../kernel-lib/quantity/measured';
import { turnoffAge } from '../../kernel-lib/turnoff/turnoff-age';
import { cluster, MODULUS, only } from './clusters';

const EBV = measuredFromSigma(0.11, 0.01, 'mag');
const PLACE = { ebv: EBV, distanceModulus: measuredFromSigma(MODULUS, 0.02, 'mag') };
const holds = ([low, high]: readonly [number, number], age: number) => low <= age && age <= high;

describe('turnoffAge', () => {
  for (const colour of ['BP-RP', 'B-V'] as const) {
    it(`finds ages from 20 Myr to 10 Gyr in ${colour}`, () => {
      let inside = 0;
      let tried = 0;
      for (const [age, distance] of [
        [0.02, 812],
        [0.1, 812],
        [0.3, 812],
        [1.5, 812],
        [3, 812],
        [5, 500],
        [8, 400],
        [10, 400],
      ]) {
        const distanceModulus = measuredFromSigma(5 * Math.log10(distance) - 5, 0.02, 'mag');
        const found = turnoffAge(cluster(31, { age, distance }), { ebv: EBV, distanceModulus, colour });
        tried++;
        if (holds(found.age95, age)) inside++;
        // 0.1 dex at 20 Myr, where a handful of stars tells, to 0.03 dex for the others.
        const most = age < 0.2 ? 0.12 : 0.04;
        expect(Math.abs(found.logAge.value - 9 - Math.log10(age)), `${age} Gyr`).toBeLessThan(most);
      }
      expect(inside).toBeGreaterThanOrEqual(tried - 1);
    });
  }

  it('is not broken by binaries, blue stragglers, white dwarfs and field stars', () => {
    const hosts = [
      cluster(11, { binaryFraction: 0 }),
      cluster(12, { binaryFraction: 0.8 }),
      cluster(13, { whiteDwarfs: true, magnitudeLimit: 22, members: 900 }),
      cluster(14, { fieldStars: 150 }),
      // Stars of 0.1 Gyr among those of 0.7: bluer and brighter than the turnoff, as stragglers are.
      withRows(
        cluster(15),
        only(cluster(16, { age: 0.1, members: 300 }), (g, c) => g < 11.3 && c < 0.4),
        8,
      ),
    ];
    for (const [k, host] of hosts.entries()) {
      const found = turnoffAge(host, PLACE);
      expect(holds(found.age95, 0.7), `case ${k}: ${found.age95}`).toBe(true);
      expect(found.age95[1] - found.age95[0]).toBeLessThan(0.15);
    }
  });

  it('gives turnoff mass and place, and the textbook age beside them', () => {
    const found = turnoffAge(cluster(21), PLACE);
    expect(found.bounded).toBe(true);
    // Hurley, Pols & Tout 2000, Eq. 4-5, at Z = 0.02: a star of 2.4 solar masses leaves the main sequence at 0.7 Gyr.
    expect(Math.abs(found.turnoffMass.value - 2.4)).toBeLessThan(0.06);
    expect(found.textbookAge).toBeCloseTo(10 * found.turnoffMass.value ** -2.5, 9);
    expect(found.textbookRatio).toBeCloseTo(found.textbookAge / found.age.value, 9);
    expect(found.logAge.value).toBeCloseTo(9 + Math.log10(found.age.value), 9);
    const { logAge, density } = found.posterior;
    let total = 0;
    for (let k = 1; k < logAge.length; k++) total += 0.5 * (density[k] + density[k - 1]) * (logAge[k] - logAge[k - 1]);
    expect(total).toBeCloseTo(1, 6);
    expect(String(found)).toMatch(/textbook age/);
  });

  it('carries errors of distance, reddening and metallicity through', () => {
    const width = (options: object) => {
      const [low, high] = turnoffAge(cluster(22), { ...PLACE, ...options }).age95;
      return high / low;
    };
    const plain = width({});
    expect(width({ ebv: 0.11, distanceModulus: MODULUS })).toBeLessThan(plain);
    expect(width({ metallicityError: 0.2 })).toBeGreaterThan(plain);
    // A distance or reddening that the stars contradict is named.
    const wrong = turnoffAge(cluster(22), { ...PLACE, distanceModulus: measuredFromSigma(MODULUS + 0.3, 0.02, 'mag') });
    expect(wrong.notes.join(' ')).toMatch(/errors from the value given/);
  });

  it('says what the stars do not tell', () => {
    const noTurnoff = turnoffAge(
      only(cluster(23), (g) => g > 14),
      PLACE,
    );
    expect(noTurnoff.bounded).toBe(false);
    expect(noTurnoff.age95[1]).toBeGreaterThan(0.7);
    expect(noTurnoff.notes.join(' ')).toMatch(/upper limit to the age only, as no turnoff shows in them: younger than/);
    const dust = turnoffAge(
      only(cluster(24, { members: 0, fieldStars: 600 }), (g) => g < 17),
      PLACE,
    );
    expect(dust.notes.join(' ')).toMatch(/fit no sequence/);
    expect(() => turnoffAge(cluster(1, { members: 3 }), PLACE)).toThrow(
      /turnoffAge: 3 stars have BP-RP and G; at least 12 are needed/,
    );
    expect(() => turnoffAge(cluster(1), { ...PLACE, ebv: measuredFromSigma(Number.NaN, Number.NaN) })).toThrow(
      /ebv is not determined/,
    );
    expect(() => turnoffAge(cluster(1), { ...PLACE, age: 1 } as never)).toThrow(/unknown option "age"/);
  });

  it('places the stars of a near cluster one by one', () => {
    // A depth of 10 pc at 47 pc smears magnitudes by 0.4 mag; errors of parallax are 0.02 mas.
    const near = cluster(25, { distance: 47, ebv: 0, radius: 4, members: 250, magnitudeLimit: 13, fieldRadiusDeg: 30 });
    const found = turnoffAge(near, { ebv: 0, distanceModulus: 'parallax' });
    expect(holds(found.age95, 0.7)).toBe(true);
    expect(found.age95[1] - found.age95[0]).toBeLessThan(0.2);
  });

  it('reports progress up to the end', () => {
    const seen: number[] = [];
    turnoffAge(cluster(26, { members: 100 }), { ...PLACE, onProgress: (done, total) => seen.push(done / total) });
    expect(seen.at(-1)).toBe(1);
    for (let k = 1; k < seen.length; k++) expect(seen[k]).toBeGreaterThanOrEqual(seen[k - 1]);
  });
});

/** A catalogue with the first rows of another added. */
function withRows(host: ReturnType<typeof cluster>, guests: ReturnType<typeof cluster>, count: number) {
  expect(guests.rowCount).toBeGreaterThanOrEqual(count);
  const columns = host.columnData().map((c) => {
    const more = guests.values(c.name);
    const values: ColumnValues =
      c.values instanceof Float64Array
        ? Float64Array.from([...c.values, ...(more as Float64Array).subarray(0, count)])
        : ([...c.values, ...Array.from(more as ArrayLike<unknown>).slice(0, count)] as ColumnValues);
    return { ...c, values };
  });
  return new Catalogue({
    source: 'with guests',
    rowCount: host.rowCount + count,
    columns,
    roles: host.roles,
  });
}
