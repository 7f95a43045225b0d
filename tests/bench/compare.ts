/** Largest difference as a share of the largest exact value. */
export function largestError(values: ArrayLike<number>, exact: ArrayLike<number>): number {
  let peak = 0;
  let error = 0;
  for (let i = 0; i < exact.length; i++) {
    peak = Math.max(peak, Math.abs(exact[i]!));
    const difference = Math.abs(values[i]! - exact[i]!);
    if (!(difference <= error)) error = difference;
  }
  return error / peak;
}
