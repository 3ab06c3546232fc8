import type { Catalogue } from '../catalogue/catalogue';
import { zeroAge } from '../models/zero-age';
import { SOLAR_TEMPERATURE } from '../quantity/constants';
import { checkOptions } from '../quantity/options';
import { STAR_COLUMNS } from '../stars/columns';
import { EVOLUTIONARY_GROUPS, type EvolutionaryGroup, evolutionaryGroups } from '../stars/evolutionary-group';
import { ageLabel } from './age-label';
import { baseLayout, logAxis } from './axes';
import { brokenAt, curveTrace } from './curve';
import { crossingRadii, equalRadii, type HrView } from './equal-radii';
import { Figure, type FigureTrace } from './figure';
import { plotText } from './plot-text';
import { axisKeeper } from './points';
import { finiteExtent, pick, significant } from './rounding';
import { spectralAxis, spectralBoundaries } from './spectral-axis';
import { drawnAlike, GUIDE, markerSize, PALETTE, scatterType } from './theme';

/** A curve on the HR diagram; an isochrone of the models is one. */
export interface HrCurve {
  /** log10 of K, shape (n), in the order in which the points are joined. */
  readonly logTeff: ArrayLike<number>;
  /** log10 of solar luminosities, shape (n). */
  readonly logL: ArrayLike<number>;
  /** Places at which a new piece of the curve starts. */
  readonly breaks?: ArrayLike<number>;
  /** log10 of the age in years, for the name in the legend. */
  readonly logAge?: number;
  /** Name in the legend. Default: the age. */
  readonly label?: string;
}

/** Options of `hrDiagram`. */
export interface HrDiagramOptions {
  /** Turnoff point: marked, and the stars about it named. */
  readonly turnoff?: { readonly logTeff: number; readonly logL: number };
  /** Curves over the stars, such as isochrones. */
  readonly isochrones?: readonly HrCurve[];
  /** [Fe/H] of the zero-age main sequence, dex, -2.3 to 0.2. Default 0. */
  readonly metallicity?: number;
  /** Whether the zero-age main sequence (Tout et al. 1996) is drawn. Default true. */
  readonly zeroAge?: boolean;
  /** Radii, solar, whose lines are drawn; [] for none. Default: every power of ten that crosses the picture. */
  readonly radii?: readonly number[];
  /** Whether the Sun's place is marked. Default true. */
  readonly sun?: boolean;
  /** Whether spectral classes stand along the top. Default true. */
  readonly spectralClasses?: boolean;
  /** Whether stars are told apart by evolutionary group. Default true. */
  readonly groups?: boolean;
  /** Default `Hertzsprung-Russell diagram`. */
  readonly title?: string;
}

const OPTIONS = [
  'turnoff',
  'isochrones',
  'metallicity',
  'zeroAge',
  'radii',
  'sun',
  'spectralClasses',
  'groups',
  'title',
];

/** Symbol and colour of each group: either alone tells them apart. */
const LOOKS: Readonly<Record<EvolutionaryGroup, { readonly color: string; readonly symbol: string }>> = {
  'main sequence': { color: PALETTE.azure, symbol: 'circle' },
  turnoff: { color: PALETTE.amber, symbol: 'diamond' },
  subgiants: { color: PALETTE.teal, symbol: 'triangle-up' },
  giants: { color: PALETTE.crimson, symbol: 'square' },
  supergiants: { color: PALETTE.orchid, symbol: 'star' },
  'white dwarfs': { color: PALETTE.slate, symbol: 'triangle-down' },
  other: { color: PALETTE.slate, symbol: 'x-thin-open' },
};

/** Above this many stars the hover boxes leave out name, radius and class, to keep notebooks small. */
const NAMED_STARS = 3000;

/**
 * Hertzsprung-Russell diagram: temperature from hot to cool and luminosity upward, both logarithmic, spectral classes of
 * dwarfs along the top, lines of equal radius, the zero-age main sequence, the Sun, and the stars by evolutionary group;
 * resting on a star shows its values with their errors.
 * @param stars   a catalogue with log_teff and log_l, as physicalProperties makes it
 * @param options see HrDiagramOptions
 * @throws Error when the columns are missing or no star has a place, TypeError for an unknown option
 * @example hrDiagram(physicalProperties(members, { distance: 180, ebv: 0.03 }))
 */
export function hrDiagram(stars: Catalogue, options: HrDiagramOptions = {}): Figure {
  const caller = 'hrDiagram';
  checkOptions(caller, options, OPTIONS);
  const { title = 'Hertzsprung-Russell diagram', isochrones = [], metallicity = 0, sun = true, turnoff } = options;
  for (const name of [STAR_COLUMNS.logTeff, STAR_COLUMNS.logL]) {
    if (!stars.has(name))
      throw new Error(`${caller}: ${stars.source} has no column ${name}; call physicalProperties first.`);
  }
  const view = viewOf(caller, stars, sun);
  const lines = equalRadii(options.radii ?? crossingRadii(view), view);
  const data: FigureTrace[] = [];
  if (lines.trace.x && (lines.trace.x as unknown[]).length > 0) data.push(lines.trace);
  if (options.zeroAge !== false) data.push(zeroAgeTrace(metallicity, view));
  data.push(...starTraces(stars, options));
  isochrones.forEach((curve, k) => {
    data.push(isochroneTrace(curve, k));
  });
  if (sun) data.push(markTrace('Sun', Math.log10(SOLAR_TEMPERATURE), 0, 'circle-open-dot', PALETTE.amber));
  if (turnoff) data.push(markTrace('turnoff point', turnoff.logTeff, turnoff.logL, 'diamond-open', PALETTE.amber));
  const classes = options.spectralClasses !== false;
  if (classes) data.push(axisKeeper('x2', 'y'));
  const base = baseLayout(plotText(title), 640);
  const layout = {
    ...base,
    ...(classes ? { margin: { ...(base['margin'] as object), t: 96 }, xaxis2: spectralAxis(view) } : {}),
    xaxis: logAxis('effective temperature (K)', [view.hot, view.cool]),
    yaxis: logAxis('luminosity (L\u2609)', [view.faint, view.bright]),
    shapes: classes ? spectralBoundaries(view) : [],
    annotations: lines.labels,
  };
  return new Figure(drawnAlike(data), layout, title);
}

/**
 * Room for all stars that have a place, and for the Sun: at least a factor 2 in temperature and 100 in luminosity. Stars
 * beyond 2000 to 120,000 K do not widen it.
 */
function viewOf(caller: string, stars: Catalogue, sun: boolean): HrView {
  const placed = (values: Float64Array, other: Float64Array) => values.filter((v, i) => Number.isFinite(v + other[i]));
  const t = stars.numbers(STAR_COLUMNS.logTeff);
  const l = stars.numbers(STAR_COLUMNS.logL);
  const within = (logTeff: number) => logTeff > Math.log10(2000) && logTeff < Math.log10(120_000);
  const sunT = sun ? [Math.log10(SOLAR_TEMPERATURE)] : [];
  const temperatures = finiteExtent(placed(t, l).filter(within), sunT);
  const luminosities = finiteExtent(placed(l, t), sun ? [0] : []);
  if (finiteExtent(placed(t, l)) === null || temperatures === null || luminosities === null) {
    throw new Error(
      `${caller}: none of the ${stars.rowCount} stars of ${stars.source} has both temperature and luminosity.`,
    );
  }
  const widen = ([low, high]: [number, number], least: number, pad: number): [number, number] => {
    const short = Math.max(0, least - (high - low)) / 2;
    return [low - short - pad, high + short + pad];
  };
  const [cool, hot] = widen(temperatures, 0.3, 0.03);
  const [faint, bright] = widen(luminosities, 2, 0.35);
  return { hot: 10 ** hot, cool: 10 ** cool, faint: 10 ** faint, bright: 10 ** bright };
}

function zeroAgeTrace(metallicity: number, view: HrView): FigureTrace {
  const mass = Float64Array.from({ length: 120 }, (_, i) => 10 ** (-1 + (i * 3) / 119));
  const line = zeroAge({ mass, metallicity });
  const inside = Array.from(mass.keys()).filter(
    (i) => line.luminosity[i] > view.faint / 3 && line.luminosity[i] < view.bright * 3,
  );
  return {
    type: 'scatter',
    mode: 'lines',
    name: 'zero-age main sequence',
    x: significant(pick(line.temperature, inside), 5),
    y: significant(pick(line.luminosity, inside), 5),
    line: { color: GUIDE, width: 2.5 },
    hoverinfo: 'skip',
  };
}

function starTraces(stars: Catalogue, options: HrDiagramOptions): FigureTrace[] {
  if (options.groups === false) {
    const rows = Uint32Array.from({ length: stars.rowCount }, (_, i) => i);
    return [starTrace(stars, rows, 'stars', LOOKS['main sequence'])];
  }
  const { turnoff } = options;
  const grouped = stars.has(STAR_COLUMNS.group) && !turnoff ? stars : evolutionaryGroups(stars, { turnoff });
  const groups = grouped.values(STAR_COLUMNS.group);
  const traces: FigureTrace[] = [];
  for (const group of EVOLUTIONARY_GROUPS) {
    const rows: number[] = [];
    for (let i = 0; i < groups.length; i++) if (groups[i] === group) rows.push(i);
    if (rows.length > 0) traces.push(starTrace(stars, Uint32Array.from(rows), group, LOOKS[group]));
  }
  return traces;
}

function starTrace(
  stars: Catalogue,
  rows: Uint32Array,
  name: string,
  look: { readonly color: string; readonly symbol: string },
): FigureTrace {
  const n = rows.length;
  const temperature = pick(stars.numbers(STAR_COLUMNS.logTeff), rows).map((v) => 10 ** v);
  const luminosity = pick(stars.numbers(STAR_COLUMNS.logL), rows).map((v) => 10 ** v);
  const hover = hoverOf(stars, rows, temperature, luminosity);
  return {
    type: scatterType(n),
    mode: 'markers',
    name: `${name} (${n})`,
    x: significant(temperature, 4),
    y: significant(luminosity, 4),
    ...hover,
    marker: {
      color: look.color,
      symbol: look.symbol,
      size: markerSize(n) + (look.symbol === 'circle' ? 0 : 1),
      opacity: 0.85,
      ...(look.symbol.endsWith('-open') ? { line: { width: 1.5, color: look.color } } : {}),
    },
  };
}

/** Template and data of the hover boxes: only what the catalogue has. */
function hoverOf(stars: Catalogue, rows: Uint32Array, temperature: Float64Array, luminosity: Float64Array): object {
  const fields: (number | string | null)[][] = [];
  const field = (values: (number | string | null)[], format = ''): string => {
    fields.push(values);
    return `%{customdata[${fields.length - 1}]${format}}`;
  };
  const named = rows.length <= NAMED_STARS;
  const numbers = (column: string) => (stars.has(column) ? pick(stars.numbers(column), rows) : null);
  const plusMinus = (values: Float64Array | null, scale: Float64Array | null, format = ''): string => {
    if (values === null || !values.some(Number.isFinite)) return '';
    const errors = scale === null ? values : values.map((e, i) => e * Math.LN10 * scale[i]);
    return ` \u00b1 ${field(significant(errors, 2), format)}`;
  };
  const lines: string[] = [];
  if (named && stars.has('identifier')) {
    const names = stars.values('identifier');
    lines.push(`<b>${field(Array.from(rows, (r) => plotText(names[r])))}</b>`);
  }
  lines.push(`T = %{x:,.0f}${plusMinus(numbers(STAR_COLUMNS.logTeffError), temperature, ':,.0f')} K`);
  lines.push(`L = %{y}${plusMinus(numbers(STAR_COLUMNS.logLError), luminosity)} L\u2609`);
  const radius = named ? numbers(STAR_COLUMNS.radius) : null;
  if (radius !== null) {
    const value = field(significant(radius, 4));
    lines.push(`R = ${value}${plusMinus(numbers(STAR_COLUMNS.radiusError), null)} R\u2609`);
  }
  if (named && stars.has(STAR_COLUMNS.spectralClass)) {
    const classes = stars.values(STAR_COLUMNS.spectralClass);
    lines.push(`class ${field(Array.from(rows, (r) => plotText(classes[r])))}`);
  }
  return {
    customdata: Array.from(rows, (_, i) => fields.map((f) => f[i])),
    hovertemplate: `${lines.join('<br>')}<extra></extra>`,
  };
}

function isochroneTrace(curve: HrCurve, k: number): FigureTrace {
  const name = curve.label ?? (curve.logAge === undefined ? `curve ${k + 1}` : ageLabel(curve.logAge));
  const x = significant(
    Float64Array.from(curve.logTeff, (v) => 10 ** v),
    5,
  );
  const y = significant(
    Float64Array.from(curve.logL, (v) => 10 ** v),
    5,
  );
  return curveTrace(plotText(name), brokenAt(x, curve.breaks), brokenAt(y, curve.breaks), k);
}

function markTrace(name: string, logTeff: number, logL: number, symbol: string, color: string): FigureTrace {
  return {
    type: 'scatter',
    mode: 'markers',
    name,
    x: significant([10 ** logTeff], 5),
    y: significant([10 ** logL], 5),
    marker: { symbol, color, size: 15, line: { width: 2, color } },
    hovertemplate: `${name}<br>T = %{x:,.0f} K<br>L = %{y} L\u2609<extra></extra>`,
  };
}
