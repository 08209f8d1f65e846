/** Symmetric positive definite systems in place, row-major n×n in a flat array. */

/**
 * A = L·Lᵀ; L overwrites the lower triangle. Columns are scaled by their own norms first, so the
 * answer does not depend on the units of the parameters. False when A is not numerically definite.
 */
export function factor(a: Float64Array, n: number, relativeFloor = 1e-13): boolean {
  for (let j = 0; j < n; j++) {
    const diagonal = a[j * n + j];
    let d = diagonal;
    for (let k = 0; k < j; k++) d -= a[j * n + k] ** 2;
    if (!(d > relativeFloor * diagonal) || !(diagonal > 0)) return false;
    const root = Math.sqrt(d);
    a[j * n + j] = root;
    for (let i = j + 1; i < n; i++) {
      let s = a[i * n + j];
      for (let k = 0; k < j; k++) s -= a[i * n + k] * a[j * n + k];
      a[i * n + j] = s / root;
    }
  }
  return true;
}

/** Solves L·Lᵀ·x = b in place, L from `factor`. */
export function solveFactored(l: Float64Array, n: number, x: Float64Array): void {
  solveLower(l, n, x);
  solveUpper(l, n, x);
}

/** Solves L·x = b in place. */
export function solveLower(l: Float64Array, n: number, x: Float64Array): void {
  for (let i = 0; i < n; i++) {
    let s = x[i];
    for (let k = 0; k < i; k++) s -= l[i * n + k] * x[k];
    x[i] = s / l[i * n + i];
  }
}

/** Solves Lᵀ·x = b in place. */
export function solveUpper(l: Float64Array, n: number, x: Float64Array): void {
  for (let i = n - 1; i >= 0; i--) {
    let s = x[i];
    for (let k = i + 1; k < n; k++) s -= l[k * n + i] * x[k];
    x[i] = s / l[i * n + i];
  }
}

/** Inverse of a symmetric positive definite matrix, or null when it is not numerically definite. */
export function inverse(a: Float64Array, n: number): Float64Array | null {
  const l = a.slice();
  if (!factor(l, n)) return null;
  const out = new Float64Array(n * n);
  const column = new Float64Array(n);
  for (let j = 0; j < n; j++) {
    column.fill(0);
    column[j] = 1;
    solveFactored(l, n, column);
    for (let i = 0; i < n; i++) out[i * n + j] = column[i];
  }
  return out;
}
