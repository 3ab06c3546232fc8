import type { HistoryStep } from '../history';
import { isRole, type Role } from '../roles';
import type { RawTable } from './raw-table';

/** What a file that Coeval wrote says about its catalogue. */
export interface SavedState {
  readonly roles: Readonly<Partial<Record<Role, string>>>;
  readonly history: readonly HistoryStep[];
  readonly warnings: readonly string[];
  /** The other keywords of the table. */
  readonly meta: Readonly<Record<string, unknown>>;
}

/** Roles, history and warnings that `writeCatalogue` left in the table's keywords, or null. Entries that do not fit are left out. */
export function savedState(raw: RawTable): SavedState | null {
  const coeval = raw.meta.coeval as { roles?: unknown; history?: unknown; warnings?: unknown } | undefined;
  if (coeval === undefined || coeval === null || typeof coeval !== 'object') return null;
  const names = new Set(raw.columns.map((c) => c.name));
  const roles: Partial<Record<Role, string>> = {};
  for (const [role, name] of Object.entries((coeval.roles ?? {}) as Record<string, unknown>)) {
    if (isRole(role) && typeof name === 'string' && names.has(name)) roles[role] = name;
  }
  const history = Array.isArray(coeval.history) ? coeval.history.filter(isStep) : [];
  const warnings = Array.isArray(coeval.warnings) ? coeval.warnings.filter((w) => typeof w === 'string') : [];
  const { coeval: _own, ...meta } = raw.meta;
  return { roles, warnings, history: history.map((s) => Object.freeze({ ...s })), meta };
}

function isStep(step: unknown): step is HistoryStep {
  const s = step as Partial<HistoryStep> | null;
  return (
    s !== null &&
    typeof s === 'object' &&
    typeof s.action === 'string' &&
    typeof s.note === 'string' &&
    Number.isFinite(s.rowsBefore) &&
    Number.isFinite(s.rowsAfter)
  );
}
