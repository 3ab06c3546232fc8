import type { Coefficients } from '../coefficients/coefficients';
import { CoreClock } from './core-clock';
import { heliumLuminosity } from './naked-helium-fits';

/** Chandrasekhar mass as the paper takes it, solar masses. */
export const CHANDRASEKHAR_MASS = 1.44;

/** Values of the giant fits that depend on the metallicity alone. */
export interface GiantJoins {
  /** Constants alpha_1, alpha_3, alpha_4 that join the luminosities and the helium-burning time at the flash limit. */
  readonly ignition: number;
  readonly ending: number;
  readonly duration: number;
  /** Least luminosity of core helium burning at the flash limit, and the constant c of Eq. 51. */
  readonly leastLuminosity: number;
  readonly leastLuminosityC: number;
  /** Constants C of the core masses at the base of the giant branch and at ignition (Eq. 44). */
  readonly coreBase: number;
  readonly coreIgnition: number;
  /** Log of the ratio R_mHe/R_GB at the flash limit (Eq. 55). */
  readonly lnBlueRatio: number;
  /** ln M of the largest mass that ignites on the giant branch, alpha_bl and f_bl there (Eq. 58). */
  readonly lnMassGiantBranch: number;
  readonly blueAlpha: number;
  /** ln of the ratio of the two limiting masses. */
  readonly lnFlashShare: number;
  readonly blueF: number;
  /** Core mass - luminosity relation at the flash limit and at 2.5 solar masses (ln D). */
  readonly lnDFlash: number;
  readonly lnD25: number;
}

const C1 = 9.20925e-5;
const C2 = 5.402216;

/** Luminosity at the base of the giant branch, solar. Eq. 10. */
export function baseLuminosity(a: Float64Array, lnMass: number): number {
  return (
    (a[27] * Math.exp(a[31] * lnMass) + a[28] * Math.exp(9.301992 * lnMass)) /
    (a[29] + a[30] * Math.exp(4.637345 * lnMass) + Math.exp(a[32] * lnMass))
  );
}

/** Mass factor of the radius of first-branch giants (Eq. 46). */
export function giantFactor(b: Float64Array, lnMass: number): number {
  return Math.min(b[4] * Math.exp(-b[5] * lnMass), b[6] * Math.exp(-b[7] * lnMass));
}

/** Radius of a first-branch giant, solar, from its mass factor. Eq. 46. */
export function giantRadius(b: Float64Array, factor: number, luminosity: number): number {
  const lnL = Math.log(luminosity);
  return factor * (Math.exp(b[1] * lnL) + b[2] * Math.exp(b[3] * lnL));
}

/** Exponent b_50 of the radius of asymptotic-branch giants (Eq. 74). */
export function asymptoticExponent(c: Coefficients, mass: number): number {
  const high = c.b[55] * c.b[3];
  if (mass >= c.massFlash) return high;
  if (mass <= c.massFlash - 0.2) return c.b[3];
  return c.b[3] + ((high - c.b[3]) * (mass - c.massFlash + 0.2)) / 0.2;
}

function asymptoticFactorHigh(b: Float64Array, lnMass: number): number {
  return Math.min(b[51] * Math.exp(-b[52] * lnMass), b[53] * Math.exp(-b[54] * lnMass));
}

/** Mass factor of the radius of asymptotic-branch giants (Eq. 74). */
export function asymptoticFactor(c: Coefficients, mass: number, lnMass: number): number {
  if (mass >= c.massFlash) return asymptoticFactorHigh(c.b, lnMass);
  const lowMass = c.massFlash - 0.2;
  if (mass <= lowMass) return c.b[56] + c.b[57] * mass;
  const low = c.b[56] + c.b[57] * lowMass;
  const high = asymptoticFactorHigh(c.b, Math.log(c.massFlash));
  return low + ((high - low) * (mass - lowMass)) / 0.2;
}

/** Radius of an asymptotic-branch giant, solar. Eq. 74. */
export function asymptoticRadius(b: Float64Array, factor: number, exponent: number, luminosity: number): number {
  const lnL = Math.log(luminosity);
  return factor * (Math.exp(b[1] * lnL) + b[2] * Math.exp(exponent * lnL));
}

/** Sets the core mass - luminosity relation of a star. Eqs 31-38. */
export function setCoreRelation(
  c: Coefficients,
  joins: GiantJoins,
  mass: number,
  lnMass: number,
  clock: CoreClock,
): void {
  const share = Math.max(0, Math.min(1, (mass - c.massFlash) / (2.5 - c.massFlash)));
  let lnD = joins.lnDFlash;
  if (mass >= 2.5) lnD = lnDHigh(c.zeta, mass);
  else if (share > 0) lnD += (joins.lnD25 - joins.lnDFlash) * share;
  clock.setRelation(6 - share, 3 - share, Math.max(3e4, 500 + 1.75e4 * Math.exp(0.6 * lnMass)), lnD);
}

function lnDHigh(zeta: number, mass: number): number {
  const d0 = 5.37 + 0.135 * zeta;
  return Math.LN10 * Math.max(-1, 0.975 * d0 - 0.18 * mass, 0.5 * d0 - 0.06 * mass);
}

/** Rate at which hydrogen burning adds to the core, solar masses per solar luminosity per Myr. Eq. 43. */
export function hydrogenRate(mass: number): number {
  return Math.exp(Math.LN10 * Math.max(-4.8, Math.min(-5.7 + 0.8 * mass, -4.1 + 0.14 * mass)));
}

function ignitionLuminosityHigh(b: Float64Array, mass: number, lnMass: number): number {
  return (b[11] + b[12] * Math.exp(3.8 * lnMass)) / (b[13] + mass * mass);
}

/** Luminosity at helium ignition, solar. Eq. 49. */
export function ignitionLuminosity(c: Coefficients, joins: GiantJoins, mass: number, lnMass: number): number {
  const b = c.b;
  if (mass >= c.massFlash) return ignitionLuminosityHigh(b, mass, lnMass);
  return (b[9] * Math.exp(b[10] * lnMass)) / (1 + joins.ignition * Math.exp(15 * (mass - c.massFlash)));
}

/** Least luminosity of core helium burning, solar, at and above the flash limit. Eq. 51. */
export function leastLuminosity(
  c: Coefficients,
  joins: GiantJoins,
  lnMass: number,
  luminosityIgnition: number,
): number {
  const b = c.b;
  const m15 = Math.exp(b[15] * lnMass);
  return (luminosityIgnition * (b[14] + joins.leastLuminosityC * m15 * Math.exp(0.1 * lnMass))) / (b[16] + m15);
}

/** Radius factor f of zero-age horizontal-branch stars between the naked helium star (0) and the giant (1). Eq. 54. */
export function horizontalShare(b: Float64Array, mu: number): number {
  if (mu <= 0) return 0;
  const lnMu = Math.log(mu);
  return ((1 + b[21]) * Math.exp(b[22] * lnMu)) / (1 + b[21] * Math.exp(b[23] * lnMu));
}

/** Luminosity on the zero-age horizontal branch, solar. Eq. 53. */
export function horizontalLuminosity(
  c: Coefficients,
  joins: GiantJoins,
  mass: number,
  core: number,
  mu: number,
): number {
  const b = c.b;
  const naked = heliumLuminosity(core);
  const alpha = (b[18] + naked - joins.leastLuminosity) / (joins.leastLuminosity - naked);
  const lnMu = Math.log(mu);
  const share = (1 + b[20]) / (1 + b[20] * Math.exp(1.6479 * lnMu));
  return naked + (share * b[18] * Math.exp(b[19] * lnMu)) / (1 + alpha * Math.exp(15 * (mass - c.massFlash)));
}

/** Smallest radius of the blue phase at and above the flash limit, solar. Eq. 55. */
export function blueRadiusHigh(b: Float64Array, mass: number, lnMass: number): number {
  const m28 = Math.exp(b[28] * lnMass);
  return (b[24] * mass + Math.exp(b[26] * (Math.log(b[25]) + lnMass)) * m28) / (b[27] + m28);
}

function endingLuminosityHigh(b: Float64Array, lnMass: number): number {
  const m33 = Math.exp(b[33] * lnMass);
  return (b[31] + b[32] * m33 * Math.exp(1.8 * lnMass)) / (b[34] + m33);
}

/** Luminosity at the base of the asymptotic giant branch, solar. Eq. 56. */
export function endingLuminosity(c: Coefficients, joins: GiantJoins, mass: number, lnMass: number): number {
  const b = c.b;
  if (mass >= c.massFlash) return endingLuminosityHigh(b, lnMass);
  return (b[29] * Math.exp(b[30] * lnMass)) / (1 + joins.ending * Math.exp(15 * (mass - c.massFlash)));
}

/** Core mass at the base of the asymptotic giant branch, solar. Eq. 66. */
export function endingCore(b: Float64Array, lnMass: number): number {
  return Math.sqrt(Math.sqrt(b[36] * Math.exp(b[37] * lnMass) + b[38]));
}

/** Core mass at the base of the giant branch or at ignition for stars without a flash, solar. Eq. 44. */
export function quarticCore(constant: number, lnMass: number, coreEnding: number): number {
  return Math.min(0.95 * coreEnding, Math.sqrt(Math.sqrt(constant + C1 * Math.exp(C2 * lnMass))));
}

/** Duration of core helium burning at and above the flash limit as a share of the time to the giant branch. Eq. 57. */
export function heliumBurningShare(b: Float64Array, mass: number, lnMass: number): number {
  const m5 = mass * mass * mass * mass * mass;
  return (b[41] * Math.exp(b[42] * lnMass) + b[43] * m5) / (b[44] + m5);
}

/** f_bl of Eq. 58, before it is divided by its value at the limit. */
export function blueFraction(b: Float64Array, lnMass: number, blue: number, asymptotic: number): number {
  return Math.exp(b[48] * lnMass) * Math.max(0, 1 - blue / asymptotic) ** b[49];
}

/** Works out the joins of one metallicity. */
export function giantJoins(c: Coefficients): GiantJoins {
  const { a, b, massFlash, massGiantBranch } = c;
  const lnFlash = Math.log(massFlash);
  const lnBranch = Math.log(massGiantBranch);
  const atFlash = ignitionLuminosityHigh(b, massFlash, lnFlash);
  const leastLuminosityC = b[17] / massGiantBranch ** 0.1 + (b[16] * b[17] - b[14]) / massGiantBranch ** (b[15] + 0.1);
  const ending = endingLuminosityHigh(b, lnFlash);
  const m5 = massFlash ** 5;
  const baseTime =
    (a[1] + a[2] * massFlash ** 4 + a[3] * massFlash ** 5.5 + massFlash ** 7) /
    (a[4] * massFlash ** 2 + a[5] * massFlash ** 7);
  const duration = (baseTime * (b[41] * massFlash ** b[42] + b[43] * m5)) / (b[44] + m5);
  const lnDFlash = Math.LN10 * (5.37 + 0.135 * c.zeta);
  const partial: GiantJoins = {
    ignition: (b[9] * massFlash ** b[10] - atFlash) / atFlash,
    ending: (b[29] * massFlash ** b[30] - ending) / ending,
    duration: (duration - b[39]) / b[39],
    leastLuminosity: 0,
    leastLuminosityC,
    coreBase: 0,
    coreIgnition: 0,
    lnBlueRatio: 0,
    lnMassGiantBranch: lnBranch,
    blueAlpha: 1 - b[45] * (massFlash / massGiantBranch) ** 0.414,
    blueF: 0,
    lnFlashShare: lnFlash - lnBranch,
    lnDFlash,
    lnD25: lnDHigh(c.zeta, 2.5),
  };
  const clock = new CoreClock();
  setCoreRelation(c, partial, massFlash, lnFlash, clock);
  const least = leastLuminosity(c, partial, lnFlash, atFlash);
  const quartic = (luminosity: number) => clock.coreAtLuminosity(luminosity) ** 4 - C1 * massFlash ** C2;
  const withLeast = { ...partial, leastLuminosity: least };
  const core = clock.coreAtLuminosity(atFlash);
  const horizontal = horizontalLuminosity(c, withLeast, massFlash, core, 1);
  const blueAtFlash = blueRadiusHigh(b, massFlash, lnFlash);
  const branchIgnition = ignitionLuminosityHigh(b, massGiantBranch, lnBranch);
  const branchAsymptotic = asymptoticRadius(b, asymptoticFactorHigh(b, lnBranch), b[55] * b[3], branchIgnition);
  return {
    ...withLeast,
    coreBase: quartic(baseLuminosity(a, lnFlash)),
    coreIgnition: quartic(atFlash),
    lnBlueRatio: Math.log(blueAtFlash / giantRadius(b, giantFactor(b, lnFlash), horizontal)),
    blueF: blueFraction(b, lnBranch, blueRadiusHigh(b, massGiantBranch, lnBranch), branchAsymptotic),
  };
}
