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

/** Each field of two records put through a function. */
export function mapColours(f: (x: number, y: number) => number, a: Colours, b: Colours): Colours {
  return {
    bcV: f(a.bcV, b.bcV),
    bv: f(a.bv, b.bv),
    ub: f(a.ub, b.ub),
    vr: f(a.vr, b.vr),
    vi: f(a.vi, b.vi),
    vj: f(a.vj, b.vj),
    vh: f(a.vh, b.vh),
    vk: f(a.vk, b.vk),
    gv: f(a.gv, b.gv),
    bpRp: f(a.bpRp, b.bpRp),
    gRp: f(a.gRp, b.gRp),
  };
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
