import type { Fits } from '../fits';
import { Life, remnantState } from '../life';
import type { LifeSource } from '../moments';
import { HeliumGiant, heliumMainSequence } from '../phases/helium-star';
import { HOOK_WIDTH } from '../phases/main-sequence';
import { heliumLifetime } from '../phases/naked-helium-fits';
import { PHASE, StarState } from '../phases/phase';
import { type WindOptions, windRate } from './wind-rate';

const MOST_NODES = 20000;
const MYR = 1e6;

/**
 * One star's life with winds, followed step by step. After the main sequence luminosity and core follow from the mass at its
 * end (for stars with a helium flash, from the mass left at the flash), radius from the current mass; a star that has lost
 * its envelope goes on as a helium star or is a white dwarf.
 * Moments: 0-7 as Life (a phase never reached counts as ending when the star left that road), 8 loss of the envelope before
 * the end of helium burning, 9 end of core burning of the naked star.
 * Source: Hurley, Pols & Tout 2000, sections 6 and 7.1, without its small-envelope perturbation (section 6.3).
 */
export class WindLife implements LifeSource {
  readonly momentCount = 10;
  private readonly fits: Fits;
  private readonly wind: WindOptions;
  private readonly life: Life;
  private readonly naked: HeliumGiant = new HeliumGiant();
  private readonly probe: StarState = new StarState();
  private readonly times: Float64Array = new Float64Array(MOST_NODES);
  private readonly masses: Float64Array = new Float64Array(MOST_NODES);
  private readonly clocks: Float64Array = new Float64Array(MOST_NODES);
  private nodes = 0;
  private readonly segmentPhase: Uint8Array = new Uint8Array(16);
  private readonly segmentFirst: Int32Array = new Int32Array(17);
  private readonly segmentMass: Float64Array = new Float64Array(16);
  private segments = 0;
  private readonly moments: Float64Array = new Float64Array(10);
  private lifeMass = Number.NaN;
  private time = 0;
  private mass = 0;
  private clock = 0;
  /** What is left: phase number, mass, and the time at which the star ended. */
  remnant = 0;
  remnantMass = 0;
  timeEnd = 0;

  constructor(fits: Fits, wind: WindOptions) {
    this.fits = fits;
    this.wind = wind;
    this.life = new Life(fits);
    this.life.giant.windy = true;
  }

  moment(k: number): number {
    return this.moments[k];
  }

  phaseAt(time: number): number {
    if (time >= this.timeEnd) return this.remnant;
    for (let s = 0; s < this.segments; s++) {
      if (time <= this.times[this.segmentFirst[s + 1] - 1]) return this.segmentPhase[s];
    }
    return this.remnant;
  }

  stateIn(phase: number, time: number, out: StarState): void {
    let s = this.segments - 1;
    while (s >= 0 && this.segmentPhase[s] !== phase) s--;
    if (s < 0) {
      remnantState(this.remnant, this.remnantMass, this.fits.z, time - this.timeEnd, out);
      return;
    }
    let low = this.segmentFirst[s];
    let high = this.segmentFirst[s + 1] - 1;
    const t = Math.max(this.times[low], Math.min(time, this.times[high]));
    while (high - low > 1) {
      const mid = (low + high) >> 1;
      if (this.times[mid] <= t) low = mid;
      else high = mid;
    }
    const width = this.times[high] - this.times[low];
    const share = width > 0 ? (t - this.times[low]) / width : 0;
    const mass = this.masses[low] + share * (this.masses[high] - this.masses[low]);
    const clock = this.clocks[low] + share * (this.clocks[high] - this.clocks[low]);
    this.evaluate(phase, this.segmentMass[s], mass, clock, out);
  }

  /** The star in a phase, from the mass that set its clock, its current mass and the clock. */
  private evaluate(phase: number, mass0: number, mass: number, clock: number, out: StarState): void {
    if (phase === PHASE.mainSequence) {
      this.setLife(mass);
      this.life.stateIn(phase, clock * this.life.main.timeEnd, out);
    } else if (phase === PHASE.heliumMainSequence) heliumMainSequence(mass, clock, out);
    else if (phase === PHASE.heliumGiant) this.naked.state(mass, clock, out);
    else {
      this.setLife(mass0);
      this.life.setCurrentMass(mass);
      this.life.stateIn(phase, clock, out);
    }
    out.mass = mass;
  }

  private setLife(mass: number): void {
    if (mass === this.lifeMass) return;
    this.life.setMass(mass);
    this.lifeMass = mass;
  }

  /** Follows the whole life of a star. */
  setMass(mass: number): void {
    this.nodes = 0;
    this.segments = 0;
    this.time = 0;
    this.mass = mass;
    this.moments.fill(Number.NaN);
    this.followMainSequence();
    const stripped = this.followGiant();
    if (stripped >= 0) this.strip(stripped);
    this.timeEnd = this.time;
    this.segmentFirst[this.segments] = this.nodes;
    // A moment that the star never came to counts as come when the star left that road.
    const left = Number.isNaN(this.moments[8]) ? this.timeEnd : this.moments[8];
    for (let k = 2; k < 7; k++) if (Number.isNaN(this.moments[k])) this.moments[k] = left;
    this.moments[7] = this.timeEnd;
    for (let k = 8; k < 10; k++) if (Number.isNaN(this.moments[k])) this.moments[k] = this.timeEnd;
  }

  private begin(phase: number, mass0: number, clock: number): void {
    this.segmentPhase[this.segments] = phase;
    this.segmentMass[this.segments] = mass0;
    this.segmentFirst[this.segments] = this.nodes;
    this.segments++;
    this.clock = clock;
    this.note();
  }

  private note(): void {
    this.times[this.nodes] = this.time;
    this.masses[this.nodes] = this.mass;
    this.clocks[this.nodes] = this.clock;
    this.nodes++;
  }

  private rateNow(phase: number, mass0: number, mass: number, clock: number): number {
    const { probe } = this;
    this.evaluate(phase, mass0, mass, clock, probe);
    return MYR * windRate(phase, mass, probe.luminosity, probe.radius, this.fits.z, this.wind);
  }

  /** Speed of a phase's clock: shares of the lifetime on the two main sequences, time elsewhere. */
  private pace(phase: number, mass: number): number {
    if (phase === PHASE.mainSequence) {
      this.setLife(mass);
      return 1 / this.life.main.timeEnd;
    }
    return phase === PHASE.heliumMainSequence ? 1 / heliumLifetime(mass) : 1;
  }

  /**
   * Follows one phase to the end of its clock by midpoint steps, short enough that rate and envelope change little in one.
   * @returns false when the envelope was gone before the end
   */
  private follow(phase: number, mass0: number, clockEnd: number, steps: number): boolean {
    const length = clockEnd - this.clock;
    if (!(length > 0)) return true;
    let step = length / steps;
    const least = length * 1e-7;
    while (this.clock < clockEnd && this.nodes < MOST_NODES - 2) {
      const rate = this.rateNow(phase, mass0, this.mass, this.clock);
      const core = this.probe.coreMass;
      const pace = this.pace(phase, this.mass);
      const spare = phase === PHASE.mainSequence || phase === PHASE.heliumMainSequence ? this.mass : this.mass - core;
      let d = Math.min(step, clockEnd - this.clock);
      if (rate > 0) d = Math.min(d, (Math.max(0.04 * spare, 0.002 * this.mass) * pace) / rate);
      let middle = 0;
      for (;;) {
        const halfMass = Math.max(this.mass - (0.5 * rate * d) / pace, 0.5 * this.mass);
        middle = this.rateNow(phase, mass0, halfMass, this.clock + 0.5 * d);
        const change = Math.abs(middle - rate);
        if (d <= least || change < 0.1 * rate || (change * d) / pace < 2e-5 * this.mass) break;
        d *= 0.5;
      }
      const paceMiddle = this.pace(phase, this.mass - (0.5 * middle * d) / pace);
      const after = this.mass - (middle * d) / paceMiddle;
      const isMain = phase === PHASE.mainSequence || phase === PHASE.heliumMainSequence;
      if (!isMain && after <= core) {
        const share = (this.mass - core) / (this.mass - after);
        this.time += (share * d) / paceMiddle;
        this.clock += share * d;
        this.mass = core;
        this.note();
        return false;
      }
      this.time += d / paceMiddle;
      this.clock = d >= clockEnd - this.clock ? clockEnd : this.clock + d;
      this.mass = after;
      this.note();
      step = Math.min(length / steps, 2 * d);
    }
    return true;
  }

  private followMainSequence(): void {
    this.setLife(this.mass);
    const { main } = this.life;
    this.life.stateIn(PHASE.mainSequence, main.timeEnd, this.probe);
    const windy = this.probe.luminosity > 4000;
    this.begin(PHASE.mainSequence, this.mass, 0);
    const first = this.nodes - 1;
    const hook = main.timeHook / main.timeEnd;
    this.follow(PHASE.mainSequence, this.mass, 1, windy ? 60 : 1);
    this.moments[0] = this.timeAtClock(first, (1 - HOOK_WIDTH) * hook);
    this.moments[1] = this.timeAtClock(first, hook);
    this.moments[2] = this.time;
  }

  private timeAtClock(first: number, clock: number): number {
    for (let i = first + 1; i < this.nodes; i++) {
      if (this.clocks[i] < clock) continue;
      const share = (clock - this.clocks[i - 1]) / (this.clocks[i] - this.clocks[i - 1]);
      return this.times[i - 1] + share * (this.times[i] - this.times[i - 1]);
    }
    return this.time;
  }

  /** @returns the phase in which the envelope was lost, or -1 */
  private followGiant(): number {
    const { life } = this;
    const { giant, main } = life;
    let mass0 = this.mass;
    this.setLife(mass0);
    life.complete();
    this.begin(PHASE.hertzsprungGap, mass0, main.timeEnd);
    if (!this.follow(PHASE.hertzsprungGap, mass0, main.timeBase, 20)) return PHASE.hertzsprungGap;
    this.moments[3] = this.time;
    if (!giant.early) {
      this.begin(PHASE.giantBranch, mass0, main.timeBase);
      if (!this.follow(PHASE.giantBranch, mass0, giant.timeIgnition, 60)) return PHASE.giantBranch;
    }
    this.moments[4] = this.time;
    if (giant.flash) {
      mass0 = this.mass;
      this.setLife(mass0);
      life.complete();
    }
    if (!giant.ignites) {
      this.remnant = PHASE.heliumWhiteDwarf;
      this.remnantMass = this.mass;
      return -1;
    }
    this.begin(PHASE.coreHelium, mass0, giant.timeIgnition);
    if (!this.follow(PHASE.coreHelium, mass0, giant.timeEnding, 60)) return PHASE.coreHelium;
    this.moments[5] = this.time;
    if (giant.timeDredge > giant.timeEnding) {
      this.begin(PHASE.earlyAsymptotic, mass0, giant.timeEnding);
      if (!this.follow(PHASE.earlyAsymptotic, mass0, giant.timeDredge, 60)) return PHASE.earlyAsymptotic;
    }
    this.moments[6] = this.time;
    this.remnant = giant.remnant;
    this.remnantMass = giant.remnantMass;
    if (giant.timeEnd > giant.timeDredge) {
      this.begin(PHASE.pulsingAsymptotic, mass0, giant.timeDredge);
      if (!this.follow(PHASE.pulsingAsymptotic, mass0, giant.timeEnd, 400)) {
        this.remnant = giant.coreEnding < 1.6 ? PHASE.carbonWhiteDwarf : PHASE.neonWhiteDwarf;
        this.remnantMass = this.mass;
      }
    }
    return -1;
  }

  /** Goes on with a star that has just lost its envelope. */
  private strip(phase: number): void {
    const { giant } = this.life;
    if (giant.flash && phase <= PHASE.giantBranch) {
      this.remnant = PHASE.heliumWhiteDwarf;
      this.remnantMass = this.mass;
      return;
    }
    this.moments[8] = this.time;
    let core = 0;
    if (phase === PHASE.earlyAsymptotic) core = giant.earlyClock.coreAtTime(this.clock);
    else {
      const tau = phase === PHASE.coreHelium ? (this.clock - giant.timeIgnition) / giant.duration : 0;
      this.begin(PHASE.heliumMainSequence, this.mass, Math.min(1, tau));
      this.follow(PHASE.heliumMainSequence, this.mass, 1, 40);
    }
    this.moments[9] = this.time;
    this.naked.start(this.mass, core, this.time);
    this.remnant = this.naked.remnant;
    this.remnantMass = this.naked.remnantMass;
    if (this.naked.timeEnd > this.time) {
      this.begin(PHASE.heliumGiant, this.mass, this.time);
      if (!this.follow(PHASE.heliumGiant, this.mass, this.naked.timeEnd, 60)) {
        this.remnant = this.naked.mass0 < 1.6 ? PHASE.carbonWhiteDwarf : PHASE.neonWhiteDwarf;
        this.remnantMass = this.mass;
      }
      this.remnantMass = Math.min(this.remnantMass, this.mass);
    }
  }
}
