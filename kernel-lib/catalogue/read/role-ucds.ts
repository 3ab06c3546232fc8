import type { Band } from '../../quantity/band';
import type { BaseRole } from '../roles';

/** What a UCD says about a column. */
export interface UcdRole {
  readonly base: BaseRole;
  readonly isError: boolean;
  /** Whether it is marked as the main one of its kind. */
  readonly main: boolean;
}

const BANDS: readonly (readonly [string, Band])[] = [
  ['em.opt.u', 'U'],
  ['em.opt.b', 'B'],
  ['em.opt.v', 'V'],
  ['em.opt.r', 'Rc'],
  ['em.opt.i', 'Ic'],
  ['em.ir.j', 'J'],
  ['em.ir.h', 'H'],
  ['em.ir.k', 'Ks'],
];

/**
 * The role that a UCD1+ word stands for, or null. Source: "The UCD1+ controlled vocabulary", IVOA Recommendation 1.5.
 * @example roleOfUcd('stat.error;pos.parallax') // => { base: 'parallax', isError: true, main: false }
 */
export function roleOfUcd(ucd: string): UcdRole | null {
  const words = ucd
    .toLowerCase()
    .split(/[;\s]+/)
    .filter((w) => w !== '');
  const isError = words[0] === 'stat.error';
  const main = words.includes('meta.main');
  const rest = words.filter((w) => w !== 'stat.error' && w !== 'meta.main');
  const base = baseOf(rest);
  return base === null ? null : { base, isError, main };
}

function baseOf(words: readonly string[]): BaseRole | null {
  const [first, second] = words;
  if (first === 'meta.id' && words.length === 1) return 'identifier';
  if (first === 'pos.eq.ra' && words.length === 1) return 'rightAscension';
  if (first === 'pos.eq.dec' && words.length === 1) return 'declination';
  if (first === 'pos.parallax' || first === 'pos.parallax.trig') return words.length === 1 ? 'parallax' : null;
  if (first === 'pos.pm' && second === 'pos.eq.ra') return 'properMotionRa';
  if (first === 'pos.pm' && second === 'pos.eq.dec') return 'properMotionDec';
  if (/^(?:spect\.dopplerveloc(?:\.opt)?|phys\.veloc)$/.test(first ?? '')) {
    // Rotation, dispersion and space-velocity components carry another word.
    return words.slice(1).every((w) => /^(?:em\.|pos\.heliocentric|pos\.barycentric|pos\.lsr|src$)/.test(w))
      ? 'radialVelocity'
      : null;
  }
  if (first === 'phot.mag' && words.length === 2) {
    const band = bandOf(second);
    return band === null ? null : `magnitude.${band}`;
  }
  if (first === 'phot.color' && words.length === 3) {
    const blue = bandOf(words[1]);
    const red = bandOf(words[2]);
    return blue !== null && red !== null ? `colour.${blue}-${red}` : null;
  }
  return null;
}

function bandOf(word: string): Band | null {
  return BANDS.find(([ucd]) => ucd === word)?.[1] ?? null;
}
