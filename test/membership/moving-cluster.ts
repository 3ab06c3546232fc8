import type { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { KMS_PER_AU_PER_YEAR, RADIANS_PER_DEGREE } from '../../kernel-lib/quantity/constants';
import { randomStream } from '../../kernel-lib/quantity/random';
import { fieldCatalogue } from './simulated-field';

export interface MovingCluster {
  readonly catalogue: Catalogue;
  readonly member: Uint8Array;
  /** true parallax of every star, mas */
  readonly parallax: Float64Array;
}

/**
 * A near cluster in a wide field: stars placed in space about a centre, all with one velocity and a small scatter, among field
 * stars with the velocities of the disc. Motions and radial velocities follow from space by geometry alone.
 */
export function movingCluster(options: {
  seed: number;
  members: number;
  stars: number;
  distance: number;
  velocity: readonly [number, number, number];
  dispersion: number;
  radius: number;
  /** errors of motion and parallax, mas/yr and mas */
  error: number;
  /** share of stars with a radial velocity of 0.5 km/s error */
  radialVelocities?: number;
}): MovingCluster {
  const { seed, members, stars, distance, velocity, dispersion, radius, error, radialVelocities = 0 } = options;
  const random = randomStream(seed);
  const n = stars + members;
  const names = [
    'ra',
    'dec',
    'parallax',
    'pmra',
    'pmdec',
    'parallax_error',
    'pmra_error',
    'pmdec_error',
    'rv',
    'rv_error',
  ];
  const c = Object.fromEntries(names.map((name) => [name, new Float64Array(n)]));
  const member = new Uint8Array(n);
  const truth = new Float64Array(n);
  const centre = [67, 16].map((x) => x * RADIANS_PER_DEGREE);
  const middle = direction(centre[0], centre[1]).map((u) => distance * u);
  for (let i = 0; i < n; i++) {
    member[i] = i < members ? 1 : 0;
    let place: number[];
    if (member[i]) {
      place = middle.map((x) => x + radius * random.normal());
    } else {
      const d = distance * (0.5 + 2.5 * random.uniform() ** (1 / 3));
      const ra = centre[0] + 0.7 * (random.uniform() - 0.5);
      const dec = centre[1] + 0.6 * (random.uniform() - 0.5);
      place = direction(ra, dec).map((u) => d * u);
    }
    const own = member[i]
      ? velocity.map((v) => v + dispersion * random.normal())
      : [30, 25, 20].map((s, k) => [8, -4, -12][k] + s * random.normal());
    const d = Math.hypot(...place);
    const ra = Math.atan2(place[1], place[0]);
    const dec = Math.asin(place[2] / d);
    const east = [-Math.sin(ra), Math.cos(ra), 0];
    const north = [-Math.sin(dec) * Math.cos(ra), -Math.sin(dec) * Math.sin(ra), Math.cos(dec)];
    const e = error * (0.5 + random.uniform());
    truth[i] = 1000 / d;
    c.ra[i] = ra / RADIANS_PER_DEGREE;
    c.dec[i] = dec / RADIANS_PER_DEGREE;
    c.parallax[i] = truth[i] + e * random.normal();
    c.pmra[i] = (dot(own, east) * truth[i]) / KMS_PER_AU_PER_YEAR + e * random.normal();
    c.pmdec[i] = (dot(own, north) * truth[i]) / KMS_PER_AU_PER_YEAR + e * random.normal();
    for (const name of ['parallax_error', 'pmra_error', 'pmdec_error']) c[name][i] = e;
    const known = random.uniform() < radialVelocities;
    const noise = 0.5 * random.normal();
    c.rv[i] = known ? dot(own, direction(ra, dec)) + noise : Number.NaN;
    c.rv_error[i] = known ? 0.5 : Number.NaN;
  }
  return { catalogue: fieldCatalogue(c, 'moving cluster'), member, parallax: truth };
}

function direction(ra: number, dec: number): number[] {
  return [Math.cos(dec) * Math.cos(ra), Math.cos(dec) * Math.sin(ra), Math.sin(dec)];
}

function dot(a: readonly number[], b: readonly number[]): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}
