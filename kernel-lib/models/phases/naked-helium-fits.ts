/**
 * Stars without hydrogen: zero-age luminosity and radius (solar) and core helium burning time (Myr) at a mass in solar
 * masses. Source: Hurley, Pols & Tout 2000, Eqs 77-79.
 */
export function heliumLuminosity(mass: number): number {
  const m3 = mass * mass * mass;
  const m6 = m3 * m3;
  const m9 = m6 * m3;
  const root = Math.sqrt(mass);
  return (15262 * m9 * mass * Math.sqrt(root)) / (m9 + 29.54 * m6 * mass * root + 31.18 * m6 + 0.0469);
}

/** Zero-age radius of a helium star, Eq. 78. */
export function heliumRadius(mass: number): number {
  const m3 = mass * mass * mass;
  return (0.2391 * Math.exp(4.6 * Math.log(mass))) / (m3 * mass + 0.162 * m3 + 0.0065);
}

/** Core helium burning time of a helium star, Myr, Eq. 79. */
export function heliumLifetime(mass: number): number {
  const m2 = mass * mass;
  const m4 = m2 * m2;
  return (0.4129 + 18.81 * m4 + 1.853 * m4 * m2) / (m4 * m2 * Math.sqrt(mass));
}
