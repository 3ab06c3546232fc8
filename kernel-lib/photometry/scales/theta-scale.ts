import type { ColourName } from '../../quantity/band';
import type { ColourRelation, TemperatureScale } from './temperature-scale';
import { type ThetaRelation, thetaColour, thetaTemperature } from './theta-relation';

/** Rounding may carry a colour just outside a range that it came from. */
const SLACK = 1e-9;

/** A scale of relations of 5040 K / T, one a colour. */
export function thetaScale(
  parts: Omit<TemperatureScale, 'colours' | 'relation'>,
  relations: readonly ThetaRelation[],
): TemperatureScale {
  const colours = relations.map((r) => r.colour);
  return Object.freeze({
    ...parts,
    colours,
    relation(colour: ColourName, metallicity: number): ColourRelation {
      return thetaColourRelation(relations[colours.indexOf(colour)], metallicity, parts.metallicities);
    },
  });
}

/** One of them at one metallicity. */
export function thetaColourRelation(
  relation: ThetaRelation,
  f: number,
  metallicities: readonly [number, number] | null,
): ColourRelation {
  const [low, high] = relation.range;
  const holds = metallicities === null || (f >= metallicities[0] && f <= metallicities[1]);
  const inside = (c: number) => holds && c >= low - SLACK && c <= high + SLACK;
  return {
    range: relation.range,
    temperature: (c) => (inside(c) ? thetaTemperature(relation, c, f) : Number.NaN),
    colour(temperature) {
      const c = thetaColour(relation, temperature, f);
      return inside(c) ? c : Number.NaN;
    },
  };
}
