import { instantiate, Layout, type CompiledKernel } from './host';

type PoissonCalls = {
  sumFaces(level: number): number;
  coarsenFaces(coarse: number, fine: number): void;
  weighInterpolation(fine: number, coarse: number): void;
  setSmoother(low: number): void;
  solve(levels: number, count: number, x: number, r: number, p: number, q: number, tolerance: number, most: number, report: number): number;
};

/** Cells before and behind each row, and rows below and above. */
const MARGIN_CELLS = 4;
/** Largest side of the coarsest level. */
const COARSEST = 4;
/** Lowest eigenvalue of the scaled matrix that smoothing damps; the rest is left to coarser levels. Found by trial: 0.1 to 0.3 take the same number of rounds. */
const SMOOTHED_FROM = 0.2;
const MOST_ROUNDS = 200;

const LEVEL_BYTES = 48;
/** kx, ky, diagonal, inverse, x, y, b, share. */
const GRIDS_PER_LEVEL = 8;

/** The finest level as the caller fills it. */
type Finest = { stride: number; kx: Float32Array; ky: Float32Array };

/** The iteration did not reach the tolerance: the faces leave water without a way to p = 0 and b does not sum to 0 there. */
export class PoissonNotSolved extends Error {
  constructor(readonly share: number, readonly rounds: number) {
    super(`The residual stood at ${share.toExponential(1)} of the right side after ${rounds} rounds: some water has no open edge and its right side does not sum to zero`);
    this.name = 'PoissonNotSolved';
  }
}

/**
 * sum over the faces of a cell of k (p - p_neighbour) = b on nx*ny cells, k >= 0 a face, p = 0 beyond outer faces: the
 * five-point form of -div(k grad p) = b, with which a flow becomes free of divergence.
 * Conjugate gradients (Hestenes & Stiefel 1952) in 64 bits, preconditioned by one multigrid cycle in 32 bits
 * (Trottenberg, Oosterlee & Schüller 2001, Multigrid, sections 2.4 and 7.8; Chebyshev smoothing: Adams, Brezina, Hu &
 * Tuminaro 2003, J. Comput. Phys. 188:593). Face values are rounded to 32 bits once, when they are set.
 * Cost: 8 to 14 rounds to 1e-8 at any size (more where the coast is much broken), 6 ns a cell and round. Memory: about 90 bytes a cell, all made here.
 */
export class PoissonSolver {
  private readonly calls: PoissonCalls;
  private readonly finest: Finest;
  private readonly levelCount: number;
  private readonly at: { levels: number; x: number; r: number; p: number; q: number; report: number };
  private readonly fields: Record<'x' | 'r' | 'p', Float64Array>;
  private readonly report: Float64Array;
  private readonly origin: number;

  constructor(kernel: CompiledKernel, readonly nx: number, readonly ny: number) {
    if (!(nx >= 1 && ny >= 1)) throw new RangeError(`A Poisson problem needs cells, got ${nx} x ${ny}`);
    const layout = new Layout();
    const sizes = levelSizes(nx, ny);
    this.levelCount = sizes.length;
    const table = layout.take(LEVEL_BYTES * sizes.length);
    const addresses = sizes.map(({ stride, rows }) => Array.from({ length: GRIDS_PER_LEVEL }, () => layout.f32(stride * rows)));
    const { stride, rows } = sizes[0]!;
    this.origin = stride + MARGIN_CELLS;
    const grid64 = (): number => layout.f64(stride * rows) + 8 * this.origin;
    this.at = { levels: table, x: grid64(), r: grid64(), p: grid64(), q: grid64(), report: layout.f64(1) };
    const { calls, buffer } = instantiate<PoissonCalls>(kernel, layout);
    this.calls = calls;
    calls.setSmoother(SMOOTHED_FROM);
    const records = new Int32Array(buffer, table, (LEVEL_BYTES / 4) * sizes.length);
    sizes.forEach((size, l) => {
      const first = 4 * (size.stride + MARGIN_CELLS);
      records.set([size.nx, size.ny, 4 * size.stride, ...addresses[l]!.map((address) => address + first)], (LEVEL_BYTES / 4) * l);
    });
    const [kx, ky] = addresses[0]!.map((address) => new Float32Array(buffer, address, stride * rows));
    this.finest = { stride, kx: kx!, ky: ky! };
    const view = (address: number): Float64Array => new Float64Array(buffer, address - 8 * this.origin, stride * rows);
    this.fields = { x: view(this.at.x), r: view(this.at.r), p: view(this.at.p) };
    this.report = new Float64Array(buffer, this.at.report, 1);
  }

  /**
   * Sets the faces: x (nx+1)*ny, face i left of cell i; y nx*(ny+1), face j below cell j. Outer faces lead to p = 0; closed
   * faces are 0. Values are rounded to 32 bits: use `Math.fround` of them where fluxes k (p - p') must match to rounding.
   */
  setFaces(x: Float64Array, y: Float64Array): void {
    const { nx, ny } = this;
    if (x.length !== (nx + 1) * ny || y.length !== nx * (ny + 1)) throw new RangeError(`Faces of ${nx} x ${ny} cells are ${(nx + 1) * ny} and ${nx * (ny + 1)}, got ${x.length} and ${y.length}`);
    const { finest, calls, levelCount, origin } = this;
    for (let j = 0; j < ny; j++) finest.kx.set(x.subarray(j * (nx + 1), (j + 1) * (nx + 1)), origin + j * finest.stride - 1);
    for (let j = 0; j <= ny; j++) finest.ky.set(y.subarray(j * nx, (j + 1) * nx), origin + (j - 1) * finest.stride);
    const level = (l: number): number => this.at.levels + LEVEL_BYTES * l;
    for (let l = 0; l < levelCount; l++) {
      if (l > 0) calls.coarsenFaces(level(l), level(l - 1));
      if (calls.sumFaces(level(l)) === 0) throw new RangeError('Faces must be finite and not negative');
      if (l > 0) calls.weighInterpolation(level(l - 1), level(l));
    }
  }

  /**
   * Solves for p into `out` (nx*ny, x fastest; overwritten); `b` likewise, ignored where all faces are closed.
   * Answers the rounds taken. Throws PoissonNotSolved where |residual| stays above `tolerance` |b| (2-norms).
   */
  solve(out: Float64Array, b: Float64Array, tolerance = 1e-8): number {
    const { x, r, p } = this.fields;
    const { nx, ny } = this;
    const { stride } = this.finest;
    x.fill(0);
    p.fill(0);
    for (let j = 0; j < ny; j++) r.set(b.subarray(j * nx, (j + 1) * nx), this.origin + j * stride);
    const rounds = this.calls.solve(this.at.levels, this.levelCount, this.at.x, this.at.r, this.at.p, this.at.q, tolerance, MOST_ROUNDS, this.at.report);
    if (rounds < 0) throw new PoissonNotSolved(this.report[0]!, MOST_ROUNDS);
    for (let j = 0; j < ny; j++) out.set(x.subarray(this.origin + j * stride, this.origin + j * stride + nx), j * nx);
    return rounds;
  }
}

function levelSizes(nx: number, ny: number): { nx: number; ny: number; stride: number; rows: number }[] {
  const sizes = [];
  for (;;) {
    sizes.push({ nx, ny, stride: Math.ceil(nx / 8) * 8 + 2 * MARGIN_CELLS, rows: ny + 3 });
    if (Math.max(nx, ny) <= COARSEST) return sizes;
    nx = Math.ceil(nx / 2);
    ny = Math.ceil(ny / 2);
  }
}
