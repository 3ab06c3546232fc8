import type { Catalogue } from '../catalogue/catalogue';
import { type Band, bandsOfColour, type ColourName } from '../quantity/band';
import { observedColour, preferredColour, preferredMagnitude } from '../stars/observed-colour';

/** Stars in a colour-magnitude diagram, as observed. */
export interface DiagramStars {
  readonly colourName: ColourName;
  readonly magnitudeBand: Band;
  /** Number of stars that can be used. */
  readonly count: number;
  /** Rows of the catalogue they come from, shape (count). */
  readonly rows: Uint32Array;
  /** mag, shape (count), as are all that follow. */
  readonly colour: Float64Array;
  readonly magnitude: Float64Array;
  readonly colourError: Float64Array;
  readonly magnitudeError: Float64Array;
  /** Covariance of colour and magnitude of a star, which share a band's error, mag^2. */
  readonly covariance: Float64Array;
  /** Probability of belonging to the cluster; 1 where the catalogue does not say. */
  readonly probability: Float64Array;
  /** Rows left out because a value or error is missing. */
  readonly dropped: number;
  /** What a reader should know. */
  readonly notes: readonly string[];
}

/** Which diagram, and whose membership. */
export interface DiagramChoice {
  /** Default: BP-RP, else B-V, else the first colour the catalogue has. */
  colour?: ColourName;
  /** Default: G with Gaia colours, V with Johnson ones. */
  magnitude?: Band;
  /** Column with the membership probability. Default: `membershipProbability` where there is one. */
  probability?: string;
  /** Error taken where the catalogue gives none, mag. Default: 0.02. */
  missingError?: number;
}

/**
 * Colour, magnitude, errors and probability of the stars of a catalogue.
 * @throws Error when the catalogue lacks the bands
 */
export function diagramStars(caller: string, catalogue: Catalogue, choice: DiagramChoice): DiagramStars {
  const colourName = choice.colour ?? preferredColour(catalogue);
  if (colourName === null) {
    throw new Error(
      `${caller}: ${catalogue.source} has no colour: give the roles of two magnitudes, for example ` +
        `roles: { 'magnitude.B': 'b_mag', 'magnitude.V': 'v_mag' }, when reading.`,
    );
  }
  const magnitudeBand = choice.magnitude ?? preferredMagnitude(catalogue, colourName);
  if (magnitudeBand === null)
    throw new Error(`${caller}: ${catalogue.source} has no magnitude to go with ${colourName}.`);
  const { blue, red } = bandsOfColour(colourName);
  const observed = observedColour(caller, catalogue, colourName);
  const magnitude = catalogue.numbers(`magnitude.${magnitudeBand}`);
  const errorRole = `magnitude.${magnitudeBand}.error`;
  const magnitudeErrors = catalogue.has(errorRole) ? catalogue.numbers(errorRole) : null;
  const name = choice.probability ?? (catalogue.has('membershipProbability') ? 'membershipProbability' : null);
  const probabilities = name === null ? null : catalogue.numbers(name);
  const fallback = choice.missingError ?? 0.02;
  const n = catalogue.rowCount;
  const usable = new Uint32Array(n);
  let count = 0;
  let unknown = 0;
  for (let i = 0; i < n; i++) {
    const p = probabilities === null ? 1 : probabilities[i];
    if (Number.isFinite(observed.values[i]) && Number.isFinite(magnitude[i]) && p > 0) usable[count++] = i;
  }
  const rows = usable.slice(0, count);
  const make = () => new Float64Array(count);
  const out = {
    colour: make(),
    magnitude: make(),
    colourError: make(),
    magnitudeError: make(),
    covariance: make(),
    probability: make(),
  };
  const sign = !observed.fromMagnitudes ? 0 : magnitudeBand === blue ? 1 : magnitudeBand === red ? -1 : 0;
  for (let k = 0; k < count; k++) {
    const i = rows[k];
    const ec = observed.errors[i];
    const em = magnitudeErrors === null ? Number.NaN : magnitudeErrors[i];
    if (!(ec > 0) || !(em > 0)) unknown++;
    out.colour[k] = observed.values[i];
    out.magnitude[k] = magnitude[i];
    out.colourError[k] = ec > 0 ? ec : fallback;
    out.magnitudeError[k] = em > 0 ? em : fallback;
    out.covariance[k] = ec > 0 && em > 0 ? sign * Math.min(em * em, ec * ec) : 0;
    out.probability[k] = probabilities === null ? 1 : Math.min(1, probabilities[i]);
  }
  const notes = unknown > 0 ? [`${unknown} stars have no photometric error; ${fallback} mag was taken.`] : [];
  return { colourName, magnitudeBand, count, rows, ...out, dropped: n - count, notes };
}
