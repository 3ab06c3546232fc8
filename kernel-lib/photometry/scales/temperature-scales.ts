import { findRoot } from '../../numeric/find-root';
import { bandsOfColour, type ColourName } from '../../quantity/band';
import { checkChoice } from '../../quantity/options';
import { colourBranch } from '../colour-branch';
import { compositeLight } from '../composite/composite-light';
import { bandCorrection, giantShare, METALLICITY_RANGE } from '../light-table';
import { tableCorrection, tableRange } from '../table-light';
import { ALONSO_1999_BLUE, ALONSO_1999_RED } from './alonso-1999';
import { CASAGRANDE_2010 } from './casagrande-2010';
import { vanBelleColour, vanBelleTemperature } from './cool-giants';
import { FLOWER_RANGE, flowerLogTeff, flowerSupergiantLogTeff } from './flower-1996';
import { GONZALEZ_HERNANDEZ_2009_GIANTS } from './gonzalez-hernandez-2009';
import { MUCCIARELLI_2021_DWARFS, MUCCIARELLI_2021_GIANTS, MUCCIARELLI_2021_SOURCE } from './mucciarelli-2021';
import type { ColourRelation, TemperatureScale } from './temperature-scale';
import { thetaColourRelation, thetaScale } from './theta-scale';

const FROM_LOG = 3.377;
const TO_LOG = 4.876;

/** A relation from a colour that is a function of log Teff. */
function fromColour(colour: (logTeff: number) => number, low: number, high: number): ColourRelation {
  const branch = colourBranch(colour, low, high);
  return {
    range: branch.range,
    temperature: (c) => 10 ** branch.logTeff(c),
    colour: (temperature) => colour(Math.log10(temperature)),
  };
}

const COMPOSITE: TemperatureScale = Object.freeze({
  name: 'composite',
  stars: 'dwarfs by default; giants and supergiants when a gravity is given',
  accuracy: 'dwarfs 2 % (the table, smoothed within 0.03 mag); giants 100 K; supergiants 3 %',
  source:
    'Pecaut & Mamajek 2013 with terms and branches of the other scales, see photometry/composite; what isochrones are made with',
  colours: 'any',
  metallicities: METALLICITY_RANGE,
  relation(colour: ColourName, metallicity: number, logGravity: number): ColourRelation {
    const { blue, red } = bandsOfColour(colour);
    const light = compositeLight();
    return fromColour(
      (t) => {
        const share = giantShare(t, logGravity);
        return bandCorrection(light[red], t, share, metallicity) - bandCorrection(light[blue], t, share, metallicity);
      },
      FROM_LOG,
      TO_LOG,
    );
  },
});

const TABLE: TemperatureScale = Object.freeze({
  name: 'pecaut-mamajek-2013',
  stars: 'dwarfs of solar metallicity',
  accuracy: 'about 100 K for F to K, 75 K for M, 3 to 5 % for O and B stars (scatter among papers, from memory)',
  source:
    'Pecaut & Mamajek 2013, ApJS 208, 9, Table 5, on-line version 2024.05.15; point by point, monotone cubic between',
  colours: 'any',
  metallicities: null,
  relation(colour: ColourName): ColourRelation {
    const { blue, red } = bandsOfColour(colour);
    const [low, high] = [blue, red].map(tableRange).reduce((a, b) => [Math.max(a[0], b[0]), Math.min(a[1], b[1])]);
    return fromColour((t) => tableCorrection(red, t) - tableCorrection(blue, t), low, high);
  },
});

function flower(name: string, stars: string, logTeff: (bv: number) => number, red: number): TemperatureScale {
  return Object.freeze({
    name,
    stars,
    accuracy: '2 to 4 % (scatter of the stars, from memory)',
    source: 'Flower 1996, ApJ 469, 355, as corrected by Torres 2010, AJ 140, 1158; coefficients from memory',
    colours: ['B-V'] as const,
    metallicities: null,
    relation(): ColourRelation {
      const [low] = FLOWER_RANGE;
      return {
        range: [low, red],
        temperature: (bv) => (bv >= low && bv <= red ? 10 ** logTeff(bv) : Number.NaN),
        colour: (temperature) => findRoot((bv) => logTeff(bv) - Math.log10(temperature), low, red),
      };
    },
  });
}

const ALONSO: TemperatureScale = Object.freeze({
  name: 'alonso-1999',
  stars: 'giants F0 to K5',
  accuracy: `${ALONSO_1999_BLUE.scatter} K at B-V below 0.75, ${ALONSO_1999_RED.scatter} K above`,
  source: 'Alonso, Arribas & Martinez-Roger 1999, A&AS 140, 261, Table 2; coefficients from memory',
  colours: ['B-V'] as const,
  metallicities: [-3, 0.5] as const,
  relation(_colour: ColourName, metallicity: number): ColourRelation {
    const blue = thetaColourRelation(ALONSO_1999_BLUE, metallicity, ALONSO.metallicities);
    const red = thetaColourRelation(ALONSO_1999_RED, metallicity, ALONSO.metallicities);
    // Both hold from 0.7 to 0.8 mag: one goes over into the other there.
    const temperature = (c: number) => {
      const w = Math.min(1, Math.max(0, (c - 0.7) / 0.1));
      return (w < 1 ? (1 - w) * blue.temperature(c) : 0) + (w > 0 ? w * red.temperature(c) : 0);
    };
    const [low] = ALONSO_1999_BLUE.range;
    const [, high] = ALONSO_1999_RED.range;
    return { range: [low, high], temperature, colour: (t) => findRoot((c) => temperature(c) - t, low, high) };
  },
});

const VAN_BELLE: TemperatureScale = Object.freeze({
  name: 'van-belle-1999',
  stars: 'cool giants, by angular diameters',
  accuracy: '80 K (from memory)',
  source: 'van Belle et al. 1999, AJ 117, 521; from memory',
  colours: ['V-Ks'] as const,
  metallicities: null,
  relation(): ColourRelation {
    const range = [2.5, 8] as const;
    const inside = (c: number) => c >= range[0] && c <= range[1];
    return {
      range,
      temperature: (c) => (inside(c) ? vanBelleTemperature(c) : Number.NaN),
      colour: (t) => (inside(vanBelleColour(t)) ? vanBelleColour(t) : Number.NaN),
    };
  },
});

/** Every colour-temperature scale. The first is the default. */
export const TEMPERATURE_SCALES: readonly TemperatureScale[] = Object.freeze([
  COMPOSITE,
  TABLE,
  flower('flower-1996', 'main-sequence stars, subgiants and giants', flowerLogTeff, 1.7),
  flower('flower-1996-supergiants', 'supergiants', flowerSupergiantLogTeff, 1.7),
  thetaScale(
    {
      name: 'casagrande-2010',
      stars: 'dwarfs and subgiants F to K',
      accuracy: '25 K (V-Ks) to 73 K (B-V)',
      source: 'Casagrande et al. 2010, A&A 512, A54, Table 4; coefficients from memory',
      metallicities: [-5, 0.4],
    },
    CASAGRANDE_2010,
  ),
  ALONSO,
  thetaScale(
    {
      name: 'gonzalez-hernandez-2009-giants',
      stars: 'giants F to K',
      accuracy: '23 K (V-Ks) to 94 K (V-J)',
      source: 'Gonzalez Hernandez & Bonifacio 2009, A&A 497, 497, Table 5; coefficients and ranges from memory',
      metallicities: [-4, 0.2],
    },
    GONZALEZ_HERNANDEZ_2009_GIANTS,
  ),
  thetaScale(
    {
      name: 'mucciarelli-2021-dwarfs',
      stars: 'dwarfs F to K',
      accuracy: '61 K (BP-RP), 82 K (BP-G)',
      source: `${MUCCIARELLI_2021_SOURCE}, Table 1; coefficients from memory`,
      metallicities: [-4, 0.4],
    },
    MUCCIARELLI_2021_DWARFS,
  ),
  thetaScale(
    {
      name: 'mucciarelli-2021-giants',
      stars: 'giants F to K',
      accuracy: '83 K (BP-RP, BP-G), 71 K (G-RP)',
      source: `${MUCCIARELLI_2021_SOURCE}, Table 1; coefficients from memory`,
      metallicities: [-4, 0.4],
    },
    MUCCIARELLI_2021_GIANTS,
  ),
  VAN_BELLE,
]);

/**
 * A scale by its name, for a colour.
 * @throws TypeError when there is no such scale, or it does not know the colour
 */
export function temperatureScale(caller: string, name: string, colour: ColourName): TemperatureScale {
  const names = TEMPERATURE_SCALES.map((s) => s.name);
  checkChoice<string>(caller, 'scale', name, names);
  bandsOfColour(colour);
  const scale = TEMPERATURE_SCALES[names.indexOf(name)];
  if (scale.colours === 'any' || scale.colours.includes(colour)) return scale;
  const others = TEMPERATURE_SCALES.filter((s) => s.colours === 'any' || s.colours.includes(colour)).map((s) => s.name);
  throw new TypeError(
    `${caller}: scale "${name}" has no ${colour}, only ${scale.colours.join(', ')}. Scales with ${colour}: ${others.join(', ')}.`,
  );
}
