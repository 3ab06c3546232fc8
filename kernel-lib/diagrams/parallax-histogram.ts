import { thresholdFreedmanDiaconis } from 'd3-array';
import type { Catalogue } from '../catalogue/catalogue';
import type { Measured } from '../quantity/measured';
import { checkOptions, checkRange } from '../quantity/options';
import { baseLayout, linearAxis, padded } from './axes';
import { Figure, type FigureTrace } from './figure';
import { plotText } from './plot-text';
import { robustRange } from './robust-range';
import { rounded } from './rounding';
import { PALETTE, translucent } from './theme';

/** Options of `parallaxHistogram`. */
export interface ParallaxHistogramOptions {
  /** Membership probability of each row, shape (n): a second histogram counts each star by it. */
  readonly probability?: ArrayLike<number>;
  /** The cluster's parallax with its error, mas: a line and a band. */
  readonly parallax?: Measured;
  /** Shown range, mas. Default: holds 99 % of the stars. */
  readonly range?: readonly [number, number];
  /** Number of bins over the range. Default by the rule of Freedman & Diaconis 1981, 20 to 80. */
  readonly bins?: number;
  /** Default `Parallaxes`. */
  readonly title?: string;
}

/**
 * Histogram of parallaxes, of all stars and of the members.
 * @param catalogue with role parallax
 * @throws Error when the role is missing, TypeError for an unknown option, RangeError for a bad range or number of bins
 * @example parallaxHistogram(field, { probability: membership.probability, parallax: distance.parallax })
 */
export function parallaxHistogram(catalogue: Catalogue, options: ParallaxHistogramOptions = {}): Figure {
  const caller = 'parallaxHistogram';
  checkOptions(caller, options, ['probability', 'parallax', 'range', 'bins', 'title']);
  const { probability, parallax, title = 'Parallaxes' } = options;
  const values = catalogue.numbers('parallax');
  if (probability && probability.length !== values.length) {
    throw new RangeError(
      `${caller}: probability has ${probability.length} entries for ${values.length} rows of the catalogue.`,
    );
  }
  const range = options.range ?? padded(robustRange(values, null, 0.005) ?? [0, 1]);
  if (!(range[1] > range[0])) {
    throw new RangeError(`${caller}: range must be [low, high] in mas with low < high, got [${range.join(', ')}].`);
  }
  const inside = Array.from(values).filter((v) => v >= range[0] && v <= range[1]);
  const count = options.bins ?? Math.min(80, Math.max(20, thresholdFreedmanDiaconis(inside, range[0], range[1])));
  checkRange(caller, 'bins', count, 1, 2000);
  const all = histogram(values, null, range, count);
  const data: FigureTrace[] = [bars('all stars', all, range, PALETTE.slate, 0.55)];
  let highest = Math.max(1, ...all);
  if (probability) {
    const members = histogram(values, probability, range, count);
    let expected = 0;
    for (let i = 0; i < probability.length; i++) if (probability[i] > 0) expected += probability[i];
    data.push(bars(`members, by probability (${expected.toFixed(0)})`, members, range, PALETTE.azure, 0.85));
    highest = Math.max(highest, ...members);
  }
  const top = highest * 1.08;
  if (parallax) data.push(parallaxLine(parallax, top));
  const layout = {
    ...baseLayout(plotText(title), 460),
    xaxis: linearAxis('parallax (mas)', range),
    yaxis: linearAxis('stars', [0, top]),
    barmode: 'overlay',
    shapes: parallax ? [parallaxBand(parallax)] : [],
  };
  return new Figure(data, layout, title);
}

/** Stars, or the sum of their weights, in equal bins over a range; the last bin holds its upper end. */
function histogram(
  values: Float64Array,
  weights: ArrayLike<number> | null,
  range: readonly [number, number],
  count: number,
): Float64Array {
  const counts = new Float64Array(count);
  const perUnit = count / (range[1] - range[0]);
  for (let i = 0; i < values.length; i++) {
    if (!(values[i] >= range[0] && values[i] <= range[1])) continue;
    const weight = weights === null ? 1 : weights[i];
    if (weight > 0) counts[Math.min(count - 1, Math.floor((values[i] - range[0]) * perUnit))] += weight;
  }
  return counts;
}

function bars(
  name: string,
  counts: Float64Array,
  range: readonly [number, number],
  color: string,
  opacity: number,
): FigureTrace {
  const step = (range[1] - range[0]) / counts.length;
  return {
    type: 'bar',
    name,
    x: rounded(
      counts.map((_, i) => range[0] + (i + 0.5) * step),
      5,
    ),
    y: rounded(counts, 2),
    width: step,
    marker: { color, opacity },
    hovertemplate: '%{y:.3~g} stars about %{x:.3f} mas<extra></extra>',
  };
}

function parallaxBand(parallax: Measured): object {
  const ends = { type: 'rect', x0: parallax.lower, x1: parallax.upper, y0: 0, y1: 1, yref: 'paper', layer: 'below' };
  return { ...ends, fillcolor: translucent(PALETTE.crimson, 0.2), line: { width: 0 } };
}

function parallaxLine(parallax: Measured, top: number): FigureTrace {
  return {
    type: 'scatter',
    mode: 'lines',
    name: `cluster, ${plotText(String(parallax))}`,
    x: rounded([parallax.value, parallax.value], 5),
    y: rounded([0, top], 2),
    line: { color: PALETTE.crimson, width: 1.5, dash: 'dash' },
    hoverinfo: 'name',
  };
}
