import {
  ALONSO_1999_BLUE,
  ALONSO_1999_RED,
  ALONSO_1999_UV_BLUE,
  ALONSO_1999_UV_RED,
  alonsoCorrection,
} from '../scales/alonso-1999';
import { CASAGRANDE_2010 } from '../scales/casagrande-2010';
import { gMinusV } from '../scales/gaia-from-johnson';
import { GONZALEZ_HERNANDEZ_2009_GIANTS } from '../scales/gonzalez-hernandez-2009';
import { MUCCIARELLI_2021_DWARFS, MUCCIARELLI_2021_GIANTS } from '../scales/mucciarelli-2021';
import { type ThetaRelation, thetaColour } from '../scales/theta-relation';
import { blend, heldBetween } from './blend';
import type { Colours } from './colours';

/** The relation of a list that gives a colour. */
function find(list: readonly ThetaRelation[], colour: string): ThetaRelation {
  return list.find((r) => r.colour === colour) as ThetaRelation;
}

/** Change of a colour at fixed temperature from solar metallicity to another, mag. */
function change(relation: ThetaRelation, temperature: number, f: number): number {
  return thetaColour(relation, temperature, f) - thetaColour(relation, temperature, 0);
}

/** U-V by the blue relation above 5400 K, by the red one below 5000 K. */
function changeOfUV(logTeff: number, f: number): number {
  const temperature = 10 ** logTeff;
  const w = blend(logTeff, 3.699, 3.732);
  return (
    (w < 1 ? (1 - w) * change(ALONSO_1999_UV_RED, temperature, f) : 0) +
    (w > 0 ? w * change(ALONSO_1999_UV_BLUE, temperature, f) : 0)
  );
}

/** Metal-poor and metal-rich stars differ less and less above 7000 K; below the cool end no relation holds and the terms die away. */
function weight(logTeff: number, coolEnd: number): number {
  return blend(logTeff, 3.95, 3.83) * blend(logTeff, 3.519, coolEnd);
}

/**
 * What dwarfs of another metallicity differ from solar ones at the same temperature: colours by Casagrande et al. 2010, Gaia's by Mucciarelli
 * et al. 2021, U-V and the bolometric correction by Alonso et al. 1999. Full from 4300 to 6800 K, none above 8900 and below 3300 K.
 * The ultraviolet agrees with the excess of Karaali et al. 2003, MNRAS 343, 1013 (from memory): U-B of a star of [Fe/H] -1 and 5772 K changes by
 * -0.22 here, by -0.25 there.
 */
export function dwarfMetallicity(logTeff: number, f: number): Colours {
  const t = heldBetween(logTeff, 3.633, 3.86, 0.01);
  const temperature = 10 ** t;
  const w = weight(logTeff, 3.633);
  const by = (colour: string) => w * change(find(CASAGRANDE_2010, colour), temperature, f);
  const gaia = (colour: string) => w * change(find(MUCCIARELLI_2021_DWARFS, colour), temperature, f);
  const bv = by('B-V');
  const vi = by('V-Ic');
  const level = thetaColour(find(CASAGRANDE_2010, 'V-Ic'), temperature, 0);
  const bpRp = gaia('BP-RP');
  return {
    bcV: w * (alonsoCorrection(t, f) - alonsoCorrection(t, 0)),
    bv,
    ub: w * changeOfUV(t, f) - bv,
    vr: by('V-Rc'),
    vi,
    vj: by('V-J'),
    vh: by('V-H'),
    vk: by('V-Ks'),
    gv: gMinusV(level + vi) - gMinusV(level),
    bpRp,
    gRp: bpRp - gaia('BP-G'),
  };
}

/**
 * The same for giants: B-V, U-V and bolometric correction by Alonso et al. 1999, infrared colours by Gonzalez Hernandez & Bonifacio 2009,
 * Gaia's by Mucciarelli et al. 2021. V-Ic has no term there (Alonso et al. find none). Full from 3900 to 6800 K.
 */
export function giantMetallicity(logTeff: number, f: number): Colours {
  const t = heldBetween(logTeff, 3.6, 3.86, 0.01);
  const temperature = 10 ** t;
  const w = weight(logTeff, 3.591);
  // The relations meet at B-V 0.75, which metal-poor giants reach at 4900 K.
  const red = blend(t, 3.71, 3.67);
  const bv =
    w *
    ((red > 0 ? red * change(ALONSO_1999_RED, temperature, f) : 0) +
      (red < 1 ? (1 - red) * change(ALONSO_1999_BLUE, temperature, f) : 0));
  const infrared = (colour: string) => w * change(find(GONZALEZ_HERNANDEZ_2009_GIANTS, colour), temperature, f);
  const gaia = (colour: string) => w * change(find(MUCCIARELLI_2021_GIANTS, colour), temperature, f);
  return {
    bcV: w * (alonsoCorrection(t, f) - alonsoCorrection(t, 0)),
    bv,
    ub: w * changeOfUV(t, f) - bv,
    vr: 0,
    vi: 0,
    vj: infrared('V-J'),
    vh: infrared('V-H'),
    vk: infrared('V-Ks'),
    gv: 0,
    bpRp: gaia('BP-RP'),
    gRp: gaia('G-RP'),
  };
}
