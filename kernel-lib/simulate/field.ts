import { bandExtinction } from '../extinction/band-coefficients';
import type { StellarModel } from '../models/stellar-model';
import { galacticOf } from '../numeric/galactic-frame';
import type { Band } from '../quantity/band';
import { RADIANS_PER_DEGREE } from '../quantity/constants';
import type { RandomStream } from '../quantity/random';
import { makeMassDrawer } from './initial-masses';
import { fieldVelocityInto, type SeenMotion, seenMotionInto } from './space-motion';
import { starLight } from './star-light';

/** One star of the field, as it truly is. */
export interface FieldStar {
  ra: number;
  dec: number;
  distance: number;
  mass: number;
  ebv: number;
  /** Apparent magnitudes without errors, one a band. */
  readonly magnitudes: Float64Array;
  readonly motion: SeenMotion;
}

/** What the field is like. */
export interface FieldSetting {
  readonly ra: number;
  readonly dec: number;
  readonly radiusDeg: number;
  readonly bands: readonly Band[];
  readonly limitBand: number;
  readonly magnitudeLimit: number;
  readonly rV: number;
  /** E(B-V) at 1 kpc of the smooth dust layer along this line of sight. */
  readonly ebvPerKpc: number;
  readonly model: StellarModel;
}

/** Ages (Gyr) and [Fe/H] of the field's kinds of stars, and how many of each. Our own round figures for the thin disc. */
const KINDS = [
  { age: 0.3, metallicity: 0, share: 0.06 },
  { age: 0.8, metallicity: 0, share: 0.1 },
  { age: 2, metallicity: 0, share: 0.18 },
  { age: 4, metallicity: -0.05, share: 0.22 },
  { age: 6.5, metallicity: -0.15, share: 0.24 },
  { age: 9.5, metallicity: -0.3, share: 0.2 },
];
const DISC_HEIGHT = 300;
const FARTHEST = 8000;

/**
 * A drawer of field stars: disc stars of several ages, in number with the volume of the cone and the thickness of the disc, reddened by
 * a smooth layer of dust, kept when brighter than the limit.
 * @returns function that fills a star from a stream
 */
export function makeFieldDrawer(setting: FieldSetting): (stream: RandomStream, out: FieldStar) => void {
  const { ra, dec, radiusDeg, bands, limitBand, magnitudeLimit, rV, ebvPerKpc, model } = setting;
  const light = KINDS.map((k) =>
    starLight(model.isochrone({ logAge: 9 + Math.log10(k.age), metallicity: k.metallicity, bands }), bands),
  );
  const drawMass = makeMassDrawer('kroupa2001', 0.12, 8);
  const coefficients = bands.map((b) => rV * bandExtinction(b, { rV }));
  const { l, b } = galacticOf(ra, dec);
  const sinB = Math.abs(Math.sin(b * RADIANS_PER_DEGREE));
  const distances = distanceTable(sinB);
  const cosRadius = Math.cos(radiusDeg * RADIANS_PER_DEGREE);
  const scratch = new Float64Array(3);
  const velocity = new Float64Array(3);

  return (stream, out) => {
    for (let tries = 0; tries < 1e7; tries++) {
      const kind = pickKind(stream.uniform());
      if (!light[kind].magnitudes(drawMass(stream), out.magnitudes)) continue;
      const distance = drawDistance(distances, stream.uniform());
      const modulus = 5 * Math.log10(distance) - 5;
      // Dust thins out with height above the disc.
      const reach = sinB > 1e-3 ? (100 / sinB) * (1 - Math.exp((-distance * sinB) / 100)) : distance;
      const ebv = (ebvPerKpc * reach) / 1000;
      for (let k = 0; k < bands.length; k++) out.magnitudes[k] += modulus + ebv * coefficients[k];
      if (!(out.magnitudes[limitBand] < magnitudeLimit)) continue;
      out.distance = distance;
      out.ebv = ebv;
      out.mass = Number.NaN;
      placeInCone(ra, dec, cosRadius, stream, out);
      fieldVelocityInto(l, distance, KINDS[kind].age, stream, scratch, velocity);
      seenMotionInto(velocity, out.ra, out.dec, distance, out.motion);
      return;
    }
    throw new RangeError(
      `simulateCluster: no field star is brighter than ${magnitudeLimit} mag in ten million tries; raise magnitudeLimit.`,
    );
  };
}

function pickKind(u: number): number {
  let sum = 0;
  for (let k = 0; k < KINDS.length - 1; k++) {
    sum += KINDS[k].share;
    if (u < sum) return k;
  }
  return KINDS.length - 1;
}

/** Cumulative number of stars within a distance along a cone, on an even grid. */
function distanceTable(sinB: number): Float64Array {
  const table = new Float64Array(801);
  for (let i = 1; i < table.length; i++) {
    const r = (i - 0.5) * (FARTHEST / 800);
    table[i] = table[i - 1] + r * r * Math.exp((-r * sinB) / DISC_HEIGHT);
  }
  return table;
}

function drawDistance(table: Float64Array, u: number): number {
  const target = u * table[table.length - 1];
  let low = 0;
  let high = table.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (table[middle] <= target) low = middle;
    else high = middle;
  }
  // Within a step numbers grow with the cube of the distance.
  const step = FARTHEST / 800;
  const share = (target - table[low]) / (table[high] - table[low]);
  return Math.cbrt((low * step) ** 3 + share * ((high * step) ** 3 - (low * step) ** 3));
}

/** A place spread evenly over a cap of the sky. */
function placeInCone(ra: number, dec: number, cosRadius: number, stream: RandomStream, out: FieldStar): void {
  const c = 1 - stream.uniform() * (1 - cosRadius);
  const s = Math.sqrt(1 - c * c);
  const angle = 2 * Math.PI * stream.uniform();
  offsetInto(ra, dec, s * Math.cos(angle), s * Math.sin(angle), c, out);
}

/** Place whose direction has components east, north and outward at a centre. */
export function offsetInto(
  ra: number,
  dec: number,
  east: number,
  north: number,
  outward: number,
  out: { ra: number; dec: number },
): void {
  const d = dec * RADIANS_PER_DEGREE;
  const across = Math.cos(d) * outward - Math.sin(d) * north;
  const up = Math.sin(d) * outward + Math.cos(d) * north;
  const turned = ra + Math.atan2(east, across) / RADIANS_PER_DEGREE;
  out.ra = ((turned % 360) + 360) % 360;
  out.dec = Math.atan2(up, Math.hypot(across, east)) / RADIANS_PER_DEGREE;
}
