import { SkyIndex } from '../numeric/sky-index';
import { type Pairs, type SkyPlaces, sigmaDistance2 } from './sky-pairs';

/** Right rows that the circle for the local density holds on the mean. */
const NEIGHBOURS = 20;
/** Square arcsec of the whole sky. */
const WHOLE_SKY = 4 * Math.PI * (648000 / Math.PI) ** 2;
const BANDS = 180;
const SECTORS = 360;

/**
 * Density of the right catalogue around each pair, per square arcsec, the counterpart itself left out: counted in a circle
 * that holds 20 rows on the mean over the occupied part of the sky. Too low, by up to four times, at the rim of a field.
 * @param order left rows in an order in which neighbours on the sky are near each other
 */
export function localDensity(left: SkyPlaces, right: SkyPlaces, order: Int32Array, pairs: Pairs): Float64Array {
  const out = new Float64Array(pairs.left.length).fill(Number.NaN);
  const mean = meanDensity(right);
  if (!(mean > 0)) return out;
  const radius = Math.min(36000, Math.sqrt(NEIGHBOURS / (Math.PI * mean)));
  const area = WHOLE_SKY * Math.sin((radius * Math.PI) / 648000 / 2) ** 2;
  const index = new SkyIndex(right.ra, right.dec, radius);
  const wanted = new Uint8Array(left.ra.length);
  for (let k = 0; k < out.length; k++) if (pairs.right[k] >= 0) wanted[pairs.left[k]] = 1;
  const around = new Float64Array(left.ra.length);
  for (let k = 0; k < order.length; k++) {
    const i = order[k];
    if (wanted[i]) around[i] = Math.max(1, index.within(left.ra[i], left.dec[i]) - 1) / area;
  }
  for (let k = 0; k < out.length; k++) if (pairs.right[k] >= 0) out[k] = around[pairs.left[k]];
  return out;
}

/** Mean density over the cells, equal in area, that hold at least one row. */
function meanDensity(sky: SkyPlaces): number {
  const seen = new Uint8Array(BANDS * SECTORS);
  let cells = 0;
  let count = 0;
  for (let i = 0; i < sky.ra.length; i++) {
    if (!Number.isFinite(sky.ra[i]) || !Number.isFinite(sky.dec[i])) continue;
    count++;
    const band = Math.min(BANDS - 1, Math.floor(((Math.sin((sky.dec[i] * Math.PI) / 180) + 1) / 2) * BANDS));
    const sector = Math.min(SECTORS - 1, Math.floor(sky.ra[i] - 360 * Math.floor(sky.ra[i] / 360)));
    const cell = band * SECTORS + sector;
    if (!seen[cell]) cells++;
    seen[cell] = 1;
  }
  return count / ((cells * WHOLE_SKY) / (BANDS * SECTORS));
}

/**
 * Probabilities of the pairs. With r the separation in sigmas along both axes and lambda = pi sigma_ra sigma_dec density, the
 * likelihood ratio of counterpart to chance is LR = exp(r^2 (2 lambda - 1) / 2) / (2 lambda) (de Ruiter, Willis & Arp 1977,
 * A&AS 28, 211, from memory), and match = theta LR / (theta LR + 1 - theta). The fraction theta of left rows with a true
 * counterpart is estimated from the matched fraction less the one expected by chance within the radius.
 * Pairs are judged one by one: rivals for the same left row do not share their probability.
 */
export function matchProbabilities(
  left: SkyPlaces,
  right: SkyPlaces,
  pairs: Pairs,
  density: Float64Array,
  radiusArcsec: number,
): { match: Float64Array; chance: Float64Array; prior: number } {
  const n = pairs.left.length;
  const match = new Float64Array(n).fill(Number.NaN);
  const chance = new Float64Array(n).fill(Number.NaN);
  let byChance = 0;
  for (let k = 0; k < n; k++) {
    if (pairs.right[k] < 0) continue;
    chance[k] = -Math.expm1(-Math.PI * density[k] * pairs.separation[k] ** 2);
    byChance += -Math.expm1(-Math.PI * density[k] * radiusArcsec ** 2);
  }
  if (!left.errors || !right.errors || pairs.count === 0) return { match, chance, prior: Number.NaN };
  const expected = byChance / pairs.count;
  const fraction = pairs.matched / (left.ra.length - left.missing);
  const prior = Math.min(0.999, Math.max(0.001, (fraction - expected) / (1 - expected)));
  for (let k = 0; k < n; k++) {
    if (pairs.right[k] < 0) continue;
    const [i, j] = [pairs.left[k], pairs.right[k]];
    const sa = Math.hypot(left.errors[0][i], right.errors[0][j]) / 1000;
    const sd = Math.hypot(left.errors[1][i], right.errors[1][j]) / 1000;
    const r2 = sigmaDistance2(left, right, i, j, pairs.separation[k]);
    const lambda = Math.PI * sa * sd * density[k];
    if (!(lambda > 0) || Number.isNaN(r2)) continue;
    const logOdds = (r2 * (2 * lambda - 1)) / 2 - Math.log(2 * lambda) + Math.log(prior / (1 - prior));
    match[k] = 1 / (1 + Math.exp(-logOdds));
  }
  return { match, chance, prior };
}
