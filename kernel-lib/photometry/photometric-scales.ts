import type { ColourName } from '../quantity/band';
import { SOLAR_LOG_GRAVITY, SOLAR_TEMPERATURE } from '../quantity/constants';
import { htmlTable, presentable, textTable } from '../quantity/present';
import { CORRECTION_SCALES } from './scales/correction-scales';
import { TEMPERATURE_SCALES } from './scales/temperature-scales';
import { SOLAR_COLOURS } from './solar-photometry';

/** One colour of a temperature scale, or one band of a scale of bolometric corrections. */
export interface ScaleEntry {
  readonly name: string;
  /** A colour such as `B-V`, or a bolometric correction such as `BC V`. */
  readonly quantity: string;
  readonly stars: string;
  /** Colours, mag; for corrections temperatures, K. */
  readonly range: string;
  readonly accuracy: string;
  /** What the scale gives for the Sun: temperature at its observed colour less 5772 K, or its bolometric correction in mag. */
  readonly sun: string;
  readonly source: string;
}

/** All scales, showing themselves as a table. */
export interface PhotometricScales {
  readonly entries: readonly ScaleEntry[];
}

const COLOURS = Object.keys(SOLAR_COLOURS) as ColourName[];

/**
 * Every colour-temperature scale and scale of bolometric corrections: for which stars, range, accuracy, how far its zero point is from the
 * Sun, and source.
 * @example photometricScales()
 * Source: solar colours in SOLAR_COLOURS, 5772 K by IAU 2015 Resolution B3.
 */
export function photometricScales(): PhotometricScales {
  const entries: ScaleEntry[] = [];
  for (const scale of TEMPERATURE_SCALES) {
    const { name, stars, accuracy, source } = scale;
    for (const colour of scale.colours === 'any' ? COLOURS : scale.colours) {
      const relation = scale.relation(colour, 0, SOLAR_LOG_GRAVITY);
      const [low, high] = relation.range;
      const observed = SOLAR_COLOURS[colour];
      const off = observed === undefined ? Number.NaN : relation.temperature(observed.value) - SOLAR_TEMPERATURE;
      const sun = Number.isNaN(off) ? '' : `${off < 0 ? '' : '+'}${off.toFixed(0)} K`;
      const range = `${low.toFixed(2)} to ${high.toFixed(2)} mag`;
      entries.push(Object.freeze({ name, quantity: colour, stars, range, accuracy, sun, source }));
    }
  }
  const solar = Math.log10(SOLAR_TEMPERATURE);
  for (const scale of CORRECTION_SCALES) {
    const { name, stars, accuracy, source } = scale;
    for (const band of scale.bands.length > 2 ? (['V', 'G'] as const) : scale.bands) {
      const correction = scale.correction(band, solar, 0, SOLAR_LOG_GRAVITY);
      const range = `${reach(scale, band, -1)} to ${reach(scale, band, 1)} K`;
      const sun = `${correction.toFixed(3)} mag`;
      entries.push(Object.freeze({ name, quantity: `BC ${band}`, stars, range, accuracy, sun, source }));
    }
  }
  const head = ['scale', 'quantity', 'stars', 'range', 'accuracy', 'Sun', 'source'];
  const rows = () => entries.map((e) => [e.name, e.quantity, e.stars, e.range, e.accuracy, e.sun, e.source]);
  return presentable(
    { entries: Object.freeze(entries) },
    { text: () => textTable(head, rows()), html: () => htmlTable(head, rows(), { caption: 'Photometric scales' }) },
  );
}

/** Temperature at which a correction ends, in steps of 0.001 dex from the Sun, to three digits. */
function reach(scale: (typeof CORRECTION_SCALES)[number], band: 'V' | 'G' | (string & {}), sign: 1 | -1): number {
  let t = Math.log10(SOLAR_TEMPERATURE);
  while (!Number.isNaN(scale.correction(band as 'V', t + sign * 0.001, 0, SOLAR_LOG_GRAVITY))) t += sign * 0.001;
  return Number((10 ** t).toPrecision(3));
}
