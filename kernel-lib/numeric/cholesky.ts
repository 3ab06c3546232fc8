/**
 * Inverse of a symmetric positive definite matrix, by Cholesky factors.
 * @param matrix shape (n, n), row by row; only the lower triangle is read; not changed
 * @returns shape (n, n), symmetric; null when the matrix is not positive definite (or holds NaN)
 * @example invertPositive(Float64Array.of(4, 0, 0, 2), 2) // => [0.25, 0, 0, 0.5]
 */
export function invertPositive(matrix: Float64Array, n: number): Float64Array | null {
  const l = choleskyFactor(matrix, n);
  if (l === null) return null;
  // Inverse of the factor, in place below the diagonal.
  const inverse = new Float64Array(n * n);
  for (let j = 0; j < n; j++) {
    inverse[j * n + j] = 1 / l[j * n + j];
    for (let i = j + 1; i < n; i++) {
      let sum = 0;
      for (let k = j; k < i; k++) sum -= l[i * n + k] * inverse[k * n + j];
      inverse[i * n + j] = sum / l[i * n + i];
    }
  }
  const out = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = 0;
      for (let k = i; k < n; k++) sum += inverse[k * n + i] * inverse[k * n + j];
      out[i * n + j] = sum;
      out[j * n + i] = sum;
    }
  }
  return out;
}

/**
 * Lower triangular L with L L^T equal to the matrix.
 * @param matrix shape (n, n), row by row; only the lower triangle is read
 * @returns shape (n, n); null when the matrix is not positive definite (or holds NaN)
 * @example choleskyFactor(Float64Array.of(4, 2, 2, 5), 2) // => [2, 0, 1, 2]
 */
export function choleskyFactor(matrix: Float64Array, n: number): Float64Array | null {
  const l = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = matrix[i * n + j];
      for (let k = 0; k < j; k++) sum -= l[i * n + k] * l[j * n + k];
      if (i === j) {
        if (!(sum > 0) || !Number.isFinite(sum)) return null;
        l[i * n + i] = Math.sqrt(sum);
      } else {
        l[i * n + j] = sum / l[j * n + j];
      }
    }
  }
  return l;
}
