import type { Fits } from '../fits';
import {
  alphaL,
  alphaR,
  betaL,
  betaR,
  endLuminosity,
  endRadius,
  etaL,
  gammaR,
  hookLuminosity,
  hookRadius,
  hookShare,
  timeBaseGiantBranch,
} from './main-sequence-fits';
import { PHASE, type StarState } from './phase';
import { zeroAgeLuminosity, zeroAgeRadius } from './zero-age-fits';

/** Share of the time to the hook over which the star contracts in it. */
export const HOOK_WIDTH = 0.01;

/** Times and shape of one star's main sequence. Reused from star to star, so that loops allocate nothing. */
export class MainSequence {
  mass: number = Number.NaN;
  lnMass: number = Number.NaN;
  /** Myr to the base of the giant branch, to the hook, to the end of the main sequence. */
  timeBase: number = Number.NaN;
  timeHook: number = Number.NaN;
  timeEnd: number = Number.NaN;
  luminosityZero: number = Number.NaN;
  radiusZero: number = Number.NaN;
  luminosityEnd: number = Number.NaN;
  radiusEnd: number = Number.NaN;
  alphaL = 0;
  betaL = 0;
  eta = 10;
  deltaL = 0;
  restL = 0;
  alphaR = 0;
  betaR = 0;
  gamma = 0;
  deltaR = 0;
  restR = 0;
  radiusLeast = 0;
}

/** Times only, in Myr. Eqs 4-7. */
export function setMainSequenceTimes(f: Fits, mass: number, s: MainSequence): void {
  s.mass = mass;
  s.lnMass = Math.log(mass);
  s.timeBase = timeBaseGiantBranch(f.a, mass);
  s.timeHook = hookShare(f.a, s.lnMass) * s.timeBase;
  s.timeEnd = Math.max(s.timeHook, f.mainSequenceShare * s.timeBase);
}

/** All but the times, which must be set already. */
export function setMainSequenceShape(f: Fits, s: MainSequence): void {
  const { mass, lnMass } = s;
  const joins = f.mainSequence;
  s.luminosityZero = zeroAgeLuminosity(f, mass);
  s.radiusZero = zeroAgeRadius(f, mass);
  s.luminosityEnd = endLuminosity(f.a, mass, lnMass);
  s.radiusEnd = endRadius(f.a, joins, mass, lnMass, s.radiusZero);
  s.alphaL = alphaL(f.a, joins, mass, lnMass);
  s.betaL = betaL(f.a, joins, mass, lnMass);
  s.eta = etaL(f.z, mass);
  s.deltaL = hookLuminosity(f, joins, mass, lnMass);
  s.restL = Math.log10(s.luminosityEnd / s.luminosityZero) - s.alphaL - s.betaL;
  s.alphaR = alphaR(f.a, joins, mass, lnMass);
  s.betaR = betaR(f.a, joins, mass, lnMass);
  s.gamma = gammaR(f.a, joins, mass);
  s.deltaR = hookRadius(f, joins, mass, lnMass);
  s.restR = Math.log10(s.radiusEnd / s.radiusZero) - s.alphaR - s.betaR - s.gamma;
  // Degenerate stars of very low mass, Eq. 24; it lies far below the fit above 0.15 solar masses.
  s.radiusLeast = mass < 0.3 ? f.degenerateRadius / Math.cbrt(mass) : 0;
  if (s.radiusEnd < s.radiusLeast) s.radiusEnd = s.radiusLeast;
}

/** Luminosity and radius at a time in Myr, Eqs 11-15. */
export function mainSequenceState(s: MainSequence, time: number, out: StarState): void {
  const tau = Math.max(0, Math.min(1, time / s.timeEnd));
  const tau2 = tau * tau;
  const tau5 = tau2 * tau2 * tau;
  const tau10 = tau5 * tau5;
  let late = tau10;
  if (s.eta === 20) late = tau10 * tau10;
  else if (s.eta !== 10) late = tau ** s.eta;
  let logL = s.alphaL * tau + s.betaL * late + s.restL * tau2;
  let logR = s.alphaR * tau + s.betaR * tau10 + s.restR * tau2 * tau;
  if (s.gamma > 0) logR += s.gamma * tau10 * tau10 * tau10 * tau10;
  if (s.deltaL !== 0 || s.deltaR !== 0) {
    const one = Math.min(1, time / s.timeHook);
    const two = Math.max(0, Math.min(1, (time - (1 - HOOK_WIDTH) * s.timeHook) / (HOOK_WIDTH * s.timeHook)));
    logL -= s.deltaL * (one * one - two * two);
    logR -= s.deltaR * (one * one * one - two * two * two);
  }
  out.phase = PHASE.mainSequence;
  out.mass = s.mass;
  out.luminosity = s.luminosityZero * Math.exp(Math.LN10 * logL);
  out.radius = Math.max(s.radiusLeast, s.radiusZero * Math.exp(Math.LN10 * logR));
  out.coreMass = 0;
}
