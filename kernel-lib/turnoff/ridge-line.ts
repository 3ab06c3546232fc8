import type { Catalogue } from '../catalogue/catalogue';
import type { Band, ColourName } from '../quantity/band';
import { checkOptions } from '../quantity/options';
import { htmlTable, presentable, textTable } from '../quantity/present';
import { type DiagramChoice, type DiagramStars, diagramStars } from './diagram-stars';
import { findRidge, type Ridge } from './ridge';

/** What `ridgeLine` takes. */
export interface RidgeLineOptions extends DiagramChoice {
  /** Stars a window, at least 6. Default: a twentieth of them, 10 to 60. */
  window?: number;
}

/** The ridge of the main sequence, as observed (reddened, apparent). Arrays of one length, bright to faint. */
export interface RidgeLine {
  readonly colourName: ColourName;
  readonly magnitudeBand: Band;
  readonly count: number;
  /** mag */
  readonly magnitude: Float64Array;
  /** mag */
  readonly colour: Float64Array;
  /** Standard error of the colour, mag. Neighbouring windows share half their stars, so their errors are not independent. */
  readonly colourError: Float64Array;
  /** Intrinsic width of the sequence of single stars, mag. */
  readonly width: Float64Array;
  /** Stars that count as single and belonging, a window. */
  readonly stars: Float64Array;
  readonly notes: readonly string[];
}

/** Fewest stars that a ridge can be drawn through. */
export const LEAST_STARS = 12;

/**
 * Ridge line of a main sequence: the locus of single stars. In every window of magnitude the colours are taken apart into a
 * narrow core, a tail of unresolved binaries on its red side and foreign stars, so binaries do not drag the line.
 * @param members  catalogue of member stars with a colour and a magnitude by role
 * @param options  which diagram; stars a window
 * @returns the line, bright to faint
 * @throws Error when the bands are missing or fewer than 12 stars have them; TypeError on an unknown option
 * @example ridgeLine(members, { colour: 'B-V' }).colour
 * On invented clusters with 35 % binaries the ridge lies 0.001 mag (BP-RP) to 0.003 mag (B-V) redward of the single stars in the
 * median, with scatter near the errors given; with 70 %, 0.004 to 0.008 mag. Within 0.3 mag of a faint limit, which takes
 * single stars away and leaves binaries, it can be 0.05 mag too red. The mixture is our own.
 */
export function ridgeLine(members: Catalogue, options: RidgeLineOptions = {}): RidgeLine {
  checkOptions('ridgeLine', options, ['colour', 'magnitude', 'probability', 'missingError', 'window']);
  const stars = diagramStars('ridgeLine', members, options);
  requireStars('ridgeLine', stars, LEAST_STARS);
  const ridge = findRidge(
    stars.colour,
    stars.magnitude,
    stars.colourError,
    byMagnitude(stars),
    windowFor(stars.count, options.window),
  );
  return showRidge(stars, ridge);
}

/** Stars a window of a sequence of so many. */
export function windowFor(count: number, asked?: number): number {
  return Math.max(6, Math.min(asked ?? Math.min(60, Math.max(10, Math.round(count / 20))), count));
}

/** Indices of the likely members (p >= 0.5) by ascending magnitude; all stars when too few are likely. */
export function byMagnitude(stars: DiagramStars): Uint32Array {
  const all = Uint32Array.from({ length: stars.count }, (_, i) => i);
  const likely = all.filter((i) => stars.probability[i] >= 0.5);
  const chosen = likely.length >= LEAST_STARS ? likely : all;
  return chosen.sort((a, b) => stars.magnitude[a] - stars.magnitude[b]);
}

/** @throws Error when there are too few stars for a step */
export function requireStars(caller: string, stars: DiagramStars, least: number): void {
  if (stars.count >= least) return;
  throw new Error(
    `${caller}: ${stars.count} stars have ${stars.colourName} and ${stars.magnitudeBand}; at least ${least} are needed. ` +
      `Lower the membership threshold, or choose a colour that more stars have.`,
  );
}

function showRidge(stars: DiagramStars, ridge: Ridge): RidgeLine {
  const line: RidgeLine = {
    colourName: stars.colourName,
    magnitudeBand: stars.magnitudeBand,
    count: ridge.magnitude.length,
    magnitude: ridge.magnitude,
    colour: ridge.colour,
    colourError: ridge.colourError,
    width: ridge.width,
    stars: ridge.stars,
    notes: Object.freeze([...stars.notes]),
  };
  const head = [stars.magnitudeBand, stars.colourName, 'error', 'width', 'single stars'];
  const rows = () =>
    Array.from(ridge.magnitude, (m, i) => [
      m.toFixed(2),
      ridge.colour[i].toFixed(4),
      ridge.colourError[i].toFixed(4),
      ridge.width[i].toFixed(4),
      ridge.stars[i].toFixed(1),
    ]);
  const title = () => `Ridge line of ${stars.count} stars, ${line.count} points`;
  return presentable(line, {
    text: () => [title(), textTable(head, rows()), ...line.notes].join('\n'),
    html: () => htmlTable(head, rows(), { caption: title(), numeric: [0, 1, 2, 3, 4] }),
  });
}
