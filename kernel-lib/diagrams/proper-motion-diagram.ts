import type { Catalogue } from '../catalogue/catalogue';
import { checkOptions } from '../quantity/options';
import { baseLayout, guideLine, linearAxis, padded } from './axes';
import { Figure } from './figure';
import { memberClasses } from './member-classes';
import { plotText } from './plot-text';
import { optionalNumbers, pointTrace } from './points';
import { robustRange } from './robust-range';
import { drawnAlike } from './theme';

/** Options of `properMotionDiagram`. */
export interface ProperMotionDiagramOptions {
  /** Membership probability of each row, shape (n): stars are told apart by it. Default: all alike. */
  readonly probability?: ArrayLike<number>;
  /** Mean motion of the cluster, mas/yr, marked by crossing lines. */
  readonly centre?: { readonly ra: number; readonly dec: number };
  /** Half the width of the picture, mas/yr. Default: holds 98 % of the stars. */
  readonly halfWidth?: number;
  /** Default `Proper motions`. */
  readonly title?: string;
}

/**
 * Proper motions: in right ascension (with the factor cos declination) to the right, in declination upward, both to the
 * same scale, so that a cluster is a clump.
 * @param catalogue with roles properMotionRa and properMotionDec
 * @throws Error when a role is missing, TypeError for an unknown option, RangeError for probabilities of the wrong length
 * @example properMotionDiagram(field, { probability: membership.probability })
 */
export function properMotionDiagram(catalogue: Catalogue, options: ProperMotionDiagramOptions = {}): Figure {
  checkOptions('properMotionDiagram', options, ['probability', 'centre', 'halfWidth', 'title']);
  const { probability, centre, halfWidth, title = 'Proper motions' } = options;
  const x = catalogue.numbers('properMotionRa');
  const y = catalogue.numbers('properMotionDec');
  const classes = memberClasses('properMotionDiagram', catalogue.rowCount, probability);
  const [xRange, yRange] = squareRanges(x, y, centre, halfWidth);
  const data = classes.map((kind) =>
    pointTrace(kind, x, y, [3, 3], {
      catalogue,
      probability,
      xError: optionalNumbers(catalogue, 'properMotionRa.error'),
      yError: optionalNumbers(catalogue, 'properMotionDec.error'),
      xName: '\u03bc<sub>\u03b1*</sub>',
      yName: '\u03bc<sub>\u03b4</sub>',
      unit: 'mas/yr',
    }),
  );
  const layout = {
    ...baseLayout(plotText(title), 600),
    xaxis: linearAxis('\u03bc<sub>\u03b1*</sub> (mas/yr)', xRange, { scaleanchor: 'y' }),
    yaxis: linearAxis('\u03bc<sub>\u03b4</sub> (mas/yr)', yRange),
    shapes: centre ? [guideLine('x', centre.ra), guideLine('y', centre.dec)] : [],
  };
  return new Figure(drawnAlike(data), layout, title);
}

function squareRanges(
  x: Float64Array,
  y: Float64Array,
  centre: { readonly ra: number; readonly dec: number } | undefined,
  halfWidth: number | undefined,
): [[number, number], [number, number]] {
  const xs = padded(robustRange(x, null, 0.01) ?? [-1, 1]);
  const ys = padded(robustRange(y, null, 0.01) ?? [-1, 1]);
  const half = halfWidth ?? Math.max(xs[1] - xs[0], ys[1] - ys[0]) / 2;
  const inside = (v: number, range: [number, number]) => v > range[0] && v < range[1];
  // The whole field if the cluster lies in it, so that it is seen against the field; else about the cluster.
  const useCentre =
    centre !== undefined && (halfWidth !== undefined || !inside(centre.ra, xs) || !inside(centre.dec, ys));
  const middle = useCentre && centre ? [centre.ra, centre.dec] : [(xs[0] + xs[1]) / 2, (ys[0] + ys[1]) / 2];
  return [
    [middle[0] - half, middle[0] + half],
    [middle[1] - half, middle[1] + half],
  ];
}
