/** Dense linear algebra on Float64Array, in place: LU with partial pivoting. */

/**
 * LU factorisation with partial pivoting of a row-major n by n matrix, in place.
 * @param matrix n*n entries, overwritten by L (unit diagonal) and U
 * @param pivots n entries, receives the row exchanged at each step
 * @returns false if a pivot is zero or not finite (matrix singular to working precision)
 * @see Golub & Van Loan 2013, Matrix Computations, alg. 3.4.1
 */
export function luFactor(matrix: Float64Array, n: number, pivots: Int32Array): boolean {
  for (let k = 0; k < n; k++) {
    let best = k;
    let size = Math.abs(matrix[k * n + k]);
    for (let i = k + 1; i < n; i++) {
      const candidate = Math.abs(matrix[i * n + k]);
      if (candidate > size) {
        size = candidate;
        best = i;
      }
    }
    pivots[k] = best;
    if (!(size > 0 && size < Number.POSITIVE_INFINITY)) return false;
    if (best !== k) {
      for (let j = 0; j < n; j++) {
        const swap = matrix[k * n + j];
        matrix[k * n + j] = matrix[best * n + j];
        matrix[best * n + j] = swap;
      }
    }
    const inverse = 1 / matrix[k * n + k];
    for (let i = k + 1; i < n; i++) {
      const factor = matrix[i * n + k] * inverse;
      if (factor === 0) continue;
      matrix[i * n + k] = factor;
      for (let j = k + 1; j < n; j++) matrix[i * n + j] -= factor * matrix[k * n + j];
    }
  }
  return true;
}

/** Solves A x = b with the output of {@link luFactor}; b is overwritten by x. */
export function luSolve(factors: Float64Array, n: number, pivots: Int32Array, b: Float64Array): void {
  for (let k = 0; k < n; k++) {
    const p = pivots[k];
    if (p !== k) {
      const swap = b[k];
      b[k] = b[p];
      b[p] = swap;
    }
  }
  for (let i = 1; i < n; i++) {
    let sum = b[i];
    for (let j = 0; j < i; j++) sum -= factors[i * n + j] * b[j];
    b[i] = sum;
  }
  for (let i = n - 1; i >= 0; i--) {
    let sum = b[i];
    for (let j = i + 1; j < n; j++) sum -= factors[i * n + j] * b[j];
    b[i] = sum / factors[i * n + i];
  }
}
