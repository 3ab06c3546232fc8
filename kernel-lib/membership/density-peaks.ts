import type { Stars } from './stars';

/** A place in motion and parallax where stars crowd. */
export interface Peak {
  /** proper motions, mas/yr, and parallax, mas */
  readonly mean: readonly [number, number, number];
  /** half width of the cell, mas/yr and mas */
  readonly motionWidth: number;
  readonly parallaxWidth: number;
  /** stars above those expected from the surroundings */
  readonly excess: number;
  /** excess in standard deviations */
  readonly significance: number;
}

/** Cells of a grid on each side, at most. */
const MOST_MOTION_CELLS = 160;
const MOST_SLABS = 90;
/** Reach of the grids in stretched coordinates: some 27 spreads from the middle. */
const REACH = 4;

/**
 * Crowded places, found by counting in cells of several sizes against the ring of cells around, at like parallax. In each
 * grid only stars take part whose errors are not much larger than its cells. Cells grow with distance from the middle of all
 * stars (the inverse hyperbolic sine of the distance is gridded), so that a near cluster far out is seen as well.
 * @param limit peaks returned at most, none twice
 */
export function densityPeaks(stars: Stars, limit: number): Peak[] {
  const motion = Math.min(stars.spread[0], stars.spread[1]);
  const found: (Peak & { rank: number })[] = [];
  for (const motionShare of [0.2, 0.1, 0.05, 0.025]) {
    for (const parallaxShare of stars.useParallax ? [0.6, 0.2, 0.07] : [1]) {
      found.push(...peaksOfGrid(stars, motion, motionShare, parallaxShare, limit));
    }
  }
  // The best of every grid first, then the second best, ...: a faint cluster shows in one grid only.
  found.sort((a, b) => a.rank - b.rank || b.significance - a.significance);
  const kept: Peak[] = [];
  for (const peak of found) {
    if (kept.length >= limit) break;
    if (!kept.some((k) => same(k, peak))) kept.push(peak);
  }
  return kept;
}

/** Whether two peaks are one thing seen at two resolutions: then the more significant stands for both. */
function same(a: Peak, b: Peak): boolean {
  const w = Math.max(a.motionWidth, b.motionWidth);
  const p = Math.max(a.parallaxWidth, b.parallaxWidth);
  const near =
    Math.hypot(a.mean[0] - b.mean[0], a.mean[1] - b.mean[1]) < 1.5 * w && Math.abs(a.mean[2] - b.mean[2]) < 1.5 * p;
  const alike = a.motionWidth / b.motionWidth < 2.5 && b.motionWidth / a.motionWidth < 2.5;
  return near && alike;
}

function peaksOfGrid(
  stars: Stars,
  motion: number,
  cell: number,
  slab: number,
  limit: number,
): (Peak & { rank: number })[] {
  const side = Math.min(MOST_MOTION_CELLS, Math.ceil((2 * REACH) / cell));
  const slabs = stars.useParallax ? Math.min(MOST_SLABS, Math.ceil((1.75 * REACH) / slab)) : 1;
  const edge = (-side * cell) / 2;
  const low = stars.useParallax ? -0.25 * slabs * slab : -0.5;
  const depth = stars.useParallax ? stars.spread[2] : 1;
  const cellOf = new Int32Array(stars.count).fill(-1);
  const counts = new Float64Array(side * side * slabs);
  for (let i = 0; i < stars.count; i++) {
    const c = 6 * i;
    const u = Math.asinh((stars.values[3 * i] - stars.centre[0]) / motion);
    const v = Math.asinh((stars.values[3 * i + 1] - stars.centre[1]) / motion);
    const w = Math.asinh((stars.values[3 * i + 2] - stars.centre[2]) / depth);
    const error = Math.sqrt(Math.max(stars.covariance[c], stars.covariance[c + 3]));
    if (error > 1.2 * cell * motion * Math.cosh(Math.min(Math.abs(u), Math.abs(v)))) continue;
    if (stars.useParallax && Math.sqrt(stars.covariance[c + 5]) > 1.5 * slab * depth * Math.cosh(w)) continue;
    const x = Math.floor((u - edge) / cell);
    const y = Math.floor((v - edge) / cell);
    const z = stars.useParallax ? Math.floor((w - low) / slab) : 0;
    if (x < 0 || y < 0 || z < 0 || x >= side || y >= side || z >= slabs) continue;
    cellOf[i] = (z * side + y) * side + x;
    counts[cellOf[i]]++;
  }
  // Counts in boxes by running sums: the place itself (3 x 3 x 3) and its surroundings (9 x 9 x 3).
  const sums = runningSums(counts, side, slabs);
  const box = (x: number, y: number, z: number, r: number): number => {
    const n = side + 1;
    const a = Math.max(0, x - r);
    const b = Math.min(side, x + r + 1);
    const c = Math.max(0, y - r);
    const d = Math.min(side, y + r + 1);
    const e = Math.max(0, z - 1);
    const f = Math.min(slabs, z + 2);
    const at = (u: number, v: number, w: number) => sums[(w * n + v) * n + u];
    return (
      at(b, d, f) - at(a, d, f) - at(b, c, f) + at(a, c, f) - at(b, d, e) + at(a, d, e) + at(b, c, e) - at(a, c, e)
    );
  };
  const best: { x: number; y: number; z: number; excess: number; significance: number }[] = [];
  for (let z = 0; z < slabs; z++) {
    for (let y = 0; y < side; y++) {
      for (let x = 0; x < side; x++) {
        const here = counts[(z * side + y) * side + x];
        if (here === 0) continue;
        const inner = box(x, y, z, 1);
        if (inner < 4) continue;
        const ring = ((box(x, y, z, 4) - inner) * 9) / 72;
        const excess = inner - ring;
        const significance = excess / Math.sqrt(ring + 1);
        if (significance < 2) continue;
        best.push({ x, y, z, excess, significance });
      }
    }
  }
  best.sort((a, b) => b.significance - a.significance);
  const kept: typeof best = [];
  for (const b of best) {
    if (kept.length >= limit) break;
    if (kept.every((k) => Math.abs(k.x - b.x) > 2 || Math.abs(k.y - b.y) > 2 || Math.abs(k.z - b.z) > 2)) kept.push(b);
  }
  return kept.map((b, rank) => {
    const mean = centroid(stars, cellOf, b, side);
    // The width of a cell where it lies.
    const away = Math.hypot((mean[0] - stars.centre[0]) / motion, (mean[1] - stars.centre[1]) / motion);
    const far = (mean[2] - stars.centre[2]) / depth;
    return {
      mean,
      motionWidth: cell * motion * Math.hypot(1, away),
      parallaxWidth: stars.useParallax ? slab * depth * Math.hypot(1, far) : 0,
      excess: b.excess,
      significance: b.significance,
      rank,
    };
  });
}

function runningSums(counts: Float64Array, side: number, slabs: number): Float64Array {
  const n = side + 1;
  const sums = new Float64Array(n * n * (slabs + 1));
  for (let z = 1; z <= slabs; z++) {
    for (let y = 1; y <= side; y++) {
      let row = 0;
      for (let x = 1; x <= side; x++) {
        row += counts[((z - 1) * side + y - 1) * side + x - 1];
        const below = sums[((z - 1) * n + y) * n + x];
        const behind = sums[(z * n + y - 1) * n + x];
        sums[(z * n + y) * n + x] = row + below + behind - sums[((z - 1) * n + y - 1) * n + x];
      }
    }
  }
  return sums;
}

function centroid(
  stars: Stars,
  cellOf: Int32Array,
  at: { x: number; y: number; z: number },
  side: number,
): [number, number, number] {
  const mean: [number, number, number] = [0, 0, 0];
  let n = 0;
  for (let i = 0; i < stars.count; i++) {
    if (cellOf[i] < 0) continue;
    const x = cellOf[i] % side;
    const y = Math.floor(cellOf[i] / side) % side;
    const z = Math.floor(cellOf[i] / (side * side));
    if (Math.abs(x - at.x) > 1 || Math.abs(y - at.y) > 1 || Math.abs(z - at.z) > 1) continue;
    for (let d = 0; d < 3; d++) mean[d] += stars.values[3 * i + d];
    n++;
  }
  return [mean[0] / n, mean[1] / n, mean[2] / n];
}
