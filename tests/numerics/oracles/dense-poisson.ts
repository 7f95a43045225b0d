/** Solves the five-point problem by Gaussian elimination on the full matrix; cells without open faces get 0. */
export function densePoisson(nx: number, ny: number, x: Float64Array, y: Float64Array, b: Float64Array): Float64Array {
  const n = nx * ny;
  const a = Array.from({ length: n }, () => new Float64Array(n + 1));
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const at = j * nx + i;
      const faces: [number, number][] = [
        [x[j * (nx + 1) + i]!, i > 0 ? at - 1 : -1],
        [x[j * (nx + 1) + i + 1]!, i + 1 < nx ? at + 1 : -1],
        [y[j * nx + i]!, j > 0 ? at - nx : -1],
        [y[(j + 1) * nx + i]!, j + 1 < ny ? at + nx : -1],
      ];
      for (const [k, other] of faces) {
        a[at]![at]! += k;
        if (other >= 0) a[at]![other]! -= k;
      }
      if (a[at]![at] === 0) a[at]![at] = 1;
      else a[at]![n] = b[at]!;
    }
  }
  for (let k = 0; k < n; k++) {
    for (let row = k + 1; row < n; row++) {
      const factor = a[row]![k]! / a[k]![k]!;
      if (factor !== 0) for (let column = k; column <= n; column++) a[row]![column]! -= factor * a[k]![column]!;
    }
  }
  const out = new Float64Array(n);
  for (let k = n - 1; k >= 0; k--) {
    let sum = a[k]![n]!;
    for (let column = k + 1; column < n; column++) sum -= a[k]![column]! * out[column]!;
    out[k] = sum / a[k]![k]!;
  }
  return out;
}
