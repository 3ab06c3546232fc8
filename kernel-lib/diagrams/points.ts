import type { Catalogue } from '../catalogue/catalogue';
import type { FigureTrace } from './figure';
import type { MemberClass } from './member-classes';
import { plotText } from './plot-text';
import { pick, rounded } from './rounding';
import { markerSize, scatterType } from './theme';

/** Above this many points hover boxes leave out names and probabilities, to keep notebooks small. */
const NAMED_POINTS = 3000;

/** What the hover box of a point says beside the coordinates. */
export interface PointDetails {
  readonly catalogue?: Catalogue;
  readonly probability?: ArrayLike<number>;
  /** Standard errors along each axis, shape (rows of the catalogue). */
  readonly xError?: ArrayLike<number>;
  readonly yError?: ArrayLike<number>;
  readonly xName: string;
  readonly yName: string;
  readonly unit: string;
}

/**
 * Points of one class of stars, with a hover box that gives values with errors, the name and the probability.
 * @param decimals rounding of both coordinates
 */
export function pointTrace(
  kind: MemberClass,
  x: ArrayLike<number>,
  y: ArrayLike<number>,
  decimals: readonly [number, number],
  details: PointDetails,
): FigureTrace {
  const n = kind.rows.length;
  const named = n <= NAMED_POINTS;
  const size = markerSize(n) * (kind.background ? 0.7 : 1);
  const fields: (number | string | null)[][] = [];
  const lines: string[] = [];
  const field = (values: (number | string | null)[]): string => `%{customdata[${fields.push(values) - 1}]}`;
  if (named && details.catalogue?.has('identifier')) {
    const names = details.catalogue.values('identifier');
    lines.push(`<b>${field(Array.from(kind.rows, (r) => plotText(names[r])))}</b>`);
  }
  const error = (values: ArrayLike<number> | undefined, places: number): string =>
    named && hasNumbers(values, kind.rows)
      ? ` \u00b1 ${field(rounded(pick(values as ArrayLike<number>, kind.rows), places))}`
      : '';
  const unit = details.unit === '' ? '' : ` ${details.unit}`;
  lines.push(`${details.xName} %{x}${error(details.xError, decimals[0])}${unit}`);
  lines.push(`${details.yName} %{y}${error(details.yError, decimals[1])}${unit}`);
  if (named && details.probability) lines.push(`p = ${field(rounded(pick(details.probability, kind.rows), 2))}`);
  return {
    type: scatterType(n),
    mode: 'markers',
    name: kind.name,
    x: rounded(pick(x, kind.rows), decimals[0]),
    y: rounded(pick(y, kind.rows), decimals[1]),
    ...(fields.length > 0 ? { customdata: Array.from(kind.rows, (_, i) => fields.map((f) => f[i])) } : {}),
    hovertemplate: `${lines.join('<br>')}<extra></extra>`,
    marker: { color: kind.color, symbol: kind.symbol, size: Math.round(size * 10) / 10, opacity: kind.opacity },
  };
}

function hasNumbers(values: ArrayLike<number> | undefined, rows: Uint32Array): boolean {
  return values !== undefined && rows.some((r) => Number.isFinite(values[r]));
}

/** The values of a column by role if the catalogue has it, else undefined. */
export function optionalNumbers(catalogue: Catalogue, role: string): Float64Array | undefined {
  return catalogue.has(role) ? catalogue.numbers(role) : undefined;
}

/** A trace without points that makes Plotly draw an axis nothing else is drawn on. */
export function axisKeeper(xaxis: string, yaxis: string): FigureTrace {
  return { type: 'scatter', mode: 'markers', x: [null], y: [null], xaxis, yaxis, showlegend: false, hoverinfo: 'skip' };
}
