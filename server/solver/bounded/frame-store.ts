import type { PlaneGrid } from '../../../shared/frames';
import type { Weights } from '../release-profile';
import type { Books, GriddedField } from '../types';
import type { BoundedWater } from './bounded-water';
import type { TracerField } from './tracer-field';

/** Part of a grid that holds anything, in 32 bits: 6e-8 of each value is lost. */
type Crop = { i0: number; j0: number; nx: number; ny: number; values: Float32Array };
type Stored = { readonly timeS: number; readonly crops: readonly (Crop | null)[]; readonly books: readonly Books[] };

/** Below this share of the largest value a cell counts as empty in a stored frame. */
const EMPTY_SHARE = 1e-12;

export type StoreInput = {
  readonly water: BoundedWater;
  readonly origin: { readonly originLon: number; readonly originLat: number };
  /** Caps: of each release, 1/m3 a kilogram, and of the sum, kg/m3. */
  readonly capsPerKg: readonly number[];
  readonly solubility: number;
  /** Amounts the envelope is kept for. */
  readonly likely: Weights;
};

/** Frames of each release at the times asked for, their books, and the largest values met. Memory: 4 bytes a stored cell. */
export class FrameStore {
  private readonly stored: Stored[] = [];
  private readonly peaks: { readonly timeS: number; readonly crop: Crop | null }[] = [];
  private readonly highest: Float64Array;
  private readonly sum: Float64Array;

  constructor(private readonly input: StoreInput) {
    this.highest = new Float64Array(input.water.grid.isWater.length);
    this.sum = new Float64Array(input.water.grid.isWater.length);
  }

  /** Keeps the fields, their books and the envelope so far. */
  keep(timeS: number, fields: readonly TracerField[], volume: Float64Array): void {
    const { grid } = this.input.water;
    this.peaks.push({ timeS, crop: cropOf(this.highest, grid.nx) });
    this.stored.push({
      timeS,
      crops: fields.map((field) => cropOf(field.c, grid.nx)),
      books: fields.map((field) => ({ released: field.released, inWater: field.inWater(volume), lost: field.lost, left: field.left })),
    });
  }

  /** Takes the fields into the envelope. */
  raise(fields: readonly TracerField[]): void {
    const { likely, capsPerKg } = this.input;
    const { sum, highest } = this;
    sum.fill(0);
    fields.forEach((field, r) => {
      const { c } = field;
      if (field.isEmpty || likely[r] === 0) return;
      for (let k = 0; k < sum.length; k++) sum[k]! += likely[r]! * Math.min(c[k]!, capsPerKg[r]!);
    });
    for (let k = 0; k < sum.length; k++) if (sum[k]! > highest[k]!) highest[k] = sum[k]!;
  }

  fieldAt(tS: number, weights: Weights): GriddedField {
    const { before, after, share } = this.around(tS);
    const out = new Float64Array(this.highest.length);
    if (before) this.addTo(out, before, weights, 1 - share);
    if (after && share > 0) this.addTo(out, after, weights, share);
    return this.gridded(out);
  }

  /** Largest values up to a time, linear between frames: for amounts in proportion to the likely ones; for others, over the stored frames alone. */
  envelope(untilS: number, weights: Weights): GriddedField {
    const { likely } = this.input;
    const ratio = weights[0]! / likely[0]!;
    const out = new Float64Array(this.highest.length);
    if (weights.every((weight, r) => Math.abs(weight - ratio * likely[r]!) <= 1e-12 * Math.abs(weight))) {
      const next = this.peaks.findIndex((peak) => peak.timeS >= untilS);
      const after = this.peaks[next] ?? this.peaks[this.peaks.length - 1];
      const before = this.peaks[next - 1];
      const share = after && before ? (untilS - before.timeS) / (after.timeS - before.timeS) : 1;
      if (before?.crop) this.addCrop(out, before.crop, ratio * (1 - share), Infinity);
      if (after?.crop) this.addCrop(out, after.crop, ratio * share, Infinity);
      return this.gridded(out);
    }
    const one = new Float64Array(out.length);
    for (const frame of this.stored.filter((item) => item.timeS <= untilS)) {
      one.fill(0);
      this.addTo(one, frame, weights, 1);
      for (let k = 0; k < out.length; k++) if (one[k]! > out[k]!) out[k] = one[k]!;
    }
    return this.gridded(out);
  }

  books(tS: number, weights: Weights): Books {
    const { before, after, share } = this.around(tS);
    const sum = (item: Stored | null, name: keyof Books): number => (item ? item.books.reduce((total, books, r) => total + weights[r]! * books[name], 0) : 0);
    const at = (name: keyof Books): number => (1 - share) * sum(before, name) + (share > 0 ? share * sum(after, name) : 0);
    return { released: at('released'), inWater: at('inWater'), lost: at('lost'), left: at('left') };
  }

  private around(tS: number): { before: Stored | null; after: Stored | null; share: number } {
    const { stored } = this;
    const next = stored.findIndex((frame) => frame.timeS >= tS);
    if (next < 0) return { before: stored[stored.length - 1] ?? null, after: null, share: 0 };
    const after = stored[next]!;
    const before = stored[next - 1] ?? null;
    const share = before ? (tS - before.timeS) / (after.timeS - before.timeS) : tS === after.timeS ? 1 : 0;
    return { before, after, share };
  }

  private addTo(out: Float64Array, { crops }: Stored, weights: Weights, share: number): void {
    crops.forEach((crop, r) => crop && this.addCrop(out, crop, weights[r]! * share, this.input.capsPerKg[r]!));
  }

  private addCrop(out: Float64Array, { i0, j0, nx, ny, values }: Crop, factor: number, cap: number): void {
    const stride = this.input.water.grid.nx;
    for (let j = 0; j < ny; j++) for (let i = 0; i < nx; i++) out[(j0 + j) * stride + i0 + i]! += factor * Math.min(values[j * nx + i]!, cap);
  }

  /** Cut to what holds anything, one cell of margin; water that no way leads to is left open. */
  private gridded(values: Float64Array): GriddedField {
    const { water, origin, solubility } = this.input;
    const { grid } = water;
    const crop = cropOf(values, grid.nx);
    const i0 = Math.max(0, (crop?.i0 ?? 1) - 1);
    const j0 = Math.max(0, (crop?.j0 ?? 1) - 1);
    const nx = Math.min(grid.nx - i0, (crop?.nx ?? 1) + 2);
    const ny = Math.min(grid.ny - j0, (crop?.ny ?? 1) + 2);
    const out = new Float64Array(nx * ny);
    for (let j = 0; j < ny; j++) {
      for (let i = 0; i < nx; i++) {
        const cell = (j0 + j) * grid.nx + i0 + i;
        out[j * nx + i] = water.isCutOff[cell] === 1 ? Number.NaN : Math.min(values[cell]!, solubility);
      }
    }
    const plane: PlaneGrid = { kind: 'plane', ...origin, x0M: grid.x0M + i0 * grid.dxM, y0M: grid.y0M + j0 * grid.dxM, dxM: grid.dxM, dyM: grid.dxM, nx, ny };
    return { grid: plane, values: out };
  }
}

function cropOf(values: Float64Array, stride: number): Crop | null {
  const floor = EMPTY_SHARE * values.reduce((most, value) => Math.max(most, value), 0);
  let [i0, j0, i1, j1] = [Infinity, -1, -1, -1];
  for (let k = 0; k < values.length; k++) {
    if (!(values[k]! > floor)) continue;
    const i = k % stride;
    const j = (k - i) / stride;
    i0 = Math.min(i0, i);
    i1 = Math.max(i1, i);
    if (j0 < 0) j0 = j;
    j1 = j;
  }
  if (i1 < 0) return null;
  const nx = i1 - i0 + 1;
  const ny = j1 - j0 + 1;
  const out = new Float32Array(nx * ny);
  for (let j = 0; j < ny; j++) for (let i = 0; i < nx; i++) out[j * nx + i] = values[(j0 + j) * stride + i0 + i]!;
  return { i0, j0, nx, ny, values: out };
}
