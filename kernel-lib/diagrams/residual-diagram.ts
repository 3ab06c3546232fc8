import { checkOptions } from '../quantity/options';
import { baseLayout, guideLine, linearAxis, padded } from './axes';
import { Figure, type FigureTrace } from './figure';
import { plotText } from './plot-text';
import { robustRange } from './robust-range';
import { finiteExtent, rounded } from './rounding';
import { drawnAlike, markerSize, PALETTE, scatterType, translucent } from './theme';

/** What `residualDiagram` draws. */
export interface Residuals {
  /** What the residuals are looked at against, shape (n), for example magnitude. */
  readonly x: ArrayLike<number>;
  /** Observed less model, shape (n). */
  readonly residual: ArrayLike<number>;
  /** Standard errors of the residuals, shape (n). */
  readonly error?: ArrayLike<number>;
}

/** Options of `residualDiagram`. */
export interface ResidualDiagramOptions {
  /** Horizontal axis with its unit. Default `x`. */
  readonly xTitle?: string;
  /** Vertical axis with its unit. Default `observed \u2212 model`. */
  readonly residualTitle?: string;
  /** Default `Residuals`. */
  readonly title?: string;
}

/** Error bars are drawn up to this many points; beyond they would hide them. */
const BARRED_POINTS = 400;

/**
 * Residuals against a quantity, with the line of no residual, and a running median with the band that holds 68 % of the
 * stars about it, so that a trend or a growing scatter shows.
 * @throws TypeError for an unknown option, RangeError when lengths differ
 * @example residualDiagram({ x: magnitude, residual, error }, { xTitle: 'V (mag)', residualTitle: '\u0394(B-V) (mag)' })
 */
export function residualDiagram(residuals: Residuals, options: ResidualDiagramOptions = {}): Figure {
  checkOptions('residualDiagram', options, ['xTitle', 'residualTitle', 'title']);
  const { xTitle = 'x', residualTitle = 'observed \u2212 model', title = 'Residuals' } = options;
  const { x, residual, error } = residuals;
  if (x.length !== residual.length || (error && error.length !== x.length)) {
    throw new RangeError(
      `residualDiagram: x has ${x.length} values, residual ${residual.length}${error ? `, error ${error.length}` : ''}; give one each a star.`,
    );
  }
  const n = x.length;
  const data: FigureTrace[] = [];
  const running = runningSpread(x, residual);
  if (running.x.length > 1) data.push(...spreadTraces(running));
  data.push({
    type: scatterType(n),
    mode: 'markers',
    name: `stars (${n})`,
    x: rounded(x, 4),
    y: rounded(residual, 5),
    ...(error && n <= BARRED_POINTS
      ? {
          error_y: {
            type: 'data',
            array: rounded(error, 5),
            thickness: 1,
            width: 0,
            color: translucent(PALETTE.azure, 0.45),
          },
        }
      : {}),
    marker: { color: PALETTE.azure, size: markerSize(n), opacity: 0.75 },
  });
  const high = Math.max(...(robustRange(residual, null, n > 200 ? 0.005 : 0) ?? [1, 1]).map(Math.abs)) || 1;
  const layout = {
    ...baseLayout(plotText(title), 400),
    xaxis: linearAxis(plotText(xTitle), padded(finiteExtent(x) ?? [0, 1], 0.03)),
    yaxis: linearAxis(plotText(residualTitle), [-1.1 * high, 1.1 * high]),
    shapes: [guideLine('y', 0, 'solid')],
  };
  return new Figure(drawnAlike(data), layout, title);
}

interface Spread {
  readonly x: number[];
  readonly median: number[];
  readonly low: number[];
  readonly high: number[];
}

/** Median and 16-84 % of the residuals in groups of neighbours in x: at most 20 groups of at least 25 stars. */
function runningSpread(x: ArrayLike<number>, residual: ArrayLike<number>): Spread {
  const order = Array.from({ length: x.length }, (_, i) => i)
    .filter((i) => Number.isFinite(x[i]) && Number.isFinite(residual[i]))
    .sort((a, b) => x[a] - x[b]);
  const groups = Math.min(20, Math.floor(order.length / 25));
  const spread: Spread = { x: [], median: [], low: [], high: [] };
  for (let g = 0; g < groups; g++) {
    const rows = order.slice(Math.floor((g * order.length) / groups), Math.floor(((g + 1) * order.length) / groups));
    const middle = robustRange(x, rows, 0.5) as [number, number];
    const centre = robustRange(residual, rows, 0.5) as [number, number];
    const [low, high] = robustRange(residual, rows, 0.158655) as [number, number];
    spread.x.push(middle[0]);
    spread.median.push(centre[0]);
    spread.low.push(low);
    spread.high.push(high);
  }
  return spread;
}

function spreadTraces(spread: Spread): FigureTrace[] {
  return [
    {
      type: 'scatter',
      mode: 'lines',
      name: '68 % of the stars',
      x: rounded([...spread.x, ...[...spread.x].reverse()], 4),
      y: rounded([...spread.high, ...[...spread.low].reverse()], 5),
      fill: 'toself',
      fillcolor: translucent(PALETTE.amber, 0.22),
      line: { width: 0, color: PALETTE.amber },
      hoverinfo: 'skip',
    },
    {
      type: 'scatter',
      mode: 'lines',
      name: 'running median',
      x: rounded(spread.x, 4),
      y: rounded(spread.median, 5),
      line: { color: PALETTE.amber, width: 2.5 },
    },
  ];
}
