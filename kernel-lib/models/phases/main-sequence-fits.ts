import type { Coefficients } from '../coefficients/coefficients';
import { zeroAgeRadius } from './zero-age-fits';

/**
 * Values of the main-sequence fits at the masses where their branches meet, so that they are worked out once for a
 * metallicity and not for every star.
 */
export interface MainSequenceJoins {
  readonly radiusEndLow: number;
  readonly radiusEndHigh: number;
  readonly hookLuminosity: number;
  readonly hookRadius2: number;
  readonly alphaL2: number;
  readonly betaL: number;
  readonly alphaRLow: number;
  readonly alphaRHigh: number;
  readonly betaR2: number;
  readonly betaR16: number;
  readonly gamma1: number;
  readonly gammaEnd: number;
}

/** Time to the base of the giant branch, Myr. Eq. 4. */
export function timeBaseGiantBranch(a: Float64Array, mass: number): number {
  const m2 = mass * mass;
  const m4 = m2 * m2;
  const root = Math.sqrt(mass);
  const m7 = m4 * m2 * mass;
  return (a[1] + a[2] * m4 + a[3] * m4 * mass * root + m7) / (a[4] * m2 + a[5] * m7);
}

/** Time of the hook as a share of the time to the base of the giant branch. Eq. 7. */
export function hookShare(a: Float64Array, lnMass: number): number {
  return Math.max(0.5, 1 - 0.01 * Math.max(a[6] * Math.exp(-a[7] * lnMass), a[8] + a[9] * Math.exp(-a[10] * lnMass)));
}

/** Luminosity at the end of the main sequence, solar. Eq. 8. */
export function endLuminosity(a: Float64Array, mass: number, lnMass: number): number {
  const m3 = mass * mass * mass;
  const m16 = Math.exp(a[16] * lnMass);
  return (
    (a[11] * m3 + a[12] * m3 * mass + a[13] * m16 * Math.exp(1.8 * lnMass)) / (a[14] + a[15] * m3 * mass * mass + m16)
  );
}

function endRadiusLow(a: Float64Array, lnMass: number): number {
  return (a[18] + a[19] * Math.exp(a[21] * lnMass)) / (a[20] + Math.exp(a[22] * lnMass));
}

function endRadiusHigh(a: Float64Array, mass: number, lnMass: number): number {
  const m26 = Math.exp(a[26] * lnMass);
  const m3 = mass * mass * mass;
  return (-0.08672073 * m3 + a[23] * m26 + a[24] * m26 * mass * Math.sqrt(mass)) / (a[25] + m3 * mass * mass);
}

/** Radius at the end of the main sequence, solar. Eq. 9. */
export function endRadius(
  a: Float64Array,
  joins: MainSequenceJoins,
  mass: number,
  lnMass: number,
  radiusZeroAge: number,
): number {
  if (mass >= a[17] + 0.1) return endRadiusHigh(a, mass, lnMass);
  if (mass > a[17]) return joins.radiusEndLow + (joins.radiusEndHigh - joins.radiusEndLow) * ((mass - a[17]) / 0.1);
  const radius = endRadiusLow(a, lnMass);
  return mass < 0.5 ? Math.max(radius, 1.5 * radiusZeroAge) : radius;
}

function hookLuminosityHigh(a: Float64Array, lnMass: number): number {
  return Math.min(a[34] * Math.exp(-a[35] * lnMass), a[36] * Math.exp(-a[37] * lnMass));
}

/** Depth of the hook in log luminosity. Eq. 16. */
export function hookLuminosity(c: Coefficients, joins: MainSequenceJoins, mass: number, lnMass: number): number {
  if (mass <= c.massHook) return 0;
  if (mass >= c.a[33]) return hookLuminosityHigh(c.a, lnMass);
  return joins.hookLuminosity * ((mass - c.massHook) / (c.a[33] - c.massHook)) ** 0.4;
}

function hookRadiusHigh(a: Float64Array, mass: number, lnMass: number): number {
  const m3 = mass * mass * mass;
  return (a[38] + a[39] * m3 * Math.sqrt(mass)) / (a[40] * m3 + Math.exp(a[41] * lnMass)) - 1;
}

/** Depth of the hook in log radius. Eq. 17. */
export function hookRadius(c: Coefficients, joins: MainSequenceJoins, mass: number, lnMass: number): number {
  const a = c.a;
  if (mass <= c.massHook) return 0;
  if (mass >= 2) return hookRadiusHigh(a, mass, lnMass);
  if (mass <= a[42]) return a[43] * Math.sqrt((mass - c.massHook) / (a[42] - c.massHook));
  return a[43] + (joins.hookRadius2 - a[43]) * ((mass - a[42]) / (2 - a[42])) ** a[44];
}

function alphaLHigh(a: Float64Array, lnMass: number): number {
  return (a[45] + a[46] * Math.exp(a[48] * lnMass)) / (Math.exp(0.4 * lnMass) + a[47] * Math.exp(1.9 * lnMass));
}

/** Linear rise of log luminosity. Eq. 19. */
export function alphaL(a: Float64Array, joins: MainSequenceJoins, mass: number, lnMass: number): number {
  if (mass >= 2) return alphaLHigh(a, lnMass);
  if (mass < 0.5) return a[49];
  if (mass < 0.7) return a[49] + 5 * (0.3 - a[49]) * (mass - 0.5);
  if (mass < a[52]) return 0.3 + ((a[50] - 0.3) * (mass - 0.7)) / (a[52] - 0.7);
  if (mass < a[53]) return a[50] + ((a[51] - a[50]) * (mass - a[52])) / (a[53] - a[52]);
  return a[51] + ((joins.alphaL2 - a[51]) * (mass - a[53])) / (2 - a[53]);
}

/** Late rise of log luminosity. Eq. 20. */
export function betaL(a: Float64Array, joins: MainSequenceJoins, mass: number, lnMass: number): number {
  const beta = Math.max(0, a[54] - a[55] * Math.exp(a[56] * lnMass));
  return mass > a[57] && beta > 0 ? Math.max(0, joins.betaL - 10 * (mass - a[57]) * joins.betaL) : beta;
}

/** Exponent of the late rise of log luminosity. Eq. 18. */
export function etaL(z: number, mass: number): number {
  if (z <= 0.0009 || mass <= 1) return 10;
  return mass >= 1.1 ? 20 : 10 + 100 * (mass - 1);
}

function alphaRHigh(a: Float64Array, lnMass: number): number {
  return (a[58] * Math.exp(a[60] * lnMass)) / (a[59] + Math.exp(a[61] * lnMass));
}

/** Linear rise of log radius. Eq. 21. */
export function alphaR(a: Float64Array, joins: MainSequenceJoins, mass: number, lnMass: number): number {
  if (mass > a[67]) return joins.alphaRHigh + a[65] * (mass - a[67]);
  if (mass >= a[66]) return alphaRHigh(a, lnMass);
  if (mass >= a[68]) return a[64] + ((joins.alphaRLow - a[64]) * (mass - a[68])) / (a[66] - a[68]);
  if (mass < 0.5) return a[62];
  if (mass < 0.65) return a[62] + ((a[63] - a[62]) * (mass - 0.5)) / 0.15;
  return a[63] + ((a[64] - a[63]) * (mass - 0.65)) / (a[68] - 0.65);
}

function betaRMiddle(a: Float64Array, mass: number, lnMass: number): number {
  return (a[69] * mass * mass * mass * Math.sqrt(mass)) / (a[70] + Math.exp(a[71] * lnMass));
}

/**
 * Rise of log radius with the tenth power of age. Eq. 22, with a_74 - 1 as the denominator between 1 solar mass and
 * a_74: only that makes the fit continuous at a_74 (we believe the paper prints another, which changes R by 2.3 % at most).
 */
export function betaR(a: Float64Array, joins: MainSequenceJoins, mass: number, lnMass: number): number {
  if (mass <= 1) return 0.06;
  if (mass < a[74]) return 0.06 + ((a[72] - 1.06) * (mass - 1)) / (a[74] - 1);
  if (mass < 2) return a[72] + ((joins.betaR2 - a[72]) * (mass - a[74])) / (2 - a[74]) - 1;
  if (mass <= 16) return betaRMiddle(a, mass, lnMass) - 1;
  return joins.betaR16 + a[73] * (mass - 16) - 1;
}

/** Rise of log radius with the fortieth power of age. Eq. 23; a negative value counts as 0. */
export function gammaR(a: Float64Array, joins: MainSequenceJoins, mass: number): number {
  if (mass >= a[75] + 0.1) return 0;
  let gamma: number;
  if (mass <= 1) gamma = gammaLow(a, mass);
  else if (mass <= a[75]) gamma = joins.gamma1 + (a[80] - joins.gamma1) * ((mass - 1) / (a[75] - 1)) ** a[81];
  else gamma = joins.gammaEnd * (1 - 10 * (mass - a[75]));
  return Math.max(0, gamma);
}

function gammaLow(a: Float64Array, mass: number): number {
  return a[76] + a[77] * Math.abs(mass - a[78]) ** a[79];
}

/** Works out the joins of one metallicity. */
export function mainSequenceJoins(c: Coefficients): MainSequenceJoins {
  const a = c.a;
  const gamma1 = gammaLow(a, 1);
  const lowEnd = endRadiusLow(a, Math.log(a[17]));
  return {
    radiusEndLow: a[17] < 0.5 ? Math.max(lowEnd, 1.5 * zeroAgeRadius(c, a[17])) : lowEnd,
    radiusEndHigh: endRadiusHigh(a, a[17] + 0.1, Math.log(a[17] + 0.1)),
    hookLuminosity: hookLuminosityHigh(a, Math.log(a[33])),
    hookRadius2: hookRadiusHigh(a, 2, Math.LN2),
    alphaL2: alphaLHigh(a, Math.LN2),
    betaL: Math.max(0, a[54] - a[55] * a[57] ** a[56]),
    alphaRLow: alphaRHigh(a, Math.log(a[66])),
    alphaRHigh: alphaRHigh(a, Math.log(a[67])),
    betaR2: betaRMiddle(a, 2, Math.LN2),
    betaR16: betaRMiddle(a, 16, Math.log(16)),
    gamma1,
    gammaEnd: a[75] > 1 ? a[80] : gamma1,
  };
}
