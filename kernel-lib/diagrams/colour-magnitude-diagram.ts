import { ticks } from 'd3-array';
import type { Catalogue } from '../catalogue/catalogue';
import { bandExtinction } from '../extinction/band-coefficients';
import type { Band, ColourName } from '../quantity/band';
import { bandsOfColour } from '../quantity/band';
import { checkOptions } from '../quantity/options';
import { observedColour, preferredColour, preferredMagnitude } from '../stars/observed-colour';
import { ageLabel } from './age-label';
import { baseLayout, linearAxis, padded } from './axes';
import { brokenAt, centralValue, curveTrace, markTrace, type NumberOrMeasured } from './curve';
import { Figure, type FigureTrace } from './figure';
import { memberClasses } from './member-classes';
import { plotText } from './plot-text';
import { axisKeeper, optionalNumbers, pointTrace } from './points';
import { robustRange } from './robust-range';
import { finiteExtent, rounded } from './rounding';
import { drawnAlike, PALETTE, translucent } from './theme';

/** A curve in a colour-magnitude diagram. */
export interface ColourMagnitudeCurve {
  /** mag, shape (n), in the order in which the points are joined; NaN breaks the curve. */
  readonly colour: ArrayLike<number>;
  /** mag, shape (n). */
  readonly magnitude: ArrayLike<number>;
  /** Places at which a new piece of the curve starts. */
  readonly breaks?: ArrayLike<number>;
  /** Name in the legend. */
  readonly label?: string;
}

/** An isochrone as the models make it: absolute magnitudes by band, without extinction. */
export interface IsochroneCurve {
  readonly logAge: number;
  readonly magnitudes: Readonly<Partial<Record<Band, ArrayLike<number>>>>;
  /** Places at which a new piece of the curve starts. */
  readonly breaks?: ArrayLike<number>;
  /** Name in the legend. Default: the age. */
  readonly label?: string;
}

/** Options of `colourMagnitudeDiagram`. */
export interface ColourMagnitudeDiagramOptions {
  /** Horizontal axis. Default: the best the catalogue has, BP-RP before B-V. */
  readonly colour?: ColourName;
  /** Vertical axis. Default: G with Gaia colours, else V. */
  readonly magnitude?: Band;
  /** Membership probability of each row, shape (n): stars are told apart by it. Default: all alike. */
  readonly probability?: ArrayLike<number>;
  /** Distance modulus without extinction, mag: adds an axis of absolute magnitude at the right and places isochrones. */
  readonly modulus?: NumberOrMeasured;
  /** E(B-V), mag: reddens isochrones and goes into the absolute magnitude. Default 0. */
  readonly ebv?: NumberOrMeasured;
  /** A(V) / E(B-V). Default 3.1. */
  readonly rV?: number;
  /** Isochrones from the models, moved to the cluster by modulus and ebv. */
  readonly isochrones?: readonly IsochroneCurve[];
  /** The main sequence's ridge line as observed. */
  readonly ridge?: ColourMagnitudeCurve;
  /** Other curves as observed. */
  readonly curves?: readonly ColourMagnitudeCurve[];
  /** Turnoff point as observed. */
  readonly turnoff?: { readonly colour: NumberOrMeasured; readonly magnitude: NumberOrMeasured };
  /** Default `Colour-magnitude diagram`. */
  readonly title?: string;
}

const OPTIONS = [
  'colour',
  'magnitude',
  'probability',
  'modulus',
  'ebv',
  'rV',
  'isochrones',
  'ridge',
  'curves',
  'turnoff',
  'title',
];

/**
 * Colour-magnitude diagram as observed: colour to the right, brighter upward.
 * @param catalogue with a colour (its own column, or the magnitudes of both bands) and a magnitude
 * @throws Error when the catalogue has no such colour or magnitude, or isochrones come without a modulus or a band
 * @throws TypeError for an unknown option, RangeError for probabilities of the wrong length
 * @example colourMagnitudeDiagram(members, { colour: 'B-V', modulus: 8.2, ebv: 0.05, isochrones: [isochrone({ logAge: 8.8 })] })
 */
export function colourMagnitudeDiagram(catalogue: Catalogue, options: ColourMagnitudeDiagramOptions = {}): Figure {
  const caller = 'colourMagnitudeDiagram';
  checkOptions(caller, options, OPTIONS);
  const { probability, ridge, turnoff, title = 'Colour-magnitude diagram' } = options;
  const { colour, band } = chooseAxes(caller, catalogue, options);
  const observed = observedColour(caller, catalogue, colour);
  const magnitude = catalogue.numbers(`magnitude.${band}`);
  const classes = memberClasses(caller, catalogue.rowCount, probability);
  const data: FigureTrace[] = classes.map((kind) =>
    pointTrace(kind, observed.values, magnitude, [3, 3], {
      catalogue,
      probability,
      xError: observed.errors,
      yError: optionalNumbers(catalogue, `magnitude.${band}.error`),
      xName: colour,
      yName: band,
      unit: 'mag',
    }),
  );
  const ranges = shownRanges(observed.values, magnitude, classes);
  const curves = [...placedIsochrones(caller, options, colour, band), ...(options.curves ?? [])];
  curves.forEach((curve, k) => {
    data.push(
      curveTrace(
        plotText(curve.label ?? `curve ${k + 1}`),
        brokenAt(rounded(curve.colour, 4), curve.breaks),
        brokenAt(rounded(curve.magnitude, 4), curve.breaks),
        k,
      ),
    );
  });
  if (ridge) data.push(ridgeTrace(ridge));
  const units = { x: colour, y: band };
  if (turnoff) data.push(markTrace('turnoff', turnoff.colour, turnoff.magnitude, PALETTE.amber, 'star', units));
  const layout: Record<string, unknown> = {
    ...baseLayout(plotText(title), 620),
    xaxis: linearAxis(`${colour} (mag)`, ranges.colour),
    yaxis: linearAxis(`${band} (mag)`, [ranges.magnitude[1], ranges.magnitude[0]]),
  };
  if (options.modulus !== undefined) {
    layout['yaxis2'] = absoluteAxis(band, ranges.magnitude, apparentShift(options, band));
    // Clear of the labels of the second axis.
    layout['legend'] = { ...(layout['legend'] as object), x: 1.09 };
    data.push(axisKeeper('x', 'y2'));
  }
  return new Figure(drawnAlike(data), layout, title);
}

function chooseAxes(
  caller: string,
  catalogue: Catalogue,
  options: ColourMagnitudeDiagramOptions,
): { colour: ColourName; band: Band } {
  const colour = options.colour ?? preferredColour(catalogue);
  if (colour === null) {
    throw new Error(
      `${caller}: ${catalogue.source} has no colour and no two magnitudes with known roles. Give roles when reading.`,
    );
  }
  bandsOfColour(colour);
  const band = options.magnitude ?? preferredMagnitude(catalogue, colour);
  if (band === null) {
    throw new Error(
      `${caller}: ${catalogue.source} has no magnitude to go with ${colour}. Give a role such as magnitude.V when reading.`,
    );
  }
  return { colour, band };
}

/** Distance modulus and extinction together: apparent less absolute magnitude. */
function apparentShift(options: ColourMagnitudeDiagramOptions, band: Band): number {
  const { modulus = 0, ebv = 0, rV = 3.1 } = options;
  return centralValue(modulus) + bandExtinction(band, { rV }) * rV * centralValue(ebv);
}

function placedIsochrones(
  caller: string,
  options: ColourMagnitudeDiagramOptions,
  colour: ColourName,
  band: Band,
): ColourMagnitudeCurve[] {
  if (!options.isochrones) return [];
  if (options.modulus === undefined) {
    throw new Error(
      `${caller}: isochrones are in absolute magnitudes; say how far the cluster is with modulus: ... (mag).`,
    );
  }
  const { blue, red } = bandsOfColour(colour);
  return options.isochrones.map((isochrone) => {
    const [b, r, m] = [blue, red, band].map((name) => {
      const magnitudes = isochrone.magnitudes[name];
      if (magnitudes) return { magnitudes, shift: apparentShift(options, name) };
      throw new Error(
        `${caller}: an isochrone has no ${name} magnitudes; compute it with bands: ['${blue}', '${red}', '${band}'].`,
      );
    });
    const n = m.magnitudes.length;
    return {
      label: isochrone.label ?? ageLabel(isochrone.logAge),
      breaks: isochrone.breaks,
      colour: Float64Array.from({ length: n }, (_, i) => b.magnitudes[i] + b.shift - r.magnitudes[i] - r.shift),
      magnitude: Float64Array.from({ length: n }, (_, i) => m.magnitudes[i] + m.shift),
    };
  });
}

function ridgeTrace(ridge: ColourMagnitudeCurve): FigureTrace {
  const line = { color: translucent(PALETTE.orchid, 0.9), width: 3 };
  return {
    type: 'scatter',
    mode: 'lines',
    name: plotText(ridge.label ?? 'ridge line'),
    x: rounded(ridge.colour, 4),
    y: rounded(ridge.magnitude, 4),
    line,
    hoverinfo: 'skip',
  };
}

/** The members' range if there are members, else that of the stars; a few outliers do not set it. */
function shownRanges(
  colour: Float64Array,
  magnitude: Float64Array,
  classes: readonly { rows: Uint32Array; background: boolean }[],
): { colour: [number, number]; magnitude: [number, number] } {
  const members = classes.filter((c) => !c.background).flatMap((c) => Array.from(c.rows));
  const both = (rows: readonly number[] | null) => {
    const kept = (rows ?? Array.from(colour.keys())).filter(
      (i) => Number.isFinite(colour[i]) && Number.isFinite(magnitude[i]),
    );
    const trim = kept.length > 200 ? 0.002 : 0;
    const range = (values: Float64Array) => robustRange(values, kept, trim);
    return { colour: range(colour), magnitude: range(magnitude) };
  };
  const all = both(null);
  const own = members.length > 0 ? both(members) : all;
  const union = (a: [number, number] | null, b: [number, number] | null, c: readonly number[]) =>
    finiteExtent(a ?? [], b ?? [], c) ?? [0, 1];
  const fieldMagnitudes = classes.some((c) => c.background) ? all.magnitude : null;
  return {
    colour: padded(union(own.colour, null, [])),
    magnitude: padded(union(own.magnitude, fieldMagnitudes, []), 0.04),
  };
}

function absoluteAxis(band: Band, range: readonly [number, number], shift: number): Readonly<Record<string, unknown>> {
  const values = ticks(range[0] - shift, range[1] - shift, 10);
  // The same axis with other labels, so that both move together when the reader zooms.
  return linearAxis(`M<sub>${band}</sub> (mag)`, [range[1], range[0]], {
    overlaying: 'y',
    side: 'right',
    matches: 'y',
    showgrid: false,
    tickmode: 'array',
    tickvals: values.map((v) => Number((v + shift).toFixed(4))),
    ticktext: values.map((v) => String(v).replace('-', '\u2212')),
  });
}
