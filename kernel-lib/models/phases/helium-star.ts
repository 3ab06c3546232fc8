import { CoreClock } from './core-clock';
import { HELIUM_RATE } from './giant';
import { CHANDRASEKHAR_MASS } from './giant-fits';
import { heliumLuminosity, heliumRadius } from './naked-helium-fits';
import { PHASE, type StarState } from './phase';

/** Luminosity and radius of a naked helium star burning helium in its core, at a share tau of that phase. Eqs 80-81, from memory. */
export function heliumMainSequence(mass: number, tau: number, out: StarState): void {
  const alpha = Math.max(0, 0.85 - 0.08 * mass);
  const beta = Math.max(0, 0.4 - 0.22 * Math.log10(mass));
  out.phase = PHASE.heliumMainSequence;
  out.mass = mass;
  out.coreMass = 0;
  out.luminosity = heliumLuminosity(mass) * (1 + 0.45 * tau + alpha * tau * tau);
  out.radius = heliumRadius(mass) * (1 + beta * tau - beta * tau ** 6);
}

/** A naked helium giant: its core clock and what becomes of it. Eqs 82-89, from memory. */
export class HeliumGiant {
  readonly clock: CoreClock = new CoreClock();
  /** Mass of the star at the end of core helium burning, which sets clock and luminosity. */
  mass0 = 0;
  luminosityStart = 0;
  timeEnd = 0;
  coreEnd = 0;
  remnant = 0;
  remnantMass = 0;

  /** Starts the giant with a given core of carbon and oxygen, at a time in Myr; core 0 means the end of the helium main sequence. */
  start(mass0: number, core: number, time: number): void {
    this.mass0 = mass0;
    this.clock.setRelation(5, 3, 4.1e4, Math.log(5.5e4 / (1 + 0.4 * mass0 ** 4)));
    const ending = heliumLuminosity(mass0) * (1.45 + Math.max(0, 0.85 - 0.08 * mass0));
    this.luminosityStart = core > 0 ? Math.max(ending, this.clock.luminosityAtCore(core)) : ending;
    this.clock.start(HELIUM_RATE, this.luminosityStart, time);
    const supernova = Math.max(CHANDRASEKHAR_MASS, 0.773 * mass0 - 0.35);
    const first = this.clock.coreAtLuminosity(this.luminosityStart);
    this.coreEnd = Math.max(first, Math.min(supernova, 1.45 * mass0 - 0.31, mass0));
    this.timeEnd = Math.max(time, this.clock.timeAtLuminosity(this.clock.luminosityAtCore(this.coreEnd)));
    // Helium burning does not reach the outermost layers of a light star; they stay on the white dwarf.
    this.remnantMass = Math.min(mass0, Math.max(this.coreEnd, (this.coreEnd + 0.31) / 1.45));
    this.remnant = mass0 < 1.6 ? PHASE.carbonWhiteDwarf : PHASE.neonWhiteDwarf;
    if (this.coreEnd < supernova) return;
    if (mass0 < 1.6) {
      this.remnant = PHASE.noRemnant;
      this.remnantMass = 0;
      return;
    }
    this.remnantMass = 1.17 + 0.09 * this.coreEnd;
    this.remnant = this.remnantMass <= 1.8 ? PHASE.neutronStar : PHASE.blackHole;
  }

  /** State at a time for a current mass. */
  state(mass: number, time: number, out: StarState): void {
    const core = this.clock.coreAtTime(Math.min(time, this.timeEnd));
    const luminosity = this.clock.luminosityAtCore(core);
    const lambda = (500 * (2 + mass ** 5)) / mass ** 2.5;
    const first =
      heliumRadius(mass) * (luminosity / this.luminosityStart) ** 0.2 +
      0.02 * (Math.exp(luminosity / lambda) - Math.exp(this.luminosityStart / lambda));
    out.phase = PHASE.heliumGiant;
    out.mass = mass;
    out.coreMass = core;
    out.luminosity = luminosity;
    out.radius = Math.min(first, 0.08 * luminosity ** 0.75);
  }
}
