import { smoothWithin } from '../../numeric/smoothing-spline';
import { dwarfPoints } from '../dwarf-sequence';
import type { DwarfColumn } from '../dwarf-table';
import { bpMinusRp, gMinusRp } from '../scales/gaia-from-johnson';
import { blend } from './blend';
import type { Colours } from './colours';

/** Coordinate in which colours are near to straight from O to M: 5040 K / T and, so that O stars keep apart, log T. */
function coordinate(logTeff: number): number {
  return 5040 / 10 ** logTeff - 0.5 * logTeff;
}

/** How far the smooth curve may stray from a point of the table, mag. */
type Tolerance = (logTeff: number) => number;

const COLOUR: Tolerance = (t) =>
  Math.abs(t - 3.761) < 0.012 ? 0.012 : t > 3.484 ? 0.027 : t > 3.46 ? 0.06 : t > 3.43 ? 0.12 : 0.25;
const VISUAL: Tolerance = (t) => Math.min(COLOUR(t), 0.06);
const INFRARED: Tolerance = (t) => (t > 3.46 ? 0.012 : 0.02);
const CORRECTION: Tolerance = (t) =>
  Math.abs(t - 3.761) < 0.012 ? 0.006 : t > 4.1 ? 0.05 : t > 3.58 ? 0.025 : t > 3.46 ? 0.05 : 0.15;

const TOLERANCES: Readonly<Partial<Record<DwarfColumn, Tolerance>>> = {
  bcV: CORRECTION,
  'B-V': VISUAL,
  'J-H': INFRARED,
  'H-Ks': INFRARED,
};

/** Larger is smoother; as large as leaves no wiggle that follows single points of the table. */
const STIFFNESS: Readonly<Partial<Record<DwarfColumn, number>>> = {
  bcV: 6e-4,
  'V-Ks': 4e-4,
  'V-Ic': 6e-4,
  'BP-RP': 6e-4,
};

const curves = new Map<DwarfColumn, (logTeff: number) => number>();

/**
 * A column of the dwarf sequence, smoothed: the table's two or three digits and its unequal steps in temperature would show as kinks in an
 * isochrone. Beyond its ends it goes on straight.
 */
export function smoothDwarf(name: DwarfColumn, logTeff: number): number {
  let curve = curves.get(name);
  if (curve === undefined) {
    curve = smoothColumn(name);
    curves.set(name, curve);
  }
  return curve(logTeff);
}

function smoothColumn(name: DwarfColumn): (logTeff: number) => number {
  const { logTeff, values } = dwarfPoints(name);
  const tolerance = TOLERANCES[name] ?? COLOUR;
  const x = logTeff.map(coordinate).reverse();
  const spline = smoothWithin(x, values.slice().reverse(), logTeff.map(tolerance).reverse(), STIFFNESS[name] ?? 1e-3);
  return (t) => spline(coordinate(t));
}

/** Change of a colour along the sequence for each magnitude of B-V, at a temperature. */
export function slopeAgainstBV(colour: (logTeff: number) => number, logTeff: number): number {
  const h = 0.01;
  const bv = smoothDwarf('B-V', logTeff + h) - smoothDwarf('B-V', logTeff - h);
  return (colour(logTeff + h) - colour(logTeff - h)) / bv;
}

/** A column where the table has it; hotter, where it is empty, in step with B-V as at its last types. */
function withHotEnd(name: DwarfColumn, last: number): (logTeff: number) => number {
  const edge = smoothDwarf(name, last);
  const bv = smoothDwarf('B-V', last);
  const slope = slopeAgainstBV((t) => smoothDwarf(name, t), last - 0.01);
  return (t) => (t <= last ? smoothDwarf(name, t) : edge + slope * (smoothDwarf('B-V', t) - bv));
}

/** Gaia colours that the table ends at B9, carried on by a transformation of V-Ic, set to meet the table there. */
function withGaiaHotEnd(
  name: 'BP-RP' | 'G-RP',
  transformation: (vi: number) => number,
  vi: (logTeff: number) => number,
): (logTeff: number) => number {
  const at = 3.985;
  const offset = smoothDwarf(name, at) - transformation(vi(at));
  return (t) => {
    const w = blend(t, 3.94, 4.029);
    return (w < 1 ? (1 - w) * smoothDwarf(name, t) : 0) + (w > 0 ? w * (transformation(vi(t)) + offset) : 0);
  };
}

/** Dwarfs of solar metallicity as a function of log Teff, 3.36 to 4.76. */
export function dwarfLevel(): (logTeff: number) => Colours {
  const vr = withHotEnd('V-Rc', 4.41);
  const vi = withHotEnd('V-Ic', 4.51);
  const vk = withHotEnd('V-Ks', 4.51);
  const jh = withHotEnd('J-H', 4.51);
  const hk = withHotEnd('H-Ks', 4.51);
  const bpRp = withGaiaHotEnd('BP-RP', bpMinusRp, vi);
  const gRp = withGaiaHotEnd('G-RP', gMinusRp, vi);
  return (t) => {
    const k = vk(t);
    const h = k - hk(t);
    return {
      bcV: smoothDwarf('bcV', t),
      bv: smoothDwarf('B-V', t),
      ub: smoothDwarf('U-B', t),
      vr: vr(t),
      vi: vi(t),
      vj: h - jh(t),
      vh: h,
      vk: k,
      gv: smoothDwarf('G-V', t),
      bpRp: bpRp(t),
      gRp: gRp(t),
    };
  };
}
