import { LAND, type CellGrid } from './cell-grid';

/** Weights along one step of the grid, m2/s a cell: what `latticeShares` gave there. */
export type StepWeights = { readonly a: number; readonly b: number; readonly weights: Float64Array };

/**
 * Cells joined along one step of the grid, in order; `link` joins a cell to the next in the list, 0 at the end of a line.
 * Lines of one cell are left out.
 */
export type SpreadingLines = { readonly order: Int32Array; readonly link: Float64Array };

/** Whether the line between two centres stays on water: every cell it runs through, or one of the two where it runs between them. */
function isPathOpen(grid: CellGrid, from: number, a: number, b: number): boolean {
  const parts = 2 * Math.max(Math.abs(a), Math.abs(b));
  const around = (value: number): number[] => (Math.abs(value - Math.round(value)) === 0.5 ? [Math.floor(value), Math.ceil(value)] : [Math.round(value)]);
  for (let n = 1; n < parts; n++) {
    const isOpen = around((a * n) / parts).some((x) => around((b * n) / parts).some((y) => grid.isWater[from + y * grid.nx + x] !== LAND));
    if (!isOpen) return false;
  }
  return isDiagonalOpen(grid, from, a, b);
}

/** A diagonal step needs water on one of its two sides: it must not slip between two corners of land. */
const isDiagonalOpen = ({ nx, isWater }: CellGrid, from: number, a: number, b: number): boolean =>
  Math.abs(a) !== 1 || Math.abs(b) !== 1 || isWater[from + a] !== LAND || isWater[from + b * nx] !== LAND;

/** 1 for each cell from which the step (a, b) leads over water to water. */
export function openSteps(grid: CellGrid, a: number, b: number): Uint8Array {
  const { nx, ny, isWater } = grid;
  const step = b * nx + a;
  const out = new Uint8Array(nx * ny);
  for (let j = Math.max(0, -b); j < Math.min(ny, ny - b); j++) {
    for (let i = Math.max(0, -a); i < Math.min(nx, nx - a); i++) {
      const cell = j * nx + i;
      if (isWater[cell] !== LAND && isWater[cell + step] !== LAND && (Math.abs(a) + Math.abs(b) === 1 || isPathOpen(grid, cell, a, b))) out[cell] = 1;
    }
  }
  return out;
}

/** Joins the cells of water along one step. The link of two cells is the mean of their weights. Cost: about 20 ns a cell. */
export function spreadingLines({ nx, ny }: CellGrid, { a, b, weights }: StepWeights, isOpen: Uint8Array): SpreadingLines {
  const step = b * nx + a;
  const links = new Float64Array(nx * ny);
  for (let cell = 0; cell < links.length; cell++) if (isOpen[cell] === 1) links[cell] = (weights[cell]! + weights[cell + step]!) / 2;
  const order: number[] = [];
  const link: number[] = [];
  for (let cell = 0; cell < links.length; cell++) {
    const isStart = links[cell]! > 0 && !(cell - step >= 0 && links[cell - step]! > 0);
    if (!isStart) continue;
    let at = cell;
    for (; links[at]! > 0; at += step) {
      order.push(at);
      link.push(links[at]!);
    }
    order.push(at);
    link.push(0);
  }
  return { order: Int32Array.from(order), link: Float64Array.from(link) };
}

/** Scratch of one line, as long as the longest. */
export type LineScratch = { readonly t: Float64Array; readonly rest: Float64Array; readonly carried: Float64Array };
export const lineScratch = ({ nx, ny }: CellGrid): LineScratch => ({ t: new Float64Array(nx + ny + 1), rest: new Float64Array(nx + ny + 1), carried: new Float64Array(nx + ny + 1) });

/**
 * Spreads along every line for one step: V dc/dt = sum of T (c_neighbour - c), T = link * factor * mean volume of the two.
 * Trapezoidal rule (order 2 in time) where its explicit half leaves nothing negative, backward Euler (order 1; its
 * variance is exact all the same) on lines where it would. A tridiagonal system a line, by elimination.
 * Keeps: sum of V c to rounding; c >= 0; a uniform c.
 *
 * @param c  concentration by cell, overwritten
 * @param volume  m3 by cell
 * @param factor  step over the square of the cell's side, s/m2, times what multiplies all weights
 */
export function spreadAlong({ order, link }: SpreadingLines, c: Float64Array, volume: Float64Array, factor: number, scratch: LineScratch): void {
  for (let start = 0; start < order.length; ) {
    let end = start;
    while (link[end]! > 0) end++;
    solveLine(order, link, start, end + 1, c, volume, factor, scratch);
    start = end + 1;
  }
}

function solveLine(order: Int32Array, link: Float64Array, start: number, end: number, c: Float64Array, volume: Float64Array, factor: number, { t, rest, carried }: LineScratch): void {
  const length = end - start;
  let isPositive = true;
  let below = 0;
  for (let n = 0; n < length; n++) {
    const v = volume[order[start + n]!]!;
    const above = n + 1 < length ? (factor * link[start + n]! * (v + volume[order[start + n + 1]!]!)) / 2 : 0;
    t[n] = above;
    if (below + above > 2 * v) isPositive = false;
    below = above;
  }
  const share = isPositive ? 0.5 : 1;
  const explicit = 1 - share;
  let tBelow = 0;
  let cBelow = 0;
  let hold = 0;
  let z = 0;
  for (let n = 0; n < length; n++) {
    const cell = order[start + n]!;
    const v = volume[cell]!;
    const here = c[cell]!;
    const above = t[n]!;
    const onward = n + 1 < length ? c[order[start + n + 1]!]! : 0;
    const right = (v - explicit * (tBelow + above)) * here + explicit * (tBelow * cBelow + above * onward);
    const tb = share * tBelow;
    const pivot = 1 / (v + share * (tBelow + above) - tb * hold);
    z = (right + tb * z) * pivot;
    rest[n] = z;
    hold = share * above * pivot;
    carried[n] = hold;
    tBelow = above;
    cBelow = here;
  }
  let after = 0;
  for (let n = length - 1; n >= 0; n--) {
    after = rest[n]! + carried[n]! * after;
    c[order[start + n]!] = after;
  }
}
