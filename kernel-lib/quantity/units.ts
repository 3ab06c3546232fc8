import { nearest } from './options';

/**
 * A unit as a number times base units. Written out here, and not taken from a units library, because the general ones
 * (searched: math, physics and conversion packages) know neither the VOUnit spellings nor mas, mag, dex and solar units.
 */
export interface Unit {
  /** As it was written. */
  readonly text: string;
  /** The unit is mantissa x 10^exponent base units; apart, so that prefixes stay exact. */
  readonly mantissa: number;
  readonly exponent: number;
  /** Powers of the base units, without zeros: { m: 1, s: -1 }. */
  readonly dimensions: Readonly<Record<string, number>>;
  /** Whether values are log10 of this unit, as in dex(cm/s2), log(yr) or [K]. */
  readonly logarithmic: boolean;
}

/** Name, mantissa, exponent, dimensions, takes SI prefixes, other spellings. */
type Definition = readonly [string, number, number, Readonly<Record<string, number>>, boolean, readonly string[]];

const ANGLE = { arcsec: 1 };
const TIME = { s: 1 };
const LENGTH = { m: 1 };
const MASS = { g: 1 };
const ENERGY = { g: 1, m: 2, s: -2 };
const POWER = { g: 1, m: 2, s: -3 };

/**
 * Known units. Sources: IAU (2012 Resolution B2 astronomical unit; 2015 Resolution B2 parsec; 2015 Resolution B3 nominal solar
 * values; Julian year of 365.25 days), SI (2019) and "Units in the VO" 1.1 for the spellings. The solar mass is the nominal
 * GM over the CODATA 2018 constant of gravitation, known to 2e-5.
 */
const DEFINITIONS: readonly Definition[] = [
  ['arcsec', 1, 0, ANGLE, true, ['as', 'arcsecond', 'arcseconds', '"', "''", '″']],
  ['arcmin', 60, 0, ANGLE, true, ['arcminute', 'arcminutes', "'", '′']],
  ['deg', 3600, 0, ANGLE, false, ['degree', 'degrees', '°']],
  ['hourangle', 54000, 0, ANGLE, false, ['hours_of_ra']],
  ['rad', 648000 / Math.PI, 0, ANGLE, true, ['radian', 'radians']],
  ['sr', (648000 / Math.PI) ** 2, 0, { arcsec: 2 }, false, []],
  ['s', 1, 0, TIME, true, ['sec', 'second', 'seconds']],
  ['min', 60, 0, TIME, false, ['minute', 'minutes']],
  ['h', 3600, 0, TIME, false, ['hr', 'hour', 'hours']],
  ['d', 86400, 0, TIME, false, ['day', 'days']],
  ['yr', 31557600, 0, TIME, true, ['a', 'year', 'years', 'Jyr', 'julianyear']],
  ['m', 1, 0, LENGTH, true, ['meter', 'metre', 'meters', 'metres']],
  ['Angstrom', 1, -10, LENGTH, false, ['angstrom', 'AA', 'Å']],
  ['micron', 1, -6, LENGTH, false, []],
  ['AU', 149597870700, 0, LENGTH, false, ['au', 'astronomical_unit']],
  ['pc', (648000 / Math.PI) * 149597870700, 0, LENGTH, true, ['parsec', 'parsecs']],
  ['lyr', 299792458 * 31557600, 0, LENGTH, true, ['lightyear', 'ly']],
  ['solRad', 6.957, 8, LENGTH, false, ['Rsun', 'R_sun', 'Rsol', 'solRadius', 'Rsolar']],
  ['g', 1, 0, MASS, true, ['gram']],
  ['solMass', 1.3271244 / 6.6743, 34, MASS, false, ['Msun', 'M_sun', 'Msol', 'solarMass', 'Msolar']],
  ['jupiterMass', 1.2668653 / 6.6743, 31, MASS, false, ['Mjup', 'M_jup', 'jupMass']],
  ['K', 1, 0, { K: 1 }, true, ['Kelvin', 'kelvin']],
  ['A', 1, 0, { A: 1 }, true, ['ampere']],
  ['mol', 1, 0, { mol: 1 }, true, []],
  ['cd', 1, 0, { cd: 1 }, true, []],
  ['Hz', 1, 0, { s: -1 }, true, ['hertz']],
  ['N', 1, 3, { g: 1, m: 1, s: -2 }, true, []],
  ['Pa', 1, 3, { g: 1, m: -1, s: -2 }, true, []],
  ['J', 1, 3, ENERGY, true, ['joule']],
  ['erg', 1, -4, ENERGY, true, []],
  ['eV', 1.602176634, -16, ENERGY, true, []],
  ['W', 1, 3, POWER, true, ['watt']],
  ['solLum', 3.828, 29, POWER, false, ['Lsun', 'L_sun', 'Lsol', 'solarLuminosity', 'Lsolar']],
  ['Jy', 1, -23, { g: 1, s: -2 }, true, ['jansky']],
  ['C', 1, 0, { A: 1, s: 1 }, true, []],
  ['V', 1, 3, { g: 1, m: 2, s: -3, A: -1 }, true, []],
  ['T', 1, 3, { g: 1, s: -2, A: -1 }, true, []],
  ['G', 1, -1, { g: 1, s: -2, A: -1 }, true, ['gauss']],
  ['mag', 1, 0, { mag: 1 }, true, ['magnitude', 'magnitudes', 'mags']],
  ['dex', 1, 0, { dex: 1 }, false, []],
  ['%', 1, -2, {}, false, ['percent', 'pct']],
  ['adu', 1, 0, { adu: 1 }, true, ['ADU', 'DN', 'dn']],
  ['ct', 1, 0, { count: 1 }, true, ['count', 'counts', 'cts']],
  ['ph', 1, 0, { photon: 1 }, true, ['photon', 'photons']],
  ['electron', 1, 0, { electron: 1 }, true, ['electrons']],
  ['pix', 1, 0, { pixel: 1 }, true, ['pixel', 'pixels']],
  ['bin', 1, 0, { bin: 1 }, false, []],
  ['chan', 1, 0, { channel: 1 }, false, []],
  ['beam', 1, 0, { beam: 1 }, false, []],
  ['bit', 1, 0, { bit: 1 }, true, []],
  ['byte', 8, 0, { bit: 1 }, true, []],
];

const PREFIXES: Readonly<Record<string, number>> = {
  Q: 30,
  R: 27,
  Y: 24,
  Z: 21,
  E: 18,
  P: 15,
  T: 12,
  G: 9,
  M: 6,
  k: 3,
  h: 2,
  da: 1,
  d: -1,
  c: -2,
  m: -3,
  u: -6,
  µ: -6,
  μ: -6,
  n: -9,
  p: -12,
  f: -15,
  a: -18,
  z: -21,
  y: -24,
  r: -27,
  q: -30,
};

interface Factor {
  readonly mantissa: number;
  readonly exponent: number;
  readonly dimensions: Readonly<Record<string, number>>;
}

const SYMBOLS: ReadonlyMap<string, Factor> = makeSymbols();

function makeSymbols(): Map<string, Factor> {
  const symbols = new Map<string, Factor>();
  for (const [name, mantissa, exponent, dimensions, , others] of DEFINITIONS) {
    for (const word of [name, ...others]) symbols.set(word, { mantissa, exponent, dimensions });
  }
  // Plain names first: `min` is a minute and `cd` a candela, not a prefix with a unit.
  for (const [name, mantissa, exponent, dimensions, prefixed, others] of DEFINITIONS) {
    if (!prefixed) continue;
    for (const word of [name, ...others]) {
      if (!/^[A-Za-z]/.test(word)) continue;
      for (const [prefix, power] of Object.entries(PREFIXES)) {
        if (!symbols.has(prefix + word))
          symbols.set(prefix + word, { mantissa, exponent: exponent + power, dimensions });
      }
    }
  }
  return symbols;
}

/** Units of catalogues, offered first where a word is not known. */
const COMMON: readonly string[] = ['mas', 'deg', 'arcsec', 'mag', 'pc', 'kpc', 'yr', 'Gyr', 'K', 'km'];

/** Ways to write "no unit". */
const NONE: ReadonlySet<string> = new Set(['', '-', '--', '---', '1', 'none', 'dimensionless', 'unitless', 'null']);

/**
 * Reads a unit in the spellings of "Units in the VO" (IVOA Recommendation 1.1), and the common ones of FITS, CDS and generic
 * use: products by '.', '*' or a blank, quotients by '/', powers as m2, m**2, m^2 or m(1/2), SI prefixes, numbers in front
 * (10**3, 1e3), sqrt(...), and logarithms as log(...), dex(...) or [...].
 * @param text the unit, '' or '-' for none
 * @throws Error that names the part it does not know, and the nearest unit
 * @example parseUnit('mas.yr**-1').dimensions // => { arcsec: 1, s: -1 }
 */
export function parseUnit(text: string): Unit {
  const trimmed = text.trim().replace(/^(['"])([A-Za-z].*)\1$/, '$2');
  if (NONE.has(trimmed.toLowerCase())) return unitOf(text, { mantissa: 1, exponent: 0, dimensions: {} }, false);
  const wrapped = /^(?:(?:log|lg|dex|log10)\s*\((.*)\)|\[(.*)\])$/i.exec(trimmed);
  if (wrapped) {
    const inner = parseUnit(wrapped[1] ?? wrapped[2]);
    if (inner.logarithmic) throw new Error(`unknown unit "${text}" (a logarithm of a logarithm)`);
    return { ...inner, text, logarithmic: true };
  }
  const magnitudeOf = /^(m?mag)\s*\(.*\)$/.exec(trimmed);
  return unitOf(text, new UnitReader(magnitudeOf ? magnitudeOf[1] : trimmed, text).read(), false);
}

function unitOf(text: string, symbol: Factor, logarithmic: boolean): Unit {
  return { text, ...symbol, logarithmic };
}

/** Recursive descent over one unit text. */
class UnitReader {
  #at = 0;
  /** A unit may follow a number without a sign between: 10+3m. */
  #afterNumber = false;
  readonly #text: string;
  readonly #whole: string;

  constructor(text: string, whole: string) {
    this.#text = text;
    this.#whole = whole;
  }

  read(): Factor {
    const product = this.#product();
    if (this.#at < this.#text.length) throw this.#unknown(this.#text.slice(this.#at));
    return product;
  }

  #product(): Factor {
    this.#blanks();
    let result: Factor = { mantissa: 1, exponent: 0, dimensions: {} };
    let sign = 1;
    if (this.#take('/')) sign = -1;
    result = combine(result, this.#factor(), sign);
    for (;;) {
      const hadBlank = this.#blanks();
      const c = this.#text[this.#at];
      if (c === undefined || c === ')') return result;
      if (c === '/') sign = -1;
      else if (c === '.' || c === '·' || (c === '*' && this.#text[this.#at + 1] !== '*')) sign = 1;
      else if (hadBlank || c === '(' || this.#afterNumber) {
        result = combine(result, this.#factor(), 1);
        continue;
      } else throw this.#unknown(this.#text.slice(this.#at));
      this.#at++;
      result = combine(result, this.#factor(), sign);
    }
  }

  #factor(): Factor {
    this.#blanks();
    this.#afterNumber = false;
    const rest = this.#text.slice(this.#at);
    if (this.#take('(')) {
      const inner = this.#product();
      if (!this.#take(')')) throw this.#unknown(rest);
      return power(inner, this.#power());
    }
    const root = /^sqrt\s*\(/.exec(rest);
    if (root) {
      this.#at += root[0].length;
      const inner = this.#product();
      if (!this.#take(')')) throw this.#unknown(rest);
      return power(inner, 0.5 * this.#power());
    }
    const tenTo = /^10\s*(?:\*\*|\^|(?=[+-]\d))\s*\(?([+-]?\d+)\)?/.exec(rest);
    if (tenTo) {
      this.#at += tenTo[0].length;
      this.#afterNumber = true;
      return { mantissa: 1, exponent: Number(tenTo[1]), dimensions: {} };
    }
    const number = /^\d+(?:\.\d+)?(?:[eE][+-]?\d+)?/.exec(rest);
    if (number) {
      this.#at += number[0].length;
      this.#afterNumber = true;
      return scaled(Number(number[0]));
    }
    const word = /^(?:'(\p{L}[^']*)'|[\p{L}_%°"″′]+|''|')/u.exec(rest);
    if (!word) throw this.#unknown(rest);
    const symbol = SYMBOLS.get(word[1] ?? word[0]);
    if (symbol === undefined) throw this.#unknown(word[1] ?? word[0]);
    this.#at += word[0].length;
    return power(symbol, this.#power());
  }

  #power(): number {
    const match = /^\s*(?:\*\*|\^)?\s*(?:\(\s*([+-]?\d+(?:\.\d+)?)\s*(?:\/\s*(\d+))?\s*\)|([+-]?\d+(?:\.\d+)?))/.exec(
      this.#text.slice(this.#at),
    );
    // A blank and a number is a new factor, not a power.
    if (!match || (/^\s/.test(match[0]) && !/[*^]/.test(match[0]))) return 1;
    this.#at += match[0].length;
    return match[3] !== undefined ? Number(match[3]) : Number(match[1]) / Number(match[2] ?? 1);
  }

  #blanks(): boolean {
    const from = this.#at;
    while (/\s/.test(this.#text[this.#at] ?? '')) this.#at++;
    return this.#at > from;
  }

  #take(c: string): boolean {
    this.#blanks();
    if (this.#text[this.#at] !== c) return false;
    this.#at++;
    return true;
  }

  #unknown(part: string): Error {
    const word = part.trim();
    const near = word === '' ? null : nearest(word, [...COMMON, ...SYMBOLS.keys()]);
    const of = word === this.#whole.trim() || word === '' ? '' : ` (at "${word}")`;
    return new Error(`unknown unit ${JSON.stringify(this.#whole)}${of}${near ? `; did you mean "${near}"?` : ''}`);
  }
}

/** A number as mantissa and power of ten, so that 1000 is exactly 10^3. */
function scaled(value: number): Factor {
  const text = value.toExponential();
  const at = text.indexOf('e');
  return { mantissa: Number(text.slice(0, at)), exponent: Number(text.slice(at + 1)), dimensions: {} };
}

function power(symbol: Factor, p: number): Factor {
  if (p === 1) return symbol;
  const exponent = symbol.exponent * p;
  const wholePart = Math.trunc(exponent);
  const rest = exponent - wholePart;
  return {
    mantissa: symbol.mantissa ** p * (rest === 0 ? 1 : 10 ** rest),
    exponent: wholePart,
    dimensions: Object.fromEntries(Object.entries(symbol.dimensions).map(([k, v]) => [k, v * p])),
  };
}

function combine(a: Factor, b: Factor, sign: number): Factor {
  const dimensions: Record<string, number> = { ...a.dimensions };
  for (const [k, v] of Object.entries(b.dimensions)) {
    const sum = (dimensions[k] ?? 0) + sign * v;
    if (Math.abs(sum) < 1e-12) delete dimensions[k];
    else dimensions[k] = sum;
  }
  return {
    mantissa: sign > 0 ? a.mantissa * b.mantissa : a.mantissa / b.mantissa,
    exponent: a.exponent + sign * b.exponent,
    dimensions,
  };
}

/** Whether a unit text is known. */
export function isKnownUnit(text: string): boolean {
  try {
    parseUnit(text);
    return true;
  } catch {
    return false;
  }
}

/** How values in one unit become values in another: value x multiply / divide + add. */
export interface UnitConversion {
  readonly multiply: number;
  readonly divide: number;
  readonly add: number;
}

/**
 * The conversion from one unit to another. Kept as a product, a quotient and a sum, so that powers of ten and whole
 * factors lose nothing (mas to arcsec divides by 1000).
 * @throws Error when a unit is unknown, or they measure different things
 * @example unitConversion('arcsec', 'mas') // => { multiply: 1000, divide: 1, add: 0 }
 */
export function unitConversion(from: string, to: string): UnitConversion {
  const a = parseUnit(from);
  const b = parseUnit(to);
  const keys = new Set([...Object.keys(a.dimensions), ...Object.keys(b.dimensions)]);
  const same = [...keys].every((k) => Math.abs((a.dimensions[k] ?? 0) - (b.dimensions[k] ?? 0)) < 1e-9);
  if (!same || a.logarithmic !== b.logarithmic) {
    throw new Error(`unit "${from}" cannot be converted to "${to}"`);
  }
  let multiply = 1;
  let divide = 1;
  const power10 = a.exponent - b.exponent;
  if (power10 > 0) multiply *= Number(`1e${power10}`);
  else if (power10 < 0) divide *= Number(`1e${-power10}`);
  const ratio = a.mantissa / b.mantissa;
  const inverse = b.mantissa / a.mantissa;
  if (ratio >= 1 || !Number.isInteger(inverse)) multiply *= ratio;
  else divide *= inverse;
  if (a.logarithmic) return { multiply: 1, divide: 1, add: Math.log10(multiply / divide) };
  return { multiply, divide, add: 0 };
}

/**
 * Values in another unit; missing stays missing.
 * @param values shape (n)
 * @returns shape (n), a new array
 * @throws Error when a unit is unknown, or they measure different things
 * @example convertUnits([1, 2], 'arcsec', 'mas') // => [1000, 2000]
 */
export function convertUnits(values: ArrayLike<number>, from: string, to: string): Float64Array {
  const { multiply, divide, add } = unitConversion(from, to);
  const out = new Float64Array(values.length);
  for (let i = 0; i < out.length; i++) out[i] = (values[i] * multiply) / divide + add;
  return out;
}
