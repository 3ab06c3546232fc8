import type { Catalogue } from '../catalogue/catalogue';
import { deredden } from '../extinction/deredden';
import { bolometricCorrection } from '../photometry/bolometric-correction';
import { temperatureFromColour } from '../photometry/colour-temperature';
import { SOLAR_BOLOMETRIC_MAGNITUDE, SOLAR_LOG_GRAVITY, SOLAR_TEMPERATURE } from '../quantity/constants';
import { observedColour } from './observed-colour';
import type { PropertySettings } from './property-settings';

/** Change of log L by 1 mag. */
export const PER_MAGNITUDE = -0.4;

const LOG_SOLAR_TEMPERATURE = Math.log10(SOLAR_TEMPERATURE);

/** Places of all stars on the HR diagram, shape (n). */
export interface HrPlaces {
  /** Without reddening, mag. */
  readonly colour: Float64Array;
  /** Without extinction, mag. */
  readonly absolute: Float64Array;
  /** log10 of surface gravity that the relations were read with. */
  readonly logGravity: Float64Array;
  readonly logT: Float64Array;
  readonly logL: Float64Array;
  readonly logR: Float64Array;
}

/** The quantities that follow from colour and absolute magnitude. */
export type HrQuantity = 'logT' | 'logL' | 'logR';

/**
 * Dereddens a catalogue and places its stars.
 * @param ebv        E(B-V), mag
 * @param logGravity to read the relations with, shape (n); undefined: as the settings say
 */
export function placeStars(
  catalogue: Catalogue,
  settings: PropertySettings,
  ebv: number,
  logGravity?: Float64Array,
): HrPlaces {
  const { colour, band, rV, law, distance } = settings;
  const corrected = deredden(catalogue, { ebv, rV, law });
  const intrinsic = observedColour('physicalProperties', corrected, colour).values;
  const absolute = corrected.numbers(`magnitude.${band}`).map((m, i) => {
    const pc = typeof distance.value === 'number' ? distance.value : distance.value[i];
    return pc > 0 ? m - 5 * Math.log10(pc) + 5 : Number.NaN;
  });
  const gravity = logGravity ?? gravityOf(intrinsic, absolute, settings);
  return { colour: intrinsic, absolute, logGravity: gravity, ...locate(intrinsic, absolute, gravity, settings) };
}

/** Temperature, luminosity and radius from intrinsic colour, absolute magnitude and gravity, shape (n) each. */
export function locate(
  colour: Float64Array,
  absolute: Float64Array,
  logGravity: Float64Array,
  settings: PropertySettings,
): Pick<HrPlaces, HrQuantity> {
  const { band, metallicity, scale, correctionScale } = settings;
  const n = colour.length;
  const logT = new Float64Array(n);
  const logL = new Float64Array(n);
  const logR = new Float64Array(n);
  // Relations are made anew for each gravity, so stars of one gravity go together.
  for (const [gravity, rows] of rowsByValue(logGravity)) {
    const temperature = temperatureFromColour(
      Float64Array.from(rows, (i) => colour[i]),
      { colour: settings.colour, scale, metallicity, logGravity: gravity },
    );
    const correction = bolometricCorrection(temperature, {
      band,
      scale: correctionScale,
      metallicity,
      logGravity: gravity,
    });
    rows.forEach((i, k) => {
      logT[i] = Math.log10(temperature[k]);
      logL[i] = PER_MAGNITUDE * (absolute[i] + correction[k] - SOLAR_BOLOMETRIC_MAGNITUDE);
      logR[i] = 0.5 * logL[i] - 2 * (logT[i] - LOG_SOLAR_TEMPERATURE);
    });
  }
  return { logT, logL, logR };
}

/** Gravity of dwarfs as far as the relations tell it apart: from 4 up they are one. */
const DWARF = 5;
const LEAST_DWARF = 4;
/** Below this the relations tell giants no longer apart. */
const GIANT = 2.2;
/** Estimated gravities are rounded to this, dex: less than 0.3 % in temperature for the coolest giants. */
const GRAVITY_STEP = 0.05;
/** From dwarfs to the gravity of a giant's own place: the first pass already brings the radius near enough for the next. */
const PASSES = 3;

function gravityOf(colour: Float64Array, absolute: Float64Array, settings: PropertySettings): Float64Array {
  const { logGravity } = settings;
  if (typeof logGravity === 'number') return new Float64Array(colour.length).fill(logGravity);
  if (logGravity !== undefined) return Float64Array.from(logGravity);
  let gravity = new Float64Array(colour.length).fill(DWARF);
  for (let pass = 0; pass < PASSES; pass++) {
    const { logL, logR } = locate(colour, absolute, gravity, settings);
    gravity = logL.map((l, i) => estimatedGravity(l, logR[i]));
  }
  return gravity;
}

/**
 * log10 of surface gravity from place alone, with a mass of L^(1/4) solar: right within 0.1 dex on the main sequence, and within
 * 0.5 dex for giants, whose colours hardly depend on it any more.
 */
function estimatedGravity(logL: number, logR: number): number {
  const gravity = SOLAR_LOG_GRAVITY + 0.25 * logL - 2 * logR;
  if (!(gravity < LEAST_DWARF)) return DWARF;
  return Math.round(Math.max(GIANT, gravity) / GRAVITY_STEP) * GRAVITY_STEP;
}

function rowsByValue(values: Float64Array): Map<number, number[]> {
  const groups = new Map<number, number[]>();
  for (let i = 0; i < values.length; i++) {
    const rows = groups.get(values[i]);
    if (rows) rows.push(i);
    else groups.set(values[i], [i]);
  }
  return groups;
}
