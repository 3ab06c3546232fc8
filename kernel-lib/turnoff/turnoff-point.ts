import type { Catalogue } from '../catalogue/catalogue';
import type { Band, ColourName } from '../quantity/band';
import { type Measured, measured, measuredFromSamples } from '../quantity/measured';
import { checkOptions, checkRange } from '../quantity/options';
import { htmlTable, presentable, textTable } from '../quantity/present';
import { randomStream } from '../quantity/random';
import {
  bluestPoint,
  CLUSTER_OPTIONS,
  type ClusterOptions,
  type ClusterSetting,
  guessOf,
  settleCluster,
} from './cluster-setting';
import { findRidge } from './ridge';
import { windowFor } from './ridge-line';

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
  readonly starCount: number;
  readonly notes: readonly string[];
}

/**
 * Turnoff point read from the ridge line: the bluest place of the main sequence, by a parabola through the ridge about its bluest point,
 * with errors from star resampling and photometric noise.
 * @param members catalogue of member stars
 * @throws Error when bands are missing or fewer than 12 stars have them; TypeError or RangeError on options
 * @example turnoffPoint(members, { ebv: 0.05, distanceModulus: 9.4 }).colour
 * A ridge through few stars rounds the turnoff off: with under a hundred members the colour comes out some hundredths too red. The age
 * of `turnoffAge` does not rest on this point.
 */
export function turnoffPoint(members: Catalogue, options: TurnoffPointOptions): TurnoffPoint {
  const caller = 'turnoffPoint';
  checkOptions(caller, options, [...CLUSTER_OPTIONS, 'ebv', 'resamples', 'seed']);
  const { resamples = 200, seed = 1 } = options;
  checkRange(caller, 'resamples', resamples, 20, 10_000);
  const ebv = guessOf(caller, 'ebv', options.ebv, -0.5, 10, 'mag');
  const setting = settleCluster(caller, members, options);
  const best = vertexOf(setting.ridge);
  const samples = resample(setting, Math.round(resamples), seed);
  const around = (values: Float64Array, centre: number) => {
    const m = measuredFromSamples(values, 'mag');
    return measured(
      centre,
      Math.min(centre, centre - (m.value - m.lower)),
      Math.max(centre, centre + (m.upper - m.value)),
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
  const observedColour = around(samples.colour, best.colour);
  const observedMagnitude = around(samples.magnitude, best.magnitude);
  const { perExcess, perExtinction, modulus, stars } = setting;
  const notes = [...setting.notes];
  if (setting.bluest === 0) {
    notes.push(
      'The ridge is bluest at its bright end: the sequence does not turn off within the stars given, so this is a limit.',
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
    starCount: setting.order.length,
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

/** Bluest place of a ridge: vertex of a parabola through the points about the bluest one, held within them. */
function vertexOf(ridge: { colour: Float64Array; magnitude: Float64Array; stars: Float64Array }): {
  colour: number;
  magnitude: number;
} {
  const k = bluestPoint(ridge as never);
  const n = ridge.colour.length;
  if (k === 0 || k === n - 1) return { colour: ridge.colour[k], magnitude: ridge.magnitude[k] };
  const [m0, m1, m2] = [ridge.magnitude[k - 1], ridge.magnitude[k], ridge.magnitude[k + 1]];
  const [c0, c1, c2] = [ridge.colour[k - 1], ridge.colour[k], ridge.colour[k + 1]];
  const s0 = (c1 - c0) / (m1 - m0);
  const s1 = (c2 - c1) / (m2 - m1);
  const bend = (s1 - s0) / (m2 - m0);
  if (!(bend > 0)) return { colour: c1, magnitude: m1 };
  const at = 0.5 * (m0 + m1) - s0 / (2 * bend);
  const magnitude = Math.min(Math.max(at, m0), m2);
  return { magnitude, colour: c0 + (magnitude - m0) * (s0 + bend * (magnitude - m1)) };
}

function resample(setting: ClusterSetting, resamples: number, seed: number) {
  const { stars, order } = setting;
  const n = order.length;
  const root = randomStream(seed);
  const colour = new Float64Array(n);
  const magnitude = new Float64Array(n);
  const error = new Float64Array(n);
  const out = { colour: new Float64Array(resamples), magnitude: new Float64Array(resamples) };
  const window = windowFor(n);
  for (let r = 0; r < resamples; r++) {
    const stream = root.fork(r);
    for (let k = 0; k < n; k++) {
      const i = order[stream.below(n)];
      const em = stars.magnitudeError[i];
      const z = stream.normal();
      const rest = Math.sqrt(Math.max(0, stars.colourError[i] ** 2 - (stars.covariance[i] / em) ** 2));
      magnitude[k] = stars.magnitude[i] + em * z;
      colour[k] = stars.colour[i] + (stars.covariance[i] / em) * z + rest * stream.normal();
      error[k] = stars.colourError[i] * Math.SQRT2;
    }
    const rows = Uint32Array.from({ length: n }, (_, k) => k).sort((p, q) => magnitude[p] - magnitude[q]);
    const vertex = vertexOf(findRidge(colour, magnitude, error, rows, window));
    out.colour[r] = vertex.colour;
    out.magnitude[r] = vertex.magnitude;
  }
  return out;
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
