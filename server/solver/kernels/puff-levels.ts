import type { GridPuff } from './puffs';

/** Coarsest spacing is 2^3 = 8 nodes. */
export const MAX_LEVEL = 3;
const LEVELS = MAX_LEVEL + 1;
const CUT2 = 2 * Math.log(1e7);
const CUT = Math.sqrt(CUT2);

/** Costs in ns, measured on one machine; they choose between routes that all give the same answer, so only their ratios matter. */
const COST = { node: 0.12, row: 15, refinedNode: 0.12, grid: 150 };

type Box = { count: number; nodes: number; rows: number; x0: number; x1: number; y0: number; y1: number };
const emptyBox = (): Box => ({ count: 0, nodes: 0, rows: 0, x0: Infinity, x1: -Infinity, y0: Infinity, y1: -Infinity });

/** Where the puffs of one kind lie in the part of a level grid in use. */
export type LevelTarget = { offsetX: number; offsetY: number; stride: number; rows: number; from: number; to: number; rowFrom: number; rowTo: number };

/** Puffs sorted by how coarse a grid each would bear along x and y: fields of x, y, sxx, sxy, syy, peak, half width and half height. */
export class PuffCensus {
  readonly boxes: Box[] = Array.from({ length: LEVELS * LEVELS }, emptyBox);
  highest = 0;
  private count = 0;
  private readonly level: Uint8Array;
  private readonly fields: Float64Array;
  private readonly coarseEnough: number[];

  constructor(maxPuffs: number, kappa: number) {
    this.level = new Uint8Array(maxPuffs);
    this.fields = new Float64Array(8 * maxPuffs);
    this.coarseEnough = Array.from({ length: MAX_LEVEL }, (_, k) => (kappa * 2 ** (k + 1)) ** 2);
  }

  reset(): void {
    this.count = 0;
    this.highest = 0;
    for (const box of this.boxes) Object.assign(box, EMPTY);
  }

  add({ x, y, sxx, sxy, syy, peak, rowVariance, columnVariance }: GridPuff): void {
    const levelX = this.levelOf(rowVariance);
    const levelY = this.levelOf(columnVariance);
    const index = levelX + LEVELS * levelY;
    this.highest = Math.max(this.highest, index);
    const halfWidth = CUT * Math.sqrt(sxx);
    const halfHeight = CUT * Math.sqrt(syy);
    const { fields } = this;
    const at = 8 * this.count;
    fields[at] = x;
    fields[at + 1] = y;
    fields[at + 2] = sxx;
    fields[at + 3] = sxy;
    fields[at + 4] = syy;
    fields[at + 5] = peak;
    fields[at + 6] = halfWidth;
    fields[at + 7] = halfHeight;
    this.level[this.count++] = index;
    const box = this.boxes[index]!;
    box.count++;
    box.nodes += Math.PI * CUT2 * Math.sqrt(rowVariance * syy);
    box.rows += 2 * halfHeight;
    box.x0 = Math.min(box.x0, x - halfWidth);
    box.x1 = Math.max(box.x1, x + halfWidth);
    box.y0 = Math.min(box.y0, y - halfHeight);
    box.y1 = Math.max(box.y1, y + halfHeight);
  }

  private levelOf(variance: number): number {
    let level = 0;
    while (level < MAX_LEVEL && variance >= this.coarseEnough[level]!) level++;
    return level;
  }

  /** Writes the puffs that go onto level (x, y) when levels above the limits are not used, in its units; marks the part in use. */
  write(out: Float64Array, x: number, y: number, limits: { x: number; y: number }, target: LevelTarget): number {
    const { fields } = this;
    const scaleX = 2 ** -x;
    const scaleY = 2 ** -y;
    let written = 0;
    for (let p = 0; p < this.count; p++) {
      const own = this.level[p]!;
      if (Math.min(own % LEVELS, limits.x) !== x || Math.min(Math.floor(own / LEVELS), limits.y) !== y) continue;
      const at = 8 * p;
      const to = 6 * written++;
      const centreX = fields[at]! * scaleX + target.offsetX;
      const centreY = fields[at + 1]! * scaleY + target.offsetY;
      out[to] = centreX;
      out[to + 1] = centreY;
      out[to + 2] = fields[at + 2]! * scaleX * scaleX;
      out[to + 3] = fields[at + 3]! * scaleX * scaleY;
      out[to + 4] = fields[at + 4]! * scaleY * scaleY;
      out[to + 5] = fields[at + 5]!;
      mark(target, centreX, centreY, fields[at + 6]! * scaleX, fields[at + 7]! * scaleY);
    }
    return written;
  }
}

const EMPTY = emptyBox();

/** Whole vectors reach up to three nodes beyond the ellipse. */
function mark(target: LevelTarget, x: number, y: number, halfWidth: number, halfHeight: number): void {
  target.from = Math.min(target.from, Math.max(0, Math.floor(x - halfWidth) - 3));
  target.to = Math.max(target.to, Math.min(target.stride - 1, Math.ceil(x + halfWidth) + 3));
  target.rowFrom = Math.min(target.rowFrom, Math.max(0, Math.floor(y - halfHeight)));
  target.rowTo = Math.max(target.rowTo, Math.min(target.rows - 1, Math.ceil(y + halfHeight)));
}

/** Highest levels along x and y worth using: estimates the cost of each choice and takes the least, the finer one of equals. */
export function cheapestLimits(census: PuffCensus, nx: number, ny: number): { x: number; y: number } {
  let best = { x: 0, y: 0 };
  let least = Infinity;
  for (let y = 0; y <= MAX_LEVEL; y++) {
    for (let x = 0; x <= MAX_LEVEL; x++) {
      const cost = costOf(census.boxes, x, y, nx, ny);
      if (cost < least) {
        least = cost;
        best = { x, y };
      }
    }
  }
  return best;
}

function costOf(boxes: readonly Box[], limitX: number, limitY: number, nx: number, ny: number): number {
  let cost = 0;
  for (let b = 0; b < boxes.length; b++) {
    const box = boxes[b]!;
    if (box.count === 0) continue;
    const x = Math.min(b % LEVELS, limitX);
    const y = Math.min(Math.floor(b / LEVELS), limitY);
    cost += (COST.node * box.nodes) / 2 ** (x + y) + (COST.row * box.rows) / 2 ** y;
  }
  for (let y = 0; y <= limitY; y++) for (let x = 1; x <= limitX; x++) cost += refinement(boxes, x, y, limitY, nx, ny) / 2 ** (x - 1 + y);
  for (let y = 1; y <= limitY; y++) cost += refinement(boxes, 0, y, MAX_LEVEL + 1, nx, ny) / 2 ** (y - 1);
  return cost;
}

/** Cost at full resolution of refining what stands at level x or coarser along x, and at level y (for y = limitY or above: at y or coarser) along y. */
function refinement(boxes: readonly Box[], x: number, y: number, limitY: number, nx: number, ny: number): number {
  const union = emptyBox();
  for (let b = 0; b < boxes.length; b++) {
    const box = boxes[b]!;
    const levelY = Math.floor(b / LEVELS);
    const isIn = limitY > MAX_LEVEL ? levelY >= y : Math.min(levelY, limitY) === y;
    if (box.count === 0 || b % LEVELS < x || !isIn) continue;
    union.x0 = Math.min(union.x0, box.x0);
    union.x1 = Math.max(union.x1, box.x1);
    union.y0 = Math.min(union.y0, box.y0);
    union.y1 = Math.max(union.y1, box.y1);
  }
  if (union.x1 < union.x0) return 0;
  const width = Math.max(0, Math.min(nx, union.x1) - Math.max(0, union.x0));
  const height = Math.max(0, Math.min(ny, union.y1) - Math.max(0, union.y0));
  return COST.grid + COST.refinedNode * width * height;
}
