import { LAND, type CellGrid } from './cell-grid';
import { MaskedPoisson } from './masked-poisson';

/** Discharges through the faces of a grid, m3/s; shapes as in `CellGrid`. */
export type FaceFlow = { readonly x: Float64Array; readonly y: Float64Array };

export const emptyFlow = ({ nx, ny }: CellGrid): FaceFlow => ({ x: new Float64Array((nx + 1) * ny), y: new Float64Array(nx * (ny + 1)) });

/** Water leaving cell k less water entering it, m3/s. */
export const divergenceAt = ({ nx }: CellGrid, { x, y }: FaceFlow, cell: number): number => {
  const face = cell + Math.floor(cell / nx);
  return x[face + 1]! - x[face]! + y[cell + nx]! - y[cell]!;
};

/** What is left may be this share of the largest discharge: some roundings of a sum of four. */
const AT_REST = 4e-16;
const MOST_PASSES = 6;

/**
 * Makes a flow consistent with mass: adds the gradient of a potential, q - k (p_right - p_left), so that each cell loses
 * as much more than it gains as `target` says. The added part is the smallest one, weighted by 1/k. Faces with k = 0 keep
 * what they have. Repeats on the remainder until that is at rounding level.
 * Source: the decomposition of a vector field, Chorin 1968, Math. Comp. 22:745; least change of measured winds, Sasaki
 * 1970, Mon. Weather Rev. 98:875.
 */
export class MassProjector {
  private readonly poisson: MaskedPoisson;
  private readonly b: Float64Array;
  private readonly p: Float64Array;
  private readonly scratch: { sum: Float64Array; cells: Float64Array };

  /**
   * @param k  conductance of the faces, m: thickness of the water there, 0 where nothing may change
   * @param body  number of the body of water of each cell, from 1
   * @param isClosed  by body: no face with p = 0, so that its targets have to sum to what its fixed faces bring
   */
  constructor(
    private readonly grid: CellGrid,
    private readonly k: FaceFlow,
    private readonly body: Int32Array,
    private readonly isClosed: readonly boolean[],
  ) {
    this.poisson = new MaskedPoisson(grid, k.x, k.y);
    this.b = new Float64Array(grid.isWater.length);
    this.p = new Float64Array(grid.isWater.length);
    this.scratch = { sum: new Float64Array(isClosed.length), cells: new Float64Array(isClosed.length) };
  }

  /** Changes `flow` in place; gives the largest remaining error of a cell, m3/s. */
  project(flow: FaceFlow, target: Float64Array): number {
    let error = this.remainder(flow, target);
    const scale = Math.max(error, largest(flow.x), largest(flow.y));
    for (let pass = 0; pass < MOST_PASSES && error > AT_REST * scale; pass++) {
      this.poisson.solve(this.p, this.b, 1e-4 * error);
      this.addGradient(flow);
      error = this.remainder(flow, target);
    }
    return error;
  }

  private remainder(flow: FaceFlow, target: Float64Array): number {
    const { grid, b, body, isClosed } = this;
    const { sum, cells } = this.scratch;
    sum.fill(0);
    cells.fill(0);
    for (let cell = 0; cell < b.length; cell++) {
      b[cell] = grid.isWater[cell] === LAND ? 0 : target[cell]! - divergenceAt(grid, flow, cell);
      sum[body[cell]!]! += b[cell]!;
      cells[body[cell]!]! += 1;
    }
    let most = 0;
    for (let cell = 0; cell < b.length; cell++) {
      // What rounding leaves over in closed water is spread evenly: there is no way out for it.
      if (isClosed[body[cell]!]) b[cell]! -= sum[body[cell]!]! / cells[body[cell]!]!;
      most = Math.max(most, Math.abs(b[cell]!));
    }
    return most;
  }

  private addGradient(flow: FaceFlow): void {
    const { grid, k, p } = this;
    const { nx, ny } = grid;
    for (let j = 0; j < ny; j++) for (let i = 1; i < nx; i++) flow.x[j * (nx + 1) + i]! -= k.x[j * (nx + 1) + i]! * (p[j * nx + i]! - p[j * nx + i - 1]!);
    for (let cell = nx; cell < nx * ny; cell++) flow.y[cell]! -= k.y[cell]! * (p[cell]! - p[cell - nx]!);
  }
}

function largest(values: Float64Array): number {
  let most = 0;
  for (let n = 0; n < values.length; n++) most = Math.max(most, Math.abs(values[n]!));
  return most;
}
