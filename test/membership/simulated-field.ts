import { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { KMS_PER_AU_PER_YEAR, RADIANS_PER_DEGREE } from '../../kernel-lib/quantity/constants';
import { randomStream } from '../../kernel-lib/quantity/random';

export interface SimulatedField {
  readonly catalogue: Catalogue;
  /** 1 for a member, shape (rows) */
  readonly member: Uint8Array;
  /** what the cluster was made with: mas/yr and mas */
  readonly truth: { pmRa: number; pmDec: number; parallax: number; dispersion: number; members: number };
}

/**
 * A small field of sky with a cluster in it, made from magnitudes, distances and velocities rather than from the mixture
 * that is fitted: field distances from a density that thins out exponentially, velocities from a triaxial ellipsoid about
 * the Sun's reflex motion, errors that grow with magnitude. The cluster's magnitudes are spread otherwise than the field's.
 */
export function simulatedField(options: {
  seed: number;
  stars: number;
  members: number;
  distance: number;
  correlations?: boolean;
  brightCluster?: boolean;
}): SimulatedField {
  const { seed, stars, members, distance, correlations = false, brightCluster = true } = options;
  const random = randomStream(seed);
  const n = stars + members;
  const names = [
    'ra', 'dec', 'pmra', 'pmdec', 'parallax', 'pmra_error', 'pmdec_error', 'parallax_error', 'g',
    ...(correlations ? ['pmra_pmdec_corr', 'parallax_pmra_corr', 'parallax_pmdec_corr'] : []),
  ] as const; // biome-ignore format: a list of names
  const columns = Object.fromEntries(names.map((name) => [name, new Float64Array(n)]));
  const member = new Uint8Array(n);
  // Proper motion of the cluster: a peculiar velocity of its own beside the reflex of the Sun's.
  const peculiar = [12 * random.normal(), 8 * random.normal()];
  const pmRa = (peculiar[0] - 10) * (1000 / distance / KMS_PER_AU_PER_YEAR);
  const pmDec = (peculiar[1] - 6) * (1000 / distance / KMS_PER_AU_PER_YEAR);
  const own = (0.8 * (1000 / distance)) / KMS_PER_AU_PER_YEAR;
  let placed = 0;
  for (let i = 0; i < n; i++) {
    const isMember = i % Math.max(1, Math.floor(n / Math.max(members, 1))) === 0 && placed < members;
    member[i] = isMember ? 1 : 0;
    if (isMember) placed++;
    let g: number;
    let d: number;
    if (isMember) {
      g = brightCluster ? 10 + 8 * Math.sqrt(random.uniform()) : faint(random.uniform());
      d = distance + 4 * random.normal();
    } else {
      g = faint(random.uniform());
      // Fainter stars are seen farther: scale length grows with magnitude.
      const length = 150 * 10 ** (0.13 * (g - 10));
      d = -length * Math.log(random.uniform() * random.uniform() * random.uniform() + 1e-300);
    }
    const plx = 1000 / d;
    const u = isMember ? 0 : 32 * random.normal();
    const v = isMember ? 0 : 20 * random.normal();
    const tilt = 0.6 * u + 0.8 * v;
    const other = 0.8 * u - 0.6 * v;
    const scale = plx / KMS_PER_AU_PER_YEAR;
    const trueRa = isMember ? pmRa + own * random.normal() : (tilt - 10) * scale;
    const trueDec = isMember
      ? pmDec + own * random.normal()
      : (other - 6 - (d > 1500 ? 20 * (1 - 1500 / d) : 0)) * scale;
    const e = 0.02 * Math.sqrt(1 + 10 ** (0.4 * (g - 14.5)));
    const errors = [1.05 * e, 0.95 * e, 0.9 * e];
    const rho = correlations ? [0.3, -0.4, 0.25] : [0, 0, 0];
    const z = [random.normal(), random.normal(), random.normal()];
    const noise = correlate(z, rho);
    columns.ra[i] = 120 + (random.uniform() - 0.5) / Math.cos(20 * RADIANS_PER_DEGREE);
    columns.dec[i] = 20 + random.uniform() - 0.5;
    columns.pmra[i] = trueRa + errors[0] * noise[0];
    columns.pmdec[i] = trueDec + errors[1] * noise[1];
    columns.parallax[i] = plx + errors[2] * noise[2];
    columns.pmra_error[i] = errors[0];
    columns.pmdec_error[i] = errors[1];
    columns.parallax_error[i] = errors[2];
    columns.g[i] = g;
    if (correlations) {
      columns.pmra_pmdec_corr[i] = rho[0];
      columns.parallax_pmra_corr[i] = rho[1];
      columns.parallax_pmdec_corr[i] = rho[2];
    }
  }
  return {
    catalogue: fieldCatalogue(columns),
    member,
    truth: { pmRa, pmDec, parallax: 1000 / distance, dispersion: own, members: sum(member) },
  };
}

/** A catalogue with the usual roles, of the given columns. */
export function fieldCatalogue(columns: Record<string, Float64Array>, source = 'simulated field'): Catalogue {
  const roles = {
    rightAscension: 'ra',
    declination: 'dec',
    properMotionRa: 'pmra',
    properMotionDec: 'pmdec',
    parallax: 'parallax',
    'properMotionRa.error': 'pmra_error',
    'properMotionDec.error': 'pmdec_error',
    'parallax.error': 'parallax_error',
    radialVelocity: 'rv',
    'radialVelocity.error': 'rv_error',
  };
  const known = Object.entries(roles).filter(([, name]) => name in columns);
  return new Catalogue({
    source,
    rowCount: Object.values(columns)[0].length,
    columns: Object.entries(columns).map(([name, values]) => ({ name, values })),
    roles: Object.fromEntries(known),
  });
}

function faint(u: number): number {
  // Counts that grow by a factor 10^0.25 a magnitude, from 9 to 18.5.
  const k = 0.25 * Math.LN10;
  return 9 + Math.log(1 + u * (Math.exp(k * 9.5) - 1)) / k;
}

function sum(values: Uint8Array): number {
  let s = 0;
  for (const v of values) s += v;
  return s;
}

/** Standard normal numbers with correlations 01, 02, 12. */
function correlate(z: number[], [r01, r02, r12]: number[]): number[] {
  const l11 = Math.sqrt(1 - r01 * r01);
  const l21 = (r12 - r01 * r02) / l11;
  return [z[0], r01 * z[0] + l11 * z[1], r02 * z[0] + l21 * z[1] + Math.sqrt(1 - r02 * r02 - l21 * l21) * z[2]];
}
