import { PHASE } from '../phases/phase';

/** What of the winds can be chosen. */
export interface WindOptions {
  /** Efficiency eta of Reimers' law; the paper takes 0.5. 0 leaves that wind out. */
  readonly reimers: number;
}

/**
 * Rate at which a star loses mass, solar masses a year.
 * Reimers' law on and after the giant branch; the superwind of pulsing giants on the asymptotic branch; the wind of luminous
 * stars in every phase; that of the luminous blue variables; a wind of naked helium stars.
 * Source: Hurley, Pols & Tout 2000, section 7.1 (Kudritzki & Reimers 1978; Vassiliadis & Wood 1993; Nieuwenhuijzen & de Jager
 * 1990; Humphreys & Davidson 1994; Hamann, Koesterke & Wessolowski 1995). Digits of the second and third confirmed, the rest from memory.
 */
export function windRate(
  phase: number,
  mass: number,
  luminosity: number,
  radius: number,
  z: number,
  wind: WindOptions,
): number {
  if (phase >= PHASE.heliumWhiteDwarf) return 0;
  let rate = 0;
  if (luminosity > 4000) {
    const lnRate =
      0.81 * Math.log(radius) + 1.24 * Math.log(luminosity) + 0.16 * Math.log(mass) + 0.5 * Math.log(z / 0.02);
    rate = 9.6e-15 * Math.exp(lnRate);
  }
  if (phase >= PHASE.giantBranch) rate = Math.max(rate, (4e-13 * wind.reimers * luminosity * radius) / mass);
  if (phase === PHASE.earlyAsymptotic || phase === PHASE.pulsingAsymptotic) {
    rate = Math.max(rate, superwind(mass, luminosity, radius));
  }
  if (phase === PHASE.heliumMainSequence || phase === PHASE.heliumGiant) {
    rate = Math.max(rate, 1e-13 * luminosity ** 1.5);
  }
  const excess = 1e-5 * radius * Math.sqrt(luminosity) - 1;
  if (phase >= PHASE.hertzsprungGap && luminosity > 6e5 && excess > 0)
    rate += 0.1 * excess ** 3 * (luminosity / 6e5 - 1);
  return rate;
}

/** Mass loss of pulsing giants from their period, at most what the light can drive (Vassiliadis & Wood 1993). */
function superwind(mass: number, luminosity: number, radius: number): number {
  const logPeriod = Math.min(3.3, -2.07 - 0.9 * Math.log10(mass) + 1.94 * Math.log10(radius));
  const logRate = -11.4 + 0.0125 * (10 ** logPeriod - 100 * Math.max(mass - 2.5, 0));
  return Math.min(10 ** logRate, 1.36e-9 * luminosity);
}
