import { PHASE, StarState } from './phases/phase';

/** A curve on the HR diagram given by a parameter: initial mass on an isochrone, time on a track. */
export interface PathSource {
  /** The star at a value of the parameter, in the phase given. */
  sample(phase: number, at: number, out: StarState): void;
}

/** The pieces of a path, in order: within each the phase and the branch of the fits are the same. Reused. */
export class Pieces {
  count = 0;
  readonly low: Float64Array = new Float64Array(MOST_PIECES);
  readonly high: Float64Array = new Float64Array(MOST_PIECES);
  readonly phase: Uint8Array = new Uint8Array(MOST_PIECES);
  /** 1 where a piece goes on from the one before without a jump. */
  readonly joined: Uint8Array = new Uint8Array(MOST_PIECES);
  readonly firstNode: Int32Array = new Int32Array(MOST_PIECES + 1);
  readonly steps: Int32Array = new Int32Array(MOST_PIECES);

  /** Adds a piece at the end; one of no width is left out. */
  add(low: number, high: number, phase: number): void {
    if (!(high - low > 1e-11 * high) || this.count >= MOST_PIECES) return;
    this.low[this.count] = low;
    this.high[this.count] = high;
    this.phase[this.count] = phase;
    this.count++;
  }
}

/** Stars along a path. */
export interface PathPoints {
  readonly parameter: Float64Array;
  readonly mass: Float64Array;
  readonly coreMass: Float64Array;
  /** log10 of solar luminosities and of solar radii. */
  readonly logL: Float64Array;
  readonly logR: Float64Array;
  readonly phase: Uint8Array;
  readonly breaks: Uint32Array;
}

/** Room for the pieces of one path. */
export const MOST_PIECES = 48;

/** A step of 1 in log10 of temperature counts as much as a step of 8 in log10 of luminosity, about as on a diagram. */
const TEMPERATURE_SCALE = 8;
/** Longest step of the first, coarse pass, in log10 of luminosity. */
const COARSE_STEP = 0.2;
const MOST_NODES = 8000;
/** Pieces whose ends lie closer than this on the diagram are one unbroken curve. */
const JUMP = 2e-3;

const state = new StarState();
const nodeAt = new Float64Array(MOST_NODES);
const nodePath = new Float64Array(MOST_NODES);
const stackAt = new Float64Array(64);
const stackX = new Float64Array(64);
const stackY = new Float64Array(64);
let nodeCount = 0;
let lastX = 0;
let lastY = 0;

/** Height on the diagram of the state last sampled. */
function placeY(): number {
  return Math.LOG10E * Math.log(state.luminosity);
}

/** Place across the diagram, from the temperature. */
function placeX(y: number): number {
  return TEMPERATURE_SCALE * 0.25 * (y - 2 * Math.LOG10E * Math.log(state.radius));
}

/**
 * Places points along a path at equal steps on the HR diagram.
 * @param source gives the star at a value of the parameter
 * @param pieces the pieces of the path; at least one
 * @param points number of points; every piece has its two ends among them
 */
export function followPath(source: PathSource, pieces: Pieces, points: number): PathPoints {
  walk(source, pieces);
  return place(source, pieces, shareSteps(pieces, points), points);
}

/** First pass: nodes close enough on the diagram, with the length of the path up to each. */
function walk(source: PathSource, pieces: Pieces): void {
  nodeCount = 0;
  for (let p = 0; p < pieces.count; p++) {
    const low = pieces.low[p];
    const high = pieces.high[p];
    const phase = pieces.phase[p];
    pieces.firstNode[p] = nodeCount;
    source.sample(phase, low, state);
    const y = placeY();
    const x = placeX(y);
    const touches = p > 0 && pieces.high[p - 1] === low;
    pieces.joined[p] = touches && Math.hypot(x - lastX, y - lastY) < JUMP ? 1 : 0;
    nodeAt[nodeCount] = low;
    nodePath[nodeCount] = 0;
    nodeCount++;
    lastX = x;
    lastY = y;
    const parts = phase === PHASE.mainSequence && p === 0 ? 24 : 8;
    let from = low;
    for (let i = 1; i <= parts; i++) {
      const to = i === parts ? high : low + ((high - low) * i) / parts;
      walkInterval(source, phase, from, to);
      from = to;
    }
  }
  pieces.firstNode[pieces.count] = nodeCount;
}

/** Halves an interval of the parameter until its ends lie closer than the coarse step; adds the nodes in order. */
function walkInterval(source: PathSource, phase: number, from: number, to: number): void {
  let depth = 0;
  source.sample(phase, to, state);
  stackAt[0] = to;
  stackY[0] = placeY();
  stackX[0] = placeX(stackY[0]);
  let left = from;
  while (depth >= 0 && nodeCount < MOST_NODES) {
    const dx = stackX[depth] - lastX;
    const dy = stackY[depth] - lastY;
    const gap = Math.sqrt(dx * dx + dy * dy);
    const right = stackAt[depth];
    if (gap > COARSE_STEP && depth < 40 && right - left > 1e-13 * right) {
      const mid = 0.5 * (left + right);
      source.sample(phase, mid, state);
      depth++;
      stackAt[depth] = mid;
      stackY[depth] = placeY();
      stackX[depth] = placeX(stackY[depth]);
      continue;
    }
    nodeAt[nodeCount] = right;
    nodePath[nodeCount] = nodePath[nodeCount - 1] + gap;
    nodeCount++;
    lastX = stackX[depth];
    lastY = stackY[depth];
    left = right;
    depth--;
  }
}

/** Shares the points among the pieces by their length, two steps at least; returns the number of unbroken runs. */
function shareSteps(pieces: Pieces, points: number): number {
  const { count, firstNode, joined, steps } = pieces;
  let total = 0;
  let runs = 0;
  for (let p = 0; p < count; p++) {
    total += nodePath[firstNode[p + 1] - 1];
    if (joined[p] === 0) runs++;
  }
  const free = points - runs - 2 * count;
  let given = 0;
  let passed = 0;
  for (let p = 0; p < count; p++) {
    passed += nodePath[firstNode[p + 1] - 1];
    // Rounding the running sum shares out exactly `free` steps.
    const upTo = Math.round((free * passed) / total);
    steps[p] = 2 + upTo - given;
    given = upTo;
  }
  return runs;
}

/** Second pass: a star at each place along the path. */
function place(source: PathSource, pieces: Pieces, runs: number, points: number): PathPoints {
  const out = {
    parameter: new Float64Array(points),
    mass: new Float64Array(points),
    coreMass: new Float64Array(points),
    logL: new Float64Array(points),
    logR: new Float64Array(points),
    phase: new Uint8Array(points),
    breaks: new Uint32Array(runs),
  };
  let at = 0;
  let run = 0;
  for (let p = 0; p < pieces.count; p++) {
    const last = pieces.firstNode[p + 1] - 1;
    const steps = pieces.steps[p];
    const step = nodePath[last] / steps;
    let node = pieces.firstNode[p];
    if (pieces.joined[p] === 0) out.breaks[run++] = at;
    for (let i = pieces.joined[p]; i <= steps; i++) {
      const along = i * step;
      while (node < last - 1 && nodePath[node + 1] < along) node++;
      const width = nodePath[node + 1] - nodePath[node];
      const share = width > 0 ? Math.min(1, (along - nodePath[node]) / width) : 0;
      let parameter = nodeAt[node] + share * (nodeAt[node + 1] - nodeAt[node]);
      if (i === 0) parameter = pieces.low[p];
      if (i === steps) parameter = pieces.high[p];
      source.sample(pieces.phase[p], parameter, state);
      out.parameter[at] = parameter;
      out.mass[at] = state.mass;
      out.coreMass[at] = state.coreMass;
      out.logL[at] = Math.LOG10E * Math.log(state.luminosity);
      out.logR[at] = Math.LOG10E * Math.log(state.radius);
      out.phase[at] = pieces.phase[p];
      at++;
    }
  }
  return out;
}
