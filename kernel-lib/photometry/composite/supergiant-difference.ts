import { findRoot } from '../../numeric/find-root';
import { smoothWithin } from '../../numeric/smoothing-spline';
import { flowerLogTeff, flowerSupergiantLogTeff } from '../scales/flower-1996';
import { SUPERGIANT_COLOURS } from '../scales/supergiant-colours';
import { blend } from './blend';
import type { Colours } from './colours';

/**
 * What warm and hot supergiants differ from dwarfs of the same temperature: B-V by Flower 1996 (supergiants less his main sequence),
 * U-B by Schmidt-Kaler 1982, other colours in step with B-V as along the dwarf sequence. No difference in the bolometric correction
 * (Flower finds one relation for all luminosities). Dies away between 32,000 and 45,000 K, where no supergiants were fitted.
 * @param dwarfs colours of dwarfs as a function of log Teff
 */
export function supergiantDifference(dwarfs: (logTeff: number) => Colours): (logTeff: number) => Colours {
  const ubOfBV = smoothWithin(
    SUPERGIANT_COLOURS.map((r) => r[1]),
    SUPERGIANT_COLOURS.map((r) => r[2]),
    SUPERGIANT_COLOURS.map(() => 0.06),
    1e-4,
  );
  return (t) => {
    const held = Math.min(t, 4.58);
    const w = blend(t, 4.65, 4.5);
    const main = findRoot((bv) => flowerLogTeff(bv) - held, -0.35, 1.5);
    const super_ = findRoot((bv) => flowerSupergiantLogTeff(bv) - held, -0.35, 1.5);
    const bv = w * (super_ - main);
    const star = dwarfs(t);
    const cooler = dwarfs(t - 0.01);
    const hotter = dwarfs(t + 0.01);
    const along = (key: keyof Colours) => (bv * (hotter[key] - cooler[key])) / (hotter.bv - cooler.bv);
    return {
      bcV: 0,
      bv,
      ub: w * (ubOfBV(star.bv + super_ - main) - star.ub),
      vr: along('vr'),
      vi: along('vi'),
      vj: along('vj'),
      vh: along('vh'),
      vk: along('vk'),
      gv: along('gv'),
      bpRp: along('bpRp'),
      gRp: along('gRp'),
    };
  };
}
