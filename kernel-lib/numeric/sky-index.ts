import { RADIANS_PER_DEGREE } from '../quantity/constants';

const TURN = 2 ** 32;

/**
 * Places on the sphere sorted into zones of declination and, within a zone, by right ascension, for finding those within a
 * radius of a place. Exact at the poles and through 0h: the zones only narrow down the candidates, the chord between unit
 * vectors decides.
 */
export class SkyIndex {
  /** Rows with a position, in the order of the index. */
  readonly rows: Int32Array;
  /** Rows found by the last {@link within}; only the first entries, as many as it returned, count. */
  found: Int32Array = new Int32Array(64);
  /** Squared chords to the rows found. */
  chord2: Float64Array = new Float64Array(64);
  readonly #zones: number;
  readonly #radius: number;
  readonly #limit: number;
  readonly #start: Int32Array;
  readonly #turn: Uint32Array;
  readonly #xyz: Float64Array;

  /**
   * @param ra           shape (n), deg, any turn; a row whose place is not finite is left out
   * @param dec          shape (n), deg, -90 to 90
   * @param radiusArcsec radius of the searches
   */
  constructor(ra: Float64Array, dec: Float64Array, radiusArcsec: number) {
    const n = ra.length;
    const degrees = radiusArcsec / 3600;
    this.#radius = degrees;
    // A last-bit allowance, so that a star on the rim is in from either side.
    this.#limit = (2 * Math.sin((degrees * RADIANS_PER_DEGREE) / 2)) ** 2 * (1 + 1e-12);
    this.#zones = zoneCount(n, degrees);
    const { ordered, start, turn } = sortSky(ra, dec, this.#zones);
    const count = ordered.length;
    this.rows = ordered;
    this.#start = start;
    this.#turn = new Uint32Array(count);
    this.#xyz = new Float64Array(3 * count);
    for (let k = 0; k < count; k++) {
      const i = ordered[k];
      const cd = Math.cos(dec[i] * RADIANS_PER_DEGREE);
      this.#turn[k] = turn[i];
      this.#xyz[3 * k] = cd * Math.cos(ra[i] * RADIANS_PER_DEGREE);
      this.#xyz[3 * k + 1] = cd * Math.sin(ra[i] * RADIANS_PER_DEGREE);
      this.#xyz[3 * k + 2] = Math.sin(dec[i] * RADIANS_PER_DEGREE);
    }
  }

  /** Number of rows within the radius of a place, deg; the rows are in `found`, in no special order. */
  within(ra: number, dec: number): number {
    const cd = Math.cos(dec * RADIANS_PER_DEGREE);
    const x = cd * Math.cos(ra * RADIANS_PER_DEGREE);
    const y = cd * Math.sin(ra * RADIANS_PER_DEGREE);
    const z = Math.sin(dec * RADIANS_PER_DEGREE);
    // A hair wider than the radius: rounding of the zones must not lose a star.
    const wide = this.#radius * (1 + 1e-9) + 1e-12;
    const first = zoneOf(Math.max(-90, dec - wide), this.#zones);
    const last = zoneOf(Math.min(90, dec + wide), this.#zones);
    const ratio = Math.abs(dec) + wide < 90 ? Math.sin(wide * RADIANS_PER_DEGREE) / cd : 2;
    const half = ratio < 1 ? (Math.asin(ratio) / (2 * Math.PI)) * (1 + 1e-9) * TURN + 2 : TURN;
    const centre = turnOf(ra);
    const low = centre - half;
    const high = centre + half;
    let count = 0;
    for (let zone = first; zone <= last; zone++) {
      const from = this.#start[zone];
      const to = this.#start[zone + 1];
      if (from === to) continue;
      if (high - low >= TURN) {
        count = this.#scan(from, to, 0, TURN, x, y, z, count);
        continue;
      }
      count = this.#scan(from, to, Math.max(low, 0), Math.min(high, TURN), x, y, z, count);
      if (low < 0) count = this.#scan(from, to, low + TURN, TURN, x, y, z, count);
      if (high >= TURN) count = this.#scan(from, to, 0, high - TURN, x, y, z, count);
    }
    return count;
  }

  #scan(from: number, to: number, low: number, high: number, x: number, y: number, z: number, found: number): number {
    const turn = this.#turn;
    const xyz = this.#xyz;
    let a = from;
    let b = to;
    while (a < b) {
      const middle = (a + b) >>> 1;
      if (turn[middle] < low) a = middle + 1;
      else b = middle;
    }
    let count = found;
    for (let k = a; k < to && turn[k] <= high; k++) {
      const dx = xyz[3 * k] - x;
      const dy = xyz[3 * k + 1] - y;
      const dz = xyz[3 * k + 2] - z;
      const d2 = dx * dx + dy * dy + dz * dz;
      if (d2 > this.#limit) continue;
      if (count === this.found.length) this.#grow();
      this.found[count] = this.rows[k];
      this.chord2[count++] = d2;
    }
    return count;
  }

  #grow(): void {
    const found = new Int32Array(2 * this.found.length);
    const chord2 = new Float64Array(2 * this.found.length);
    found.set(this.found);
    chord2.set(this.chord2);
    this.found = found;
    this.chord2 = chord2;
  }
}

/** Rows with a position in the order that a {@link SkyIndex} of that radius has: zone by zone, along right ascension. */
export function skyOrder(ra: Float64Array, dec: Float64Array, radiusArcsec: number): Int32Array {
  return sortSky(ra, dec, zoneCount(ra.length, radiusArcsec / 3600)).ordered;
}

function zoneCount(rows: number, degrees: number): number {
  return Math.max(1, Math.min(Math.floor(180 / degrees), 1 << 20, 16 * rows));
}

function zoneOf(dec: number, zones: number): number {
  return Math.min(zones - 1, Math.floor(((dec + 90) / 180) * zones));
}

function sortSky(
  ra: Float64Array,
  dec: Float64Array,
  zones: number,
): { ordered: Int32Array; start: Int32Array; turn: Uint32Array } {
  const n = ra.length;
  let rows = new Int32Array(n);
  const turn = new Uint32Array(n);
  const zone = new Int32Array(n);
  let count = 0;
  for (let i = 0; i < n; i++) {
    if (!Number.isFinite(ra[i]) || !Number.isFinite(dec[i])) continue;
    rows[count++] = i;
    turn[i] = turnOf(ra[i]);
    zone[i] = zoneOf(dec[i], zones);
  }
  rows = sortedBy(rows.subarray(0, count), turn, 0);
  rows = sortedBy(rows, turn, 16);
  const start = new Int32Array(zones + 1);
  for (let k = 0; k < count; k++) start[zone[rows[k]] + 1]++;
  for (let z = 0; z < zones; z++) start[z + 1] += start[z];
  const next = start.slice();
  const ordered = new Int32Array(count);
  for (let k = 0; k < count; k++) ordered[next[zone[rows[k]]]++] = rows[k];
  return { ordered, start, turn };
}

/** Right ascension as a 32-bit fraction of a turn. */
function turnOf(ra: number): number {
  const wrapped = ra - 360 * Math.floor(ra / 360);
  return Math.min(TURN - 1, Math.floor((wrapped / 360) * TURN));
}

/** Rows in stable order of 16 bits of their key. */
function sortedBy(rows: Int32Array, key: Uint32Array, shift: number): Int32Array<ArrayBuffer> {
  const start = new Int32Array(65537);
  for (let k = 0; k < rows.length; k++) start[((key[rows[k]] >>> shift) & 0xffff) + 1]++;
  for (let v = 0; v < 65536; v++) start[v + 1] += start[v];
  const out = new Int32Array(rows.length);
  for (let k = 0; k < rows.length; k++) out[start[(key[rows[k]] >>> shift) & 0xffff]++] = rows[k];
  return out;
}
