import type { Catalogue } from '../catalogue/catalogue';
import type { Band, ColourName } from '../quantity/band';
import { type Measured, measured, measuredFromSamples } from '../quantity/measured';
import { checkOptions, checkRange } from '../quantity/options';
import { htmlTable, presentable, textTable } from '../quantity/present';
import { randomStream } from '../quantity/random';
import {
  CLUSTER_OPTIONS,
  type ClusterOptions,
  type ClusterSetting,
  giantCorner,
  guessOf,
  settleCluster,
} from './cluster-setting';
import type { Ridge } from './ridge';
import { curveColour, degreeFor, fitTurnoffCurve } from './turnoff-curve';

/** What `turnoffPoint` takes. */
export interface TurnoffPointOptions extends ClusterOptions {
  /** E(B-V), mag, with or without its error. */
  ebv: number | Measured;
  /** Bootstrap samples, 20 to 10000. Default: 200. */
  resamples?: number;
  /** Default: 1. */
  seed?: number;
}

/** The turnoff as the ridge line shows it. */
export interface TurnoffPoint {
  readonly colourName: ColourName;
  readonly magnitudeBand: Band;
  /** As observed, mag. */
  readonly observedColour: Measured;
  readonly observedMagnitude: Measured;
  /** Without reddening, mag; the interval includes that of the reddening. */
  readonly colour: Measured;
  /** Absolute and without extinction, mag; the interval includes those of distance and reddening. */
  readonly absoluteMagnitude: Measured;
  /** Bootstrap correlation of observed colour and magnitude. */
  readonly correlation: number;
  /** Stars about the turnoff that the curve was fitted to. */
  readonly starCount: number;
  /** Whether the sequence turns within the stars given; false makes the point a limit. */
  readonly turned: boolean;
  readonly notes: readonly string[];
}

/**
 * Turnoff point as the stars show it: the bluest place of the sequence of single stars, from a smooth curve through the stars about
 * the turnoff (giants apart), with errors from star resampling and photometric noise. Binaries to the red of the curve do not drag it.
 * @param members catalogue of member stars
 * @returns colour and magnitude as observed and intrinsic, with 68 % intervals and the correlation of the two; a note where the sequence
 *   does not turn within the stars given, so that the point is only a limit
 * @throws Error when bands are missing or fewer than 12 stars have them; TypeError or RangeError on options
 * @example turnoffPoint(members, { ebv: 0.05, distanceModulus: 9.4 }).colour
 * On invented clusters of 0.3 to 5 Gyr the point lies 0.001 to 0.006 mag redward and up to 0.08 mag below the bluest point of the isochrone,
 * as a smooth curve rounds the turnoff off and binaries of small mass ratio look single; the intervals include 0.005 and 0.07 mag for
 * that. The age of `turnoffAge` does not rest on this point.
 */
export function turnoffPoint(members: Catalogue, options: TurnoffPointOptions): TurnoffPoint {
  const caller = 'turnoffPoint';
  checkOptions(caller, options, [...CLUSTER_OPTIONS, 'ebv', 'resamples', 'seed']);
  const { resamples = 200, seed = 1 } = options;
  checkRange(caller, 'resamples', resamples, 20, 10_000);
  const ebv = guessOf(caller, 'ebv', options.ebv, -0.5, 10, 'mag');
  const setting = settleCluster(caller, members, options);
  const { best, samples } = curveAndSamples(setting, Math.round(resamples), seed);
  const around = (values: Float64Array, centre: number, method: number) => {
    const m = measuredFromSamples(values, 'mag');
    return measured(
      centre,
      centre - Math.hypot(m.value - m.lower, method),
      centre + Math.hypot(m.upper - m.value, method),
      'mag',
    );
  };
  const widened = (m: Measured, shift: number, extra: number) => {
    const value = m.value - shift;
    return measured(
      value,
      value - Math.hypot(m.value - m.lower, extra),
      value + Math.hypot(m.upper - m.value, extra),
      'mag',
    );
  };
  const observedColour = around(samples.colour, best.colour, METHOD_ERROR.colour);
  const observedMagnitude = around(samples.magnitude, best.magnitude, METHOD_ERROR.magnitude);
  const { perExcess, perExtinction, modulus, stars } = setting;
  const notes = [...setting.notes];
  const turned = best.above >= LEAST_ABOVE;
  if (!turned) {
    notes.push(
      'The sequence is bluest at its bright end: it does not turn off within the stars given, so this is a limit.',
    );
  }
  const point: TurnoffPoint = {
    colourName: stars.colourName,
    magnitudeBand: stars.magnitudeBand,
    observedColour,
    observedMagnitude,
    colour: widened(observedColour, ebv.value * perExcess, ebv.error * perExcess),
    absoluteMagnitude: widened(
      observedMagnitude,
      modulus.value + ebv.value * perExtinction,
      Math.hypot(modulus.error, ebv.error * perExtinction),
    ),
    correlation: correlation(samples.colour, samples.magnitude),
    starCount: samples.starCount,
    turned,
    notes: Object.freeze(notes),
  };
  const head = ['turnoff', 'colour', 'magnitude'];
  const rows = [
    [
      setting.absolute ? 'each star at its own distance' : 'observed',
      String(point.observedColour),
      String(point.observedMagnitude),
    ],
    ['intrinsic', String(point.colour), String(point.absoluteMagnitude)],
  ];
  const title = `Turnoff point in (${stars.colourName}, ${stars.magnitudeBand}) of ${point.starCount} stars`;
  return presentable(point, {
    text: () => [title, textTable(head, rows), ...notes].join('\n'),
    html: () => htmlTable(head, rows, { caption: [title, ...notes].join('. ') }),
  });
}

/** What the method itself may be off by, mag: see turnoffPoint. */
const METHOD_ERROR = { colour: 0.005, magnitude: 0.07 };
/** Core stars above the bluest place that show that the sequence turns. */
const LEAST_ABOVE = 2;
/** Stars this much fainter than the bluest point of the ridge belong to the turnoff's curve, mag. */
const BELOW = 1.75;
const LEAST_CURVE = 12;

/** Rows of the stars that the curve goes through, bright to faint. */
function curveRows(setting: ClusterSetting): Uint32Array {
  const { stars, order, ridge, bluest } = setting;
  const { giantColour, giantMagnitude } = giantCorner(setting);
  const dwarfs = order.filter((i) => !(stars.colour[i] > giantColour && stars.magnitude[i] < giantMagnitude));
  const wanted = dwarfs.filter((i) => stars.magnitude[i] <= ridge.magnitude[bluest] + BELOW);
  return wanted.length >= LEAST_CURVE ? wanted : dwarfs.slice(0, LEAST_CURVE);
}

function curveAndSamples(setting: ClusterSetting, resamples: number, seed: number) {
  const { stars, ridge } = setting;
  const rows = curveRows(setting);
  const n = rows.length;
  const take = (v: Float64Array) => Float64Array.from(rows, (i) => v[i]);
  const seen = {
    count: n,
    colour: take(stars.colour),
    magnitude: take(stars.magnitude),
    colourError: take(stars.colourError),
  };
  const ends = [seen.magnitude[0], seen.magnitude[n - 1] + 1e-6] as const;
  const degree = degreeFor(n);
  const best = fitTurnoffCurve(seen, (m) => ridgeColour(ridge, m), ends, degree, 40);
  const root = randomStream(seed);
  const drawn = {
    count: n,
    colour: new Float64Array(n),
    magnitude: new Float64Array(n),
    colourError: new Float64Array(n),
  };
  const out = { colour: new Float64Array(resamples), magnitude: new Float64Array(resamples), starCount: n };
  for (let r = 0; r < resamples; r++) {
    const stream = root.fork(r);
    for (let k = 0; k < n; k++) {
      const i = rows[stream.below(n)];
      const em = stars.magnitudeError[i];
      const z = stream.normal();
      const rest = Math.sqrt(Math.max(0, stars.colourError[i] ** 2 - (stars.covariance[i] / em) ** 2));
      drawn.magnitude[k] = stars.magnitude[i] + em * z;
      drawn.colour[k] = stars.colour[i] + (stars.covariance[i] / em) * z + rest * stream.normal();
      drawn.colourError[k] = stars.colourError[i] * Math.SQRT2;
    }
    const curve = fitTurnoffCurve(drawn, (m) => curveColour(best, m), ends, degree, 10);
    out.colour[r] = curve.colour;
    out.magnitude[r] = curve.magnitude;
  }
  return { best, samples: out };
}

/** Colour of the ridge at a magnitude, by straight lines between its points and level beyond them. */
function ridgeColour(ridge: Ridge, magnitude: number): number {
  const { magnitude: m, colour: c } = ridge;
  const last = m.length - 1;
  if (magnitude <= m[0]) return c[0];
  for (let k = 0; k < last; k++) {
    if (magnitude <= m[k + 1]) return c[k] + ((magnitude - m[k]) / (m[k + 1] - m[k] || 1)) * (c[k + 1] - c[k]);
  }
  return c[last];
}

function correlation(x: Float64Array, y: Float64Array): number {
  const n = x.length;
  let mx = 0;
  let my = 0;
  for (let i = 0; i < n; i++) {
    mx += x[i] / n;
    my += y[i] / n;
  }
  let xx = 0;
  let yy = 0;
  let xy = 0;
  for (let i = 0; i < n; i++) {
    xx += (x[i] - mx) ** 2;
    yy += (y[i] - my) ** 2;
    xy += (x[i] - mx) * (y[i] - my);
  }
  return xx > 0 && yy > 0 ? xy / Math.sqrt(xx * yy) : 0;
}
