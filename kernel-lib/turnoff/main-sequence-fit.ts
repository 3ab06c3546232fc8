import type { Catalogue } from '../catalogue/catalogue';
import { findRoot } from '../numeric/find-root';
import { gaussianSumQuantile } from '../numeric/gaussian-sum';
import { type Measured, measured, sortedQuantile } from '../quantity/measured';
import { checkOptions } from '../quantity/options';
import {
  CLUSTER_OPTIONS,
  type ClusterOptions,
  type ClusterSetting,
  regionOf,
  sequenceMaker,
  settleCluster,
} from './cluster-setting';
import { findPeak, type Peak } from './peak';
import type { Sequence } from './sequence';
import { makeWorkspace, type ReadyStars, type Region, readyStars, sequenceLogLikelihood } from './sequence-likelihood';

/** What `estimateReddening` takes. */
export interface EstimateReddeningOptions extends ClusterOptions {
  /** Range searched, mag. Default: -0.1 to 3. */
  range?: readonly [number, number];
  /** Systematic error added to the result in quadrature, mag of E(B-V): zero points of photometry and colour scale. Default: 0.01. */
  systematicError?: number;
  /** Called with the share of the work that is done. */
  onProgress?: (done: number, total: number) => void;
}

/** log10 of ages tried: the unevolved sequence hardly depends on them, and what it does is averaged over. */
const LOG_AGES = [7.6, 8.0, 8.3, 8.6, 8.8, 9.0, 9.2, 9.4, 9.6, 9.8, 10.0];
/** Stars this much fainter than the bluest point of the ridge count as unevolved. */
export const UNEVOLVED_BELOW = 1.75;
const LEAST_UNEVOLVED = 20;
/** Standard deviations of the distance modulus at which the fit is repeated. */
const NODES = [-2, -1, 0, 1, 2];

/**
 * Reddening from the unevolved main sequence at a known distance: the sequence of the model, with its unresolved binaries, is moved along
 * the reddening line to where the stars are most likely. Stars more than 1.75 mag below the bluest point of the ridge are
 * used; age is averaged over, and so is the error of the distance.
 * @param members catalogue of member stars
 * @returns E(B-V), mag, with its 68 % interval
 * @throws Error when bands are missing or fewer than 12 stars have them; TypeError or RangeError on options
 * @example estimateReddening(members, { distanceModulus: clusterDistance(members).modulus })
 * Not included: an error of the assumed metallicity (in B-V, 0.1 dex is worth about 0.02-0.03 mag) or of R_V. The accuracy of
 * the colour scale enters as `systematicError`.
 */
export function estimateReddening(members: Catalogue, options: EstimateReddeningOptions): Measured {
  const caller = 'estimateReddening';
  checkOptions(caller, options, [...CLUSTER_OPTIONS, 'range', 'systematicError', 'onProgress']);
  const { range = [-0.1, 3], systematicError = 0.01, onProgress } = options;
  const setting = settleCluster(caller, members, options);
  const { stars, order, ridge, bluest, modulus } = setting;
  const faintest = stars.magnitude[order[order.length - 1]];
  let bright = ridge.magnitude[bluest] + UNEVOLVED_BELOW;
  const below = order.filter((k) => stars.magnitude[k] >= bright).length;
  if (below < LEAST_UNEVOLVED) bright = stars.magnitude[order[0]] - 0.01;
  const region = regionOf(setting, bright, faintest + 0.01);
  const ready = readyStars(stars, region, setting.colourFloor);
  const work = makeWorkspace(ready.count);
  const sequenceAt = sequenceMaker(setting);
  const [low, high] = range;
  const peaks: { peak: Peak; weight: number }[] = [];
  const ages = LOG_AGES.filter((a) => a >= setting.model.logAgeRange[0] && a <= setting.model.logAgeRange[1]);
  ages.forEach((logAge, done) => {
    const { sequence } = sequenceAt(logAge);
    if (sequence !== null) {
      const start = ridgeReddening(setting, sequence, bright, low, high);
      const nodes = modulus.error > 0.004 ? NODES : [0];
      for (const node of nodes) {
        const dm = modulus.value + node * modulus.error;
        const peak = reddeningPeak(setting, ready, sequence, region, work, start, dm, low, high);
        peaks.push({ peak, weight: peak.top + Math.log(peak.sigma || 1e-9) - 0.5 * node * node });
      }
    }
    onProgress?.(done + 1, ages.length);
  });
  return combine(peaks, systematicError);
}

function reddeningPeak(
  setting: ClusterSetting,
  ready: ReadyStars,
  sequence: Sequence,
  region: Region,
  work: ReturnType<typeof makeWorkspace>,
  start: number,
  dm: number,
  low: number,
  high: number,
): Peak {
  const { perExcess, perExtinction } = setting;
  return findPeak(
    (e) => sequenceLogLikelihood(ready, sequence, e * perExcess, dm + e * perExtinction, region, work),
    start,
    0.02,
    low,
    high,
  );
}

/** First idea of the reddening: the median over ridge points of what brings each onto the single-star sequence. */
function ridgeReddening(
  setting: ClusterSetting,
  sequence: Sequence,
  bright: number,
  low: number,
  high: number,
): number {
  const { ridge, modulus, perExcess, perExtinction } = setting;
  const values: number[] = [];
  for (let w = 0; w < ridge.magnitude.length; w++) {
    if (ridge.magnitude[w] < bright || ridge.stars[w] < 3) continue;
    const miss = (e: number) => {
      const c = colourAt(sequence, ridge.magnitude[w] - modulus.value - e * perExtinction);
      return ridge.colour[w] - e * perExcess - c;
    };
    // The first sign change from small reddenings on; the sequence and the reddening line meet once on its unevolved part.
    let before = miss(low);
    for (let e = low + 0.05; e <= high + 1e-9; e += 0.05) {
      const next = miss(e);
      if (Number.isFinite(before) && Number.isFinite(next) && before * next <= 0) {
        values.push(findRoot(miss, e - 0.05, e));
        break;
      }
      before = next;
    }
  }
  if (values.length === 0) return Math.min(Math.max(0.05, low), high);
  return sortedQuantile(Float64Array.from(values).sort(), 0.5);
}

/** Colour of the single-star sequence at an absolute magnitude; NaN off it. Faint segments come first. */
export function colourAt(sequence: Sequence, magnitude: number): number {
  for (let k = 0; k < sequence.singles; k++) {
    const y0 = sequence.y[k];
    const y1 = y0 + sequence.dy[k];
    if ((magnitude - y0) * (magnitude - y1) <= 0 && y0 !== y1) {
      return sequence.x[k] + ((magnitude - y0) / (y1 - y0)) * sequence.dx[k];
    }
  }
  return Number.NaN;
}

/** Median and 68 % interval of a weighted sum of Gaussians, widened by a systematic error. */
function combine(peaks: readonly { peak: Peak; weight: number }[], systematic: number): Measured {
  const good = peaks.filter((p) => Number.isFinite(p.weight) && Number.isFinite(p.peak.at));
  if (good.length === 0) return measured(Number.NaN, Number.NaN, Number.NaN, 'mag');
  const top = Math.max(...good.map((p) => p.weight));
  const parts = good.map((p) => ({
    at: p.peak.at,
    sigma: Math.max(Math.hypot(p.peak.sigma, systematic), 1e-9),
    share: Math.exp(p.weight - top),
  }));
  const quantile = (q: number) => gaussianSumQuantile(parts, q);
  const value = quantile(0.5);
  return measured(value, Math.min(value, quantile(0.158655)), Math.max(value, quantile(0.841345)), 'mag');
}
