import { BAND_NAMES } from '../../quantity/band';
import { isKnownUnit, parseUnit, unitConversion } from '../../quantity/units';
import { type BaseRole, isRole, PLAIN_ROLES, type Role, type Roles, unitOfRole } from '../roles';
import { DOUBTFUL, roleOfName, splitBracketUnit } from './role-names';
import { roleOfUcd } from './role-ucds';

/** What role recognition looks at. */
export interface NamedColumn {
  readonly name: string;
  readonly kind: 'number' | 'text' | 'boolean';
  /** IVOA UCD1+ word, '' where unknown. */
  readonly ucd?: string;
  /** Unit as the file gives it, '' where unknown; a name is not believed against it. */
  readonly unit?: string;
}

/** A role that was not settled, and the columns that may carry it. */
export interface OpenRole {
  readonly role: Role;
  readonly candidates: readonly string[];
  /** Why it is open, in a sentence. */
  readonly why: string;
}

/** The outcome of `recogniseRoles`. */
export interface RecognisedRoles {
  readonly roles: Roles;
  /** How each role was found: by UCD, or by the column's name. */
  readonly found: Readonly<Partial<Record<Role, 'ucd' | 'name'>>>;
  /** Roles that several columns may carry, or that a doubtful name hints at. */
  readonly open: readonly OpenRole[];
  /** Unit that a column's name carries (`ra_hours`, `parallax [mas]`), for the columns with a role. */
  readonly units: Readonly<Partial<Record<Role, string>>>;
}

interface Candidate {
  readonly column: string;
  readonly by: 'ucd' | 'name';
  /** Lower is surer. */
  readonly rank: number;
  readonly unit: string;
}

/**
 * Finds what columns mean: by IVOA UCD1+ where present, else by common column names (compared without case). A role that two
 * columns could carry equally well is left open. A photometric UCD names a region of the spectrum and not a system, so a
 * band it gives is taken only where the column's name does not speak for another.
 * @param columns names, kinds and UCDs
 * @example recogniseRoles([{ name: 'plx', kind: 'number' }]).roles // => { parallax: 'plx' }
 */
export function recogniseRoles(columns: readonly NamedColumn[]): RecognisedRoles {
  const candidates = new Map<Role, Candidate[]>();
  const open: OpenRole[] = [];
  const add = (role: Role, candidate: Candidate) => candidates.set(role, [...(candidates.get(role) ?? []), candidate]);
  for (const column of columns) {
    const numeric = column.kind === 'number';
    const byUcd = column.ucd ? roleOfUcd(column.ucd) : null;
    const byName = roleOfName(column.name);
    const fits = (base: BaseRole) => numeric || base === 'identifier';
    if (byUcd !== null && fits(byUcd.base)) {
      const photometric = byUcd.base.startsWith('magnitude.') || byUcd.base.startsWith('colour.');
      const role: Role = byUcd.isError ? `${byUcd.base}.error` : byUcd.base;
      const unit = splitBracketUnit(column.name).unit;
      if (!photometric || byName?.base === byUcd.base) {
        add(role, { column: column.name, by: 'ucd', rank: byUcd.main ? -2 : -1, unit });
        continue;
      }
      if (byName === null) {
        open.push({
          role,
          candidates: [column.name],
          why: `its UCD ${column.ucd} gives the region of the spectrum, but its name does not say which system it is in`,
        });
        continue;
      }
    }
    if (column.kind === 'text' && (byUcd ?? byName) !== null && !fits((byUcd ?? byName)?.base as BaseRole)) {
      const { base, isError } = (byUcd ?? byName) as { base: BaseRole; isError: boolean };
      open.push({
        role: isError ? `${base}.error` : base,
        candidates: [column.name],
        why: 'it holds text, not numbers',
      });
      continue;
    }
    if (byName !== null && fits(byName.base)) {
      const role: Role = byName.isError ? `${byName.base}.error` : byName.base;
      if (!unitFits(column, role)) continue;
      add(role, { column: column.name, by: 'name', rank: byName.rank, unit: byName.unit });
    }
  }

  const roles: Partial<Record<Role, string>> = {};
  const found: Partial<Record<Role, 'ucd' | 'name'>> = {};
  const units: Partial<Record<Role, string>> = {};
  settleDoubtful(columns, candidates, open);
  for (const role of inOrder(candidates.keys())) {
    const all = candidates.get(role) as Candidate[];
    const best = Math.min(...all.map((c) => c.rank));
    const first = all.filter((c) => c.rank === best);
    if (first.length > 1) {
      open.push({ role, candidates: first.map((c) => c.column), why: 'these columns may carry it equally well' });
      continue;
    }
    roles[role] = first[0].column;
    found[role] = first[0].by;
    if (first[0].unit !== '') units[role] = first[0].unit;
  }
  // An error without its quantity says nothing, and may belong to a column that was left open.
  for (const role of Object.keys(roles) as Role[]) {
    if (!role.endsWith('.error') || roles[role.slice(0, -6) as Role] !== undefined) continue;
    delete roles[role];
    delete found[role];
    delete units[role];
  }
  return Object.freeze({
    roles: Object.freeze(roles),
    found: Object.freeze(found),
    open: Object.freeze(open),
    units: Object.freeze(units),
  });
}

/**
 * Names such as g or umag may be Gaia's or Johnson's band, or one of another system: the company they are in decides, or
 * they stay open.
 */
function settleDoubtful(columns: readonly NamedColumn[], candidates: Map<Role, Candidate[]>, open: OpenRole[]): void {
  const stems = new Set(columns.map((c) => splitBracketUnit(c.name).stem));
  const has = (...names: string[]) => names.some((n) => stems.has(n));
  const sloan =
    (has('g', 'gmag', 'g_mag') && has('r', 'rmag', 'r_mag')) || has('z', 'zmag', 'z_mag', 'i', 'imag', 'i_mag');
  const gaia = candidates.has('magnitude.BP') || candidates.has('magnitude.RP') || candidates.has('colour.BP-RP');
  const johnson = candidates.has('magnitude.B') && candidates.has('magnitude.V');
  // b and y are Stromgren's, l and b the Galactic coordinates.
  const small = has('b') && has('v') && !has('y', 'l');
  const infrared = ['j', 'h', 'k'].filter((n) => has(n)).length > 1;
  const company: Readonly<Partial<Record<Role, boolean>>> = {
    'magnitude.G': gaia && !sloan,
    'magnitude.U': johnson && !sloan,
    'magnitude.B': small,
    'magnitude.V': small,
    'magnitude.J': infrared,
    'magnitude.H': infrared,
    'magnitude.Ks': infrared,
  };
  for (const column of columns) {
    const { stem, unit } = splitBracketUnit(column.name);
    if (column.kind !== 'number' || !Object.hasOwn(DOUBTFUL, stem)) continue;
    for (const role of DOUBTFUL[stem]) {
      if (candidates.has(role) || !unitFits(column, role)) continue;
      if (company[role] === true) candidates.set(role, [{ column: column.name, by: 'name', rank: 1, unit }]);
      else open.push({ role, candidates: [column.name], why: 'the name is used for several things' });
    }
  }
}

function unitFits(column: NamedColumn, role: Role): boolean {
  const unit = (column.unit ?? '') || splitBracketUnit(column.name).unit;
  if (unit === '' || unitOfRole(role) === '' || !isKnownUnit(unit)) return true;
  try {
    // A column without unit may still be what its name says.
    return Object.keys(parseUnit(unit).dimensions).length === 0 || unitConversion(unit, unitOfRole(role)) !== null;
  } catch {
    return false;
  }
}

function inOrder(roles: Iterable<Role>): Role[] {
  const bases: string[] = [...PLAIN_ROLES, ...BAND_NAMES.map((b) => `magnitude.${b}`)];
  const place = (role: Role) => {
    const at = bases.indexOf(role.replace(/\.error$/, ''));
    return (at < 0 ? 1000 : at) * 2 + (role.endsWith('.error') ? 1 : 0);
  };
  return [...roles].filter(isRole).sort((a, b) => place(a) - place(b));
}
