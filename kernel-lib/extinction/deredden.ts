import type { Catalogue } from '../catalogue/catalogue';
import type { ColumnData } from '../catalogue/columns';
import type { Role } from '../catalogue/roles';
import { BAND_NAMES, type Band, bandsOfColour } from '../quantity/band';
import type { Measured } from '../quantity/measured';
import { checkOptions, checkRange, describe } from '../quantity/options';
import { bandExtinction } from './band-coefficients';
import { type LawName, lawNamed } from './laws';

/** Options of `deredden` and `redden`. */
export interface DereddenOptions {
  /** E(B-V), mag, -1 to 20: one for all stars (with or without its error), one a star as a list of shape (n), or a column's name. */
  readonly ebv: number | Measured | ArrayLike<number> | string;
  /** A(V)/E(B-V), 2 to 6. Default 3.1. */
  readonly rV?: number;
  /** Extinction law. Default `CCM89`. */
  readonly law?: LawName | (string & {});
}

const OPTIONS = ['ebv', 'rV', 'law'];

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
 * Source: the law chosen, at effective wavelengths (see bandExtinction).
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
  const { rV = 3.1, law = 'CCM89' } = options;
  lawNamed(caller, law, rV);
  const ebv = reddeningOf(caller, catalogue, options.ebv);
  const added: ColumnData[] = [];
  const roles: Partial<Record<Role, string>> = {};
  const used = new Set<Band>();
  const taken = new Set(catalogue.columns.map((c) => c.name));
  const ratio = (band: Band) => {
    used.add(band);
    return bandExtinction(band, { rV, law });
  };
  for (const [role, name] of Object.entries(catalogue.roles) as [Role, string][]) {
    const amount = perReddening(role, rV, ratio);
    if (amount === null) continue;
    const old = catalogue.numbers(role);
    const values = old.map((v, i) => v + sign * amount * (typeof ebv === 'number' ? ebv : ebv[i]));
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
  const coefficients = BAND_NAMES.filter((b) => used.has(b)).map((b) => `A(${b})/A(V) ${ratio(b).toFixed(4)}`);
  const twice = catalogue.history.filter((h) => h.action.startsWith(`${caller}:`)).length;
  const again = twice > 0 ? `; done before, ${twice === 1 ? 'once' : `${twice} times`}: both count` : '';
  return catalogue.withColumns(added, `${caller}: E(B-V) ${shownReddening(ebv)} mag, ${law}, R_V ${rV}`, {
    roles,
    note: `${coefficients.join(', ')}; errors unchanged${again}`,
  });
}

/** A name that no column has. */
function freeName(wanted: string, taken: Set<string>): string {
  let name = wanted;
  for (let k = 2; taken.has(name); k++) name = `${wanted}_${k}`;
  taken.add(name);
  return name;
}

/** Change of a magnitude or colour for each magnitude of E(B-V); null for other roles. */
function perReddening(role: string, rV: number, ratio: (band: Band) => number): number | null {
  if (role.endsWith('.error')) return null;
  if (role.startsWith('magnitude.')) return rV * ratio(role.slice(10) as Band);
  if (!role.startsWith('colour.')) return null;
  const { blue, red } = bandsOfColour(role.slice(7));
  const excess = ratio(blue) - ratio(red);
  return blue === 'B' && red === 'V' ? 1 : rV * excess;
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
