import { ticks } from 'd3-array';
import { measuredFromSamples } from '../quantity/measured';
import { checkOptions, checkRange } from '../quantity/options';
import { baseLayout, linearAxis } from './axes';
import { Figure, type FigureTrace } from './figure';
import { plotText } from './plot-text';
import { robustRange } from './robust-range';
import { rounded } from './rounding';
import { GUIDE, PALETTE, translucent } from './theme';

/** Options of `cornerDiagram`. */
export interface CornerDiagramOptions {
  /** Unit of each parameter, by its name. */
  readonly units?: Readonly<Record<string, string>>;
  /** Known true values, by name: marked by lines. */
  readonly truth?: Readonly<Record<string, number>>;
  /** Bins along each axis, 8 to 100. Default 32. */
  readonly bins?: number;
  /** Default `Posterior`. */
  readonly title?: string;
}

/** Space between panels, as a part of the width. */
const GAP = 0.018;

/**
 * Every pair of parameters of a posterior: how samples lie in each pair, and along the diagonal how each one is spread,
 * with its median and 68 % interval.
 * @param samples parameter name to samples, each shape (n); 2 to 8 parameters
 * @throws TypeError for an unknown option, RangeError for fewer than 2 or more than 8 parameters or lists that differ in length
 * @example cornerDiagram({ logAge: fit.samples.logAge, ebv: fit.samples.ebv }, { units: { ebv: 'mag' } })
 */
export function cornerDiagram(
  samples: Readonly<Record<string, ArrayLike<number>>>,
  options: CornerDiagramOptions = {},
): Figure {
  const caller = 'cornerDiagram';
  checkOptions(caller, options, ['units', 'truth', 'bins', 'title']);
  const { units = {}, truth = {}, bins = 32, title = 'Posterior' } = options;
  const names = Object.keys(samples);
  checkRange(caller, 'number of parameters', names.length, 2, 8);
  checkRange(caller, 'bins', bins, 8, 100);
  const n = samples[names[0]].length;
  for (const name of names) {
    if (samples[name].length !== n) {
      throw new RangeError(
        `${caller}: ${name} has ${samples[name].length} samples, ${names[0]} has ${n}; give as many of each.`,
      );
    }
  }
  const ranges = names.map((name) => shownRange(samples[name], truth[name]));
  const panels = new CornerPanels(names, samples, units, truth, ranges, bins);
  const layout: Record<string, unknown> = {
    ...baseLayout(plotText(title), 160 + 150 * names.length),
    showlegend: false,
  };
  return new Figure(panels.data, Object.assign(layout, panels.layout), title);
}

function shownRange(samples: ArrayLike<number>, truth: number | undefined): [number, number] {
  const [low, high] = robustRange(samples, null, 0.002) ?? [0, 1];
  const range = truth === undefined ? [low, high] : [Math.min(low, truth), Math.max(high, truth)];
  const pad = (range[1] - range[0]) * 0.06 || 0.5;
  return [range[0] - pad, range[1] + pad];
}

class CornerPanels {
  readonly data: FigureTrace[] = [];
  readonly layout: Record<string, unknown> = {};
  readonly #shapes: object[] = [];
  readonly #notes: object[] = [];
  #panel = 0;

  constructor(
    readonly names: readonly string[],
    readonly samples: Readonly<Record<string, ArrayLike<number>>>,
    readonly units: Readonly<Record<string, string>>,
    readonly truth: Readonly<Record<string, number>>,
    readonly ranges: readonly [number, number][],
    readonly bins: number,
  ) {
    for (let row = 0; row < names.length; row++) for (let column = 0; column <= row; column++) this.#add(row, column);
    this.layout['shapes'] = this.#shapes;
    this.layout['annotations'] = this.#notes;
  }

  #add(row: number, column: number): void {
    const suffix = ++this.#panel === 1 ? '' : String(this.#panel);
    const [x, y] = [`x${suffix}`, `y${suffix}`];
    const cell = 1 / this.names.length;
    const last = this.names.length - 1;
    const title = (k: number) =>
      plotText(this.names[k]) + (this.units[this.names[k]] ? ` (${plotText(this.units[this.names[k]])})` : '');
    const bottom = row === last;
    const outer = column === 0 && row > 0;
    this.layout[`xaxis${suffix}`] = linearAxis(bottom ? title(column) : '', this.ranges[column], {
      ...panelTicks(this.ranges[column]),
      domain: [round(column * cell + GAP / 2), round((column + 1) * cell - GAP / 2)].map((v, i) =>
        i === 0 && column === 0 ? 0 : i === 1 && column === last ? 1 : v,
      ),
      anchor: y,
      showticklabels: bottom,
      showgrid: false,
    });
    const onDiagonal = row === column;
    this.layout[`yaxis${suffix}`] = linearAxis(outer ? title(row) : '', onDiagonal ? [0, 1.15] : this.ranges[row], {
      ...(onDiagonal ? { tickvals: [], tickmode: 'array' } : panelTicks(this.ranges[row])),
      domain: [round((last - row) * cell + GAP / 2), round((last - row + 1) * cell - GAP / 2)].map((v, i) =>
        i === 0 && row === last ? 0 : i === 1 && row === 0 ? 1 - 0.04 : v,
      ),
      anchor: x,
      showticklabels: outer,
      showgrid: false,
    });
    if (onDiagonal) this.#addHistogram(column, x, y);
    else this.#addDensity(row, column, x, y);
    this.#addTruth(row, column, x, y);
  }

  #addHistogram(k: number, xaxis: string, yaxis: string): void {
    const counts = new Float64Array(this.bins);
    const values = this.samples[this.names[k]];
    for (let i = 0; i < values.length; i++) {
      const at = binOf(values[i], this.ranges[k], this.bins);
      if (at >= 0) counts[at]++;
    }
    const highest = Math.max(1, ...counts);
    const step = (this.ranges[k][1] - this.ranges[k][0]) / this.bins;
    this.data.push({
      type: 'bar',
      name: plotText(this.names[k]),
      x: centresOf(this.ranges[k], this.bins),
      y: rounded(
        counts.map((c) => c / highest),
        3,
      ),
      width: step,
      marker: { color: PALETTE.azure, opacity: 0.7 },
      hoverinfo: 'x',
      xaxis,
      yaxis,
    });
    const summary = measuredFromSamples(values, this.units[this.names[k]] ?? '');
    for (const [value, dash] of [
      [summary.value, 'solid'],
      [summary.lower, 'dash'],
      [summary.upper, 'dash'],
    ] as const) {
      this.#shapes.push({
        type: 'line',
        xref: xaxis,
        yref: yaxis,
        x0: value,
        x1: value,
        y0: 0,
        y1: 1.04,
        line: { color: GUIDE, width: 1.2, dash },
      });
    }
    const middle = (this.ranges[k][0] + this.ranges[k][1]) / 2;
    const text = `${plotText(this.names[k])} = ${plotText(String(summary))}`;
    this.#notes.push({
      x: middle,
      y: 1.15,
      xref: xaxis,
      yref: yaxis,
      text,
      showarrow: false,
      yanchor: 'bottom',
      font: { size: 12 },
    });
  }

  #addDensity(row: number, column: number, xaxis: string, yaxis: string): void {
    const counts = Array.from({ length: this.bins }, () => new Array<number>(this.bins).fill(0));
    const [xs, ys] = [this.samples[this.names[column]], this.samples[this.names[row]]];
    for (let i = 0; i < xs.length; i++) {
      const [c, r] = [binOf(xs[i], this.ranges[column], this.bins), binOf(ys[i], this.ranges[row], this.bins)];
      if (c >= 0 && r >= 0) counts[r][c]++;
    }
    this.data.push({
      type: 'heatmap',
      name: `${plotText(this.names[row])} against ${plotText(this.names[column])}`,
      x: centresOf(this.ranges[column], this.bins),
      y: centresOf(this.ranges[row], this.bins),
      z: counts.map((line) => line.map((count) => (count === 0 ? null : count))),
      colorscale: [
        [0, translucent(PALETTE.azure, 0.12)],
        [1, translucent(PALETTE.azure, 1)],
      ],
      showscale: false,
      hoverinfo: 'x+y',
      xaxis,
      yaxis,
    });
  }

  #addTruth(row: number, column: number, xref: string, yref: string): void {
    const line = { color: PALETTE.crimson, width: 1.5, dash: 'dot' };
    const [x, y] = [this.truth[this.names[column]], this.truth[this.names[row]]];
    const [xs, ys] = [this.ranges[column], row === column ? [0, 1.15] : this.ranges[row]];
    if (x !== undefined) this.#shapes.push({ type: 'line', xref, yref, x0: x, x1: x, y0: ys[0], y1: ys[1], line });
    if (y !== undefined && row !== column)
      this.#shapes.push({ type: 'line', xref, yref, x0: xs[0], x1: xs[1], y0: y, y1: y, line });
  }
}

function panelTicks(range: readonly [number, number]): Readonly<Record<string, unknown>> {
  const tickvals = ticks(range[0], range[1], 3).map((v) => v + 0);
  return { tickmode: 'array', tickvals, ticktext: tickvals.map((v) => String(v).replace('-', '\u2212')) };
}

function binOf(value: number, range: readonly [number, number], bins: number): number {
  const at = Math.floor(((value - range[0]) / (range[1] - range[0])) * bins);
  return at >= 0 && at < bins ? at : -1;
}

function centresOf(range: readonly [number, number], bins: number): number[] {
  const step = (range[1] - range[0]) / bins;
  return Array.from({ length: bins }, (_, i) => Number((range[0] + (i + 0.5) * step).toPrecision(8)));
}

function round(value: number): number {
  return Math.round(value * 1e4) / 1e4;
}
