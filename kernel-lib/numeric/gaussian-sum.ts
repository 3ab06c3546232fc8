import { findRoot } from './find-root';
import { normalCumulative } from './normal-distribution';

/** One Gaussian of a weighted sum. */
export interface GaussianPart {
  readonly at: number;
  readonly sigma: number;
  /** Relative share, positive; they need not add up to 1. */
  readonly share: number;
}

/**
 * Quantile of a weighted sum of Gaussians.
 * @param parts    at least one, sigma positive
 * @param fraction 0 to 1, exclusive
 * @example gaussianSumQuantile([{ at: 0, sigma: 1, share: 1 }], 0.5) // => 0
 */
export function gaussianSumQuantile(parts: readonly GaussianPart[], fraction: number): number {
  const total = parts.reduce((sum, p) => sum + p.share, 0);
  const below = (x: number) =>
    parts.reduce((sum, p) => sum + (p.share / total) * normalCumulative((x - p.at) / p.sigma), 0) - fraction;
  const reach = 9 * Math.max(...parts.map((p) => p.sigma));
  return findRoot(below, Math.min(...parts.map((p) => p.at)) - reach, Math.max(...parts.map((p) => p.at)) + reach);
}
