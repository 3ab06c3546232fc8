import { alonsoCorrection } from '../scales/alonso-1999';
import { CASAGRANDE_2010 } from '../scales/casagrande-2010';
import { gMinusV } from '../scales/gaia-from-johnson';
import { GONZALEZ_HERNANDEZ_2009_GIANTS } from '../scales/gonzalez-hernandez-2009';
import { MUCCIARELLI_2021_DWARFS, MUCCIARELLI_2021_GIANTS } from '../scales/mucciarelli-2021';
import { type ThetaRelation, thetaColour } from '../scales/theta-relation';
import { blend, heldBetween } from './blend';
import type { Colours } from './colours';
import { giantBV, giantUV } from './giant-ultraviolet';

/** The relation of a list that gives a colour. */
function find(list: readonly ThetaRelation[], colour: string): ThetaRelation {
  return list.find((r) => r.colour === colour) as ThetaRelation;
}

/** Change of a colour at fixed temperature from solar metallicity to another, mag. */
function change(relation: ThetaRelation, temperature: number, f: number): number {
  return thetaColour(relation, temperature, f) - thetaColour(relation, temperature, 0);
}

type Curve = (logTeff: number) => number;
const curves = new Map<(f: number) => Curve, Map<number, Curve>>();

/** A curve for a metallicity, made once. */
function curve(make: (f: number) => Curve, f: number): Curve {
  let made = curves.get(make);
  if (made === undefined) {
    made = new Map();
    curves.set(make, made);
  }
  let found = made.get(f);
  if (found === undefined) {
    found = make(f);
    made.set(f, found);
  }
  return found;
}

function changeOfUV(logTeff: number, f: number): number {
  return curve(giantUV, f)(logTeff) - curve(giantUV, 0)(logTeff);
}

/** Metal-poor and metal-rich stars differ less and less above 7000 K; below the cool end no relation holds and the terms die away. */
function weight(logTeff: number, coolEnd: number): number {
  return blend(logTeff, 3.95, 3.83) * blend(logTeff, 3.519, coolEnd);
}

/**
 * What dwarfs of another metallicity differ from solar ones at the same temperature: colours by Casagrande et al. 2010, Gaia's by Mucciarelli
 * et al. 2021, U-V and the bolometric correction by Alonso et al. 1999. Full from 4300 to 6800 K, none above 8900 and below 3300 K.
 * The ultraviolet excess of Karaali et al. 2003, MNRAS 343, 1013 (from memory) makes U-B of a star of [Fe/H] -1 and 5772 K 0.25 mag less
 * than the Sun's; here it is 0.18 less. U of other metallicities is good to 0.1 mag for each dex.
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
  const bv = w * (curve(giantBV, f)(t) - curve(giantBV, 0)(t));
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
