import { type ClusterSetting, giantCorner, regionOf } from './cluster-setting';
import type { Ridge } from './ridge';
import type { Region } from './sequence-likelihood';

/** Stars this much fainter than the bluest point of the ridge are still compared, mag. */
const BELOW = 2.5;
/** Empty stretch above the brightest star that counts, mag: a cluster so young would be hard to miss. */
const ABOVE = 4;

/**
 * Where stars are compared: from the bright limit to 2.5 mag below the bluest point of the ridge. An empty stretch above the brightest star
 * is part of it, as a younger cluster would have stars there; but only where the stars themselves show that the catalogue does
 * not simply end, by a sequence that bends or by giants.
 */
export function turnoffRegion(setting: ClusterSetting, brightLimit: number | undefined): Region {
  const { stars, order, ridge, bluest, notes } = setting;
  const faintest = stars.magnitude[order[order.length - 1]] + 0.01;
  const brightest = stars.magnitude[order[0]];
  const faint = Math.min(faintest, Math.max(ridge.magnitude[bluest] + BELOW, brightest + 1));
  if (brightLimit !== undefined) return regionOf(setting, brightLimit, faint);
  const { giantColour, giantMagnitude } = giantCorner(setting);
  const isGiant = (k: number) => stars.colour[k] > giantColour && stars.magnitude[k] < giantMagnitude;
  const giants = order.filter(isGiant).length;
  if (giants >= 2 || bends(ridge, bluest)) return regionOf(setting, brightest - ABOVE, faint);
  notes.push(
    'The sequence does not bend within the stars given, and there are no giants: no turnoff shows. That no brighter stars are there ' +
      'was not counted; pass brightLimit if the catalogue would have them.',
  );
  const top = order.find((k) => !isGiant(k)) ?? order[0];
  return regionOf(setting, stars.magnitude[top] - 0.005, faint);
}

/** Whether the ridge turns red again above its bluest point by more than its errors. */
function bends(ridge: Ridge, bluest: number): boolean {
  for (let w = 0; w < bluest; w++) {
    const error = Math.hypot(ridge.colourError[w], ridge.colourError[bluest]);
    if (ridge.stars[w] >= 3 && ridge.colour[w] - ridge.colour[bluest] > Math.max(2.5 * error, 0.01)) return true;
  }
  return false;
}
