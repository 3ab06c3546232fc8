import type { Band } from '../quantity/band';

/** What is known about a band. */
export interface BandDescription {
  readonly band: Band;
  /** Photometric system. */
  readonly system: 'Johnson-Cousins' | '2MASS' | 'Gaia DR3' | 'Hipparcos';
  /** Effective wavelength at which extinction is taken, micron. */
  readonly wavelength: number;
  readonly source: string;
}

const BESSELL =
  'effective wavelength of an A0 star, Bessell, Castelli & Plez 1998, A&A 333, 231, Table A2 (from memory)';
const COHEN = 'isophotal wavelength, Cohen, Wheaton & Megeath 2003, AJ 126, 1090, Table 2 (from memory)';
const RIELLO = 'pivot wavelength, Riello et al. 2021, A&A 649, A3 (from memory)';

function describeBand(
  band: Band,
  system: BandDescription['system'],
  wavelength: number,
  source: string,
): BandDescription {
  return Object.freeze({ band, system, wavelength, source });
}

/** Every band with its system and effective wavelength. */
export const BANDS: Readonly<Record<Band, BandDescription>> = Object.freeze({
  U: describeBand('U', 'Johnson-Cousins', 0.366, BESSELL),
  B: describeBand('B', 'Johnson-Cousins', 0.438, BESSELL),
  V: describeBand('V', 'Johnson-Cousins', 0.545, BESSELL),
  Rc: describeBand('Rc', 'Johnson-Cousins', 0.641, BESSELL),
  Ic: describeBand('Ic', 'Johnson-Cousins', 0.798, BESSELL),
  J: describeBand('J', '2MASS', 1.235, COHEN),
  H: describeBand('H', '2MASS', 1.662, COHEN),
  Ks: describeBand('Ks', '2MASS', 2.159, COHEN),
  G: describeBand('G', 'Gaia DR3', 0.6218, RIELLO),
  BP: describeBand('BP', 'Gaia DR3', 0.511, RIELLO),
  RP: describeBand('RP', 'Gaia DR3', 0.7769, RIELLO),
  Hp: describeBand('Hp', 'Hipparcos', 0.5347, 'pivot wavelength, Bessell & Murphy 2012, PASP 124, 140 (from memory)'),
});
