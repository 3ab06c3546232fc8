import { Catalogue } from '../catalogue/catalogue';
import type { ColumnData } from '../catalogue/columns';
import type { Roles } from '../catalogue/roles';
import { bandExtinction } from '../extinction/band-coefficients';
import { analyticModel } from '../models/analytic-model';
import { INITIAL_MASS_FUNCTIONS, type InitialMassFunction } from '../models/initial-mass-function';
import type { StellarModel } from '../models/stellar-model';
import { BAND_NAMES, type Band } from '../quantity/band';
import { checkChoice, checkOptions, checkRange } from '../quantity/options';
import { type RandomStream, randomStream } from '../quantity/random';
import { type FieldStar, makeFieldDrawer, offsetInto } from './field';
import { makeMassDrawer } from './initial-masses';
import { astrometricErrors, photometricError } from './observing-errors';
import { type SeenMotion, seenMotionInto, spaceVelocity } from './space-motion';
import { addLight, starLight, whiteDwarfLight } from './star-light';

/** What a simulated cluster is like. */
export interface SimulateClusterOptions {
  /** Name, used for the catalogue and the star identifiers. Default: `Simulated`. */
  name?: string;
  /** Gyr, 0.001 to 14. */
  age: number;
  /** [Fe/H], dex. Default: 0. */
  metallicity?: number;
  /** pc, 5 to 20000. */
  distance: number;
  /** E(B-V), mag, 0 to 5. Default: 0. */
  ebv?: number;
  /** A(V) / E(B-V). Default: 3.1. */
  rV?: number;
  /** Systems (single stars and unresolved binaries) of the cluster that end up in the catalogue, 0 to 1e6. */
  members: number;
  /** Stars of the field in the catalogue, 0 to 1e7. Default: 0. */
  fieldStars?: number;
  /** Share of systems that are binaries, 0 to 1. Default: 0.35. */
  binaryFraction?: number;
  /** Exponent g of the mass-ratio law q^g from q = 0.1 to 1. Default: 0 (all ratios alike). */
  massRatioSlope?: number;
  /** Default: `kroupa2001`. */
  initialMassFunction?: InitialMassFunction;
  /** Centre on the sky, deg. Default: ra 118, dec -14. */
  centre?: { ra: number; dec: number };
  /** Radius of the field, deg, 0.01 to 60. Default: 1. */
  fieldRadiusDeg?: number;
  /** Scale radius of the Plummer sphere, pc. Default: 2. */
  radius?: number;
  /** Proper motion of the centre, mas/yr; ra includes cos(dec). Default: ra -6, dec 4. */
  properMotion?: { ra: number; dec: number };
  /** km/s. Default: 0. */
  radialVelocity?: number;
  /** Internal velocity dispersion in one direction, km/s. Default: 0.5. */
  velocityDispersion?: number;
  /** Faint limit in the first of G, V and the bands given, mag. Default: 18. */
  magnitudeLimit?: number;
  /** Default: G, BP, RP, B, V. */
  bands?: readonly Band[];
  /** Whether stars that have ended shine on as white dwarfs. Default: false. */
  whiteDwarfs?: boolean;
  /** Multiplies all photometric errors. Default: 1. */
  photometricErrorScale?: number;
  /** Multiplies all astrometric errors. Default: 1. */
  astrometricErrorScale?: number;
  /** E(B-V) of the field a kpc. Default: that of the cluster spread evenly up to its distance, at least 0.3. */
  fieldEbvPerKpc?: number;
  /** Default: the built-in analytic model. */
  model?: StellarModel;
  /** Default: 1. */
  seed?: number;
}

const OPTIONS: readonly (keyof SimulateClusterOptions)[] = [
  'name',
  'age',
  'metallicity',
  'distance',
  'ebv',
  'rV',
  'members',
  'fieldStars',
  'binaryFraction',
  'massRatioSlope',
  'initialMassFunction',
  'centre',
  'fieldRadiusDeg',
  'radius',
  'properMotion',
  'radialVelocity',
  'velocityDispersion',
  'magnitudeLimit',
  'bands',
  'whiteDwarfs',
  'photometricErrorScale',
  'astrometricErrorScale',
  'fieldEbvPerKpc',
  'model',
  'seed',
];

/** Words of the IVOA list of unified content descriptors for where in the spectrum a band lies. */
const SPECTRAL_RANGE: Readonly<Record<Band, string>> = {
  U: 'em.opt.U',
  B: 'em.opt.B',
  V: 'em.opt.V',
  Rc: 'em.opt.R',
  Ic: 'em.opt.I',
  J: 'em.IR.J',
  H: 'em.IR.H',
  Ks: 'em.IR.K',
  G: 'em.opt',
  BP: 'em.opt.B',
  RP: 'em.opt.R',
  Hp: 'em.opt.V',
};
const LEAST_RATIO = 0.1;
/** Plummer spheres have no edge; stars beyond this many scale radii have long been lost. */
const EDGE = 8;

/**
 * An invented cluster in a field, as a survey would list it: masses from an initial mass function, unresolved binaries,
 * a Plummer sphere with its depth and internal motion, reddening, errors that grow with magnitude, a faint limit, and disc stars of
 * many ages in front and behind. What is true of each star stands in columns whose names begin with `true_`, what is true of the
 * cluster in the catalogue's `meta.truth`.
 * @returns rows in random order; columns star_id, ra, dec, parallax, pm_ra, pm_dec and magnitudes, each with its error, and
 *   true_member (1 or 0), true_distance, true_ebv, true_mass, true_mass_secondary, true_log_l (NaN for field stars, or for no secondary)
 * @throws TypeError or RangeError on an option that is unknown or out of range
 * @example simulateCluster({ age: 0.7, distance: 760, ebv: 0.1, members: 400, fieldStars: 8000, seed: 3 })
 * Not included: differential reddening, crowding, variable stars, systematic errors of any kind.
 */
export function simulateCluster(options: SimulateClusterOptions): Catalogue {
  const s = settle(options);
  const stream = randomStream(s.seed);
  const rows = new Rows(s.bands, s.members + s.fieldStars);
  drawMembers(s, stream.fork(1), rows);
  drawField(s, stream.fork(2), rows);
  const seen = observe(s, stream.fork(3), rows);
  return toCatalogue(s, shuffled(rows.count, stream.fork(4)), rows, seen);
}

type Settled = Required<Omit<SimulateClusterOptions, 'initialMassFunction'>> & {
  initialMassFunction: InitialMassFunction;
  limitBand: number;
};

function settle(options: SimulateClusterOptions): Settled {
  const caller = 'simulateCluster';
  checkOptions(caller, options, OPTIONS);
  const bands = options.bands ?? ['G', 'BP', 'RP', 'B', 'V'];
  const distance = options.distance;
  const ebv = options.ebv ?? 0;
  const s = {
    name: 'Simulated',
    metallicity: 0,
    rV: 3.1,
    fieldStars: 0,
    binaryFraction: 0.35,
    massRatioSlope: 0,
    initialMassFunction: 'kroupa2001' as InitialMassFunction,
    centre: { ra: 118, dec: -14 },
    fieldRadiusDeg: 1,
    radius: 2,
    properMotion: { ra: -6, dec: 4 },
    radialVelocity: 0,
    velocityDispersion: 0.5,
    magnitudeLimit: 18,
    whiteDwarfs: false,
    photometricErrorScale: 1,
    astrometricErrorScale: 1,
    fieldEbvPerKpc: Math.max(0.3, (1000 * ebv) / distance),
    model: analyticModel,
    seed: 1,
    ...options,
    bands,
    ebv,
    limitBand: Math.max(0, bands.indexOf('G') >= 0 ? bands.indexOf('G') : bands.indexOf('V')),
  };
  if (bands.length === 0) throw new TypeError(`${caller}: bands is empty; name at least one.`);
  for (const b of bands) checkChoice(caller, 'bands', b, BAND_NAMES);
  checkChoice(caller, 'initialMassFunction', s.initialMassFunction, INITIAL_MASS_FUNCTIONS);
  checkRange(caller, 'age', s.age, 0.001, 14, 'Gyr');
  checkRange(caller, 'distance', s.distance, 5, 20_000, 'pc');
  checkRange(caller, 'ebv', s.ebv, 0, 5, 'mag');
  checkRange(caller, 'members', s.members, 0, 1e6);
  checkRange(caller, 'fieldStars', s.fieldStars, 0, 1e7);
  checkRange(caller, 'binaryFraction', s.binaryFraction, 0, 1);
  checkRange(caller, 'massRatioSlope', s.massRatioSlope, -0.99, 20);
  checkRange(caller, 'fieldRadiusDeg', s.fieldRadiusDeg, 0.01, 60, 'deg');
  checkRange(caller, 'centre.ra', s.centre.ra, 0, 360, 'deg');
  checkRange(caller, 'centre.dec', s.centre.dec, -90, 90, 'deg');
  checkRange(caller, 'radius', s.radius, 0, s.distance / (EDGE + 1), 'pc');
  checkRange(caller, 'velocityDispersion', s.velocityDispersion, 0, 100, 'km/s');
  checkRange(caller, 'photometricErrorScale', s.photometricErrorScale, 0, 1000);
  checkRange(caller, 'astrometricErrorScale', s.astrometricErrorScale, 0, 1000);
  checkRange(caller, 'fieldEbvPerKpc', s.fieldEbvPerKpc, 0, 10, 'mag');
  return s;
}

/** What is true of every row, column by column. */
class Rows {
  readonly ra: Float64Array;
  readonly dec: Float64Array;
  readonly distance: Float64Array;
  readonly pmRa: Float64Array;
  readonly pmDec: Float64Array;
  readonly member: Float64Array;
  readonly ebv: Float64Array;
  readonly mass: Float64Array;
  readonly secondary: Float64Array;
  readonly logL: Float64Array;
  readonly magnitudes: Float64Array[];
  count = 0;

  constructor(bands: readonly Band[], size: number) {
    const column = () => new Float64Array(size).fill(Number.NaN);
    this.ra = column();
    this.dec = column();
    this.distance = column();
    this.pmRa = column();
    this.pmDec = column();
    this.member = column();
    this.ebv = column();
    this.mass = column();
    this.secondary = column();
    this.logL = column();
    this.magnitudes = bands.map(column);
  }

  add(
    place: { ra: number; dec: number },
    distance: number,
    ebv: number,
    motion: SeenMotion,
    magnitudes: Float64Array,
  ): number {
    const i = this.count++;
    this.ra[i] = place.ra;
    this.dec[i] = place.dec;
    this.distance[i] = distance;
    this.ebv[i] = ebv;
    this.pmRa[i] = motion.properMotionRa;
    this.pmDec[i] = motion.properMotionDec;
    this.member[i] = 0;
    for (let b = 0; b < magnitudes.length; b++) this.magnitudes[b][i] = magnitudes[b];
    return i;
  }
}

function drawMembers(s: Settled, stream: RandomStream, rows: Rows): void {
  if (s.members === 0) return;
  const { bands } = s;
  const iso = s.model.isochrone({ logAge: 9 + Math.log10(s.age), metallicity: s.metallicity, bands });
  if (iso.count === 0) throw new RangeError(`simulateCluster: no isochrone: ${iso.note}.`);
  const light = starLight(iso, bands);
  const lightest = Math.max(iso.initialMass[0], 0.1);
  const drawMass = makeMassDrawer(s.initialMassFunction, lightest, s.whiteDwarfs ? 8 : light.heaviest);
  const extinction = bands.map((b) => s.ebv * s.rV * bandExtinction(b, { rV: s.rV }));
  const { ra, dec } = s.centre;
  const centreMotion = {
    properMotionRa: s.properMotion.ra,
    properMotionDec: s.properMotion.dec,
    radialVelocity: s.radialVelocity,
  };
  const systemic = spaceVelocity(centreMotion, ra, dec, s.distance);
  const velocity = new Float64Array(3);
  const seen: SeenMotion = { properMotionRa: 0, properMotionDec: 0, radialVelocity: 0 };
  const place = { ra: 0, dec: 0 };
  const magnitudes = new Float64Array(bands.length);
  const companion = new Float64Array(bands.length);
  const most = 2000 * s.members + 1e6;
  let tries = 0;
  while (rows.count < s.members) {
    if (++tries > most) {
      throw new RangeError(
        `simulateCluster: only ${rows.count} of ${s.members} members are brighter than ${s.magnitudeLimit} mag after ` +
          `${most} tries; raise magnitudeLimit or bring the cluster nearer.`,
      );
    }
    const mass = drawMass(stream);
    let logL: number;
    if (light.magnitudes(mass, magnitudes)) {
      logL = light.last.logL;
    } else {
      const dwarf = mass > light.heaviest ? whiteDwarfLight(mass, s.age, s.metallicity, bands) : null;
      if (dwarf === null) continue;
      magnitudes.set(dwarf.magnitudes);
      logL = dwarf.logL;
    }
    let secondary = Number.NaN;
    if (stream.uniform() < s.binaryFraction) {
      const g = s.massRatioSlope + 1;
      const ratio = (LEAST_RATIO ** g + stream.uniform() * (1 - LEAST_RATIO ** g)) ** (1 / g);
      secondary = mass * ratio;
      if (light.magnitudes(secondary, companion)) addLight(companion, magnitudes);
    }
    const distance = drawPlace(s, stream, place);
    const modulus = 5 * Math.log10(distance) - 5;
    for (let b = 0; b < bands.length; b++) magnitudes[b] += modulus + extinction[b];
    if (!(magnitudes[s.limitBand] < s.magnitudeLimit)) continue;
    for (let k = 0; k < 3; k++) velocity[k] = systemic[k] + s.velocityDispersion * stream.normal();
    seenMotionInto(velocity, place.ra, place.dec, distance, seen);
    const i = rows.add(place, distance, s.ebv, seen, magnitudes);
    rows.member[i] = 1;
    rows.mass[i] = mass;
    rows.secondary[i] = secondary;
    rows.logL[i] = logL;
  }
}

/** A place in the Plummer sphere; returns the distance. Source: Aarseth, Henon & Wielen 1974, A&A 37, 183 (radius from a uniform number). */
function drawPlace(s: Settled, stream: RandomStream, out: { ra: number; dec: number }): number {
  let r = Number.POSITIVE_INFINITY;
  while (r > EDGE) r = 1 / Math.sqrt(stream.uniform() ** (-2 / 3) - 1);
  r *= s.radius;
  const c = 2 * stream.uniform() - 1;
  const angle = 2 * Math.PI * stream.uniform();
  const across = r * Math.sqrt(1 - c * c);
  const east = across * Math.cos(angle);
  const north = across * Math.sin(angle);
  const outward = s.distance + r * c;
  offsetInto(s.centre.ra, s.centre.dec, east, north, outward, out);
  return Math.hypot(east, north, outward);
}

function drawField(s: Settled, stream: RandomStream, rows: Rows): void {
  if (s.fieldStars === 0) return;
  const draw = makeFieldDrawer({
    ra: s.centre.ra,
    dec: s.centre.dec,
    radiusDeg: s.fieldRadiusDeg,
    bands: s.bands,
    limitBand: s.limitBand,
    magnitudeLimit: s.magnitudeLimit,
    rV: s.rV,
    ebvPerKpc: s.fieldEbvPerKpc,
    model: s.model,
  });
  const star: FieldStar = {
    ra: 0,
    dec: 0,
    distance: 0,
    mass: Number.NaN,
    ebv: 0,
    magnitudes: new Float64Array(s.bands.length),
    motion: { properMotionRa: 0, properMotionDec: 0, radialVelocity: 0 },
  };
  for (let k = 0; k < s.fieldStars; k++) {
    draw(stream, star);
    rows.add(star, star.distance, star.ebv, star.motion, star.magnitudes);
  }
}

interface Observed {
  parallax: Float64Array;
  parallaxError: Float64Array;
  properMotionError: Float64Array;
  magnitudeErrors: Float64Array[];
}

/** Adds errors to what is true; afterwards motions and magnitudes of the rows are the observed ones. */
function observe(s: Settled, stream: RandomStream, rows: Rows): Observed {
  const n = rows.count;
  const seen: Observed = {
    parallax: new Float64Array(n),
    parallaxError: new Float64Array(n),
    properMotionError: new Float64Array(n),
    magnitudeErrors: s.bands.map(() => new Float64Array(n)),
  };
  for (let i = 0; i < n; i++) {
    const errors = astrometricErrors(rows.magnitudes[s.limitBand][i], s.astrometricErrorScale);
    seen.parallaxError[i] = errors.parallax;
    seen.properMotionError[i] = errors.properMotion;
    seen.parallax[i] = 1000 / rows.distance[i] + errors.parallax * stream.normal();
    rows.pmRa[i] += errors.properMotion * stream.normal();
    rows.pmDec[i] += errors.properMotion * stream.normal();
    for (let b = 0; b < s.bands.length; b++) {
      const error = photometricError(s.bands[b], rows.magnitudes[b][i], s.photometricErrorScale);
      seen.magnitudeErrors[b][i] = error;
      rows.magnitudes[b][i] += error * stream.normal();
    }
  }
  return seen;
}

function shuffled(n: number, stream: RandomStream): Uint32Array {
  const order = Uint32Array.from({ length: n }, (_, i) => i);
  for (let i = n - 1; i > 0; i--) {
    const j = stream.below(i + 1);
    const kept = order[i];
    order[i] = order[j];
    order[j] = kept;
  }
  return order;
}

function toCatalogue(s: Settled, order: Uint32Array, rows: Rows, seen: Observed): Catalogue {
  const take = (values: Float64Array) => Float64Array.from(order, (i) => values[i]);
  const digits = String(rows.count).length;
  const slug = s.name.replace(/[^A-Za-z0-9]+/g, '-');
  const columns: ColumnData[] = [
    {
      name: 'star_id',
      values: Array.from(order, (_, k) => `${slug}-${String(k + 1).padStart(digits, '0')}`),
      description: 'identifier of the star',
      ucd: 'meta.id;meta.main',
    },
    {
      name: 'ra',
      values: take(rows.ra),
      unit: 'deg',
      description: 'right ascension (ICRS)',
      ucd: 'pos.eq.ra;meta.main',
    },
    {
      name: 'dec',
      values: take(rows.dec),
      unit: 'deg',
      description: 'declination (ICRS)',
      ucd: 'pos.eq.dec;meta.main',
    },
    { name: 'parallax', values: take(seen.parallax), unit: 'mas', description: 'parallax', ucd: 'pos.parallax.trig' },
    {
      name: 'parallax_error',
      values: take(seen.parallaxError),
      unit: 'mas',
      description: 'standard error of parallax',
      ucd: 'stat.error;pos.parallax.trig',
    },
    {
      name: 'pm_ra',
      values: take(rows.pmRa),
      unit: 'mas/yr',
      description: 'proper motion in right ascension, times cos(dec)',
      ucd: 'pos.pm;pos.eq.ra',
    },
    {
      name: 'pm_ra_error',
      values: take(seen.properMotionError),
      unit: 'mas/yr',
      description: 'standard error of pm_ra',
      ucd: 'stat.error;pos.pm;pos.eq.ra',
    },
    {
      name: 'pm_dec',
      values: take(rows.pmDec),
      unit: 'mas/yr',
      description: 'proper motion in declination',
      ucd: 'pos.pm;pos.eq.dec',
    },
    {
      name: 'pm_dec_error',
      values: take(seen.properMotionError),
      unit: 'mas/yr',
      description: 'standard error of pm_dec',
      ucd: 'stat.error;pos.pm;pos.eq.dec',
    },
  ];
  const roles: Record<string, string> = {
    identifier: 'star_id',
    rightAscension: 'ra',
    declination: 'dec',
    parallax: 'parallax',
    'parallax.error': 'parallax_error',
    properMotionRa: 'pm_ra',
    'properMotionRa.error': 'pm_ra_error',
    properMotionDec: 'pm_dec',
    'properMotionDec.error': 'pm_dec_error',
  };
  for (let b = 0; b < s.bands.length; b++) {
    const band = s.bands[b];
    const name = `mag_${band.toLowerCase()}`;
    const ucd = `phot.mag;${SPECTRAL_RANGE[band]}`;
    columns.push({ name, values: take(rows.magnitudes[b]), unit: 'mag', description: `${band} magnitude`, ucd });
    columns.push({
      name: `${name}_error`,
      values: take(seen.magnitudeErrors[b]),
      unit: 'mag',
      description: `standard error of ${name}`,
      ucd: `stat.error;${ucd}`,
    });
    roles[`magnitude.${band}`] = name;
    roles[`magnitude.${band}.error`] = `${name}_error`;
  }
  const truth: [string, Float64Array, string, string][] = [
    ['true_member', rows.member, '', '1 for a member of the cluster, 0 for a field star'],
    ['true_distance', rows.distance, 'pc', 'distance without error'],
    ['true_ebv', rows.ebv, 'mag', 'E(B-V) in front of the star'],
    ['true_mass', rows.mass, 'solMass', 'initial mass of the star or primary'],
    ['true_mass_secondary', rows.secondary, 'solMass', 'initial mass of an unresolved companion'],
    ['true_log_l', rows.logL, '', 'log10 of luminosity of the star or primary, solar'],
  ];
  for (const [name, values, unit, description] of truth)
    columns.push({ name, values: take(values), unit, description });
  const what =
    `simulated: ${s.members} systems of age ${s.age} Gyr, [Fe/H] ${s.metallicity}, distance ${s.distance} pc, ` +
    `E(B-V) ${s.ebv}, ${s.fieldStars} field stars, seed ${s.seed}`;
  return new Catalogue({
    source: s.name,
    rowCount: rows.count,
    columns,
    roles: roles as Roles,
    meta: { truth: truthOf(s) },
    history: [{ action: what, rowsBefore: 0, rowsAfter: rows.count, note: `model ${s.model.name}` }],
  });
}

/** The parameters of the cluster, for the catalogue's keywords. */
function truthOf(s: Settled): Record<string, unknown> {
  const { model, limitBand, bands, ...rest } = s;
  return { ...rest, bands: [...bands], model: model.name, distanceModulus: 5 * Math.log10(s.distance) - 5 };
}
