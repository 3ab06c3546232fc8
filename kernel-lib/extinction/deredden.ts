import type { Catalogue } from '../catalogue/catalogue';
import type { ColumnData } from '../catalogue/columns';
import type { Role } from '../catalogue/roles';
import { BAND_NAMES, type Band, bandsOfColour } from '../quantity/band';
import type { Measured } from '../quantity/measured';
import { checkOptions, checkRange, describe } from '../quantity/options';
import { bandExtinction } from './band-coefficients';
import { a0PerReddening } from './convert-reddening';
import {
  GAIA_A0_RANGE,
  type GaiaBand,
  gaiaExtinctionRatio,
  heldGaiaColour,
  intrinsicGaiaColour,
} from './gaia-extinction';
import { type LawName, lawNamed } from './laws';

/** Options of `deredden` and `redden`. */
export interface DereddenOptions {
  /** E(B-V), mag, -1 to 20: one for all stars (with or without its error), one a star as a list of shape (n), or a column's name. */
  readonly ebv: number | Measured | ArrayLike<number> | string;
  /** A(V)/E(B-V), 2 to 6. Default 3.1. */
  readonly rV?: number;
  /** Extinction law. Default `CCM89`. */
  readonly law?: LawName | (string & {});
  /**
   * Gaia's G, BP and RP by coefficients that follow each star's own colour (see gaiaExtinctionRatio) in place of one coefficient a band.
   * For rV 3.1 and A0 up to 5 mag. Default false.
   */
  readonly colourTerms?: boolean;
}

const OPTIONS = ['ebv', 'rV', 'law', 'colourTerms'];

/**
 * Takes interstellar extinction off every magnitude and colour whose role is known.
 *
 * Each becomes a new column, named after the old one with `_0`, and takes over its role; the old column stays. Errors stay as they are:
 * they are the stars' own, while an error of the reddening moves all stars together.
 * @param catalogue with magnitudes or colours by role
 * @returns the catalogue with the dereddened columns, the coefficients in its history
 * @throws TypeError for an unknown option or a reddening that is none, RangeError for values out of range or not one a star,
 *   Error when no magnitude and no colour has a role
 * @example deredden(members, { ebv: 0.05 }).numbers('magnitude.G')
 * Source: the law chosen, at effective wavelengths (see bandExtinction, and gaiaExtinctionRatio for colourTerms).
 */
export function deredden(catalogue: Catalogue, options: DereddenOptions): Catalogue {
  return shift('deredden', catalogue, options, -1);
}

/**
 * Puts interstellar extinction on every magnitude and colour whose role is known: the inverse of `deredden`, for invented stars. New
 * columns are named after the old with `_red`.
 * @param catalogue with magnitudes or colours by role
 * @throws as deredden
 * @example redden(catalogue, { ebv: 0.05 })
 */
export function redden(catalogue: Catalogue, options: DereddenOptions): Catalogue {
  return shift('redden', catalogue, options, 1);
}

function shift(caller: 'deredden' | 'redden', catalogue: Catalogue, options: DereddenOptions, sign: 1 | -1): Catalogue {
  checkOptions(caller, options, OPTIONS);
  const { rV = 3.1, law = 'CCM89', colourTerms = false } = options;
  lawNamed(caller, law, rV);
  const ebv = reddeningOf(caller, catalogue, options.ebv);
  const at = (i: number) => (typeof ebv === 'number' ? ebv : ebv[i]);
  const used = new Set<Band>();
  const ratio = (band: Band) => {
    used.add(band);
    return bandExtinction(band, { rV, law });
  };
  const gaia = colourTerms ? gaiaLosses(caller, catalogue, sign, { at, rV, law }) : null;
  /** Extinction of star i in a band. */
  const loss = (band: Band): ((i: number) => number) => {
    if (gaia !== null && (band === 'G' || band === 'BP' || band === 'RP')) {
      used.add(band);
      return (i) => gaia[band][i];
    }
    const each = rV * ratio(band);
    return (i) => each * at(i);
  };
  const added: ColumnData[] = [];
  const roles: Partial<Record<Role, string>> = {};
  const taken = new Set(catalogue.columns.map((c) => c.name));
  for (const [role, name] of Object.entries(catalogue.roles) as [Role, string][]) {
    const change = changeOf(role, loss, at);
    if (change === null) continue;
    const values = catalogue.numbers(role).map((v, i) => v + sign * change(i));
    const info = catalogue.columns.find((c) => c.name === name);
    const fresh = freeName(`${name}${sign < 0 ? '_0' : '_red'}`, taken);
    const what = sign < 0 ? 'without extinction' : 'with extinction';
    added.push({ name: fresh, values, unit: 'mag', description: `${info?.description || role} ${what}` });
    roles[role] = fresh;
  }
  if (added.length === 0) {
    throw new Error(
      `${caller}: ${catalogue.source} has no magnitude or colour with a known role. Give roles such as magnitude.V when reading.`,
    );
  }
  const words = BAND_NAMES.filter((b) => used.has(b)).map((b) =>
    gaia !== null && b in gaia ? `A(${b}) by the star's colour` : `A(${b})/A(V) ${ratio(b).toFixed(4)}`,
  );
  if (gaia !== null && gaia.held > 0)
    words.push(`${gaia.held} stars beyond BP-RP -0.06 to 2.5 with the coefficients there`);
  const twice = catalogue.history.filter((h) => h.action.startsWith(`${caller}:`)).length;
  if (twice > 0) words.push(`done before, ${twice === 1 ? 'once' : `${twice} times`}: all count`);
  return catalogue.withColumns(added, `${caller}: E(B-V) ${shownReddening(ebv)} mag, ${law}, R_V ${rV}`, {
    roles,
    note: `${words.join(', ')}; errors unchanged`,
  });
}

/** Extinction of every star in Gaia's bands by its own colour, shape (n), and how many stars lie beyond the coefficients. */
type GaiaLosses = Readonly<Record<GaiaBand, Float64Array>> & { readonly held: number };

function gaiaLosses(
  caller: string,
  catalogue: Catalogue,
  sign: 1 | -1,
  dust: { at: (i: number) => number; rV: number; law: string },
): GaiaLosses {
  if (dust.rV !== 3.1)
    throw new RangeError(`${caller}: colourTerms hold for rV 3.1 only, got ${dust.rV}; leave one of them out.`);
  if (!catalogue.has('colour.BP-RP') && !(catalogue.has('magnitude.BP') && catalogue.has('magnitude.RP'))) {
    throw new Error(
      `${caller}: colourTerms need BP-RP, which ${catalogue.source} does not have. Give its role when reading.`,
    );
  }
  const perReddening = a0PerReddening(caller, dust.rV, dust.law);
  const n = catalogue.rowCount;
  const losses = { G: new Float64Array(n), BP: new Float64Array(n), RP: new Float64Array(n) };
  const bp = catalogue.has('magnitude.BP') ? catalogue.numbers('magnitude.BP') : null;
  const rp = catalogue.has('magnitude.RP') ? catalogue.numbers('magnitude.RP') : null;
  const colours = catalogue.has('colour.BP-RP') ? catalogue.numbers('colour.BP-RP') : null;
  let held = 0;
  for (let i = 0; i < n; i++) {
    const a0 = perReddening * dust.at(i);
    if (a0 < GAIA_A0_RANGE[0] || a0 > GAIA_A0_RANGE[1]) {
      throw new RangeError(`${caller}: colourTerms hold for A0 0 to 5 mag, got ${a0.toPrecision(3)} in row ${i}.`);
    }
    const shown = colours !== null ? colours[i] : (bp as Float64Array)[i] - (rp as Float64Array)[i];
    const colour = sign > 0 ? shown : intrinsicGaiaColour(shown, a0);
    const inside = heldGaiaColour(colour);
    if (inside !== colour && !Number.isNaN(colour)) held++;
    for (const band of GAIA_BANDS) losses[band][i] = a0 * gaiaExtinctionRatio(band, inside, a0);
  }
  return { ...losses, held };
}

const GAIA_BANDS: readonly GaiaBand[] = ['G', 'BP', 'RP'];

/** A name that no column has. */
function freeName(wanted: string, taken: Set<string>): string {
  let name = wanted;
  for (let k = 2; taken.has(name); k++) name = `${wanted}_${k}`;
  taken.add(name);
  return name;
}

/** What extinction adds to a magnitude or colour of star i; null for other roles. */
function changeOf(
  role: string,
  loss: (band: Band) => (i: number) => number,
  ebv: (i: number) => number,
): ((i: number) => number) | null {
  if (role.endsWith('.error')) return null;
  if (role.startsWith('magnitude.')) return loss(role.slice(10) as Band);
  if (!role.startsWith('colour.')) return null;
  const { blue, red } = bandsOfColour(role.slice(7));
  const ofBlue = loss(blue);
  const ofRed = loss(red);
  // By definition, and free of rounding.
  return blue === 'B' && red === 'V' ? ebv : (i) => ofBlue(i) - ofRed(i);
}

function reddeningOf(caller: string, catalogue: Catalogue, ebv: DereddenOptions['ebv']): number | ArrayLike<number> {
  if (typeof ebv === 'number') {
    checkRange(caller, 'ebv', ebv, -1, 20, 'mag');
    return ebv;
  }
  const list = typeof ebv === 'string' ? catalogue.numbers(ebv) : ebv;
  if (list !== null && typeof list === 'object') {
    if ('length' in list) {
      if (list.length !== catalogue.rowCount) {
        throw new RangeError(`${caller}: ebv has ${list.length} values for ${catalogue.rowCount} stars.`);
      }
      for (let i = 0; i < list.length; i++) {
        if (!Number.isNaN(list[i])) checkRange(caller, `ebv[${i}]`, list[i], -1, 20, 'mag');
      }
      return list;
    }
    if (typeof list.value === 'number') return reddeningOf(caller, catalogue, list.value);
  }
  throw new TypeError(
    `${caller}: ebv must be E(B-V) in mag: a number, a measured value, one a star, or a column's name; got ${describe(ebv)}.`,
  );
}

function shownReddening(ebv: number | ArrayLike<number>): string {
  if (typeof ebv === 'number') return String(Number(ebv.toPrecision(6)));
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (let i = 0; i < ebv.length; i++) {
    if (ebv[i] < low) low = ebv[i];
    if (ebv[i] > high) high = ebv[i];
  }
  return `${Number(low.toPrecision(4))} to ${Number(high.toPrecision(4))}, one a star`;
}
