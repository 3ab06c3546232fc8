import { CHANDRASEKHAR_MASS } from './giant-fits';
import { PHASE } from './phase';

/** Radius of a neutron star, solar radii, also the least radius of a white dwarf (Hurley, Pols & Tout 2000, Eq. 91). */
export const NEUTRON_STAR_RADIUS = 1.4e-5;

/** Mean baryon number of the core: 4 helium, 15 carbon-oxygen, 17 oxygen-neon. */
export function coreBaryons(phase: number): number {
  if (phase === PHASE.heliumWhiteDwarf) return 4;
  return phase === PHASE.neonWhiteDwarf ? 17 : 15;
}

/** Luminosity of a cooling white dwarf at an age in Myr, solar. Hurley & Shara 2003, ApJ 589, 179, Eqs 1-2. */
export function coolingLuminosity(mass: number, z: number, baryons: number, age: number): number {
  const scale = mass * z ** 0.4;
  const x = baryons * (age + 0.1);
  if (age < 9000) return (300 * scale) / x ** 1.18;
  return (300 * (9000 * baryons) ** 5.3 * scale) / x ** 6.48;
}

/** Radius of a white dwarf, solar. Nauenberg 1972, ApJ 175, 417, in the form of Hurley, Pols & Tout 2000, Eq. 91. */
export function whiteDwarfRadiusLaw(mass: number): number {
  if (!(mass > 0)) return Number.NaN;
  if (mass >= CHANDRASEKHAR_MASS) return NEUTRON_STAR_RADIUS;
  const x = Math.cbrt((mass / CHANDRASEKHAR_MASS) ** 2);
  return Math.max(NEUTRON_STAR_RADIUS, 0.0115 * Math.sqrt(1 / x - x));
}
