import { nearest } from '../../quantity/options';
import { parseUnit, unitConversion } from '../../quantity/units';
import { Catalogue } from '../catalogue';
import { type ColumnData, type ColumnValues, countMissing, kindOf } from '../columns';
import { isRole, type Role, unitOfRole } from '../roles';
import { missingOf } from './declared-missing';
import { optionKey } from './delimited-columns';
import { implausibleValues } from './implausible-values';
import type { RawColumn, RawTable } from './raw-table';
import type { ReadCatalogueOptions } from './read-catalogue';
import { type RecognisedRoles, recogniseRoles } from './recognise-roles';
import { roleOfName, splitBracketUnit } from './role-names';
import { roleOfUcd } from './role-ucds';
import { type SavedState, savedState } from './saved-state';
import { degreesOf } from './sexagesimal';
import { suspiciousValues } from './suspicious-values';

/** What assembling a catalogue is told, besides the table. */
export interface AssembleRequest extends ReadCatalogueOptions {
  /** Name of the file, for titles. */
  readonly title: string;
  /** How messages begin. */
  readonly where: string;
  readonly packed: boolean;
}

/**
 * Settles units, roles and missing values of a table that a reader found, and says in history and warnings what was done.
 * The same for every format.
 */
export function assembleCatalogue(raw: RawTable, request: AssembleRequest): Catalogue {
  const { where, title } = request;
  const saved = savedState(raw);
  const warnings = [...raw.warnings];
  const notes: string[] = [];
  const columns = raw.columns.map((c) => inDegrees(declareMissing(c, request, notes), request, notes));
  const recognised = recogniseRoles(
    columns.map((c) => ({ name: c.name, kind: kindOf(c.values), ucd: c.ucd, unit: c.unit })),
  );
  const roles = settleRoles(columns, recognised, saved, request, warnings);
  const roleOf = new Map(Object.entries(roles).map(([role, name]) => [name, role as Role]));
  const assumed: string[] = [];
  const converted: string[] = [];
  const data: ColumnData[] = columns.map((c) => {
    const role = roleOf.get(c.name);
    const unit = unitOf(c, role, recognised, request);
    if (role === undefined || !(c.values instanceof Float64Array)) return { ...c, unit };
    const target = unitOfRole(role);
    if (target === '') return { ...c, unit };
    if (unit === '') {
      assumed.push(`${c.name} (${target})`);
      return { ...c, unit: target };
    }
    return { ...c, unit: target, values: inUnit(c.values, c.name, unit, target, role, where, converted) };
  });
  if (converted.length > 0) notes.push(`converted ${converted.join(', ')}`);
  if (assumed.length > 0) {
    notes.push(`no unit given, taken as Coeval's own: ${assumed.join(', ')}`);
  }
  warnings.push(
    ...suspiciousValues(columns, data, roleOf),
    ...implausibleValues(data, roleOf),
    ...missingErrors(roles),
  );
  return new Catalogue({
    source: title,
    rowCount: raw.rowCount,
    columns: data,
    roles,
    warnings: [...new Set([...(saved?.warnings ?? []), ...warnings])],
    meta: saved?.meta ?? raw.meta,
    history: [
      ...(saved?.history ?? []),
      {
        action: `read ${title} (${request.packed ? 'gzipped ' : ''}${raw.form})`,
        rowsBefore: raw.rowCount,
        rowsAfter: raw.rowCount,
        note: notes.join('; '),
      },
    ],
  });
}

/** Values that the user declared to mean "no value". */
function declareMissing(column: RawColumn, request: AssembleRequest, notes: string[]): RawColumn {
  const declared = missingOf(request.missing, column.name);
  if (declared.length === 0) return column;
  const { values } = column;
  if (!(values instanceof Float64Array)) return column;
  const numbers = new Set(declared.map(Number).filter((v) => !Number.isNaN(v)));
  let count = 0;
  const out = Float64Array.from(values);
  for (let i = 0; i < out.length; i++) {
    if (!numbers.has(out[i])) continue;
    out[i] = Number.NaN;
    count++;
  }
  if (count > 0) notes.push(`${column.name}: ${count} values of ${[...numbers].join(', ')} taken as missing`);
  return { ...column, values: out };
}

/** Positions written as hours or degrees, minutes and seconds, as degrees. */
function inDegrees(column: RawColumn, request: AssembleRequest, notes: string[]): RawColumn {
  const { name, values } = column;
  if (values instanceof Float64Array || kindOf(values) !== 'text' || request.text?.includes(name)) return column;
  const given = Object.entries(request.roles ?? {}).find(([, n]) => n === name)?.[0];
  const base = given ?? roleOfUcd(column.ucd)?.base ?? roleOfName(name)?.base;
  if (base !== 'rightAscension' && base !== 'declination') return column;
  const declared = request.units && Object.hasOwn(request.units, name) ? request.units[name] : column.unit;
  const isHours = base === 'rightAscension' && !/^deg/i.test(declared);
  const degrees = degreesOf(values as readonly (string | null)[], isHours);
  if (degrees === null) return column;
  notes.push(`${name} from ${isHours ? 'hours' : 'degrees'}, minutes and seconds to deg`);
  return { ...column, values: degrees, unit: 'deg', isSexagesimal: true };
}

/** The roles by recognition, then what the user said over it. */
function settleRoles(
  columns: readonly RawColumn[],
  recognised: RecognisedRoles,
  saved: SavedState | null,
  request: AssembleRequest,
  warnings: string[],
): Partial<Record<Role, string>> {
  const given = Object.entries(request.roles ?? {}) as [Role, string][];
  const roles: Partial<Record<Role, string>> = { ...(saved?.roles ?? recognised.roles) };
  const taken = new Set(given.map(([, name]) => name));
  for (const [role, name] of Object.entries(roles)) if (taken.has(name as string)) delete roles[role as Role];
  for (const [role, name] of given) {
    if (!isRole(role)) {
      const near = nearest(role, [
        'identifier',
        'rightAscension',
        'declination',
        'parallax',
        'properMotionRa',
        'properMotionDec',
        'radialVelocity',
        'magnitude.V',
        'magnitude.B',
        'magnitude.G',
      ]);
      throw new Error(
        `${request.where}: unknown role "${role}".${near ? ` Did you mean "${near}"?` : ''} Roles are identifier, rightAscension, declination, parallax, properMotionRa, properMotionDec, radialVelocity, magnitude.V (any band), colour.B-V (any two bands), each also with .error.`,
      );
    }
    const column = columns.find((c) => c.name === name) as RawColumn;
    if (
      role !== 'identifier' &&
      kindOf(column.values) !== 'number' &&
      countMissing(column.values) < column.values.length
    ) {
      const example = column.values instanceof Float64Array ? '' : String(column.values.find((v) => v !== null));
      throw new Error(
        `${request.where}, column "${name}": role ${role} needs numbers, the column holds ${kindOf(column.values)} (${JSON.stringify(example)}).`,
      );
    }
    roles[role] = name;
  }
  for (const { role, candidates, why } of saved === null ? recognised.open : []) {
    if (roles[role] !== undefined || candidates.every((name) => taken.has(name))) continue;
    const texts = columns.find((c) => c.name === candidates[0])?.values;
    if (candidates.length === 1 && texts !== undefined && !(texts instanceof Float64Array)) {
      const example = String(texts.find((v) => v !== null));
      warnings.push(
        `Role ${role} is not assigned: column "${candidates[0]}" holds text (${JSON.stringify(example)}), not numbers.`,
      );
      continue;
    }
    warnings.push(
      `Role ${role} is not assigned: ${candidates.map((c) => `"${c}"`).join(', ')} (${why}). Say it with roles: { ${optionKey(role)}: ${JSON.stringify(candidates[0])} }.`,
    );
  }
  return roles;
}

/** The unit of a column: what the user says, else the file, else its name; checked to be a known one. */
function unitOf(
  column: RawColumn,
  role: Role | undefined,
  recognised: RecognisedRoles,
  request: AssembleRequest,
): string {
  const given = request.units ?? {};
  const bracket = splitBracketUnit(column.name).unit;
  const byName = role === undefined ? '' : (recognised.units[role] ?? '');
  if (column.isSexagesimal) return 'deg';
  const unit = Object.hasOwn(given, column.name) ? given[column.name] : column.unit || byName || bracket;
  try {
    return isNoUnit(unit) ? '' : parseUnit(unit).text.trim();
  } catch (error) {
    // Brackets in a name need not hold a unit.
    if (!Object.hasOwn(given, column.name) && column.unit === '' && byName === '') return '';
    const likely = role === undefined ? '' : unitOfRole(role);
    throw new Error(
      `${request.where}, column "${column.name}": ${sentence((error as Error).message)} Pass units: { ${optionKey(column.name)}: ${JSON.stringify(likely)} }${likely === '' ? " ('' for none)" : ''}.`,
    );
  }
}

function isNoUnit(text: string): boolean {
  return /^(?:-*|none|1)$/i.test(text.trim());
}

function inUnit(
  values: Float64Array,
  name: string,
  from: string,
  to: string,
  role: Role,
  where: string,
  converted: string[],
): ColumnValues {
  try {
    const { multiply, divide, add } = unitConversion(from, to);
    if (multiply === 1 && divide === 1 && add === 0) return values;
    converted.push(`${name} from ${from} to ${to}`);
    const out = new Float64Array(values.length);
    for (let i = 0; i < out.length; i++) out[i] = (values[i] * multiply) / divide + add;
    return out;
  } catch {
    throw new Error(
      `${where}, column "${name}": role ${role} needs a unit like ${to}, the column is in "${from}". Pass units: { ${optionKey(name)}: ${JSON.stringify(to)} } if the file is wrong, or roles: { ... } if another column carries it.`,
    );
  }
}

/** Says which measurements came without their errors. */
function missingErrors(roles: Partial<Record<Role, string>>): string[] {
  const without = (Object.keys(roles) as Role[]).filter(
    (role) =>
      (role === 'parallax' || role.startsWith('properMotion') || role.startsWith('magnitude.')) &&
      !role.endsWith('.error') &&
      roles[`${role}.error` as Role] === undefined,
  );
  return without.length === 0
    ? []
    : [
        `No error column for ${without.join(', ')}: name it with roles: { ${optionKey(`${without[0]}.error`)}: '...' } if there is one.`,
      ];
}

function sentence(text: string): string {
  return /[.?]$/.test(text) ? text : `${text}.`;
}
