/**
 * One finite-volume step the plain way: cell by cell, faces looked up, tridiagonal systems solved afresh.
 * Flow x: (nx+1)*ny faces, y: nx*(ny+1), shares of a cell in one step; diffusion numbers likewise.
 */
export type VolumeProblem = { nx: number; ny: number; isWater: Uint8Array; flowX: Float64Array; flowY: Float64Array; diffusionX: Float64Array; diffusionY: Float64Array; isTrapezoidal: boolean };

export function plainVolumeStep(c: Float64Array, problem: VolumeProblem, isXFirst: boolean): { c: Float64Array; lost: number } {
  const { nx, ny } = problem;
  const wet = (i: number, j: number): boolean => i >= 0 && i < nx && j >= 0 && j < ny && problem.isWater[j * nx + i] === 1;
  const outside = (i: number, j: number): boolean => i < 0 || i >= nx || j < 0 || j >= ny;
  /** Flow through the face between cell (i, j) and its left (axis 0) or lower (axis 1) neighbour. */
  const flow = (axis: number, i: number, j: number): number => {
    const [a, b] = axis === 0 ? [i - 1, j] : [i, j - 1];
    if ((!wet(a, b) && !outside(a, b)) || (!wet(i, j) && !outside(i, j))) return 0;
    return axis === 0 ? problem.flowX[j * (nx + 1) + i]! : problem.flowY[j * nx + i]!;
  };
  const volume = (axis: number, i: number, j: number): number => 1 - (axis === 0 ? flow(0, i + 1, j) - flow(0, i, j) : flow(1, i, j + 1) - flow(1, i, j));
  let lost = 0;

  const sweep = (c0: Float64Array, axis: number, isFirst: boolean): Float64Array => {
    const out = new Float64Array(nx * ny);
    const length = axis === 0 ? nx : ny;
    for (let line = 0; line < (axis === 0 ? ny : nx); line++) {
      const cell = (k: number): [number, number] => (axis === 0 ? [k, line] : [line, k]);
      const f = (k: number): number => flow(axis, ...cell(k));
      const value = (k: number): number => {
        if (k < 0) return k === -1 && f(0) < 0 ? value(0) : 0;
        if (k >= length) return k === length && f(length) > 0 ? value(length - 1) : 0;
        const [i, j] = cell(k);
        return c0[j * nx + i]!;
      };
      const step = (k: number): number => (k < 0 || k > length || f(k) === 0 ? 0 : value(k) - value(k - 1));
      const half = (k: number): number => (step(k) * step(k + 1) > 0 ? (step(k) * step(k + 1)) / (step(k) + step(k + 1)) : 0);
      const flux = (k: number): number => {
        const from = f(k) < 0 ? k : k - 1;
        return f(k) * value(from) + (Math.abs(f(k)) - f(k) ** 2) * half(from);
      };
      lost += Math.max(0, flux(length)) - Math.min(0, flux(0));
      for (let k = 0; k < length; k++) {
        const [i, j] = cell(k);
        if (!wet(i, j)) continue;
        const change = flux(k + 1) - flux(k);
        out[j * nx + i] = isFirst ? (value(k) - change) / volume(axis, i, j) : value(k) * volume(1 - axis, i, j) - change;
      }
    }
    return out;
  };

  const diffuse = (c0: Float64Array, axis: number): Float64Array => {
    const out = Float64Array.from(c0);
    const length = axis === 0 ? nx : ny;
    for (let line = 0; line < (axis === 0 ? ny : nx); line++) {
      const at = (k: number): number => (axis === 0 ? line * nx + k : k * nx + line);
      const number = (k: number): number => {
        const [i, j] = axis === 0 ? [k, line] : [line, k];
        const [a, b] = axis === 0 ? [k - 1, line] : [line, k - 1];
        if (!wet(i, j) || !wet(a, b)) return 0;
        return (problem.isTrapezoidal ? 0.5 : 1) * (axis === 0 ? problem.diffusionX[j * (nx + 1) + i]! : problem.diffusionY[j * nx + i]!);
      };
      const pivot: number[] = [];
      const rest: number[] = [];
      for (let k = 0; k < length; k++) {
        const [low, high] = [k > 0 ? number(k) : 0, k + 1 < length ? number(k + 1) : 0];
        pivot[k] = 1 + low + high - (k > 0 ? (low * low) / pivot[k - 1]! : 0);
        rest[k] = c0[at(k)]! + (k > 0 ? (low / pivot[k - 1]!) * rest[k - 1]! : 0);
      }
      let after = 0;
      for (let k = length - 1; k >= 0; k--) {
        after = (rest[k]! + (k + 1 < length ? number(k + 1) * after : 0)) / pivot[k]!;
        out[at(k)] = problem.isTrapezoidal ? 2 * after - c0[at(k)]! : after;
      }
    }
    return out;
  };

  const moved = sweep(sweep(c, isXFirst ? 0 : 1, true), isXFirst ? 1 : 0, false);
  return { c: diffuse(diffuse(moved, 0), 1), lost };
}
