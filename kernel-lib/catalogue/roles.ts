import { BAND_NAMES, type Band, type ColourName } from '../quantity/band';

/** What a column means, apart from its error. */
export type BaseRole =
  | 'identifier'
  | 'rightAscension'
  | 'declination'
  | 'parallax'
  | 'properMotionRa'
  | 'properMotionDec'
  | 'radialVelocity'
  | `magnitude.${Band}`
  | `colour.${ColourName}`;

/** A role, or the standard error that goes with it. */
export type Role = BaseRole | `${BaseRole}.error`;

/** The role of every known column: role to column name. */
export type Roles = Readonly<Partial<Record<Role, string>>>;

/** Unit that Coeval uses inside for each role; properMotionRa includes the factor cos(declination). */
export function unitOfRole(role: Role): string {
  const base = role.replace(/\.error$/, '');
  if (base === 'rightAscension' || base === 'declination') return role.endsWith('.error') ? 'mas' : 'deg';
  if (base === 'parallax') return 'mas';
  if (base.startsWith('properMotion')) return 'mas/yr';
  if (base === 'radialVelocity') return 'km/s';
  if (base === 'identifier') return '';
  return 'mag';
}

/** Roles that carry a single value, in the order in which they are listed to people. */
export const PLAIN_ROLES: readonly BaseRole[] = [
  'identifier',
  'rightAscension',
  'declination',
  'parallax',
  'properMotionRa',
  'properMotionDec',
  'radialVelocity',
];

/** Whether a word is a role that Coeval knows. */
export function isRole(word: string): word is Role {
  const base = word.replace(/\.error$/, '');
  if ((PLAIN_ROLES as readonly string[]).includes(base)) return true;
  if (base.startsWith('magnitude.')) return (BAND_NAMES as readonly string[]).includes(base.slice(10));
  if (!base.startsWith('colour.')) return false;
  const parts = base.slice(7).split('-');
  return parts.length === 2 && parts.every((p) => (BAND_NAMES as readonly string[]).includes(p));
}
