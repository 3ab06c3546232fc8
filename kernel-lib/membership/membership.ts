import type { Catalogue } from '../catalogue/catalogue';
import type { ColumnData } from '../catalogue/columns';
import type { Measured } from '../quantity/measured';
import { checkRange } from '../quantity/options';
import { attachPresentation, escapeHtml, htmlTable, textTable } from '../quantity/present';

/** Column that `select` adds: each star's probability of being a member. */
export const PROBABILITY_COLUMN = 'membershipProbability';

/** A cluster in motion and parallax; spreads are the cluster's own, errors of the stars taken off. */
export interface ClusterSummary {
  /** mas/yr; for a space motion, as seen at the cluster's centre */
  readonly properMotionRa: Measured;
  readonly properMotionDec: Measured;
  /** mas; not determined when parallax was left out. No zero point applied. */
  readonly parallax: Measured;
  /** standard deviation in each direction, mas/yr */
  readonly dispersionRa: Measured;
  readonly dispersionDec: Measured;
  /** standard deviation of parallax, mas */
  readonly parallaxDispersion: Measured;
  /** members among all usable stars, 0 to 1 */
  readonly share: number;
  /** mean place of the members, deg, where positions are known */
  readonly centre: { readonly rightAscension: number; readonly declination: number } | null;
}

/** A cluster's velocity in space, relative to the Sun. */
export interface SpaceMotion {
  /** km/s along equatorial axes: x to right ascension 0, y to 90 deg on the equator, z to the north pole */
  readonly velocity: { readonly x: Measured; readonly y: Measured; readonly z: Measured };
  readonly speed: Measured;
  /** where on the sky the motions point to, deg */
  readonly convergentPoint: { readonly rightAscension: Measured; readonly declination: Measured };
  /** radial velocity expected at the cluster's centre, km/s */
  readonly radialVelocity: Measured;
  /** standard deviation in one direction, km/s; unresolved binaries widen it */
  readonly dispersion: Measured;
}

/** One component of the field, before errors. */
export interface FieldComponent {
  readonly share: number;
  readonly properMotionRa: number;
  readonly properMotionDec: number;
  readonly parallax: number;
  readonly spreadRa: number;
  readonly spreadDec: number;
  readonly parallaxSpread: number;
}

/** What a selection at one threshold is expected to hold. */
export interface SelectionQuality {
  readonly threshold: number;
  /** stars at or above it */
  readonly selected: number;
  /** members among them */
  readonly expectedMembers: number;
  /** share of the selected that is not expected to belong */
  readonly contamination: number;
  /** share of all expected members that is selected */
  readonly completeness: number;
}

/** What a Membership is made of. */
export interface MembershipParts {
  readonly catalogue: Catalogue;
  readonly motion: 'mean' | 'space-velocity';
  readonly found: boolean;
  readonly probability: Float64Array;
  readonly expectedCount: Measured;
  readonly cluster: ClusterSummary | null;
  readonly spaceMotion: SpaceMotion | null;
  readonly field: readonly FieldComponent[];
  readonly outlierShare: number;
  readonly evidence: number;
  readonly logLikelihood: number;
  readonly iterations: number;
  readonly converged: boolean;
  readonly starts: number;
  readonly seed: number;
  readonly usable: number;
  readonly notes: readonly string[];
  /** Columns that a selection carries beside the probability. */
  readonly extraColumns: readonly ColumnData[];
}

/**
 * Which stars belong to a cluster. Immutable; shows what was found as text or HTML.
 */
export class Membership implements Omit<MembershipParts, 'extraColumns'> {
  /** The catalogue that was searched. */
  readonly catalogue: Catalogue;
  readonly motion: 'mean' | 'space-velocity';
  /** Whether the stars need a cluster at all to be explained. */
  readonly found: boolean;
  /** Probability of belonging, a row of the catalogue each; NaN where a value or error that the fit needs is missing. */
  readonly probability: Float64Array;
  /** Number of members among the usable stars: the sum of the probabilities, with its error. */
  readonly expectedCount: Measured;
  /** null when no cluster was found */
  readonly cluster: ClusterSummary | null;
  /** null unless the motion was fitted in space */
  readonly spaceMotion: SpaceMotion | null;
  readonly field: readonly FieldComponent[];
  /** share of stars that fit neither cluster nor field components */
  readonly outlierShare: number;
  /** By how much a cluster lowers the Bayesian information criterion; above 10 is strong evidence. */
  readonly evidence: number;
  readonly logLikelihood: number;
  readonly iterations: number;
  readonly converged: boolean;
  /** starts that were tried */
  readonly starts: number;
  readonly seed: number;
  /** stars that took part */
  readonly usable: number;
  /** What a reader should know, one sentence each. */
  readonly notes: readonly string[];
  readonly #extra: readonly ColumnData[];

  constructor(parts: MembershipParts) {
    this.catalogue = parts.catalogue;
    this.motion = parts.motion;
    this.found = parts.found;
    this.probability = parts.probability;
    this.expectedCount = parts.expectedCount;
    this.cluster = parts.cluster;
    this.spaceMotion = parts.spaceMotion;
    this.field = Object.freeze([...parts.field]);
    this.outlierShare = parts.outlierShare;
    this.evidence = parts.evidence;
    this.logLikelihood = parts.logLikelihood;
    this.iterations = parts.iterations;
    this.converged = parts.converged;
    this.starts = parts.starts;
    this.seed = parts.seed;
    this.usable = parts.usable;
    this.notes = Object.freeze([...parts.notes]);
    this.#extra = parts.extraColumns;
    attachPresentation(this, { text: () => membershipText(this), html: () => membershipHtml(this) });
    Object.freeze(this);
  }

  /** Every row of the catalogue with its probability in the column `membershipProbability`. */
  withProbability(): Catalogue {
    const column = {
      name: PROBABILITY_COLUMN,
      values: this.probability,
      unit: '',
      description: 'probability of belonging to the cluster',
    };
    const what = this.found ? `${this.expectedCount} members expected` : 'no cluster found';
    return this.catalogue.withColumns([column, ...this.#extra], `findMembers, ${motionWords(this.motion)}: ${what}`, {
      note: `${this.usable} of ${this.catalogue.rowCount} rows usable, seed ${this.seed}`,
    });
  }

  /**
   * The stars that belong with at least the given probability, with the column `membershipProbability` (and, for a space
   * motion, `kinematicParallax` and `kinematicParallaxError`, mas).
   * @param threshold 0 to 1; default 0.5
   * @throws RangeError on a threshold outside 0 to 1
   * @example findMembers(field).select(0.8)
   */
  select(threshold = 0.5): Catalogue {
    const { selected, contamination, completeness } = this.quality(threshold);
    const mask = new Uint8Array(this.probability.length);
    for (let i = 0; i < mask.length; i++) mask[i] = this.probability[i] >= threshold ? 1 : 0;
    const note =
      selected === 0
        ? 'no star reaches it'
        : `expected contamination ${percent(contamination)}, completeness ${percent(completeness)}`;
    return this.withProbability().select(mask, `membership probability >= ${threshold}`, note);
  }

  /**
   * What a selection at a threshold is expected to hold, from the probabilities themselves.
   * @param threshold 0 to 1
   */
  quality(threshold: number): SelectionQuality {
    checkRange('select', 'threshold', threshold, 0, 1);
    let selected = 0;
    let inside = 0;
    let all = 0;
    for (const p of this.probability) {
      if (Number.isNaN(p)) continue;
      all += p;
      if (p < threshold) continue;
      selected++;
      inside += p;
    }
    return Object.freeze({
      threshold,
      selected,
      expectedMembers: inside,
      contamination: selected === 0 ? Number.NaN : 1 - inside / selected,
      completeness: all === 0 ? Number.NaN : inside / all,
    });
  }
}

function motionWords(motion: 'mean' | 'space-velocity'): string {
  return motion === 'mean' ? 'one mean motion' : 'one velocity in space';
}

function percent(x: number): string {
  return `${(100 * x).toFixed(1)} %`;
}

function headline(m: Membership): string {
  const where = `${m.usable} stars of ${m.catalogue.source}`;
  if (!m.found) return `No cluster found among ${where}: the field alone explains their motions.`;
  return `${m.expectedCount} members among ${where}, ${motionWords(m.motion)}`;
}

function clusterRows(m: Membership): string[][] {
  const rows: string[][] = [];
  const { cluster, spaceMotion } = m;
  if (cluster === null) return rows;
  rows.push(['proper motion in ra', String(cluster.properMotionRa)]);
  rows.push(['proper motion in dec', String(cluster.properMotionDec)]);
  rows.push(['parallax (no zero point applied)', String(cluster.parallax)]);
  rows.push(['own spread of motion, ra', String(cluster.dispersionRa)]);
  rows.push(['own spread of motion, dec', String(cluster.dispersionDec)]);
  rows.push(['own spread of parallax', String(cluster.parallaxDispersion)]);
  if (spaceMotion !== null) {
    const { velocity, convergentPoint } = spaceMotion;
    rows.push(['velocity x, y, z (equatorial)', `${velocity.x}, ${velocity.y}, ${velocity.z}`]);
    rows.push(['speed', String(spaceMotion.speed)]);
    rows.push(['velocity dispersion, one direction', String(spaceMotion.dispersion)]);
    rows.push(['radial velocity at the centre', String(spaceMotion.radialVelocity)]);
    rows.push(['convergent point', `${convergentPoint.rightAscension}, ${convergentPoint.declination}`]);
  }
  return rows;
}

function qualityRows(m: Membership): string[][] {
  if (!m.found) return [];
  return [0.5, 0.7, 0.9].map((t) => {
    const q = m.quality(t);
    const show = (x: number) => (Number.isNaN(x) ? '' : percent(x));
    return [t.toFixed(1), String(q.selected), show(q.contamination), show(q.completeness)];
  });
}

const QUALITY_HEAD = ['probability from', 'stars', 'contamination', 'completeness'];

function closing(m: Membership): string[] {
  const fit =
    `Field of ${m.field.length} Gaussian${m.field.length === 1 ? '' : 's'}; evidence for a cluster (fall of the Bayesian ` +
    `information criterion): ${m.evidence.toFixed(0)}; ${m.iterations} iterations, ` +
    `${m.converged ? 'converged' : 'not converged'}; ${m.starts} starts, seed ${m.seed}.`;
  return [fit, ...m.notes];
}

function membershipText(m: Membership): string {
  const parts = [headline(m)];
  if (m.found) {
    parts.push(textTable(['cluster', 'value'], clusterRows(m)), textTable(QUALITY_HEAD, qualityRows(m)));
  }
  return [...parts, ...closing(m)].join('\n');
}

function membershipHtml(m: Membership): string {
  const tables = m.found
    ? htmlTable(['cluster', 'value'], clusterRows(m)) + htmlTable(QUALITY_HEAD, qualityRows(m), { numeric: [1, 2, 3] })
    : '';
  const notes = closing(m)
    .map((n) => `<li>${escapeHtml(n)}</li>`)
    .join('');
  return `<div><p><b>${escapeHtml(headline(m))}</b></p>${tables}<ul>${notes}</ul></div>`;
}
