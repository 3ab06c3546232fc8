import { smoothWithin } from '../../numeric/smoothing-spline';
import { ALONSO_1999_BLUE, ALONSO_1999_RED, ALONSO_1999_UV_BLUE, ALONSO_1999_UV_RED } from '../scales/alonso-1999';
import { type ThetaRelation, thetaColour } from '../scales/theta-relation';

const FROM = 3.56;
const TO = 3.9;
const STEP = 0.01;
/** How far the joined curve may stray from either relation, mag: they were fitted to stars that scatter by 0.05. */
const TOLERANCE = 0.015;

/**
 * A colour against log Teff from a relation for blue stars and one for red, each where the colour lies in its range, with a smooth curve through both
 * and over the gap between. The gap moves to lower temperature in metal-poor giants.
 */
function joinedRelations(
  blue: ThetaRelation,
  red: ThetaRelation,
  bluest: number,
  reddest: number,
  f: number,
): (logTeff: number) => number {
  const x: number[] = [];
  const y: number[] = [];
  for (let t = FROM; t < TO; t += STEP) {
    const byRed = thetaColour(red, 10 ** t, f);
    const byBlue = thetaColour(blue, 10 ** t, f);
    if (byRed >= reddest) {
      x.push(t);
      y.push(byRed);
    } else if (byBlue <= bluest) {
      x.push(t);
      y.push(byBlue);
    }
  }
  return smoothWithin(
    x,
    y,
    x.map(() => TOLERANCE),
    3e-7,
  );
}

/** B-V of giants of a metallicity as a function of log Teff, 3.56 to 3.9. Source: Alonso et al. 1999. */
export function giantBV(f: number): (logTeff: number) => number {
  return joinedRelations(ALONSO_1999_BLUE, ALONSO_1999_RED, 0.7, 0.8, f);
}

/** U-V of giants of a metallicity as a function of log Teff, 3.56 to 3.9. Source: Alonso et al. 1999. */
export function giantUV(f: number): (logTeff: number) => number {
  return joinedRelations(ALONSO_1999_UV_BLUE, ALONSO_1999_UV_RED, 1.2, 1.5, f);
}
