import { ageTurnoffDiagram } from '../../kernel-lib/diagrams/age-turnoff-diagram';
import { colourMagnitudeDiagram } from '../../kernel-lib/diagrams/colour-magnitude-diagram';
import { cornerDiagram } from '../../kernel-lib/diagrams/corner-diagram';
import type { Figure } from '../../kernel-lib/diagrams/figure';
import { hrDiagram } from '../../kernel-lib/diagrams/hr-diagram';
import { massLuminosityDiagram } from '../../kernel-lib/diagrams/mass-luminosity-diagram';
import { parallaxHistogram } from '../../kernel-lib/diagrams/parallax-histogram';
import { properMotionDiagram } from '../../kernel-lib/diagrams/proper-motion-diagram';
import { residualDiagram } from '../../kernel-lib/diagrams/residual-diagram';
import { skyMap } from '../../kernel-lib/diagrams/sky-map';
import { measured, measuredFromSigma } from '../../kernel-lib/quantity/measured';
import { randomStream } from '../../kernel-lib/quantity/random';
import { inventedField } from './invented-field';

/** One figure of every kind, from invented data. */
export function allFigures(): Record<string, Figure> {
  const { field, probability } = inventedField();
  const random = randomStream(2);
  const normal = (n: number, mean: number, sigma: number) =>
    Float64Array.from({ length: n }, () => mean + sigma * random.normal());
  const age = Float64Array.from({ length: 40 }, (_, i) => 10 ** (-2 + i / 13));
  const mass = Float64Array.from({ length: 60 }, (_, i) => 0.3 + i / 6);
  return {
    hr: hrDiagram(field, {
      turnoff: { logTeff: 3.95, logL: 1.4 },
      isochrones: [{ logAge: 8.85, logTeff: [3.6, 3.8, 3.95, 3.7], logL: [-0.8, 0.5, 1.6, 1.8], breaks: [0, 3] }],
    }),
    colourMagnitude: colourMagnitudeDiagram(field, {
      probability,
      modulus: 6.4,
      ebv: 0.05,
      isochrones: [{ logAge: 8.85, magnitudes: { B: [0.2, 4.2, 7.9], V: [0.1, 3.8, 7] }, breaks: [0, 2] }],
      ridge: { colour: [0.1, 0.5, 1], magnitude: [7.5, 10, 13] },
      turnoff: { colour: measuredFromSigma(0.1, 0.02), magnitude: measured(7.6, 7.4, 7.9) },
    }),
    properMotion: properMotionDiagram(field, { probability, centre: { ra: -36, dec: -13 } }),
    sky: skyMap(field, { probability }),
    parallax: parallaxHistogram(field, { probability, parallax: measuredFromSigma(5.3, 0.05, 'mas') }),
    residual: residualDiagram({ x: normal(120, 10, 2), residual: normal(120, 0, 0.02), error: normal(120, 0.02, 0) }),
    age: ageTurnoffDiagram([{ age, position: age.map((a) => 2.4 + 2.6 * Math.log10(a)), label: '<solar>' }], {
      measured: measured(2.1, 1.95, 2.3, 'mag'),
      age: measured(0.71, 0.6, 0.83, 'Gyr'),
    }),
    massLuminosity: massLuminosityDiagram(
      { mass, luminosity: mass.map((m) => m ** 3.6), massError: mass.map((m) => 0.02 * m) },
      { curves: [{ mass: [0.3, 10], luminosity: [0.3 ** 3.5, 10 ** 3.5] }] },
    ),
    corner: cornerDiagram(
      { logAge: normal(3000, 8.85, 0.04), ebv: normal(3000, 0.05, 0.01), modulus: normal(3000, 6.4, 0.03) },
      { units: { ebv: 'mag', modulus: 'mag' }, truth: { logAge: 8.84 } },
    ),
  };
}
