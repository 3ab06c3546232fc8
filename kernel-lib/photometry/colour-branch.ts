import { SOLAR_TEMPERATURE } from '../quantity/constants';

/** The temperatures around the Sun's over which a colour changes in one direction only. */
export interface ColourBranch {
  /** log10 of temperature for a colour; NaN where the branch does not reach. */
  logTeff(colour: number): number;
  /** Least and greatest colour. */
  readonly range: readonly [number, number];
}

const STEPS = 360;

/**
 * Turns a colour as a function of log Teff round, over the unbroken run of one direction that holds the Sun.
 * @param colour continuous function of log Teff, NaN outside its range
 * @param low    log Teff from which to look
 * @param high   up to which
 */
export function colourBranch(colour: (logTeff: number) => number, low: number, high: number): ColourBranch {
  const step = (high - low) / STEPS;
  const sun = Math.min(STEPS - 1, Math.max(1, Math.round((Math.log10(SOLAR_TEMPERATURE) - low) / step)));
  const values = new Float64Array(STEPS + 1);
  for (let i = 0; i <= STEPS; i++) values[i] = colour(i === STEPS ? high : low + i * step);
  const sign = Math.sign(values[sun + 1] - values[sun - 1]);
  let first = sun;
  let last = sun;
  while (first > 0 && sign * (values[first] - values[first - 1]) > 0) first--;
  while (last < STEPS && sign * (values[last + 1] - values[last]) > 0) last++;
  // The range may end between two nodes.
  const coolEnd = edge(colour, low + first * step, first === 0 ? low : low + (first - 1) * step, values[first], -sign);
  const hotEnd = edge(colour, low + last * step, last === STEPS ? high : low + (last + 1) * step, values[last], sign);
  const atCool = colour(coolEnd);
  const atHot = colour(hotEnd);
  return {
    range: [Math.min(atCool, atHot), Math.max(atCool, atHot)],
    logTeff(given) {
      // Rounding may carry a colour just outside a range that it came from.
      if (!(sign * (given - atCool) >= -1e-9 && sign * (atHot - given) >= -1e-9)) return Number.NaN;
      const value = sign * (given - atCool) < 0 ? atCool : sign * (atHot - given) < 0 ? atHot : given;
      let a = first;
      let b = last;
      while (b - a > 1) {
        const middle = (a + b) >> 1;
        if (sign * (values[middle] - value) <= 0) a = middle;
        else b = middle;
      }
      if (sign * (value - values[first]) < 0) return solve(colour, value, sign, coolEnd, low + first * step);
      if (sign * (value - values[last]) > 0) return solve(colour, value, sign, low + last * step, hotEnd);
      return solve(colour, value, sign, low + a * step, low + b * step);
    },
  };
}

/** Last place between two at which the colour is a number and still goes on in its direction. */
function edge(colour: (t: number) => number, inside: number, outside: number, value: number, sign: number): number {
  let good = inside;
  let bad = outside;
  for (let k = 0; k < 40; k++) {
    const middle = (good + bad) / 2;
    if (sign * (colour(middle) - value) >= 0) good = middle;
    else bad = middle;
  }
  return good;
}

/** Root between two places by false position that cannot stall (Illinois rule). */
function solve(colour: (t: number) => number, value: number, sign: number, low: number, high: number): number {
  let a = low;
  let b = high;
  let fa = sign * (colour(a) - value);
  let fb = sign * (colour(b) - value);
  for (let k = 0; k < 60 && b - a > 1e-13; k++) {
    const c = fb > fa ? a - (fa * (b - a)) / (fb - fa) : (a + b) / 2;
    const fc = sign * (colour(c) - value);
    if (Math.abs(fc) < 1e-13) return c;
    if (fc < 0) {
      a = c;
      fa = fc;
      fb /= 2;
    } else {
      b = c;
      fb = fc;
      fa /= 2;
    }
  }
  return (a + b) / 2;
}
