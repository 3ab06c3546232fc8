import { checkOptions } from '../quantity/options';
import { baseLayout, logAxis } from './axes';
import { curveTrace } from './curve';
import { Figure, type FigureTrace } from './figure';
import { plotText } from './plot-text';
import { finiteExtent, significant } from './rounding';
import { drawnAlike, markerSize, PALETTE, scatterType, translucent } from './theme';

/** Stars of known mass and luminosity. */
export interface MassLuminosityStars {
  /** Solar masses, shape (n). */
  readonly mass: ArrayLike<number>;
  /** Solar luminosities, shape (n). */
  readonly luminosity: ArrayLike<number>;
  /** Standard errors, shape (n). */
  readonly massError?: ArrayLike<number>;
  readonly luminosityError?: ArrayLike<number>;
  /** Names for the hover box, shape (n). */
  readonly name?: readonly (string | null)[];
}

/** A mass-luminosity relation drawn over the stars. */
export interface MassLuminosityCurve {
  readonly mass: ArrayLike<number>;
  readonly luminosity: ArrayLike<number>;
  readonly label?: string;
}

/** Options of `massLuminosityDiagram`. */
export interface MassLuminosityDiagramOptions {
  /** Relations, each a curve. */
  readonly curves?: readonly MassLuminosityCurve[];
  /** Default `Mass and luminosity`. */
  readonly title?: string;
}

/** Error bars are drawn up to this many stars; beyond they would hide them. */
const BARRED_STARS = 600;

/**
 * Luminosity against mass, both logarithmic, in solar units.
 * @throws TypeError for an unknown option, RangeError when lengths differ
 * @example massLuminosityDiagram({ mass, luminosity }, { curves: [{ mass: m, luminosity: fit, label: 'fit' }] })
 */
export function massLuminosityDiagram(stars: MassLuminosityStars, options: MassLuminosityDiagramOptions = {}): Figure {
  checkOptions('massLuminosityDiagram', options, ['curves', 'title']);
  const { curves = [], title = 'Mass and luminosity' } = options;
  const n = stars.mass.length;
  for (const [key, list] of Object.entries(stars)) {
    if (list && list.length !== n) {
      throw new RangeError(
        `massLuminosityDiagram: ${key} has ${list.length} entries for ${n} masses; give one a star.`,
      );
    }
  }
  const bars = (errors: ArrayLike<number> | undefined) =>
    errors && n <= BARRED_STARS
      ? { type: 'data', array: significant(errors, 3), thickness: 1, width: 0, color: translucent(PALETTE.azure, 0.45) }
      : undefined;
  const [ex, ey] = [bars(stars.massError), bars(stars.luminosityError)];
  const data: FigureTrace[] = [
    {
      type: scatterType(n),
      mode: 'markers',
      name: `stars (${n})`,
      x: significant(stars.mass, 5),
      y: significant(stars.luminosity, 4),
      ...(ex ? { error_x: ex } : {}),
      ...(ey ? { error_y: ey } : {}),
      ...(stars.name ? { customdata: stars.name.map(plotText) } : {}),
      hovertemplate: `${stars.name ? '<b>%{customdata}</b><br>' : ''}M = %{x} M\u2609<br>L = %{y} L\u2609<extra></extra>`,
      marker: { color: PALETTE.azure, size: markerSize(n), opacity: 0.8 },
    },
    ...curves.map((curve, k) =>
      curveTrace(
        plotText(curve.label ?? `curve ${k + 1}`),
        significant(curve.mass, 5),
        significant(curve.luminosity, 5),
        k,
      ),
    ),
  ];
  const layout = {
    ...baseLayout(plotText(title), 560),
    xaxis: logAxis('mass (M\u2609)', widened(stars.mass)),
    yaxis: logAxis('luminosity (L\u2609)', widened(stars.luminosity)),
  };
  return new Figure(drawnAlike(data), layout, title);
}

function widened(values: ArrayLike<number>): [number, number] {
  const range = finiteExtent(Array.from(values).filter((v) => v > 0)) ?? [0.1, 10];
  const factor = Math.max(1.1, (range[1] / range[0]) ** 0.05);
  return [range[0] / factor, range[1] * factor];
}
