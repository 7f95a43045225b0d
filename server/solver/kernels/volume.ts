import { instantiate, Layout, type CompiledKernel } from './host';
import { eliminationFactors } from './tridiagonal';

type VolumeCalls = {
  step(order: number, extra: number, c: number, z: number, window: number, rows: number, flux: number, fx: number, fy: number, inverse: number, qx: number, wx: number, qy: number, wy: number, bytes: number, nx: number, ny: number, survival: number): number;
};

const MARGIN = 2;
/** More of a cell's water than this leaving in one step could take out more than is there: a face value is at most twice the cell's. */
const MOST_LEAVING = 0.5;

/** Water that leaves a cell in one step, as a share of the cell: through the right, left, upper and lower face. */
const leaving = (right: number, left: number, up: number, down: number): number => Math.max(0, right) + Math.max(0, -left) + Math.max(0, up) + Math.max(0, -down);

/**
 * A conserved concentration on a masked grid of equal cells, stepped by finite volumes:
 * dc/dt + div(u c) = div(K grad c) - k c, K diagonal, no flux through land.
 * Transport: two limited upwind sweeps, order of the directions turned round every step (second order on smooth
 * solutions); diffusion: implicit along x, then y, backward Euler (order 1 in time) or trapezoidal (order 2).
 * Keeps: mass to rounding (1e-11 of it after 2 160 steps), uniform concentration where the flow has no divergence, and
 * c >= 0 where no cell loses more than half its water in a step (checked by `setFlow`); with the trapezoidal rule only
 * while K dt/dx^2 <= 1 along each axis (checked by `setDiffusion`). Outer faces: water enters clean and leaves with the
 * concentration of its cell; no diffusion through them.
 * Memory: about 100 bytes a cell, all made here. Cost of a step: about 3 to 5 ns a cell.
 * Sources: van Leer 1974, J. Comput. Phys. 14:361 (limiter); LeVeque 2002, Finite Volume Methods for Hyperbolic
 * Problems, sections 6.11 and 19.5 (limited fluxes, splitting); Press et al. 2007, Numerical Recipes, section 2.4.
 */
export class VolumeGrid {
  /** kg/m3; node (j, i) at `index(j, i)`. Read and written freely between steps; land must stay 0. */
  readonly c: Float64Array;
  readonly stride: number;
  /** What has left through the outer faces, in concentration times cells. */
  lost = 0;
  private readonly calls: VolumeCalls;
  private readonly at: Record<'c' | 'z' | 'fx' | 'fy' | 'inverseX' | 'inverseY' | 'qx' | 'wx' | 'qy' | 'wy' | 'window' | 'rows' | 'flux', number>;
  private readonly view: (address: number) => Float64Array;
  private readonly origin: number;
  private steps = 0;
  private isTrapezoidal = false;

  /** @param isWater  1 or 0 a cell, nx*ny, x fastest; kept, not copied */
  constructor(kernel: CompiledKernel, readonly nx: number, readonly ny: number, private readonly isWater: Uint8Array) {
    if (!(nx >= 2 && ny >= 1) || isWater.length !== nx * ny) throw new RangeError(`A grid of volumes needs ${nx} x ${ny} marks for water, got ${isWater.length}`);
    this.stride = Math.ceil(nx / 2) * 2 + 2 * MARGIN;
    const rows = Math.ceil(ny / 8) * 8 + 2 * MARGIN;
    this.origin = MARGIN * this.stride + MARGIN;
    const size = this.stride * rows;
    const layout = new Layout();
    const grid = (): number => layout.f64(size) + 8 * this.origin;
    const strip = (count: number): number => layout.f64(this.stride * count + MARGIN) + 8 * MARGIN;
    this.at = { c: grid(), z: grid(), fx: grid(), fy: grid(), inverseX: grid(), inverseY: grid(), qx: grid(), wx: grid(), qy: grid(), wy: grid(), window: strip(12), rows: strip(8), flux: strip(1) };
    const { calls, buffer } = instantiate<VolumeCalls>(kernel, layout);
    this.calls = calls;
    this.view = (address) => new Float64Array(buffer, address - 8 * this.origin, size);
    this.c = this.view(this.at.c);
    this.setDiffusion(new Float64Array((nx + 1) * ny), new Float64Array(nx * (ny + 1)), 'backward');
    this.setFlow(new Float64Array((nx + 1) * ny), new Float64Array(nx * (ny + 1)));
  }

  /** Place of cell (i, j) in `c`. */
  index(i: number, j: number): number {
    return this.origin + j * this.stride + i;
  }

  private isWet(i: number, j: number): boolean {
    return i >= 0 && i < this.nx && j >= 0 && j < this.ny && this.isWater[j * this.nx + i] === 1;
  }

  /**
   * Sets the flow: water through each face in one step as a share of a cell, positive to the right and upwards.
   * @param x  (nx+1)*ny, face i left of cell i; y: nx*(ny+1), face j below cell j. Ignored where land adjoins.
   */
  setFlow(x: Float64Array, y: Float64Array): void {
    const { nx, ny } = this;
    const [fx, fy, inverseX, inverseY] = [this.view(this.at.fx), this.view(this.at.fy), this.view(this.at.inverseX), this.view(this.at.inverseY)];
    for (let j = 0; j < ny; j++) for (let i = 0; i <= nx; i++) fx[this.index(i - 1, j)] = this.isOpen(i - 1, j, i, j) ? x[j * (nx + 1) + i]! : 0;
    for (let j = 0; j <= ny; j++) for (let i = 0; i < nx; i++) fy[this.index(i, j - 1)] = this.isOpen(i, j - 1, i, j) ? y[j * nx + i]! : 0;
    for (let j = 0; j < ny; j++) {
      for (let i = 0; i < nx; i++) {
        if (!this.isWet(i, j)) continue;
        const at = this.index(i, j);
        const [right, left, up, down] = [fx[at]!, fx[at - 1]!, fy[at]!, fy[at - this.stride]!];
        const share = leaving(right, left, up, down);
        if (!(share <= MOST_LEAVING)) throw new RangeError(`Cell (${i}, ${j}) loses ${share.toPrecision(3)} of its water in one step; at most ${MOST_LEAVING} is stable: shorten the step`);
        inverseX[at] = 1 / (1 - (right - left));
        inverseY[at] = 1 / (1 - (up - down));
      }
    }
  }

  /** A face between two cells of water, or between one and the outside of the grid. */
  private isOpen(i0: number, j0: number, i1: number, j1: number): boolean {
    const inside = (i: number, j: number): boolean => i >= 0 && i < this.nx && j >= 0 && j < this.ny;
    return (this.isWet(i0, j0) || !inside(i0, j0)) && (this.isWet(i1, j1) || !inside(i1, j1));
  }

  /**
   * Sets the diffusion numbers K dt / dx^2 of the faces, shapes as in `setFlow`; outer faces and those at land count as 0.
   * `backward`: any size. `trapezoidal`: at most 1, or values could fall below 0.
   */
  setDiffusion(x: Float64Array, y: Float64Array, rule: 'backward' | 'trapezoidal'): void {
    const { nx, ny } = this;
    this.isTrapezoidal = rule === 'trapezoidal';
    const number = (value: number): number => {
      if (!(value >= 0) || (this.isTrapezoidal && value > 1)) throw new RangeError(`A face has a diffusion number of ${value}; the ${rule} rule takes 0 to ${this.isTrapezoidal ? '1: shorten the step' : 'infinity'}`);
      return this.isTrapezoidal ? value / 2 : value;
    };
    this.factor(ny, nx, (j, i) => (this.isWet(i - 1, j) && this.isWet(i, j) ? number(x[j * (nx + 1) + i]!) : 0), (j, i) => this.pairIndex(i, j), this.at.qx, this.at.wx);
    this.factor(nx, ny, (i, j) => (this.isWet(i, j - 1) && this.isWet(i, j) ? number(y[j * nx + i]!) : 0), (i, j) => this.index(i, j), this.at.qy, this.at.wy);
  }

  /** Two rows and two nodes are kept transposed: nodes i of both rows, then nodes i + 1 of both. */
  private pairIndex(i: number, j: number): number {
    return this.index((i & ~1) | (j & 1), (j & ~1) | (i & 1));
  }

  /** Factors of every line; lines beyond the grid are closed: q = 0, w = 1. `face(line, k)` couples cells k - 1 and k. */
  private factor(lines: number, length: number, face: (line: number, k: number) => number, place: (line: number, k: number) => number, qAt: number, wAt: number): void {
    const q = this.view(qAt).fill(0);
    const w = this.view(wAt).fill(1);
    for (let line = 0; line < lines; line++) {
      const factors = eliminationFactors(length, (k) => face(line, k));
      for (let k = 0; k < length; k++) {
        q[place(line, k)] = factors.q[k]!;
        w[place(line, k)] = factors.w[k]!;
      }
    }
  }

  /** One step; afterwards every value is multiplied by `survival` (losses of first order, between transport and diffusion along y). */
  step(survival = 1): void {
    const { at } = this;
    const order = this.steps++ & 1;
    this.lost += this.calls.step(order, this.isTrapezoidal ? 1 : 0, at.c, at.z, at.window, at.rows, at.flux, at.fx, at.fy, order === 0 ? at.inverseX : at.inverseY, at.qx, at.wx, at.qy, at.wy, 8 * this.stride, this.nx, this.ny, survival);
  }

  /** Sum over the cells, compensated (Neumaier 1974), in concentration times cells. */
  total(): number {
    let sum = 0;
    let correction = 0;
    for (let j = 0; j < this.ny; j++) {
      for (let at = this.index(0, j), end = at + this.nx; at < end; at++) {
        const value = this.c[at]!;
        const next = sum + value;
        correction += Math.abs(sum) >= Math.abs(value) ? sum - next + value : value - next + sum;
        sum = next;
      }
    }
    return sum + correction;
  }
}
