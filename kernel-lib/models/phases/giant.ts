import type { Fits } from '../fits';
import { CoreClock } from './core-clock';
import { extendedFinalMass } from './final-mass';
import {
  asymptoticExponent,
  asymptoticFactor,
  asymptoticRadius,
  baseLuminosity,
  blueFraction,
  blueRadiusHigh,
  CHANDRASEKHAR_MASS,
  endingCore,
  endingLuminosity,
  giantFactor,
  giantRadius,
  heliumBurningShare,
  horizontalLuminosity,
  horizontalShare,
  hydrogenRate,
  ignitionLuminosity,
  leastLuminosity,
  quarticCore,
  setCoreRelation,
} from './giant-fits';
import type { MainSequence } from './main-sequence';
import { heliumLifetime, heliumRadius } from './naked-helium-fits';
import { PHASE } from './phase';

/** Rate at which helium burning adds to the carbon-oxygen core, solar masses per solar luminosity per Myr. Eq. 68. */
export const HELIUM_RATE = 7.66e-5;

/** Landmarks of a star's life after the main sequence. Reused from star to star, so that loops allocate nothing. */
export class Giant {
  /** True for stars with a helium flash; false and `early` false: ignition on the giant branch. */
  flash = false;
  /** True for stars that ignite helium before the giant branch. */
  early = false;
  /** False for stars whose whole mass becomes core before helium can ignite. */
  ignites = true;
  /** True when winds end the asymptotic branch and not the observed final masses. */
  windy = false;
  /** Times, Myr: start of helium burning, its end, second dredge-up (end of the early branch), end of the branch. */
  timeIgnition: number = Number.NaN;
  timeEnding: number = Number.NaN;
  timeDredge: number = Number.NaN;
  timeEnd: number = Number.NaN;
  duration: number = Number.NaN;
  luminosityBase = 0;
  luminosityGapEnd = 0;
  radiusGapEnd = 0;
  luminosityIgnition = 0;
  luminosityEnding = 0;
  coreBase = 0;
  /** Rate of hydrogen burning, see CoreClock. */
  rate = 0;
  coreIgnition = 0;
  coreEnding = 0;
  coreDredge = 0;
  coreEnd = 0;
  coreSupernova = 0;
  /** Share of the growth of the core taken back by the third dredge-up. */
  lambda = 0;
  /** Factors of the two radius laws for the current mass. */
  giantFactor = 0;
  asymptoticFactor = 0;
  asymptoticExponent = 0;
  /** Core helium burning: start of the blue phase and its end as shares of the duration, values there, exponent xi. */
  tauX = 0;
  tauY = 1;
  luminosityX = 0;
  radiusX = 0;
  radiusBlue = 0;
  xi = 1;
  lnRiseL = 0;
  lnFallL = 0;
  radiusMin = 0;
  rootY = 0;
  rootX = 0;
  readonly branch: CoreClock = new CoreClock();
  readonly earlyClock: CoreClock = new CoreClock();
  readonly pulsingClock: CoreClock = new CoreClock();
  /** What is left at the end: phase number and mass. */
  remnant = 0;
  remnantMass = 0;
}

/** First stage: the giant branch up to helium ignition. */
export function setBranch(f: Fits, s: MainSequence, g: Giant): void {
  const { mass, lnMass } = s;
  const { b, giants } = f;
  g.flash = mass < f.massFlash;
  g.early = mass >= f.massGiantBranch;
  g.ignites = true;
  g.giantFactor = giantFactor(b, lnMass);
  setCoreRelation(f, giants, mass, lnMass, g.branch);
  g.luminosityBase = baseLuminosity(f.a, lnMass);
  g.luminosityGapEnd = g.luminosityBase;
  g.luminosityIgnition = ignitionLuminosity(f, giants, mass, lnMass);
  g.coreEnding = endingCore(b, lnMass);
  g.rate = hydrogenRate(mass);
  if (g.early) g.timeIgnition = s.timeBase;
  else {
    g.branch.start(g.rate, g.luminosityBase, s.timeBase);
    g.timeIgnition = Math.max(s.timeBase, g.branch.timeAtLuminosity(g.luminosityIgnition));
    g.radiusGapEnd = giantRadius(b, g.giantFactor, g.luminosityBase);
  }
  if (g.flash) {
    g.coreBase = g.branch.coreAtLuminosity(g.luminosityBase);
    g.coreIgnition = g.branch.coreAtLuminosity(g.luminosityIgnition);
  } else {
    g.coreBase = quarticCore(giants.coreBase, lnMass, g.coreEnding);
    g.coreIgnition = quarticCore(giants.coreIgnition, lnMass, g.coreEnding);
  }
  if (g.coreIgnition >= mass) endWithoutIgnition(s, g);
}

/** A star of very low mass becomes a helium white dwarf when the core has grown to the whole star. */
function endWithoutIgnition(s: MainSequence, g: Giant): void {
  g.ignites = false;
  const last = Math.max(s.timeBase, g.branch.timeAtLuminosity(g.branch.luminosityAtCore(s.mass)));
  g.timeIgnition = last;
  g.timeEnding = last;
  g.timeDredge = last;
  g.timeEnd = last;
  g.duration = 0;
  g.coreEnd = s.mass;
  g.remnant = PHASE.heliumWhiteDwarf;
  g.remnantMass = s.mass;
}

/** Second stage: how long core helium burning lasts and how bright it ends. */
export function setHeliumDuration(f: Fits, s: MainSequence, g: Giant): void {
  if (!g.ignites) return;
  const { mass, lnMass } = s;
  const { b, giants } = f;
  if (g.flash) {
    const mu = (mass - g.coreIgnition) / (f.massFlash - g.coreIgnition);
    g.duration =
      (b[39] + (heliumLifetime(g.coreIgnition) - b[39]) * Math.exp(b[40] * Math.log(1 - mu))) *
      (1 + giants.duration * Math.exp(15 * (mass - f.massFlash)));
  } else g.duration = s.timeBase * heliumBurningShare(b, mass, lnMass);
  g.timeEnding = g.timeIgnition + g.duration;
  g.luminosityEnding = endingLuminosity(f, giants, mass, lnMass);
}

/** Third stage: luminosity and radius while helium burns in the core. */
export function setHeliumShape(f: Fits, s: MainSequence, g: Giant): void {
  if (!g.ignites) return;
  const { mass, lnMass } = s;
  const { b, giants } = f;
  setAsymptoticLaw(f, s, g);
  g.tauX = 0;
  g.tauY = 1;
  if (g.flash) {
    const mu = (mass - g.coreIgnition) / (f.massFlash - g.coreIgnition);
    g.luminosityX = horizontalLuminosity(f, giants, mass, g.coreIgnition, mu);
  } else {
    const lnRatio = lnMass - giants.lnMassGiantBranch;
    if (g.early) {
      const asymptotic = asymptoticRadius(b, g.asymptoticFactor, g.asymptoticExponent, g.luminosityIgnition);
      const fitted = blueRadiusHigh(b, mass, lnMass);
      const spread = giants.blueF > 0 ? blueFraction(b, lnMass, fitted, asymptotic) / giants.blueF : 0;
      g.tauY = Math.max(0, Math.min(1, (1 - b[47]) * spread));
      g.luminosityX = g.luminosityIgnition;
      g.luminosityGapEnd = g.luminosityIgnition;
    } else {
      const power = lnRatio / giants.lnFlashShare;
      const blue = b[45] * Math.exp(0.414 * lnRatio) + giants.blueAlpha * Math.max(0, power) ** b[46];
      g.tauX = 1 - Math.max(0, Math.min(1, blue));
      g.luminosityX = leastLuminosity(f, giants, lnMass, g.luminosityIgnition);
    }
  }
  const lnLX = Math.log(g.luminosityX);
  g.lnRiseL = Math.log(g.luminosityEnding) - lnLX;
  g.lnFallL = Math.log(g.luminosityIgnition) - lnLX;
  setCharacteristicRadii(f, g, mass, lnMass);
  g.xi = Math.min(2.5, Math.max(0.4, g.radiusBlue / g.radiusX));
  setBluePhase(b, g);
}

/** Factors of the radius of asymptotic-branch giants. */
function setAsymptoticLaw(f: Fits, s: MainSequence, g: Giant): void {
  g.asymptoticFactor = asymptoticFactor(f, s.mass, s.lnMass);
  g.asymptoticExponent = asymptoticExponent(f, s.mass);
}

/** Radii at the ends of the gap and of the blue phase, for a current mass whose two factors are set. Eqs 50, 54, 55. */
function setCharacteristicRadii(f: Fits, g: Giant, mass: number, lnMass: number): void {
  const { b, giants } = f;
  if (g.flash) {
    const mu = Math.max(0, (mass - g.coreIgnition) / (f.massFlash - g.coreIgnition));
    const giant = giantRadius(b, g.giantFactor, g.luminosityX);
    const share = horizontalShare(b, mu);
    g.radiusX = (1 - share) * heliumRadius(g.coreIgnition) + share * giant;
    g.radiusBlue = giant * Math.exp((giants.lnBlueRatio * mass) / f.massFlash);
    g.radiusGapEnd = giantRadius(b, g.giantFactor, g.luminosityBase);
    return;
  }
  g.radiusBlue = blueRadiusHigh(b, mass, lnMass);
  if (!g.early) {
    g.radiusX = giantRadius(b, g.giantFactor, g.luminosityX);
    g.radiusGapEnd = giantRadius(b, g.giantFactor, g.luminosityBase);
    return;
  }
  // The fit of the blue radius passes the asymptotic giants' at high mass; the blue phase then has no length.
  const asymptotic = asymptoticRadius(b, g.asymptoticFactor, g.asymptoticExponent, g.luminosityIgnition);
  g.radiusBlue = Math.min(g.radiusBlue, asymptotic);
  if (g.tauY === 0) g.radiusX = asymptotic;
  else if (mass >= Math.max(12, f.massGiantBranch)) g.radiusX = g.radiusBlue;
  else {
    const giant = giantRadius(b, g.giantFactor, g.luminosityIgnition);
    const power = (lnMass - giants.lnMassGiantBranch) / (Math.log(12) - giants.lnMassGiantBranch);
    g.radiusX = giant * (g.radiusBlue / giant) ** Math.max(0, Math.min(1, power));
  }
  g.radiusGapEnd = g.radiusX;
}

/** Fits the radii of a star to a current mass that differs from the one that set its luminosity and core. */
export function setCurrentMass(f: Fits, g: Giant, mass: number): void {
  const lnMass = Math.log(mass);
  g.giantFactor = giantFactor(f.b, lnMass);
  g.asymptoticFactor = asymptoticFactor(f, mass, lnMass);
  g.asymptoticExponent = asymptoticExponent(f, mass);
  if (!g.ignites) {
    g.radiusGapEnd = giantRadius(f.b, g.giantFactor, g.luminosityBase);
    return;
  }
  setCharacteristicRadii(f, g, mass, lnMass);
  setBluePhase(f.b, g);
}

/** Constants of the radius of the blue phase (Eqs 62-65). */
export function setBluePhase(b: Float64Array, g: Giant): void {
  if (g.tauY <= g.tauX) return;
  g.radiusMin = Math.min(g.radiusBlue, g.radiusX);
  const luminosityY = heliumBurningLuminosity(g, g.tauY);
  const radiusY = asymptoticRadius(b, g.asymptoticFactor, g.asymptoticExponent, luminosityY);
  g.rootY = Math.cbrt(Math.log(radiusY / g.radiusMin));
  g.rootX = Math.cbrt(Math.log(g.radiusX / g.radiusMin));
}

/** Luminosity during core helium burning at a share tau of its duration. Eqs 61, 63. */
export function heliumBurningLuminosity(g: Giant, tau: number): number {
  if (tau < g.tauX) {
    const left = (g.tauX - tau) / g.tauX;
    return g.luminosityX * Math.exp(g.lnFallL * left * left * left);
  }
  if (g.tauX >= 1) return g.luminosityX;
  const share = (tau - g.tauX) / (1 - g.tauX);
  return g.luminosityX * Math.exp(g.lnRiseL * (share <= 0 ? 0 : Math.exp(g.xi * Math.log(share))));
}

/** Radius during core helium burning. Eqs 62-65. */
export function heliumBurningRadius(b: Float64Array, g: Giant, tau: number, luminosity: number): number {
  if (tau < g.tauX) return giantRadius(b, g.giantFactor, luminosity);
  if (tau > g.tauY || g.tauY <= g.tauX) {
    return asymptoticRadius(b, g.asymptoticFactor, g.asymptoticExponent, luminosity);
  }
  const width = g.tauY - g.tauX;
  const q = (g.rootY * (tau - g.tauX) - g.rootX * (g.tauY - tau)) / width;
  return g.radiusMin * Math.exp(Math.abs(q * q * q));
}

/** Last stage: clocks and ends of the two asymptotic branches. Eqs 68-75 and the observed final masses. */
export function setAsymptotic(f: Fits, s: MainSequence, g: Giant): void {
  if (!g.ignites) return;
  const { mass } = s;
  const { rate } = g;
  setAsymptoticLaw(f, s, g);
  g.coreSupernova = Math.max(CHANDRASEKHAR_MASS, 0.773 * g.coreEnding - 0.35);
  g.earlyClock.copyRelation(g.branch);
  g.earlyClock.start(HELIUM_RATE, g.luminosityEnding, g.timeEnding);
  if (g.coreEnding >= 2.25) {
    endInCollapse(g);
    return;
  }
  const dredge = g.coreEnding > 0.8 ? 0.44 * g.coreEnding + 0.448 : g.coreEnding;
  g.coreDredge = Math.min(dredge, mass);
  // With winds the star ends when its envelope is gone, which is followed step by step; the core may grow until it explodes.
  const last = g.windy ? Number.POSITIVE_INFINITY : Math.max(g.coreDredge, extendedFinalMass(mass));
  g.coreEnd = Math.min(last, g.coreSupernova, g.windy ? last : mass);
  const luminosityDredge = g.earlyClock.luminosityAtCore(Math.min(g.coreDredge, g.coreEnd));
  g.timeDredge = Math.max(g.timeEnding, g.earlyClock.timeAtLuminosity(luminosityDredge));
  g.lambda = Math.min(0.9, 0.3 + 0.001 * mass * mass * mass * mass * mass);
  g.pulsingClock.copyRelation(g.branch);
  g.pulsingClock.start(
    (rate * HELIUM_RATE) / (rate + HELIUM_RATE),
    Math.max(luminosityDredge, g.luminosityEnding),
    g.timeDredge,
  );
  const clocked = g.coreDredge + (g.coreEnd - g.coreDredge) / (1 - g.lambda);
  g.timeEnd =
    g.coreEnd > g.coreDredge
      ? Math.max(g.timeDredge, g.pulsingClock.timeAtLuminosity(g.pulsingClock.luminosityAtCore(clocked)))
      : g.timeDredge;
  g.remnantMass = g.coreEnd;
  g.remnant = g.coreEnding < 1.6 ? PHASE.carbonWhiteDwarf : PHASE.neonWhiteDwarf;
  if (g.coreEnd >= g.coreSupernova) {
    g.remnant = g.coreEnding < 1.6 ? PHASE.noRemnant : PHASE.neutronStar;
    g.remnantMass = g.coreEnding < 1.6 ? 0 : 1.17 + 0.09 * g.coreSupernova;
  }
}

/** Collapse of the core at the supernova mass. Eqs 75, 92. */
function endInCollapse(g: Giant): void {
  g.coreDredge = g.coreSupernova;
  g.coreEnd = g.coreSupernova;
  g.lambda = 0;
  g.timeDredge = Math.max(g.timeEnding, g.earlyClock.timeAtLuminosity(g.earlyClock.luminosityAtCore(g.coreSupernova)));
  g.timeEnd = g.timeDredge;
  g.remnantMass = 1.17 + 0.09 * g.coreSupernova;
  g.remnant = g.remnantMass <= 1.8 ? PHASE.neutronStar : PHASE.blackHole;
}
