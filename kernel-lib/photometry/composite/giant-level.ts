import { findRoot } from '../../numeric/find-root';
import { naturalSpline } from '../../numeric/natural-spline';
import { smoothWithin } from '../../numeric/smoothing-spline';
import { alonsoCorrection } from '../scales/alonso-1999';
import { bessellWoodCorrection, coolestGiantColour, GIANT_COLOURS, vanBelleColour } from '../scales/cool-giants';
import { flowerLogTeff, smoothFlowerCorrection } from '../scales/flower-1996';
import { bpMinusRp, gMinusRp, gMinusV } from '../scales/gaia-from-johnson';
import { GONZALEZ_HERNANDEZ_2009_GIANTS } from '../scales/gonzalez-hernandez-2009';
import { MUCCIARELLI_2021_GIANTS } from '../scales/mucciarelli-2021';
import { type ThetaRelation, thetaColour } from '../scales/theta-relation';
import { blend, heldBetween } from './blend';
import type { Colours } from './colours';
import { smoothDwarf } from './dwarf-level';
import { giantBV, giantUV } from './giant-ultraviolet';

/** Greatest distance of the smooth curves from Bessell & Brett's colours, which are given to 0.01 or 0.05 mag. */
const TOLERANCE = 0.03;

/** As stiff as leaves no wave where the sources of V-Ks meet. */
const VK_STIFFNESS = 1e-5;

type Curve = (x: number) => number;

/** A column of Bessell & Brett's giants against their V-K. */
function againstVK(column: number, tolerance = TOLERANCE): Curve {
  const rows = GIANT_COLOURS;
  return smoothWithin(
    rows.map((r) => r[1]),
    rows.map((r) => r[column] as number),
    rows.map(() => tolerance),
    0.02,
  );
}

function relation(list: readonly ThetaRelation[], colour: string): (temperature: number) => number {
  const found = list.find((r) => r.colour === colour) as ThetaRelation;
  return (temperature) => thetaColour(found, temperature, 0);
}

/** Two curves joined smoothly: `hot` above the upper, `cool` below the lower log Teff. */
function joined(cool: Curve, hot: Curve, low: number, high: number): Curve {
  return (t) => {
    const w = blend(t, low, high);
    return (w < 1 ? (1 - w) * cool(t) : 0) + (w > 0 ? w * hot(t) : 0);
  };
}

/** Coolest giant, M10; types later than M7 (3130 K) go on in step with V-K. */
export const COOLEST_GIANT: number = Math.log10(2500);

/**
 * Giants of solar metallicity as a function of log Teff, 3.4 to 3.85: K giants by the infrared flux method (Alonso et al. 1999 B-V, U-V;
 * Gonzalez Hernandez & Bonifacio 2009 V-J, V-H, V-Ks; Mucciarelli et al. 2021 Gaia colours); M giants by angular diameters (van
 * Belle et al. 1999) and the colours of Bessell & Brett 1988, which end at M7. The bolometric correction of K giants is the mean of Alonso et al. 1999
 * and Flower 1996, which part by up to 0.12 mag; that of M giants is Bessell & Wood 1984's in K.
 */
export function giantLevel(): (logTeff: number) => Colours {
  const warm = (colour: string) => {
    const f = relation(GONZALEZ_HERNANDEZ_2009_GIANTS, colour);
    return (t: number) => f(10 ** t);
  };
  const vk = giantVK(warm('V-Ks'));
  // Bessell & Brett's K is 0.044 mag fainter than Ks; their J-K, J-H and H-K become 2MASS ones by Carpenter 2001, AJ 121, 2851 (from memory).
  const johnsonVK = (t: number) => vk(t) - 0.044;
  const jh = againstVK(3, 0.015);
  const hk = againstVK(4, 0.01);
  const coolHK = (t: number) => 0.996 * hk(johnsonVK(t)) + 0.028;
  const coolJH = (t: number) => 0.98 * jh(johnsonVK(t)) - 0.045;
  const vh = joined((t) => vk(t) - coolHK(t), warm('V-H'), 3.58, 3.65);
  const vj = joined((t) => vk(t) - coolHK(t) - coolJH(t), warm('V-J'), 3.58, 3.65);
  const viOfVK = againstVK(2);
  const vi = (t: number) => viOfVK(johnsonVK(t));
  const bluer = giantBV(0);
  const uv = giantUV(0);
  const bv = joined(flowerColour, bluer, 3.585, 3.625);
  const bcOfK = (t: number) => {
    const k = johnsonVK(t);
    return bessellWoodCorrection(jh(k) + hk(k)) - k;
  };
  const bc = joined(bcOfK, (t) => 0.5 * (alonsoCorrection(t, 0) + smoothFlowerCorrection(t)), 3.56, 3.63);
  const gaia = (colour: string, transformation: Curve) => {
    const f = relation(MUCCIARELLI_2021_GIANTS, colour);
    const offset = f(4000) - transformation(vi(Math.log10(4000)));
    return joined(
      (t) => transformation(vi(t)) + offset,
      (t) => f(10 ** t),
      3.56,
      3.63,
    );
  };
  const bpRp = gaia('BP-RP', bpMinusRp);
  const gRp = gaia('G-RP', gMinusRp);
  // Schmidt-Kaler 1982 (from memory) has U-B 1.8 to 1.9 from K5 to M3: held from 3900 K down, good to 0.3 mag.
  const ultraviolet = (t: number) => {
    const held = heldBetween(t, 3.592, 4, 0.006);
    return uv(held) - bluer(held);
  };
  const rc = rcOfIc();
  return (t) => ({
    bcV: bc(t),
    bv: bv(t),
    ub: ultraviolet(t),
    vr: rc(vi(t)),
    vi: vi(t),
    vj: vj(t),
    vh: vh(t),
    vk: vk(t),
    gv: gMinusV(vi(t)),
    bpRp: bpRp(t),
    gRp: gRp(t),
  });
}

/** B-V of giants by Flower 1996; he goes down to 3400 K. */
function flowerColour(t: number): number {
  const held = Math.max(t, 3.5);
  return findRoot((bv) => flowerLogTeff(bv) - held, 0.9, 1.8);
}

/** V-Rc from V-Ic as in dwarfs of the same V-Ic. */
function rcOfIc(): Curve {
  const places = Array.from({ length: 80 }, (_, i) => 4.2 - 0.01 * i);
  const vi = places.map((t) => smoothDwarf('V-Ic', t));
  const spline = naturalSpline(
    vi,
    places.map((t) => smoothDwarf('V-Rc', t)),
  );
  // Giants too cool for any band are held at the reddest dwarf.
  return (x) => spline(Math.min(x, vi[vi.length - 1]));
}

/**
 * V-Ks of giants: one smooth curve through the infrared flux method above 4300 K, angular diameters from 3750 to 3950 K, types M4 to M7 below 3600 K
 * and their continuation. Where the three meet they part by 0.2 mag.
 */
function giantVK(warm: Curve): Curve {
  const points: [number, number, number][] = [];
  for (let t = 3.4; t < 3.555; t += 0.01) points.push([t, coolestGiantColour(t), 0.25]);
  for (let t = 3.575; t < 3.6; t += 0.01) points.push([t, vanBelleColour(10 ** t), 0.12]);
  for (let t = 3.635; t < 3.95; t += 0.01) points.push([t, warm(t), 0.02]);
  return smoothWithin(
    points.map((q) => q[0]),
    points.map((q) => q[1]),
    points.map((q) => q[2]),
    VK_STIFFNESS,
  );
}
