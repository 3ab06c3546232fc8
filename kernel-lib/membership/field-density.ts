import type { FieldModel } from './field-stars';
import type { Stars } from './stars';

const NORM = (2 * Math.PI) ** -1.5;

/**
 * Density of each star under the field alone, its errors included, the cluster's share left out and the rest scaled to 1.
 * @returns per (mas/yr)^2 mas, shape (count)
 */
export function fieldDensity(stars: Stars, field: FieldModel): Float64Array {
  const { count, values, covariance, errorClass, uniformDensity } = stars;
  const { components, means, covariances, shares } = field;
  const width = components + 2;
  const out = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const row = errorClass[i] * width;
    const s = 6 * i;
    let total = shares[row + components] * uniformDensity;
    for (let k = 0; k < components; k++) {
      const c = 6 * k;
      const a = covariances[c] + covariance[s];
      const b = covariances[c + 1] + covariance[s + 1];
      const d = covariances[c + 2] + covariance[s + 2];
      const e = covariances[c + 3] + covariance[s + 3];
      const f = covariances[c + 4] + covariance[s + 4];
      const g = covariances[c + 5] + covariance[s + 5];
      const c00 = e * g - f * f;
      const c01 = d * f - b * g;
      const c02 = b * f - d * e;
      const inverse = 1 / (a * c00 + b * c01 + d * c02);
      const d0 = values[3 * i] - means[3 * k];
      const d1 = values[3 * i + 1] - means[3 * k + 1];
      const d2 = values[3 * i + 2] - means[3 * k + 2];
      const q =
        (d0 * (c00 * d0 + 2 * c01 * d1 + 2 * c02 * d2) +
          d1 * ((a * g - d * d) * d1 + 2 * (b * d - a * f) * d2) +
          d2 * (a * e - b * b) * d2) *
        inverse;
      total += shares[row + k] * NORM * Math.sqrt(inverse) * Math.exp(-0.5 * q);
    }
    out[i] = total / (1 - shares[row + components + 1]);
  }
  return out;
}
