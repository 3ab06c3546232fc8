import type { StellarModel } from '../models/stellar-model';

/** Distance of the outer nodes, in standard errors. */
const NODE = 1.5;
/** Reach and step of the shifts, in standard errors. */
const REACH = 3;
const STEP = 0.25;

/**
 * Metallicities at which to work out a result whose metallicity is uncertain: the central one first, then one on each side where the
 * model reaches so far.
 */
export function metallicityNodes(model: StellarModel, metallicity: number, error: number): number[] {
  if (!(error > 0)) return [metallicity];
  const [low, high] = model.metallicityRange;
  const sides = [metallicity - NODE * error, metallicity + NODE * error].map((m) => Math.min(Math.max(m, low), high));
  return [metallicity, ...sides.filter((m) => Math.abs(m - metallicity) > 0.2 * error)];
}

/** A displacement of a result and how much it counts. */
export interface Shift {
  readonly shift: number;
  readonly weight: number;
}

/**
 * How a result moves as the metallicity wanders within its error: a curve through the results at the nodes, weighed by a Gaussian.
 * @param nodes  as metallicityNodes gave them, shape (1 to 3)
 * @param values results there; NaN where there was none
 * @returns shifts from the central result, their weights adding up to 1
 */
export function metallicityShifts(nodes: readonly number[], values: readonly number[], error: number): Shift[] {
  const x: number[] = [];
  const y: number[] = [];
  for (let k = 1; k < nodes.length; k++) {
    if (!Number.isFinite(values[k] - values[0])) continue;
    x.push(nodes[k] - nodes[0]);
    y.push(values[k] - values[0]);
  }
  if (x.length === 0) return [{ shift: 0, weight: 1 }];
  // y = slope x + bend x^2 through what is there.
  const bend = x.length === 2 ? (y[1] / x[1] - y[0] / x[0]) / (x[1] - x[0]) : 0;
  const slope = y[0] / x[0] - bend * x[0];
  const shifts: Shift[] = [];
  let total = 0;
  for (let t = -REACH; t <= REACH + 1e-9; t += STEP) {
    const d = t * error;
    const weight = Math.exp(-0.5 * t * t);
    total += weight;
    shifts.push({ shift: slope * d + bend * d * d, weight });
  }
  return shifts.map((s) => ({ ...s, weight: s.weight / total }));
}
