import { type Band, bandsOfColour, type ColourName } from '../quantity/band';
import { checkOptions } from '../quantity/options';
import { compositeLight } from './composite/composite-light';
import { bandCorrection, GRID_NODES, GRID_START, GRID_STEP, giantShare } from './light-table';

/** Options of colour and temperature. */
export interface ColourTemperatureOptions {
  /** Default `B-V`. */
  readonly colour?: ColourName;
  /** Name of a scale. Default `composite`. */
  readonly scale?: string;
  /** [Fe/H], dex. Default 0. */
  readonly metallicity?: number | ArrayLike<number>;
  /** log10 of cm/s2. Default: dwarfs. */
  readonly logGravity?: number | ArrayLike<number>;
}

const OPTIONS = ['colour', 'scale', 'metallicity', 'logGravity'];

function each(value: number | ArrayLike<number>, formula: (x: number, i: number) => number): number | Float64Array {
  if (typeof value === 'number') return formula(value, 0);
  const out = new Float64Array(value.length);
  for (let i = 0; i < out.length; i++) out[i] = formula(value[i], i);
  return out;
}

const pick = (v: number | ArrayLike<number>, i: number) => (typeof v === 'number' ? v : v[i]);

function colourAt(blue: Band, red: Band, t: number, g: number, f: number): number {
  const light = compositeLight();
  const share = giantShare(t, g);
  return bandCorrection(light[red], t, share, f) - bandCorrection(light[blue], t, share, f);
}

/** Effective temperature from colour, K. */
export function temperatureFromColour(value: number, options?: ColourTemperatureOptions): number;
export function temperatureFromColour(value: ArrayLike<number>, options?: ColourTemperatureOptions): Float64Array;
export function temperatureFromColour(
  value: number | ArrayLike<number>,
  options: ColourTemperatureOptions = {},
): number | Float64Array {
  checkOptions('temperatureFromColour', options, OPTIONS);
  const { colour = 'B-V', metallicity = 0, logGravity = 5 } = options;
  const { blue, red } = bandsOfColour(colour);
  return each(value, (c, i) => {
    const g = pick(logGravity, i);
    const f = pick(metallicity, i);
    let low = GRID_START + 0.02;
    let high = GRID_START + GRID_STEP * (GRID_NODES - 1);
    if (!(c <= colourAt(blue, red, low, g, f) && c >= colourAt(blue, red, high, g, f))) return Number.NaN;
    for (let k = 0; k < 50; k++) {
      const middle = (low + high) / 2;
      if (colourAt(blue, red, middle, g, f) > c) low = middle;
      else high = middle;
    }
    return 10 ** low;
  });
}

/** Colour from effective temperature, mag. */
export function colourFromTemperature(temperature: number, options?: ColourTemperatureOptions): number;
export function colourFromTemperature(temperature: ArrayLike<number>, options?: ColourTemperatureOptions): Float64Array;
export function colourFromTemperature(
  temperature: number | ArrayLike<number>,
  options: ColourTemperatureOptions = {},
): number | Float64Array {
  checkOptions('colourFromTemperature', options, OPTIONS);
  const { colour = 'B-V', metallicity = 0, logGravity = 5 } = options;
  const { blue, red } = bandsOfColour(colour);
  return each(temperature, (T, i) => colourAt(blue, red, Math.log10(T), pick(logGravity, i), pick(metallicity, i)));
}
