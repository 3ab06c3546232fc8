import { initialFinalMass } from '../models/initial-final-mass';
import { mainSequenceLifetime } from '../models/lifetime';
import type { Isochrone } from '../models/stellar-model';
import { whiteDwarfCooling } from '../models/white-dwarf';
import { absoluteMagnitudes } from '../photometry/absolute-magnitudes';
import type { Band } from '../quantity/band';
import { SOLAR_LOG_GRAVITY } from '../quantity/constants';

/** Absolute magnitudes of stars of one age by their initial mass. */
export interface StarLight {
  /** Heaviest star that still shines, solar masses. */
  readonly heaviest: number;
  /** Writes the absolute magnitudes of a mass into `out`, one a band; false when the star does not shine (or is too light). */
  magnitudes(mass: number, out: Float64Array): boolean;
  /** log10 of luminosity and temperature at the mass asked for last. */
  readonly last: { logL: number; logTeff: number };
}

/** Looks stars up along an isochrone; never across a break in it. */
export function starLight(isochrone: Isochrone, bands: readonly Band[]): StarLight {
  const { initialMass, count, breaks } = isochrone;
  const columns = bands.map((b) => isochrone.magnitudes[b] as Float64Array);
  const last = { logL: Number.NaN, logTeff: Number.NaN };
  const startsPiece = new Uint8Array(count);
  for (const b of breaks) startsPiece[b] = 1;
  return {
    heaviest: count === 0 ? 0 : initialMass[count - 1],
    last,
    magnitudes(mass, out) {
      if (count === 0 || !(mass >= initialMass[0] && mass <= initialMass[count - 1])) return false;
      let low = 0;
      let high = count - 1;
      while (high - low > 1) {
        const middle = (low + high) >> 1;
        if (initialMass[middle] <= mass) low = middle;
        else high = middle;
      }
      const span = initialMass[high] - initialMass[low];
      let share = span > 0 ? (mass - initialMass[low]) / span : 0;
      if (startsPiece[high]) share = share < 0.5 ? 0 : 1;
      for (let b = 0; b < columns.length; b++) {
        out[b] = columns[b][low] + share * (columns[b][high] - columns[b][low]);
        if (Number.isNaN(out[b])) return false;
      }
      last.logL = isochrone.logL[low] + share * (isochrone.logL[high] - isochrone.logL[low]);
      last.logTeff = isochrone.logTeff[low] + share * (isochrone.logTeff[high] - isochrone.logTeff[low]);
      return true;
    },
  };
}

/**
 * Absolute magnitudes of the white dwarf that a star has become; colours are those of a star of its temperature, which for
 * white dwarfs is right to about 0.1 mag.
 * @param mass initial mass, solar
 * @param age  of the cluster, Gyr
 * @returns one a band, or null where no white dwarf is left or it is too cool or hot for the colours
 */
export function whiteDwarfLight(
  mass: number,
  age: number,
  metallicity: number,
  bands: readonly Band[],
): { magnitudes: Float64Array; logL: number; logTeff: number } | null {
  const finalMass = initialFinalMass(mass);
  const cooling = age - mainSequenceLifetime({ mass, metallicity }) * 1.1;
  if (!(cooling > 0) || !(finalMass > 0.4 && finalMass < 1.35)) return null;
  const dwarf = whiteDwarfCooling({ mass: finalMass, age: cooling });
  const logL = Math.log10(dwarf.luminosity);
  const logTeff = Math.log10(dwarf.temperature);
  const logGravity = SOLAR_LOG_GRAVITY + Math.log10(finalMass) - 2 * Math.log10(dwarf.radius);
  const found = absoluteMagnitudes({
    logL: Float64Array.of(logL),
    logTeff: Float64Array.of(logTeff),
    logGravity: Float64Array.of(logGravity),
    metallicity: 0,
    bands,
  });
  const magnitudes = Float64Array.from(bands, (b) => (found[b] as Float64Array)[0]);
  return magnitudes.every(Number.isFinite) ? { magnitudes, logL, logTeff } : null;
}

/** Brightens magnitudes by those of a companion that is not resolved. */
export function addLight(companion: Float64Array, magnitudes: Float64Array): void {
  for (let b = 0; b < magnitudes.length; b++) {
    magnitudes[b] -= 2.5 * Math.log10(1 + 10 ** (-0.4 * (companion[b] - magnitudes[b])));
  }
}
