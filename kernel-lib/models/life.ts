import type { Fits } from './fits';
import type { LifeSource } from './moments';
import {
  Giant,
  heliumBurningLuminosity,
  heliumBurningRadius,
  setAsymptotic,
  setBranch,
  setCurrentMass,
  setHeliumDuration,
  setHeliumShape,
} from './phases/giant';
import { asymptoticRadius, giantRadius } from './phases/giant-fits';
import {
  HOOK_WIDTH,
  MainSequence,
  mainSequenceState,
  setMainSequenceShape,
  setMainSequenceTimes,
} from './phases/main-sequence';
import { PHASE, type StarState } from './phases/phase';
import { coolingLuminosity, coreBaryons, NEUTRON_STAR_RADIUS, whiteDwarfRadiusLaw } from './phases/white-dwarf-law';

/** One star's whole life without winds. Set it for a mass, then ask for states; it is reused from star to star. */
export class Life implements LifeSource {
  readonly main: MainSequence = new MainSequence();
  readonly giant: Giant = new Giant();
  readonly momentCount = 8;
  private readonly fits: Fits;
  private shaped = false;
  private branched = false;
  private timed = false;
  private helium = false;
  private ended = false;

  constructor(fits: Fits) {
    this.fits = fits;
  }

  /** Chooses the star; the later life is worked out when it is first asked for. */
  setMass(mass: number): void {
    setMainSequenceTimes(this.fits, mass, this.main);
    this.shaped = false;
    this.branched = false;
    this.timed = false;
    this.helium = false;
    this.ended = false;
  }

  private shape(): void {
    if (this.shaped) return;
    setMainSequenceShape(this.fits, this.main);
    this.shaped = true;
  }

  private branch(): void {
    if (this.branched) return;
    setBranch(this.fits, this.main, this.giant);
    this.branched = true;
  }

  private burnHelium(shape: boolean): void {
    this.branch();
    if (!this.timed) setHeliumDuration(this.fits, this.main, this.giant);
    this.timed = true;
    if (!shape || this.helium) return;
    setHeliumShape(this.fits, this.main, this.giant);
    this.helium = true;
  }

  private end(): void {
    if (this.ended) return;
    this.burnHelium(false);
    setAsymptotic(this.fits, this.main, this.giant);
    this.ended = true;
  }

  /** Works out the whole life at once, so that the fields of `giant` may be read. */
  complete(): void {
    this.burnHelium(true);
    this.end();
  }

  /**
   * Time of a moment, Myr: 0 and 1 start and end of the hook, 2 end of the main sequence, 3 base of the giant branch,
   * 4 helium ignition, 5 base of the asymptotic branch, 6 second dredge-up, 7 end.
   */
  moment(k: number): number {
    if (k === 0) return (1 - HOOK_WIDTH) * this.main.timeHook;
    if (k === 1) return this.main.timeHook;
    if (k === 2) return this.main.timeEnd;
    if (k === 3) return this.main.timeBase;
    this.branch();
    if (k === 4) return this.giant.timeIgnition;
    this.burnHelium(false);
    if (k === 5) return this.giant.timeEnding;
    this.end();
    if (k === 6) return this.giant.timeDredge;
    return this.giant.timeEnd;
  }

  /** Sets the later radii for a current mass that winds have made smaller than the one that was set. */
  setCurrentMass(mass: number): void {
    this.complete();
    setCurrentMass(this.fits, this.giant, mass);
  }

  /** Phase at a time in Myr. */
  phaseAt(time: number): number {
    const { main, giant } = this;
    if (time <= main.timeEnd) return PHASE.mainSequence;
    this.end();
    if (time >= giant.timeEnd) return giant.remnant;
    if (time <= main.timeBase) return PHASE.hertzsprungGap;
    if (time <= giant.timeIgnition) return PHASE.giantBranch;
    if (time <= giant.timeEnding) return PHASE.coreHelium;
    return time <= giant.timeDredge ? PHASE.earlyAsymptotic : PHASE.pulsingAsymptotic;
  }

  /** State at a time in Myr, in the phase given: at the border of two phases either may be asked for. */
  stateIn(phase: number, time: number, out: StarState): void {
    const { main, giant, fits } = this;
    if (phase === PHASE.mainSequence) {
      this.shape();
      mainSequenceState(main, time, out);
      return;
    }
    out.phase = phase;
    out.mass = main.mass;
    switch (phase) {
      case PHASE.hertzsprungGap: {
        this.shape();
        this.branch();
        if (giant.early) this.burnHelium(true);
        const tau = clampShare((time - main.timeEnd) / (main.timeBase - main.timeEnd));
        out.luminosity = main.luminosityEnd * Math.exp(tau * Math.log(giant.luminosityGapEnd / main.luminosityEnd));
        out.radius = main.radiusEnd * Math.exp(tau * Math.log(giant.radiusGapEnd / main.radiusEnd));
        const m525 = Math.exp(5.25 * main.lnMass);
        const rho = (1.586 + m525) / (2.434 + 1.02 * m525);
        out.coreMass = ((1 - tau) * rho + tau) * (giant.early ? giant.coreIgnition : giant.coreBase);
        return;
      }
      case PHASE.giantBranch: {
        this.branch();
        const clocked = giant.branch.coreAtTime(Math.min(Math.max(time, main.timeBase), giant.timeIgnition));
        out.luminosity = giant.branch.luminosityAtCore(clocked);
        out.radius = giantRadius(fits.b, giant.giantFactor, out.luminosity);
        const share = clampShare((time - main.timeBase) / (giant.timeIgnition - main.timeBase));
        out.coreMass = giant.flash ? clocked : giant.coreBase + (giant.coreIgnition - giant.coreBase) * share;
        return;
      }
      case PHASE.coreHelium: {
        this.burnHelium(true);
        const tau = clampShare((time - giant.timeIgnition) / giant.duration);
        out.luminosity = heliumBurningLuminosity(giant, tau);
        out.radius = heliumBurningRadius(fits.b, giant, tau, out.luminosity);
        out.coreMass = (1 - tau) * giant.coreIgnition + tau * giant.coreEnding;
        return;
      }
      case PHASE.earlyAsymptotic: {
        this.end();
        const core = giant.earlyClock.coreAtTime(Math.min(Math.max(time, giant.timeEnding), giant.timeDredge));
        out.luminosity = giant.earlyClock.luminosityAtCore(core);
        out.radius = asymptoticRadius(fits.b, giant.asymptoticFactor, giant.asymptoticExponent, out.luminosity);
        out.coreMass = giant.coreEnding;
        return;
      }
      case PHASE.pulsingAsymptotic: {
        this.end();
        const core = giant.pulsingClock.coreAtTime(Math.min(Math.max(time, giant.timeDredge), giant.timeEnd));
        out.luminosity = giant.pulsingClock.luminosityAtCore(core);
        out.radius = asymptoticRadius(fits.b, giant.asymptoticFactor, giant.asymptoticExponent, out.luminosity);
        out.coreMass = giant.coreDredge + (1 - giant.lambda) * (core - giant.coreDredge);
        return;
      }
      default:
        this.end();
        remnantState(phase, giant.remnantMass, fits.z, time - giant.timeEnd, out);
    }
  }

  /** State at a time in Myr. */
  state(time: number, out: StarState): void {
    this.stateIn(this.phaseAt(time), time, out);
  }
}

/** A dead star at a time in Myr after its end. Source: Hurley, Pols & Tout 2000, section 6.2; white dwarfs Hurley & Shara 2003. */
export function remnantState(phase: number, mass: number, z: number, age: number, out: StarState): void {
  const since = Math.max(0, age);
  out.phase = phase;
  out.mass = mass;
  out.coreMass = mass;
  if (phase === PHASE.noRemnant) {
    out.luminosity = 0;
    out.radius = 0;
  } else if (phase === PHASE.neutronStar) {
    out.luminosity = (0.02 * mass ** (2 / 3)) / Math.max(since, 0.1) ** 2;
    out.radius = NEUTRON_STAR_RADIUS;
  } else if (phase === PHASE.blackHole) {
    out.luminosity = 1e-10;
    out.radius = 4.24e-6 * mass;
  } else {
    out.luminosity = coolingLuminosity(mass, z, coreBaryons(phase), since);
    out.radius = whiteDwarfRadiusLaw(mass);
  }
}

/** Cut to 0 to 1; a phase without length (0/0) counts as at its start. */
function clampShare(x: number): number {
  return x > 0 ? Math.min(1, x) : 0;
}
