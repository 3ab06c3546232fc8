import type { Band } from '../../quantity/band';

/** What a star of some temperature, gravity and metallicity looks like: a bolometric correction and colours, mag. */
export interface Colours {
  readonly bcV: number;
  readonly bv: number;
  readonly ub: number;
  readonly vr: number;
  readonly vi: number;
  readonly vj: number;
  readonly vh: number;
  readonly vk: number;
  /** G - V. */
  readonly gv: number;
  readonly bpRp: number;
  readonly gRp: number;
}

/** Names of the fields, in a fixed order. */
export const COLOUR_KEYS: readonly (keyof Colours)[] = [
  'bcV',
  'bv',
  'ub',
  'vr',
  'vi',
  'vj',
  'vh',
  'vk',
  'gv',
  'bpRp',
  'gRp',
];

/** Each field of one or more records put through a function. */
export function mapColours(f: (...values: number[]) => number, ...of: readonly Colours[]): Colours {
  return Object.fromEntries(COLOUR_KEYS.map((key) => [key, f(...of.map((c) => c[key]))])) as unknown as Colours;
}

/** Bolometric corrections in all bands but Hp, mag. */
export function corrections(c: Colours): Readonly<Record<Exclude<Band, 'Hp'>, number>> {
  const B = c.bcV - c.bv;
  const G = c.bcV - c.gv;
  const RP = G + c.gRp;
  return {
    U: B - c.ub,
    B,
    V: c.bcV,
    Rc: c.bcV + c.vr,
    Ic: c.bcV + c.vi,
    J: c.bcV + c.vj,
    H: c.bcV + c.vh,
    Ks: c.bcV + c.vk,
    G,
    BP: RP - c.bpRp,
    RP,
  };
}
