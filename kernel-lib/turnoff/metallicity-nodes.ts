import type { StellarModel } from '../models/stellar-model';

/** A metallicity and its share. */
export interface MetallicityNode {
  readonly metallicity: number;
  readonly weight: number;
}

/** Three-point Gauss-Hermite nodes of an uncertain metallicity, held within the model's range; the central one comes second. */
export function metallicityNodes(model: StellarModel, metallicity: number, error: number): MetallicityNode[] {
  if (!(error > 0)) return [{ metallicity, weight: 1 }];
  const [low, high] = model.metallicityRange;
  const hold = (m: number) => Math.min(Math.max(m, low), high);
  return [
    { metallicity: hold(metallicity - Math.sqrt(3) * error), weight: 1 / 6 },
    { metallicity, weight: 2 / 3 },
    { metallicity: hold(metallicity + Math.sqrt(3) * error), weight: 1 / 6 },
  ];
}
