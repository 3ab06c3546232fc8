import { bandExtinction } from '../extinction/band-coefficients';
import type { StellarModel } from '../models/stellar-model';
import { galacticOf } from '../numeric/galactic-frame';
import type { Band } from '../quantity/band';
import { RADIANS_PER_DEGREE } from '../quantity/constants';
import type { RandomStream } from '../quantity/random';
import { makeMassDrawer } from './initial-masses';
import { fieldVelocityInto, type SeenMotion, seenMotionInto } from './space-motion';
import { addLight, type StarLight, starLight } from './star-light';

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
  /** E(B-V) of one kpc in the middle of the dust layer along this line of sight. */
  readonly ebvPerKpc: number;
  readonly model: StellarModel;
}

/** Edges of the age bins of the field, Gyr: stars formed at one rate all along. Our own round figures for the thin disc, as are the next. */
const AGE_EDGES = [0.05, 0.15, 0.3, 0.5, 0.75, 1, 1.5, 2, 2.75, 3.5, 4.5, 5.5, 6.5, 7.5, 8.5, 9.5, 10.5];
/** Steps from the mean [Fe/H] of an age, dex, and their shares. */
const METALLICITY_STEPS = [
  { step: -0.2, share: 0.25 },
  { step: 0, share: 0.5 },
  { step: 0.2, share: 0.25 },
];
/** Older stars are poorer in metals. */
const meanMetallicity = (age: number) => 0.05 - 0.035 * age;
const BINARY_FRACTION = 0.35;
const LEAST_RATIO = 0.1;
/** Scatter of the logarithm of the dust from star to star: it is patchy. */
const DUST_SCATTER = 0.2;

interface Kind {
  readonly age: number;
  readonly light: StarLight;
  /** Share of this kind and all before it. */
  readonly upTo: number;
}

function makeKinds(model: StellarModel, bands: readonly Band[]): Kind[] {
  const whole = AGE_EDGES[AGE_EDGES.length - 1] - AGE_EDGES[0];
  const kinds: Kind[] = [];
  let upTo = 0;
  for (let k = 0; k + 1 < AGE_EDGES.length; k++) {
    const age = 0.5 * (AGE_EDGES[k] + AGE_EDGES[k + 1]);
    for (const { step, share } of METALLICITY_STEPS) {
      const [poorest, richest] = model.metallicityRange;
      const metallicity = Math.min(Math.max(meanMetallicity(age) + step, poorest), richest);
      upTo += (share * (AGE_EDGES[k + 1] - AGE_EDGES[k])) / whole;
      const isochrone = model.isochrone({ logAge: 9 + Math.log10(age), metallicity, bands, points: 300 });
      kinds.push({ age, light: starLight(isochrone, bands), upTo });
    }
  }
  return kinds;
}

function pickKind(kinds: readonly Kind[], u: number): Kind {
  let k = 0;
  while (k < kinds.length - 1 && u >= kinds[k].upTo) k++;
  return kinds[k];
}

const DISC_HEIGHT = 300;
const FARTHEST = 8000;

/**
 * A drawer of field stars: disc stars of many ages and metallicities, a third of them unresolved binaries, in number with the volume of the
 * cone and the thickness of the disc, reddened by a patchy layer of dust, kept when brighter than the limit.
 * @returns function that fills a star from a stream
 */
export function makeFieldDrawer(setting: FieldSetting): (stream: RandomStream, out: FieldStar) => void {
  const { ra, dec, radiusDeg, bands, limitBand, magnitudeLimit, rV, ebvPerKpc, model } = setting;
  const kinds = makeKinds(model, bands);
  const companion = new Float64Array(bands.length);
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
      const { age, light } = pickKind(kinds, stream.uniform());
      const mass = drawMass(stream);
      const draw = stream.uniform();
      if (!light.magnitudes(mass, out.magnitudes)) continue;
      if (draw < BINARY_FRACTION) {
        const ratio = LEAST_RATIO + (1 - LEAST_RATIO) * (draw / BINARY_FRACTION);
        if (light.magnitudes(mass * ratio, companion)) addLight(companion, out.magnitudes);
      }
      const distance = drawDistance(distances, stream.uniform());
      const modulus = 5 * Math.log10(distance) - 5;
      // Dust thins out with height above the disc.
      const reach = sinB > 1e-3 ? (100 / sinB) * (1 - Math.exp((-distance * sinB) / 100)) : distance;
      const ebv = ((ebvPerKpc * reach) / 1000) * Math.exp(DUST_SCATTER * stream.normal());
      for (let k = 0; k < bands.length; k++) out.magnitudes[k] += modulus + ebv * coefficients[k];
      if (!(out.magnitudes[limitBand] < magnitudeLimit)) continue;
      out.distance = distance;
      out.ebv = ebv;
      out.mass = Number.NaN;
      placeInCone(ra, dec, cosRadius, stream, out);
      fieldVelocityInto(l, distance, age, stream, scratch, velocity);
      seenMotionInto(velocity, out.ra, out.dec, distance, out.motion);
      return;
    }
    throw new RangeError(
      `simulateCluster: no field star is brighter than ${magnitudeLimit} mag in ten million tries; raise magnitudeLimit.`,
    );
  };
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
