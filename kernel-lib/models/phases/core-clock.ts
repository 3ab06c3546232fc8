/**
 * Growth of a core by shell burning: the luminosity follows from the core mass, L = min(B Mc^q, D Mc^p), and the core
 * grows by dMc/dt = A L. Solar masses and luminosities, Myr.
 * Source: Hurley, Pols & Tout 2000, Eqs 31-43.
 */
export class CoreClock {
  p = 5;
  q = 2;
  /** ln B and ln D. */
  lnB = 0;
  lnD = 0;
  rate = 0;
  /** Luminosity and core mass where the two power laws cross. */
  luminosityCross = 0;
  lnLuminosityCross = 0;
  coreCross = 0;
  timeStart = 0;
  luminosityStart = 0;
  infinity1 = 0;
  timeCross = 0;
  infinity2 = 0;

  /** The core mass - luminosity relation. */
  setRelation(p: number, q: number, b: number, lnD: number): void {
    this.p = p;
    this.q = q;
    this.lnB = Math.log(b);
    this.lnD = lnD;
    const lnCross = (this.lnB - lnD) / (p - q);
    this.coreCross = Math.exp(lnCross);
    this.lnLuminosityCross = lnD + p * lnCross;
    this.luminosityCross = Math.exp(this.lnLuminosityCross);
  }

  /** Takes over the relation of another clock. */
  copyRelation(other: CoreClock): void {
    this.p = other.p;
    this.q = other.q;
    this.lnB = other.lnB;
    this.lnD = other.lnD;
    this.coreCross = other.coreCross;
    this.luminosityCross = other.luminosityCross;
    this.lnLuminosityCross = other.lnLuminosityCross;
  }

  /** Sets the clock going at a luminosity and time. */
  start(rate: number, luminosity: number, time: number): void {
    this.rate = rate;
    this.timeStart = time;
    this.luminosityStart = luminosity;
    const lnL = Math.log(luminosity);
    if (luminosity >= this.luminosityCross) {
      this.infinity1 = time;
      this.timeCross = time;
      this.infinity2 = time + this.remainingHigh(lnL);
      return;
    }
    this.infinity1 = time + this.remainingLow(lnL);
    this.timeCross = this.infinity1 - this.remainingLow(this.lnLuminosityCross);
    this.infinity2 = this.timeCross + this.remainingHigh(this.lnLuminosityCross);
  }

  /** Time left at a luminosity before the lower power law would run to infinity. */
  private remainingLow(lnL: number): number {
    const p = this.p;
    return Math.exp(((p - 1) / p) * (this.lnD - lnL) - this.lnD) / ((p - 1) * this.rate);
  }

  /** The same of the upper power law. */
  private remainingHigh(lnL: number): number {
    const q = this.q;
    return Math.exp(((q - 1) / q) * (this.lnB - lnL) - this.lnB) / ((q - 1) * this.rate);
  }

  /** Core mass at a luminosity. */
  coreAtLuminosity(luminosity: number): number {
    return luminosity <= this.luminosityCross
      ? Math.exp((Math.log(luminosity) - this.lnD) / this.p)
      : Math.exp((Math.log(luminosity) - this.lnB) / this.q);
  }

  /** Luminosity at a core mass. */
  luminosityAtCore(core: number): number {
    return core <= this.coreCross
      ? Math.exp(this.lnD + this.p * Math.log(core))
      : Math.exp(this.lnB + this.q * Math.log(core));
  }

  /** Time at which a luminosity is reached. */
  timeAtLuminosity(luminosity: number): number {
    const lnL = Math.log(luminosity);
    return luminosity <= this.luminosityCross
      ? this.infinity1 - this.remainingLow(lnL)
      : this.infinity2 - this.remainingHigh(lnL);
  }

  /** Core mass at a time; the clock stands still a little before it would run to infinity. */
  coreAtTime(time: number): number {
    if (time <= this.timeCross && this.luminosityStart < this.luminosityCross) {
      const p = this.p;
      return Math.exp((Math.log((p - 1) * this.rate * (this.infinity1 - time)) + this.lnD) / (1 - p));
    }
    const q = this.q;
    const left = Math.max(this.infinity2 - time, 1e-9 * (this.infinity2 - this.timeStart) + 1e-300);
    return Math.exp((Math.log((q - 1) * this.rate * left) + this.lnB) / (1 - q));
  }
}
