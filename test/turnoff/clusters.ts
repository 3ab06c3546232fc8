import type { Catalogue } from '../../kernel-lib/catalogue/catalogue';
import { isochrone } from '../../kernel-lib/models/isochrone';
import type { ColourName } from '../../kernel-lib/quantity/band';
import { type SimulateClusterOptions, simulateCluster } from '../../kernel-lib/simulate/simulate-cluster';

export const TRUTH = { age: 0.7, distance: 812, ebv: 0.11 };
export const MODULUS = 5 * Math.log10(TRUTH.distance) - 5;

/** An invented cluster without its field. */
export function cluster(seed: number, options: Partial<SimulateClusterOptions> = {}): Catalogue {
  return simulateCluster({ ...TRUTH, members: 460, seed, ...options });
}

/** The rows for which a test of G magnitude and BP-RP holds. */
export function only(catalogue: Catalogue, test: (g: number, colour: number) => boolean): Catalogue {
  const [g, bp, rp] = ['G', 'BP', 'RP'].map((b) => catalogue.numbers(`magnitude.${b}`));
  return catalogue.select(
    g.map((m, i) => (test(m, bp[i] - rp[i]) ? 1 : 0)),
    'test',
  );
}

/** Colour of the main sequence of the truth at an absolute magnitude, the turnoff's own branch apart. */
export function sequenceColour(colour: ColourName, age: number): (magnitude: number) => number {
  const iso = isochrone({ logAge: 9 + Math.log10(age), bands: ['G', 'BP', 'RP', 'B', 'V'], points: 2000 });
  const [blue, red] = colour.split('-').map((b) => iso.magnitudes[b as 'B'] as Float64Array);
  const y = iso.magnitudes[colour === 'B-V' ? 'V' : 'G'] as Float64Array;
  return (magnitude) => {
    for (let i = 1; i < iso.count && iso.phase[i] <= 1; i++) {
      if (y[i] <= magnitude && y[i - 1] > magnitude) {
        const t = (magnitude - y[i - 1]) / (y[i] - y[i - 1]);
        return blue[i - 1] - red[i - 1] + t * (blue[i] - red[i] - blue[i - 1] + red[i - 1]);
      }
    }
    return Number.NaN;
  };
}
