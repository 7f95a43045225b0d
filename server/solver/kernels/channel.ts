import { instantiate, Layout, type CompiledKernel } from './host';
import { eliminationFactors } from './tridiagonal';

type ChannelCalls = {
  step(rows: number, end: number, first: number, cells: number, stride: number, q: number, w: number, exchange: number, row: number, survival: number): void;
};

/** A tube may lose at most all of itself to its two neighbours in one step. */
const MOST_EXCHANGE = 1;

/**
 * Stream tubes of a channel in cells that the water crosses in one step each (Courant number 1, so that moving on is exact
 * and spreads nothing): dc/dt + u dc/dx = d/dx(K dc/dx) + exchange between tubes - k c, all cells of one volume.
 * Order of a step: move on, dispersion (backward Euler, order 1 in time, order 2 in space, closed ends), exchange
 * (explicit), loss. Keeps mass to rounding and c >= 0. Cost: about 1 ns a cell and tube. Memory: 16 bytes each, made here.
 * Sources: Yotsukura & Sayre 1976, Water Resour. Res. 12:695 (tubes of equal discharge); Press et al. 2007, Numerical
 * Recipes, section 2.4 (the elimination).
 */
export class ChannelTubes {
  /** What the last step let out at the downstream end, kg/m3 a tube. */
  readonly outflow: Float64Array;
  private readonly calls: ChannelCalls;
  private readonly at: { rows: number; q: number; w: number; exchange: number; row: number };
  private readonly rows: Float64Array;
  private readonly q: Float64Array;
  private readonly w: Float64Array;
  private readonly exchange: Float64Array;
  /** Values a row. */
  private readonly stride: number;
  /** Ring row of cell 0. */
  private first = 0;

  constructor(kernel: CompiledKernel, readonly cells: number, readonly tubes: number) {
    if (!(cells >= 1 && tubes >= 1)) throw new RangeError(`A channel needs cells and tubes, got ${cells} and ${tubes}`);
    this.stride = Math.ceil(tubes / 4) * 4;
    const layout = new Layout();
    this.at = { rows: layout.f64(cells * this.stride + 2), q: layout.f64(cells), w: layout.f64(cells), exchange: layout.f64(cells * this.stride), row: layout.f64(this.stride + 2) };
    const { calls, buffer } = instantiate<ChannelCalls>(kernel, layout);
    this.calls = calls;
    this.rows = new Float64Array(buffer, this.at.rows, cells * this.stride);
    this.q = new Float64Array(buffer, this.at.q, cells);
    this.w = new Float64Array(buffer, this.at.w, cells);
    this.exchange = new Float64Array(buffer, this.at.exchange, cells * this.stride);
    this.outflow = new Float64Array(tubes);
    this.setDispersion(new Float64Array(cells + 1));
  }

  /** @param faces  K dt / dx^2 of each face, cells + 1 of them; the two ends count as 0. Cheap: call it whenever the flow changes. */
  setDispersion(faces: Float64Array): void {
    if (faces.length !== this.cells + 1 || !faces.every((value) => value >= 0 && value < Infinity)) throw new RangeError(`A channel of ${this.cells} cells takes ${this.cells + 1} dispersion numbers of 0 or more, got ${faces.length}`);
    const { q, w } = eliminationFactors(this.cells, (k) => faces[k]!);
    this.q.set(q);
    this.w.set(w);
  }

  /** @param shares  cells*(tubes-1), tube fastest: the share of a tube that it exchanges with the next one to the right in one step. */
  setExchange(shares: Float64Array): void {
    const { cells, tubes, stride } = this;
    if (shares.length !== cells * (tubes - 1)) throw new RangeError(`Exchange of ${cells} cells and ${tubes} tubes is ${cells * (tubes - 1)} shares, got ${shares.length}`);
    for (let i = 0; i < cells; i++) {
      for (let k = 0; k < tubes - 1; k++) {
        const share = shares[i * (tubes - 1) + k]!;
        const left = k > 0 ? shares[i * (tubes - 1) + k - 1]! : 0;
        if (!(share >= 0 && share + left <= MOST_EXCHANGE)) throw new RangeError(`Tube ${k} of cell ${i} exchanges ${share + left} of itself in one step; at most ${MOST_EXCHANGE} is stable: shorten the step`);
        this.exchange[i * stride + k] = share;
      }
    }
  }

  private rowOf(cell: number): number {
    return ((this.first + cell) % this.cells) * this.stride;
  }

  get(cell: number, tube: number): number {
    return this.rows[this.rowOf(cell) + tube]!;
  }

  add(cell: number, tube: number, value: number): void {
    this.rows[this.rowOf(cell) + tube]! += value;
  }

  /** One step. `inflow` is what comes in at the upstream end, a value a tube; what leaves stands in `outflow`. */
  step(inflow: Float64Array, survival = 1): void {
    const { at, cells, stride, tubes } = this;
    this.first = (this.first + cells - 1) % cells;
    const incoming = this.rowOf(0);
    for (let k = 0; k < tubes; k++) {
      this.outflow[k] = this.rows[incoming + k]!;
      this.rows[incoming + k] = inflow[k]!;
    }
    this.calls.step(at.rows, at.rows + 8 * cells * stride, at.rows + 8 * this.first * stride, cells, 8 * stride, at.q, at.w, at.exchange, at.row, survival);
  }

  /** All values, cells*tubes, tube fastest, into `out`. */
  read(out: Float64Array): void {
    for (let i = 0; i < this.cells; i++) {
      const from = this.rowOf(i);
      out.set(this.rows.subarray(from, from + this.tubes), i * this.tubes);
    }
  }
}
