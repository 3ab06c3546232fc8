import type { ColourName } from '../quantity/band';

/** A photometric quantity of the Sun as observed. */
export interface SolarValue {
  readonly value: number;
  /** Standard error, mag. */
  readonly error: number;
  readonly source: string;
}

const RAMIREZ = 'Ramirez et al. 2012, ApJ 752, 5 (from memory)';
const CASAGRANDE = 'Casagrande et al. 2012, ApJ 761, 16 (from memory)';
const GAIA = 'Casagrande & VandenBerg 2018, MNRAS 479, L102 (from memory)';

/** The Sun's colours from its twins, mag. */
export const SOLAR_COLOURS: Readonly<Partial<Record<ColourName, SolarValue>>> = Object.freeze({
  'B-V': { value: 0.653, error: 0.005, source: RAMIREZ },
  'U-B': { value: 0.166, error: 0.022, source: RAMIREZ },
  'V-Rc': { value: 0.352, error: 0.007, source: RAMIREZ },
  'V-Ic': { value: 0.702, error: 0.01, source: RAMIREZ },
  'V-J': { value: 1.198, error: 0.005, source: CASAGRANDE },
  'V-H': { value: 1.484, error: 0.009, source: CASAGRANDE },
  'V-Ks': { value: 1.56, error: 0.008, source: CASAGRANDE },
  'BP-RP': { value: 0.82, error: 0.02, source: GAIA },
});

/** The Sun's absolute magnitudes. */
export const SOLAR_MAGNITUDES: Readonly<Record<'V' | 'G', SolarValue>> = Object.freeze({
  V: { value: 4.81, error: 0.03, source: 'V -26.76 (Torres 2010, AJ 140, 1158)' },
  G: { value: 4.67, error: 0.02, source: GAIA },
});
