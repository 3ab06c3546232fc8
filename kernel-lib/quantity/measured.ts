import { attachPresentation, escapeHtml } from './present';

/** A value with its 68 % interval. `lower` and `upper` are the bounds themselves, not differences. */
export interface Measured {
  readonly value: number;
  readonly lower: number;
  readonly upper: number;
  readonly unit: string;
  /** As a paper would print it: digits set by the error. */
  toString(): string;
}

/**
 * A value with a 68 % interval given by its bounds.
 * @throws RangeError when the bounds do not enclose the value
 * @example String(measured(760, 738, 779, 'pc')) // => '760 +19 -22 pc'
 */
export function measured(value: number, lower: number, upper: number, unit = ''): Measured {
  if (lower > value || upper < value) {
    throw new RangeError(`measured: bounds ${lower} to ${upper} do not enclose the value ${value}.`);
  }
  const result = { value, lower, upper, unit } as Measured;
  const text = () => formatMeasured(value, lower, upper, unit);
  attachPresentation(result, { text, html: () => `<span>${escapeHtml(text())}</span>` });
  return Object.freeze(result);
}

/** A value with a symmetric standard error. */
export function measuredFromSigma(value: number, sigma: number, unit = ''): Measured {
  return measured(value, value - sigma, value + sigma, unit);
}

/**
 * Median and 15.87-84.13 percentiles of samples; NaN samples are left out.
 * @param samples shape (n); not changed
 */
export function measuredFromSamples(samples: ArrayLike<number>, unit = ''): Measured {
  const sorted = Float64Array.from(samples).filter((x) => !Number.isNaN(x));
  sorted.sort();
  return measured(
    sortedQuantile(sorted, 0.5),
    sortedQuantile(sorted, 0.158655254),
    sortedQuantile(sorted, 0.841344746),
    unit,
  );
}

/** Linear-interpolation quantile of ascending values; NaN when there are none. */
export function sortedQuantile(sorted: ArrayLike<number>, fraction: number): number {
  if (sorted.length === 0) return Number.NaN;
  const at = fraction * (sorted.length - 1);
  const below = Math.floor(at);
  const above = Math.min(below + 1, sorted.length - 1);
  return sorted[below] + (at - below) * (sorted[above] - sorted[below]);
}

function formatMeasured(value: number, lower: number, upper: number, unit: string): string {
  const tail = unit === '' ? '' : ` ${unit}`;
  if (Number.isNaN(value)) return `not determined${tail}`;
  const up = upper - value;
  const down = value - lower;
  const smallest = Math.min(...[up, down].filter((e) => e > 0 && Number.isFinite(e)));
  if (!Number.isFinite(smallest)) return `${Number(value.toPrecision(6))}${tail}`;
  const decimals = decimalsFor(smallest);
  const show = (x: number) => (Number.isFinite(x) ? fixed(x, decimals) : 'inf');
  const plus = show(up);
  const minus = show(down);
  return plus === minus ? `${show(value)} ± ${plus}${tail}` : `${show(value)} +${plus} -${minus}${tail}`;
}

/** Decimals that show an error with two digits when it starts with 1 or 2, else with one. Negative: rounded to tens. */
function decimalsFor(error: number): number {
  const exponent = Math.floor(Math.log10(error));
  const lead = error / 10 ** exponent;
  return Math.min(12, lead < 2.95 ? 1 - exponent : -exponent);
}

function fixed(x: number, decimals: number): string {
  if (decimals >= 0) return x.toFixed(decimals);
  const step = 10 ** -decimals;
  return (Math.round(x / step) * step).toFixed(0);
}
