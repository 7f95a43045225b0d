import { LAND, type CellGrid } from './cell-grid';

/** Share of a pivot that must survive the corrections, else the plain diagonal stands in (a closed body of water has a last pivot of 0). */
const LEAST_PIVOT = 0.25;
/** Share of the dropped fill-in that is given back to the diagonal: 1 would be singular on closed water. */
const MODIFIED = 0.97;

/**
 * Solves sum over the faces of each cell of water of k (p - p_neighbour) = b: the five-point form of -div(k grad p) = b
 * with no flow through land; faces to open water hold p = 0 behind them. On a body of water without an open face b has
 * to sum to zero, and p is known but for a constant.
 * Conjugate gradients (Hestenes & Stiefel 1952) preconditioned by a modified incomplete Cholesky factor
 * (Gustafsson 1978, BIT 18:142). Keeps nothing between calls but the factor. Cost: about 15 ns a cell and round, and
 * rounds in proportion to the square root of the number of cells along a side.
 */
export class MaskedPoisson {
  private readonly linkX: Float64Array;
  private readonly linkY: Float64Array;
  private readonly diagonal: Float64Array;
  private readonly pivot: Float64Array;
  private readonly r: Float64Array;
  private readonly z: Float64Array;
  private readonly d: Float64Array;
  private readonly q: Float64Array;

  /** @param kX  (nx+1)*ny and kY nx*(ny+1): 0 at land; at an open face its value is the pull towards p = 0 */
  constructor(private readonly grid: CellGrid, private readonly kX: Float64Array, private readonly kY: Float64Array) {
    const n = grid.isWater.length;
    const { nx } = grid;
    [this.diagonal, this.pivot, this.r, this.z, this.d, this.q] = Array.from({ length: 6 }, () => new Float64Array(n)) as [Float64Array, Float64Array, Float64Array, Float64Array, Float64Array, Float64Array];
    this.linkX = Float64Array.from(kX, (k, face) => (this.joins(face % (nx + 1) > 0 ? face - Math.floor(face / (nx + 1)) - 1 : -1, 1) ? k : 0));
    this.linkY = Float64Array.from(kY, (k, face) => (this.joins(face - nx, nx) ? k : 0));
    this.factor();
  }

  /** Both the cell and the one `step` further are water. */
  private joins(cell: number, step: number): boolean {
    const { isWater } = this.grid;
    return cell >= 0 && cell + step < isWater.length && isWater[cell] !== LAND && isWater[cell + step] !== LAND;
  }

  private factor(): void {
    const { nx, ny, isWater } = this.grid;
    const { kX, kY, linkX, linkY, diagonal, pivot } = this;
    for (let j = 1; j < ny - 1; j++) {
      for (let i = 1; i < nx - 1; i++) {
        const k = j * nx + i;
        if (isWater[k] === LAND) continue;
        const x = j * (nx + 1) + i;
        diagonal[k] = kX[x]! + kX[x + 1]! + kY[k]! + kY[k + nx]!;
        const west = linkX[x]!;
        const south = linkY[k]!;
        const byWest = west * pivot[k - 1]!;
        const bySouth = south * pivot[k - nx]!;
        const left = diagonal[k]! - byWest * west - bySouth * south - MODIFIED * (byWest * linkY[k - 1 + nx]! + bySouth * linkX[x - nx]!);
        const kept = left < LEAST_PIVOT * diagonal[k]! ? diagonal[k]! : left;
        // A pond of one cell has nothing to solve.
        pivot[k] = kept > 0 ? 1 / kept : 0;
      }
    }
  }

  private precondition(): void {
    const { nx, ny } = this.grid;
    const { linkX, linkY, pivot, r, z } = this;
    for (let j = 1; j < ny - 1; j++) for (let k = j * nx + 1, x = j * (nx + 1) + 1, end = k + nx - 2; k < end; k++, x++) z[k] = pivot[k]! * (r[k]! + linkX[x]! * z[k - 1]! + linkY[k]! * z[k - nx]!);
    for (let j = ny - 2; j > 0; j--)
      for (let k = j * nx + nx - 2, x = j * (nx + 1) + nx - 2, end = j * nx; k > end; k--, x--) z[k]! += pivot[k]! * (linkX[x + 1]! * z[k + 1]! + linkY[k + nx]! * z[k + nx]!);
  }

  /** q = A d, and d . q. */
  private apply(): number {
    const { nx, ny } = this.grid;
    const { linkX, linkY, diagonal, d, q } = this;
    let sum = 0;
    for (let j = 1; j < ny - 1; j++) {
      for (let k = j * nx + 1, x = j * (nx + 1) + 1, end = k + nx - 2; k < end; k++, x++) {
        const value = diagonal[k]! * d[k]! - linkX[x]! * d[k - 1]! - linkX[x + 1]! * d[k + 1]! - linkY[k]! * d[k - nx]! - linkY[k + nx]! * d[k + nx]!;
        q[k] = value;
        sum += value * d[k]!;
      }
    }
    return sum;
  }

  /** Writes p; stops when no residual is above `tolerance`, or after `most` rounds. Gives the rounds used. */
  solve(p: Float64Array, b: Float64Array, tolerance: number, most = 2_000): number {
    const { r, z, d, q } = this;
    p.fill(0);
    r.set(b);
    this.precondition();
    d.set(z);
    let energy = dot(r, z);
    for (let round = 0; round < most; round++) {
      if (largest(r) <= tolerance || energy === 0) return round;
      const step = energy / this.apply();
      for (let k = 0; k < p.length; k++) {
        p[k]! += step * d[k]!;
        r[k]! -= step * q[k]!;
      }
      this.precondition();
      const next = dot(r, z);
      const carried = next / energy;
      energy = next;
      for (let k = 0; k < d.length; k++) d[k] = z[k]! + carried * d[k]!;
    }
    return most;
  }
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let k = 0; k < a.length; k++) sum += a[k]! * b[k]!;
  return sum;
}

function largest(values: Float64Array): number {
  let most = 0;
  for (let k = 0; k < values.length; k++) most = Math.max(most, Math.abs(values[k]!));
  return most;
}
