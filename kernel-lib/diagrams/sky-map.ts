import { ticks } from 'd3-array';
import type { Catalogue } from '../catalogue/catalogue';
import { RADIANS_PER_DEGREE } from '../quantity/constants';
import { checkOptions } from '../quantity/options';
import { baseLayout, linearAxis, padded } from './axes';
import { Figure } from './figure';
import { memberClasses } from './member-classes';
import { plotText } from './plot-text';
import { pointTrace } from './points';
import { finiteExtent } from './rounding';
import { drawnAlike } from './theme';

/** Options of `skyMap`. */
export interface SkyMapOptions {
  /** Membership probability of each row, shape (n): stars are told apart by it. Default: all alike. */
  readonly probability?: ArrayLike<number>;
  /** Default `Sky`. */
  readonly title?: string;
}

/**
 * Positions on the sky: right ascension increasing to the left, as seen from below, declination upward, to the same scale
 * at the middle of the field. Meant for fields up to some tens of degrees away from the poles.
 * @param catalogue with roles rightAscension and declination
 * @throws Error when a role is missing, TypeError for an unknown option, RangeError for probabilities of the wrong length
 * @example skyMap(field, { probability: membership.probability })
 */
export function skyMap(catalogue: Catalogue, options: SkyMapOptions = {}): Figure {
  checkOptions('skyMap', options, ['probability', 'title']);
  const { probability, title = 'Sky' } = options;
  const ra = unwrapped(catalogue.numbers('rightAscension'));
  const dec = catalogue.numbers('declination');
  const raRange = padded(finiteExtent(ra) ?? [0, 1], 0.03);
  const decRange = padded(finiteExtent(dec) ?? [0, 1], 0.03);
  const data = memberClasses('skyMap', catalogue.rowCount, probability).map((kind) =>
    pointTrace(kind, ra, dec, [4, 4], { catalogue, probability, xName: 'RA', yName: 'Dec', unit: '\u00b0' }),
  );
  const values = ticks(raRange[0], raRange[1], 7);
  const middle = ((decRange[0] + decRange[1]) / 2) * RADIANS_PER_DEGREE;
  const layout = {
    ...baseLayout(plotText(title), 600),
    xaxis: linearAxis('right ascension (\u00b0)', [raRange[1], raRange[0]], {
      scaleanchor: 'y',
      scaleratio: Math.round(Math.max(0.02, Math.cos(middle)) * 1e4) / 1e4,
      // Ascensions on both sides of 0 h are drawn as negative; the labels say what they are.
      ...(raRange[0] < 0
        ? {
            tickmode: 'array',
            tickvals: values,
            ticktext: values.map((v) => String(Number((v < 0 ? v + 360 : v).toFixed(6)))),
          }
        : {}),
    }),
    yaxis: linearAxis('declination (\u00b0)', decRange),
  };
  return new Figure(drawnAlike(data), layout, title);
}

/** Right ascensions of a field that lies across 0 h, moved below zero so that it holds together. */
function unwrapped(ra: Float64Array): Float64Array {
  const range = finiteExtent(ra);
  if (range === null || range[1] - range[0] <= 180) return ra;
  const moved = ra.map((v) => (v > 180 ? v - 360 : v));
  const movedRange = finiteExtent(moved) as [number, number];
  return movedRange[1] - movedRange[0] < range[1] - range[0] ? moved : ra;
}
