import { describe, expect, it } from 'vitest';
import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { evolve } from '../../kernel-lib/models/evolve';
import { mainSequenceLifetime } from '../../kernel-lib/models/lifetime';
import { zeroAge } from '../../kernel-lib/models/zero-age';
import {
  type EvolutionaryGroup,
  evolutionaryGroup,
  evolutionaryGroups,
} from '../../kernel-lib/stars/evolutionary-group';
import { lineAt, TERMINAL_AGE_LINE, ZERO_AGE_LINE } from '../../kernel-lib/stars/main-sequence-band';

/** K, solar luminosities; from memory, rounded; the group is the luminosity class each star is commonly given. */
const KNOWN: readonly [string, number, number, EvolutionaryGroup][] = [
  ['Sun, G2V', 5772, 1, 'main sequence'],
  ['Sirius A, A1V', 9850, 25, 'main sequence'],
  ['Vega, A0V', 9600, 40, 'main sequence'],
  ['61 Cygni A, K5V', 4450, 0.15, 'main sequence'],
  ["Barnard's star, M4V", 3150, 0.0035, 'main sequence'],
  ['Spica, B1V', 25000, 20000, 'main sequence'],
  ['eta Bootis, G0IV', 6100, 9, 'subgiants'],
  ['delta Eridani, K1IV', 5000, 3.2, 'subgiants'],
  ['Pollux, K0III', 4800, 40, 'giants'],
  ['Arcturus, K1.5III', 4290, 170, 'giants'],
  ['Aldebaran, K5III', 3900, 440, 'giants'],
  ['Mira, M7III', 3000, 9000, 'giants'],
  ['Polaris, F7Ib', 6000, 1260, 'supergiants'],
  ['Betelgeuse, M2I', 3600, 126000, 'supergiants'],
  ['Antares, M1.5I', 3660, 76000, 'supergiants'],
  ['Rigel, B8Ia', 12100, 120000, 'supergiants'],
  ['Deneb, A2Ia', 8500, 196000, 'supergiants'],
  ['Sirius B, DA2', 25000, 0.056, 'white dwarfs'],
  ['40 Eridani B, DA3', 16500, 0.013, 'white dwarfs'],
];

describe('evolutionaryGroup', () => {
  it.each(KNOWN)('%s', (_, temperature, luminosity, group) => {
    expect(evolutionaryGroup(Math.log10(temperature), Math.log10(luminosity))).toBe(group);
  });

  it('follows model stars through their lives', () => {
    for (const mass of [1, 1.5, 2.5, 5, 9]) {
      const life = mainSequenceLifetime({ mass });
      const at = (age: number) => {
        const star = evolve({ mass, age });
        return evolutionaryGroup(Math.log10(star.temperature), Math.log10(star.luminosity));
      };
      for (const share of [0, 0.3, 0.6, 0.9])
        expect([mass, share, at(share * life)]).toEqual([mass, share, 'main sequence']);
    }
    const clump = evolve({ mass: 2, age: 1.35 });
    expect(evolutionaryGroup(Math.log10(clump.temperature), Math.log10(clump.luminosity))).toBe('giants');
  });

  it('keeps lines that agree with the models they were taken from (0.03 and 0.05 dex: straight pieces between points)', () => {
    for (const mass of [0.12, 0.25, 0.45, 0.75, 1.05, 1.6, 2.2, 3.5, 7, 12, 25, 50]) {
      const star = zeroAge({ mass });
      expect(Math.abs(lineAt(ZERO_AGE_LINE, Math.log10(star.temperature)) - Math.log10(star.luminosity))).toBeLessThan(
        0.03,
      );
    }
    for (const mass of [0.9, 1.2, 2, 4, 8, 20]) {
      const star = evolve({ mass, age: mainSequenceLifetime({ mass }) * (1 - 1e-9) });
      expect(
        Math.abs(lineAt(TERMINAL_AGE_LINE, Math.log10(star.temperature)) - Math.log10(star.luminosity)),
      ).toBeLessThan(0.05);
    }
    expect(lineAt(ZERO_AGE_LINE, 3.4)).toBeNaN();
    expect(lineAt(ZERO_AGE_LINE, 4.7)).toBeNaN();
  });

  it('names the turnoff only when it knows where it is', () => {
    const [t, l] = [3.9, 1.3];
    expect(evolutionaryGroup(t, l)).toBe('main sequence');
    expect(evolutionaryGroup(t, l, { turnoff: { logTeff: 3.91, logL: 1.4 } })).toBe('turnoff');
    expect(evolutionaryGroup(3.7, -0.4, { turnoff: { logTeff: 3.91, logL: 1.4 } })).toBe('main sequence');
  });

  it('has no group for what it cannot place, and another for what is out of place', () => {
    expect(evolutionaryGroup(Number.NaN, 1)).toBeNull();
    expect(evolutionaryGroup(3.3, -3.4)).toBeNull();
    expect(evolutionaryGroup(3.75, -1.2)).toBe('other');
    expect(evolutionaryGroup(3.6, -0.3)).toBe('other');
  });

  it('adds the column to a catalogue and counts in the history', () => {
    const columns = [
      { name: 'log_teff', values: Float64Array.of(Math.log10(5772), 3.59, Number.NaN) },
      { name: 'log_l', values: Float64Array.of(0, 2.64, 1) },
    ];
    const placed = evolutionaryGroups(new Catalogue({ source: 'three stars', rowCount: 3, columns }));
    expect(placed.values('group')).toEqual(['main sequence', 'giants', null]);
    expect(placed.history[0].note).toBe('1 main sequence, 1 giants, 1 without a place');
  });

  it('says what is missing or misspelt', () => {
    const empty = new Catalogue({ source: 'field.csv', rowCount: 0, columns: [] });
    expect(() => evolutionaryGroups(empty)).toThrow(/field.csv has no column log_teff; call physicalProperties first/);
    expect(() => evolutionaryGroup(3.7, 0, { turnof: 1 } as never)).toThrow(
      /unknown option "turnof".*Did you mean "turnoff"/,
    );
    expect(() => evolutionaryGroups(empty, { turnoff: 3 as never })).toThrow(/turnoff must be { logTeff, logL }/);
  });
});
