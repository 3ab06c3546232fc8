import type { Band } from '../quantity/band';

/** Errors of one star as a survey would quote them. */
export interface SurveyErrors {
  /** mas */
  readonly parallax: number;
  /** mas/yr, each axis */
  readonly properMotion: number;
}

/** Bands measured from space together with the astrometry; the others come from the ground. */
const SPACE: readonly Band[] = ['G', 'BP', 'RP', 'Hp'];

/**
 * Photometric error that grows with magnitude: a floor, and photon noise with some background.
 * @param band      which
 * @param magnitude apparent
 * @param scale     multiplies all errors
 * @returns mag
 * Our own round figures, of the size that present surveys quote.
 */
export function photometricError(band: Band, magnitude: number, scale = 1): number {
  const floor = band === 'G' ? 0.002 : SPACE.includes(band) ? 0.004 : 0.008;
  const noise = band === 'G' ? 0.0008 : SPACE.includes(band) ? 0.004 : 0.006;
  return scale * Math.hypot(floor, noise * 10 ** (0.3 * (magnitude - 16)));
}

/**
 * Astrometric errors that grow with G magnitude.
 * @param g     apparent G
 * @param scale multiplies all errors
 * Our own round figures: 0.025 mas at G 15, 0.12 mas at 18, 0.4 mas at 20.
 */
export function astrometricErrors(g: number, scale = 1): SurveyErrors {
  const parallax = scale * Math.hypot(0.015, 0.022 * 10 ** (0.25 * (g - 15)));
  return { parallax, properMotion: 1.05 * parallax };
}
