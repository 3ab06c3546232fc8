import type { ClusterSetting } from './cluster-setting';
import { likelihoodAt, makeComparison, type PlacePrior, type PlaceStart } from './place-fit';
import type { Sequence } from './sequence';
import { type ReadyStars, type Region, readyStars } from './sequence-likelihood';

/** Stars used for a first idea, at most. */
const SCAN_STARS = 200;

/**
 * Looks over reddening and distance on a grid, with the stars' colours blurred to the width of its steps, so that the fit that
 * follows begins near the highest peak and not on a lesser one.
 * @param sequences of several ages; the best of them counts
 */
export function placeStart(
  setting: ClusterSetting,
  region: Region,
  sequences: readonly Sequence[],
  prior: PlacePrior,
  ebvRange: readonly [number, number],
  modulusRange: readonly [number, number],
): PlaceStart {
  const ebvFree = prior.ebv.error > 0.03;
  const modulusFree = prior.modulus.error > 0.1;
  const ebvStep = modulusFree ? 0.08 : 0.03;
  const blur = modulusFree ? 0.06 : 0.03;
  const all = readyStars(setting.stars, region, Math.max(blur, setting.colourFloor));
  const c = makeComparison(setting, thinned(all, SCAN_STARS), region);
  const ebvs = ebvFree ? steps(clip(prior.ebv, ebvRange), ebvStep) : [prior.ebv.value];
  const moduli = modulusFree ? steps(clip(prior.modulus, modulusRange), 0.3) : [prior.modulus.value];
  let best = { ebv: ebvs[0], modulus: moduli[0] };
  let top = Number.NEGATIVE_INFINITY;
  for (const sequence of sequences) {
    for (const modulus of moduli) {
      for (const ebv of ebvs) {
        const value = likelihoodAt(c, sequence, ebv, modulus);
        if (value > top) {
          top = value;
          best = { ebv, modulus };
        }
      }
    }
  }
  return best;
}

/** Every k-th star by magnitude, so that at most so many are left. */
export function thinned(stars: ReadyStars, most: number): ReadyStars {
  const every = Math.ceil(stars.count / most);
  if (every <= 1) return stars;
  const take = (v: Float64Array) => v.filter((_, i) => i % every === every >> 1);
  const probability = take(stars.probability);
  return {
    count: probability.length,
    colour: take(stars.colour),
    magnitude: take(stars.magnitude),
    probability,
    a: take(stars.a),
    b: take(stars.b),
    c: take(stars.c),
    reach: stars.reach,
  };
}

/** The range, cut to four standard deviations about a value that is known. */
function clip(known: { value: number; error: number }, [low, high]: readonly [number, number]): [number, number] {
  if (!Number.isFinite(known.error)) return [low, high];
  return [Math.max(low, known.value - 4 * known.error), Math.min(high, known.value + 4 * known.error)];
}

function steps([low, high]: readonly [number, number], step: number): number[] {
  const count = Math.max(1, Math.ceil((high - low) / step));
  return Array.from({ length: count + 1 }, (_, i) => low + ((high - low) * i) / count);
}
