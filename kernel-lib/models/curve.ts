import type { Fits } from './fits';
import { MASS_RANGE } from './metallicity';
import { type LifeSource, MOMENT_COUNT, type MomentTable, massesAtMoment } from './moments';
import { PHASE, StarState } from './phases/phase';

/** Stars of one age along their curve, before they are dressed with temperatures and magnitudes. */
export interface Curve {
  readonly initialMass: Float64Array;
  readonly mass: Float64Array;
  /** log10 of solar luminosities and of solar radii. */
  readonly logL: Float64Array;
  readonly logR: Float64Array;
  readonly phase: Uint8Array;
  readonly weight: Float64Array;
  readonly breaks: Uint32Array;
}

/** A step of 1 in log10 of temperature counts as much as a step of 8 in log10 of luminosity, about as on a diagram. */
const TEMPERATURE_SCALE = 8;
/** Longest step of the first, coarse pass, in log10 of luminosity. */
const COARSE_STEP = 0.12;
const MOST_PIECES = 48;
const MOST_NODES = 6000;

const state = new StarState();
const cuts = new Float64Array(MOST_PIECES);
const pieceLow = new Float64Array(MOST_PIECES);
const pieceHigh = new Float64Array(MOST_PIECES);
const piecePhase = new Uint8Array(MOST_PIECES);
const pieceJoined = new Uint8Array(MOST_PIECES);
const pieceFirst = new Int32Array(MOST_PIECES + 1);
const pieceSteps = new Int32Array(MOST_PIECES);
const nodeMass = new Float64Array(MOST_NODES);
const nodePath = new Float64Array(MOST_NODES);
const stackMass = new Float64Array(64);
const stackX = new Float64Array(64);
const stackY = new Float64Array(64);
let nodeCount = 0;
let lastX = 0;
let lastY = 0;

/** Place of the current state on the diagram: x from temperature, y from luminosity, both in log10. */
function placeX(): number {
  return TEMPERATURE_SCALE * 0.25 * (placeY() - 2 * Math.log10(state.radius));
}
function placeY(): number {
  return Math.log10(state.luminosity);
}

/**
 * The curve of all living stars at a time.
 * @param time   Myr
 * @param points number of points; they lie at equal steps along each unbroken piece of the curve
 * @param until  PHASE number from which on stars are left out (white dwarfs and other remnants)
 */
export function traceCurve(
  fits: Fits,
  source: LifeSource,
  table: MomentTable,
  time: number,
  points: number,
  until: number = PHASE.heliumWhiteDwarf,
): Curve {
  const pieces = cutIntoPieces(fits, source, table, time, until);
  walk(source, time, pieces);
  const runs = shareSteps(pieces, points);
  return place(source, time, pieces, runs, points);
}

/** Finds the masses between which nothing but the mass changes: same phase, same branch of the fits. */
function cutIntoPieces(fits: Fits, source: LifeSource, table: MomentTable, time: number, until: number): number {
  const [lowest, highest] = MASS_RANGE;
  const lnTime = Math.log(time);
  let count = 0;
  cuts[count++] = lowest;
  for (let k = 0; k < MOMENT_COUNT && count < MOST_PIECES - 4; k++) {
    const from = count;
    count = massesAtMoment(source, table, k, lnTime, cuts, count);
    // Stars without a hook have no kink there.
    if (k < 2) for (let i = count - 1; i >= from; i--) if (cuts[i] <= fits.massHook) count = i;
  }
  const evolved = count > 1;
  cuts[count++] = highest;
  if (evolved) {
    cuts[count++] = fits.massFlash;
    cuts[count++] = fits.massGiantBranch;
  }
  sortFirst(cuts, count);
  let pieces = 0;
  for (let i = 1; i < count; i++) {
    const low = cuts[i - 1];
    const high = cuts[i];
    if (high - low <= 1e-11 * high) continue;
    source.setMass(0.5 * (low + high));
    const phase = source.phaseAt(time);
    if (phase >= until) continue;
    // A cut that changes nothing (a limit of the giants among stars of the main sequence) is no cut.
    const previous = pieces - 1;
    const idle =
      high !== low && phase === PHASE.mainSequence && (low === fits.massFlash || low === fits.massGiantBranch);
    if (idle && previous >= 0 && pieceHigh[previous] === low && piecePhase[previous] === phase) {
      pieceHigh[previous] = high;
      continue;
    }
    pieceLow[pieces] = low;
    pieceHigh[pieces] = high;
    piecePhase[pieces] = phase;
    pieces++;
  }
  return pieces;
}

function sortFirst(values: Float64Array, count: number): void {
  for (let i = 1; i < count; i++) {
    const v = values[i];
    let j = i - 1;
    while (j >= 0 && values[j] > v) {
      values[j + 1] = values[j];
      j--;
    }
    values[j + 1] = v;
  }
}

/** First pass: nodes close enough on the diagram, with the length of the path up to each. */
function walk(source: LifeSource, time: number, pieces: number): void {
  nodeCount = 0;
  for (let p = 0; p < pieces; p++) {
    const low = pieceLow[p];
    const high = pieceHigh[p];
    const phase = piecePhase[p];
    pieceFirst[p] = nodeCount;
    source.setMass(low);
    source.stateIn(phase, time, state);
    const y = placeY();
    const x = placeX();
    const gap = p > 0 && pieceHigh[p - 1] === low ? Math.hypot(x - lastX, y - lastY) : Number.POSITIVE_INFINITY;
    pieceJoined[p] = gap < 2e-3 ? 1 : 0;
    nodeMass[nodeCount] = low;
    nodePath[nodeCount] = 0;
    nodeCount++;
    lastX = x;
    lastY = y;
    const parts = phase === PHASE.mainSequence && p === 0 ? 24 : 8;
    let from = low;
    for (let i = 1; i <= parts; i++) {
      const to = i === parts ? high : low + ((high - low) * i) / parts;
      walkInterval(source, phase, time, from, to);
      from = to;
    }
  }
  pieceFirst[pieces] = nodeCount;
}

/** Halves an interval of mass until its ends lie closer than the coarse step; adds the nodes in order. */
function walkInterval(source: LifeSource, phase: number, time: number, from: number, to: number): void {
  let depth = 0;
  source.setMass(to);
  source.stateIn(phase, time, state);
  stackMass[0] = to;
  stackY[0] = placeY();
  stackX[0] = placeX();
  let left = from;
  while (depth >= 0 && nodeCount < MOST_NODES) {
    const dx = stackX[depth] - lastX;
    const dy = stackY[depth] - lastY;
    const gap = Math.sqrt(dx * dx + dy * dy);
    const right = stackMass[depth];
    if (gap > COARSE_STEP && depth < 40 && right - left > 1e-13 * right) {
      const mid = 0.5 * (left + right);
      source.setMass(mid);
      source.stateIn(phase, time, state);
      depth++;
      stackMass[depth] = mid;
      stackY[depth] = placeY();
      stackX[depth] = placeX();
      continue;
    }
    nodeMass[nodeCount] = right;
    nodePath[nodeCount] = nodePath[nodeCount - 1] + gap;
    nodeCount++;
    lastX = stackX[depth];
    lastY = stackY[depth];
    left = right;
    depth--;
  }
}

/** Shares the points among the pieces by their length, two steps at least; returns the number of unbroken runs. */
function shareSteps(pieces: number, points: number): number {
  let total = 0;
  let runs = 0;
  for (let p = 0; p < pieces; p++) {
    total += nodePath[pieceFirst[p + 1] - 1];
    if (pieceJoined[p] === 0) runs++;
  }
  const free = points - runs - 2 * pieces;
  let given = 0;
  let passed = 0;
  for (let p = 0; p < pieces; p++) {
    passed += nodePath[pieceFirst[p + 1] - 1];
    // Rounding the running sum shares out exactly `free` steps.
    const upTo = Math.round((free * passed) / total);
    pieceSteps[p] = 2 + upTo - given;
    given = upTo;
  }
  return runs;
}

/** Second pass: a star at each place along the path. */
function place(source: LifeSource, time: number, pieces: number, runs: number, points: number): Curve {
  const curve = {
    initialMass: new Float64Array(points),
    mass: new Float64Array(points),
    logL: new Float64Array(points),
    logR: new Float64Array(points),
    phase: new Uint8Array(points),
    weight: new Float64Array(points),
    breaks: new Uint32Array(runs),
  };
  let at = 0;
  let run = 0;
  for (let p = 0; p < pieces; p++) {
    const first = pieceFirst[p];
    const last = pieceFirst[p + 1] - 1;
    const steps = pieceSteps[p];
    const step = nodePath[last] / steps;
    let node = first;
    if (pieceJoined[p] === 0) curve.breaks[run++] = at;
    for (let i = pieceJoined[p]; i <= steps; i++) {
      const along = i * step;
      while (node < last - 1 && nodePath[node + 1] < along) node++;
      const width = nodePath[node + 1] - nodePath[node];
      const share = width > 0 ? Math.min(1, (along - nodePath[node]) / width) : 0;
      let mass = nodeMass[node] + share * (nodeMass[node + 1] - nodeMass[node]);
      if (i === 0) mass = pieceLow[p];
      if (i === steps) mass = pieceHigh[p];
      source.setMass(mass);
      source.stateIn(piecePhase[p], time, state);
      curve.initialMass[at] = mass;
      curve.mass[at] = state.mass;
      curve.logL[at] = Math.log10(state.luminosity);
      curve.logR[at] = Math.log10(state.radius);
      curve.phase[at] = piecePhase[p];
      at++;
    }
  }
  weigh(curve.initialMass, curve.breaks, curve.weight);
  return curve;
}

/** Span of initial mass of each point: half-way to its neighbours within its unbroken run. */
export function weigh(initialMass: Float64Array, breaks: ArrayLike<number>, weight: Float64Array): void {
  const n = initialMass.length;
  for (let r = 0; r < breaks.length; r++) {
    const first = breaks[r];
    const last = (r + 1 < breaks.length ? breaks[r + 1] : n) - 1;
    for (let i = first; i <= last; i++) {
      weight[i] = 0.5 * (initialMass[Math.min(i + 1, last)] - initialMass[Math.max(i - 1, first)]);
    }
  }
}
