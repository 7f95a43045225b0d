import type { PlaneGrid } from '../../../shared/frames';
import type { PuffList } from '../open/grid-puffs';
import { instantiate, Layout, type CompiledKernel } from './host';
import { cheapestLimits, MAX_LEVEL, PuffCensus } from './puff-levels';

type AddPuffs = (grid: number, stride: number, nx: number, ny: number, puffs: number, count: number, table: number) => void;
type PuffCalls = {
  add32: AddPuffs;
  add64: AddPuffs;
  refineX(fine: number, fineStride: number, coarse: number, coarseStride: number, shift: number, rowFrom: number, rowTo: number, from: number, to: number): void;
  refineY(fine: number, coarse: number, stride: number, shift: number, rowFrom: number, rowTo: number, from: number, to: number): void;
};

/** Squared distance of the cut, standard deviations: exp(-r^2/2) = 1e-7. */
const CUT2 = 2 * Math.log(1e7);
const F64_PER_PUFF = 6;
/** Narrowest puff a grid can carry, in nodes: sums over nodes then keep mass to 1e-4. Same rule as the plain solver. */
const LEAST_SIGMA_NODES = 0.7;
/** Nodes that the widest row may reach to each side of a puff's centre. */
const TABLE_REACH = 65_536;
/** Nodes beyond the edge of a coarse grid, so that interpolation never runs out of neighbours. */
const MARGIN = 8;

/** One puff in units of the grid. `rowVariance` is that of a cut along x, `columnVariance` of one along y, nodes squared. */
export type GridPuff = { x: number; y: number; sxx: number; sxy: number; syy: number; peak: number; rowVariance: number; columnVariance: number };

/** Turns puff p into units of the grid, widened to what the grid can carry. Throws RangeError where it is wider than the table. */
export function toGridPuff(out: GridPuff, grid: PlaneGrid, puffs: PuffList, p: number): void {
  const { dxM, dyM } = grid;
  const least = (LEAST_SIGMA_NODES * Math.max(dxM, dyM)) ** 2;
  const mean = (puffs.sxx[p]! + puffs.syy[p]!) / 2;
  const smaller = mean - Math.hypot((puffs.sxx[p]! - puffs.syy[p]!) / 2, puffs.sxy[p]!);
  const widening = Math.max(0, least - smaller);
  const sxx = puffs.sxx[p]! + widening;
  const syy = puffs.syy[p]! + widening;
  const sxy = puffs.sxy[p]!;
  const det = sxx * syy - sxy * sxy;
  out.x = (puffs.x[p]! - grid.x0M) / dxM;
  out.y = (puffs.y[p]! - grid.y0M) / dyM;
  out.sxx = sxx / (dxM * dxM);
  out.sxy = sxy / (dxM * dyM);
  out.syy = syy / (dyM * dyM);
  out.peak = puffs.amount[p]! / (2 * Math.PI * Math.sqrt(det));
  out.rowVariance = det / syy / (dxM * dxM);
  out.columnVariance = det / sxx / (dyM * dyM);
  if (!(det > 0) || !(CUT2 * out.rowVariance < (TABLE_REACH - 16) ** 2)) {
    throw new RangeError(`Puff ${p} has a row variance of ${out.rowVariance} nodes squared; it must be positive and below ${((TABLE_REACH - 16) ** 2 / CUT2).toPrecision(3)}`);
  }
}

const emptyPuff = (): GridPuff => ({ x: 0, y: 0, sxx: 0, sxy: 0, syy: 0, peak: 0, rowVariance: 0, columnVariance: 0 });

function checkShape(nx: number, ny: number, maxPuffs: number): void {
  if (!(nx >= 1 && ny >= 1 && maxPuffs >= 1)) throw new RangeError(`A sum of puffs needs nodes and room for puffs, got ${nx} x ${ny} and ${maxPuffs}`);
}

/**
 * Adds normal clouds to a grid in 64-bit arithmetic: out += peak exp(-d^T S^-1 d / 2), cut at 1e-7 of each puff's peak.
 * For figures that are quoted. `values` (kg/m3, ny rows of `stride` nodes, x fastest, nx of them meaningful) is a view
 * into the kernel's memory: read or copy it before the next call of `sum`, never write to it.
 * Error beyond the cut: 1e-14 of the peak. Cost: about 0.7 ns a node within the ellipses. Allocates nothing.
 * Source: the normal cloud of Fischer et al. 1979, section 2.4; "table times geometric" is explained in wasm/puffs.as.
 */
export class PuffSum64 {
  readonly stride: number;
  readonly values: Float64Array;
  private readonly calls: PuffCalls;
  private readonly puffs: Float64Array;
  private readonly at: { grid: number; puffs: number; table: number };
  private readonly puff = emptyPuff();

  constructor(kernel: CompiledKernel, readonly nx: number, readonly ny: number, readonly maxPuffs: number) {
    checkShape(nx, ny, maxPuffs);
    this.stride = Math.ceil(nx / 2) * 2;
    const layout = new Layout();
    this.at = { grid: layout.f64(this.stride * ny), puffs: layout.f64(F64_PER_PUFF * maxPuffs), table: layout.f64(2 * TABLE_REACH) + 8 * TABLE_REACH };
    const { calls, buffer } = instantiate<PuffCalls>(kernel, layout);
    this.calls = calls;
    this.values = new Float64Array(buffer, this.at.grid, this.stride * ny);
    this.puffs = new Float64Array(buffer, this.at.puffs, F64_PER_PUFF * maxPuffs);
  }

  /** Overwrites `values` with the sum of the puffs; the grid's shape must be nx by ny. Any number of puffs. */
  sum(grid: PlaneGrid, puffs: PuffList): void {
    this.values.fill(0);
    for (let from = 0; from < puffs.x.length; from += this.maxPuffs) {
      const count = Math.min(this.maxPuffs, puffs.x.length - from);
      for (let p = 0; p < count; p++) {
        toGridPuff(this.puff, grid, puffs, from + p);
        const { x, y, sxx, sxy, syy, peak } = this.puff;
        this.puffs.set([x, y, sxx, sxy, syy, peak], F64_PER_PUFF * p);
      }
      this.calls.add64(this.at.grid, this.stride, this.nx, this.ny, this.at.puffs, count, this.at.table);
    }
  }
}

/** A grid of one level: spacing 2^levelX by 2^levelY nodes, `offset` nodes or rows of margin, the part in use since it was cleared. */
type LevelGrid = { address: number; stride: number; rows: number; offsetX: number; offsetY: number; values: Float32Array; from: number; to: number; rowFrom: number; rowTo: number };

const levelIndex = (levelX: number, levelY: number): number => levelX + (MAX_LEVEL + 1) * levelY;

/** Nodes (with both margins) along an axis at each level. A level reaches four nodes beyond half of the finer one's last. */
function axisSizes(n: number): number[] {
  const last = [n - 1];
  for (let level = 1; level <= MAX_LEVEL; level++) last.push((last[level - 1]! >> 1) + 4);
  return last.map((value, level) => value + 1 + (level > 0 ? MARGIN : 0));
}

/**
 * The same sum in 32 bits for frames: a puff whose standard deviation along a row (a column) is at least `kappa` nodes of
 * a spacing of 2, 4 or 8 is added on a grid that coarse along that axis, and coarse grids are added up by 8-point
 * midpoint interpolation, level by level, where that is quicker. Interpolation errs by at most 0.11 / kappa^8 of a
 * puff's peak an axis (3e-7 for kappa 5): the eighth derivative of exp(-x^2/2) is at most 105, times 35/32768.
 * Error in all: 6e-7 of the peak of the sum for up to 500 puffs. `kappa` Infinity: everything straight onto the grid.
 * `values` (kg/m3) is a view as in PuffSum64, `stride` nodes a row. Cost: about 0.1 to 0.2 ns a node within the ellipses.
 * Source: Lagrange interpolation at midpoints, Abramowitz and Stegun 1964, 25.2.
 */
export class PuffSum32 {
  readonly stride: number;
  readonly values: Float32Array;
  private readonly calls: PuffCalls;
  private readonly puffs: Float64Array;
  private readonly at: { puffs: number; table: number };
  private readonly levels: LevelGrid[] = [];
  private readonly census: PuffCensus;
  private readonly puff = emptyPuff();

  constructor(kernel: CompiledKernel, readonly nx: number, readonly ny: number, readonly maxPuffs: number, kappa = 5) {
    checkShape(nx, ny, maxPuffs);
    const layout = new Layout();
    this.at = { puffs: layout.f64(F64_PER_PUFF * maxPuffs), table: layout.f32(2 * TABLE_REACH) + 4 * TABLE_REACH };
    const sizes = { x: axisSizes(nx).map((n) => Math.ceil(n / 8) * 8), y: axisSizes(ny).map((n) => Math.ceil(n / 2) * 2) };
    const highest = kappa === Infinity ? 0 : MAX_LEVEL;
    const addresses: number[] = [];
    for (let y = 0; y <= highest; y++) for (let x = 0; x <= highest; x++) addresses[levelIndex(x, y)] = layout.f32(sizes.x[x]! * sizes.y[y]!);
    const { calls, buffer } = instantiate<PuffCalls>(kernel, layout);
    this.calls = calls;
    for (let y = 0; y <= highest; y++) {
      for (let x = 0; x <= highest; x++) {
        const index = levelIndex(x, y);
        const [stride, rows, address] = [sizes.x[x]!, sizes.y[y]!, addresses[index]!];
        const values = new Float32Array(buffer, address, stride * rows);
        this.levels[index] = { address, stride, rows, offsetX: x > 0 ? MARGIN : 0, offsetY: y > 0 ? MARGIN : 0, values, from: stride, to: -1, rowFrom: rows, rowTo: -1 };
      }
    }
    this.census = new PuffCensus(maxPuffs, kappa);
    this.stride = sizes.x[0]!;
    this.values = this.levels[0]!.values;
    this.puffs = new Float64Array(buffer, this.at.puffs, F64_PER_PUFF * maxPuffs);
  }

  /** Overwrites `values` with the sum of the puffs; the grid's shape must be nx by ny. */
  sum(grid: PlaneGrid, puffs: PuffList): void {
    for (const level of this.levels) clear(level);
    for (let from = 0; from < puffs.x.length; from += this.maxPuffs) this.addChunk(grid, puffs, from, Math.min(this.maxPuffs, puffs.x.length - from));
    this.gather();
  }

  private addChunk(grid: PlaneGrid, puffs: PuffList, from: number, count: number): void {
    const { census } = this;
    census.reset();
    for (let p = 0; p < count; p++) {
      toGridPuff(this.puff, grid, puffs, from + p);
      census.add(this.puff);
    }
    const limits = census.highest > 0 ? cheapestLimits(census, this.nx, this.ny) : { x: 0, y: 0 };
    for (let y = 0; y <= limits.y; y++) {
      for (let x = 0; x <= limits.x; x++) {
        const level = this.levels[levelIndex(x, y)]!;
        const written = census.write(this.puffs, x, y, limits, level);
        if (written > 0) this.calls.add32(level.address, level.stride, x > 0 ? level.stride : this.nx, y > 0 ? level.rows : this.ny, this.at.puffs, written, this.at.table);
      }
    }
  }

  /** Adds coarse grids into finer ones: along x down to full rows, then along y, from the coarsest rows on. */
  private gather(): void {
    const top = this.levels.length > 1 ? MAX_LEVEL : 0;
    for (let y = top; y >= 0; y--) {
      for (let x = top; x >= 1; x--) this.addAlongX(this.levels[levelIndex(x - 1, y)]!, this.levels[levelIndex(x, y)]!);
      if (y > 0) this.addAlongY(this.levels[levelIndex(0, y - 1)]!, this.levels[levelIndex(0, y)]!);
    }
  }

  private addAlongX(fine: LevelGrid, coarse: LevelGrid): void {
    if (coarse.to < coarse.from) return;
    const shift = fine.offsetX > 0 ? MARGIN / 2 : MARGIN;
    const from = Math.max(0, 2 * (coarse.from - shift) - 8);
    const to = Math.min(fine.stride - 1, 2 * (coarse.to - shift) + 8);
    if (to < from) return;
    this.calls.refineX(fine.address, fine.stride, coarse.address, coarse.stride, shift, coarse.rowFrom, coarse.rowTo, from, to);
    touch(fine, from, to, coarse.rowFrom, coarse.rowTo);
  }

  private addAlongY(fine: LevelGrid, coarse: LevelGrid): void {
    if (coarse.to < coarse.from) return;
    const shift = fine.offsetY > 0 ? MARGIN / 2 : MARGIN;
    const rowFrom = Math.max(0, 2 * (coarse.rowFrom - shift) - 8);
    const rowTo = Math.min(fine.rows - 1, 2 * (coarse.rowTo - shift) + 8);
    if (rowTo < rowFrom) return;
    this.calls.refineY(fine.address, coarse.address, fine.stride, shift, rowFrom, rowTo, coarse.from, coarse.to);
    touch(fine, coarse.from, coarse.to, rowFrom, rowTo);
  }
}

function touch(level: LevelGrid, from: number, to: number, rowFrom: number, rowTo: number): void {
  level.from = Math.min(level.from, from);
  level.to = Math.max(level.to, to);
  level.rowFrom = Math.min(level.rowFrom, rowFrom);
  level.rowTo = Math.max(level.rowTo, rowTo);
}

/** Only rows in use since the last time need clearing; refinement rounds rows up to pairs. */
function clear(level: LevelGrid): void {
  if (level.rowTo < level.rowFrom) return;
  level.values.fill(0, (level.rowFrom & ~1) * level.stride, Math.min(level.rows, (level.rowTo | 1) + 1) * level.stride);
  level.from = level.stride;
  level.to = -1;
  level.rowFrom = level.rows;
  level.rowTo = -1;
}
