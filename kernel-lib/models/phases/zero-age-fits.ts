import type { Coefficients } from '../coefficients/coefficients';

/** Zero-age luminosity, solar. Every exponent is a multiple of a half, so products and one root do. Tout et al. 1996, Eq. 1. */
export function zeroAgeLuminosity(c: Coefficients, mass: number): number {
  const k = c.zeroAgeLuminosity;
  const root = Math.sqrt(mass);
  const m2 = mass * mass;
  const m3 = m2 * mass;
  const m5 = m3 * m2;
  const m8 = m5 * m3;
  return (
    (m5 * root * k[0] + k[1] * m8 * m3) / (k[2] + m3 + k[3] * m5 + k[4] * m5 * m2 + k[5] * m8 + k[6] * m8 * mass * root)
  );
}

/** Zero-age radius, solar. Tout et al. 1996, Eq. 2. */
export function zeroAgeRadius(c: Coefficients, mass: number): number {
  const k = c.zeroAgeRadius;
  const root = Math.sqrt(mass);
  const m2 = mass * mass;
  const m4 = m2 * m2;
  const m8 = m4 * m4;
  const m18 = m8 * m8 * m2;
  const m195 = m18 * mass * root;
  return (
    (k[0] * m2 * root + k[1] * m4 * m2 * root + k[2] * m8 * m2 * mass + k[3] * m18 * mass + k[4] * m195) /
    (k[5] + k[6] * m2 + k[7] * m8 * root + m18 * root + k[8] * m195)
  );
}
