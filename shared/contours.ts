/**
 * Isolines of values on a regular grid by marching squares. Positions are in grid units: node (i, j) lies at
 * (i, j), so that one set of lines serves any projection of the grid. Crossings are linear between nodes: give logarithms
 * where the logarithm of a value is nearly linear, as in a cloud.
 */

/** Closed rings, vertices as x, y pairs one ring after another; ring k ends before vertex `ends[k]`. */
export type Rings = { points: Float64Array; ends: number[] };

/**
 * Room for the walk over one grid, kept between calls so that playing frames allocates next to nothing. Grids of nodes in
 * it have a border of nodes below every level round them and rows of `width` nodes, a multiple of 4.
 */
export type ContourRoom = {
  readonly nx: number;
  readonly ny: number;
  readonly width: number;
  /** What `fillRoom` copied, nx*ny. */
  readonly values: Float64Array;
  /** How many levels lie at or below each node; the same bytes four at a time. */
  readonly bands: Uint8Array;
  readonly fours: Int32Array;
  /** First and last node of each row that reaches the lowest level; first behind last where none does. */
  readonly reach: Int32Array;
  /** For each crossed edge the one that follows it along its line, else -1. */
  readonly next: Int32Array;
  /** Cells crossed by each level, as their lower left node, and how many. */
  readonly crossed: { cells: Int32Array; count: number }[];
  starts: Int32Array;
  points: Float64Array;
};

export function contourRoom(nx: number, ny: number): ContourRoom {
  if (!(nx >= 1 && ny >= 1)) throw new RangeError(`A grid to contour needs nodes, got ${nx} x ${ny}`);
  const width = Math.ceil((nx + 2) / 4) * 4;
  const nodes = width * (ny + 2);
  const bands = new Uint8Array(nodes);
  return { nx, ny, width, values: new Float64Array(nx * ny), bands, fours: new Int32Array(bands.buffer), reach: new Int32Array(2 * (ny + 2)), next: new Int32Array(2 * nodes).fill(-1), crossed: [], starts: new Int32Array(1024), points: new Float64Array(4096) };
}

/** Copies the values into the room. Row-major, x fastest. */
export function fillRoom(room: ContourRoom, values: ArrayLike<number>): void {
  if (values.length !== room.values.length) throw new RangeError(`A grid of ${room.nx} x ${room.ny} has ${room.values.length} values, got ${values.length}`);
  room.values.set(values);
}

/** Rings round everything at or above `level` in the room's values; see `contourBands`. */
export const contourRings = (room: ContourRoom, level: number): Rings => bandRings(room, room.values, [level])[0]!;

/**
 * For each level (ascending) the rings round everything at or above it, for filling with the even-odd rule.
 * A saddle is settled by the mean of its corners. Where the grid's border cuts through, the ring runs along the border.
 * Outer rings turn anticlockwise (x right, y up), holes clockwise. Values that are no number count as below every level.
 * Each node is compared once for all levels; most cells are then skipped four at a time. Cost O(nx*ny + vertices), about
 * 2 ns a node and 15 ns a vertex. Error: order 2 in the spacing for a smooth field.
 */
export function contourBands(room: ContourRoom, values: ArrayLike<number>, levels: readonly number[]): Rings[] {
  // One kind of array throughout keeps the loops quick: other kinds are copied first.
  if (values instanceof Float64Array && values.length === room.values.length) return bandRings(room, values, levels);
  fillRoom(room, values);
  return bandRings(room, room.values, levels);
}

function bandRings(room: ContourRoom, values: Float64Array, levels: readonly number[]): Rings[] {
  if (levels.length > MOST_LEVELS || levels.some((level, k) => k > 0 && !(level >= levels[k - 1]!))) throw new RangeError(`Levels to contour must ascend, ${MOST_LEVELS} at most, got ${levels.join(', ')}`);
  sortIntoBands(room, values, levels);
  listCrossed(room, levels.length);
  return levels.map((level, k) => followRings(room, values, level, linkCrossings(room, values, level, k)));
}

/** Bands are bytes. */
const MOST_LEVELS = 255;

function sortIntoBands({ nx, ny, width, bands, reach }: ContourRoom, values: Float64Array, levels: readonly number[]): void {
  bands.fill(0);
  for (let row = 0; row < ny + 2; row++) {
    reach[2 * row] = width;
    reach[2 * row + 1] = -1;
  }
  if (levels.length === 0) return;
  // The level a value must reach to rise by one band, and the one below which it falls; the ends are never met.
  const rise = Float64Array.from([...levels, Number.NaN]);
  const lowest = levels[0]!;
  for (let j = 0; j < ny; j++) {
    const end = (j + 1) * nx;
    const shift = (j + 1) * width + 1 - j * nx;
    let at = j * nx;
    while (at < end && !(values[at]! >= lowest)) at++;
    if (at === end) continue;
    const row = (j + 1) * width;
    reach[2 * (j + 1)] = at + shift - row;
    let last = at;
    let band = 0;
    for (; at < end; at++) {
      const value = values[at]!;
      if (!(value >= lowest)) continue;
      while (value >= rise[band]!) band++;
      while (value < rise[band - 1]!) band--;
      bands[at + shift] = band;
      last = at;
    }
    reach[2 * (j + 1) + 1] = last + shift - row;
  }
}

/** Lists the cells that each level crosses; cells whose corners are all in one band are passed over, four at a time. */
function listCrossed(room: ContourRoom, levelCount: number): void {
  const { ny, width, bands, fours, crossed, reach } = room;
  while (crossed.length < levelCount) crossed.push({ cells: new Int32Array(1024), count: 0 });
  for (const list of crossed) list.count = 0;
  const perRow = width >> 2;
  for (let j = 0; j <= ny; j++) {
    const from = (Math.min(reach[2 * j]!, reach[2 * j + 2]!) - 1) >> 2;
    const to = Math.max(reach[2 * j + 1]!, reach[2 * j + 3]!) >> 2;
    if (to < from) continue;
    const row = j * perRow;
    let lower = fours[row + from]!;
    let upper = fours[row + perRow + from]!;
    for (let k = from; k <= to; k++) {
      const isLast = k === perRow - 1;
      const nextLower = isLast ? 0 : fours[row + k + 1]!;
      const nextUpper = isLast ? 0 : fours[row + perRow + k + 1]!;
      const band = lower & 255;
      if (lower !== upper || (nextLower & 255) !== band || (nextUpper & 255) !== band || lower !== Math.imul(band, 0x01010101)) {
        const first = (row + k) << 2;
        for (let node = first, end = isLast ? first + 3 : first + 4; node < end; node++) listCell(bands[node]!, bands[node + 1]!, bands[node + width]!, bands[node + width + 1]!, node, crossed);
      }
      lower = nextLower;
      upper = nextUpper;
    }
  }
}

function listCell(a: number, b: number, c: number, d: number, node: number, crossed: ContourRoom['crossed']): void {
  if (a === b && a === c && a === d) return;
  const [low, high] = [Math.min(a, b, c, d), Math.max(a, b, c, d)];
  for (let level = low; level < high; level++) {
    const list = crossed[level]!;
    if (list.count === list.cells.length) list.cells = doubled(list.cells);
    list.cells[list.count++] = node;
  }
}

function doubled(array: Int32Array): Int32Array {
  const wider = new Int32Array(2 * array.length);
  wider.set(array);
  return wider;
}

/**
 * Edges crossed in a cell for each pattern of corners at or above the level (1 lower left, 2 lower right, 4 upper right,
 * 8 upper left); the high side is on the left of the line. Edges: 0 bottom, 1 right, 2 top, 3 left.
 */
const FROM = [0, 0, 1, 1, 2, 0, 2, 2, 3, 0, 0, 1, 3, 0, 3, 0];
const TO = [0, 3, 0, 3, 1, 0, 0, 3, 2, 2, 0, 2, 1, 1, 0, 0];
/** The two saddles: corners joined through the middle, or apart; two lines each, as from, to, from, to. */
const SADDLES = { 5: { joined: [0, 1, 2, 3], apart: [0, 3, 2, 1] }, 10: { joined: [3, 0, 1, 2], apart: [1, 0, 3, 2] } } as const;

/** Writes for each crossed edge the edge that follows it along its line into `next`, and the crossed edges into `starts`; answers how many. */
function linkCrossings(room: ContourRoom, values: Float64Array, level: number, k: number): number {
  const { width, bands, next } = room;
  const { cells, count } = room.crossed[k]!;
  if (room.starts.length < 2 * count) room.starts = new Int32Array(4 * count);
  const { starts } = room;
  // Each grid edge once: 2n for the edge from node n to the right, 2n + 1 for the one upward.
  const edge = [0, 3, 2 * width, 1];
  let found = 0;
  for (let c = 0; c < count; c++) {
    const node = cells[c]!;
    const corners = (bands[node]! > k ? 1 : 0) | (bands[node + 1]! > k ? 2 : 0) | (bands[node + width + 1]! > k ? 4 : 0) | (bands[node + width]! > k ? 8 : 0);
    if (corners === 5 || corners === 10) {
      const lines = SADDLES[corners][isJoined(room, values, node, level) ? 'joined' : 'apart'];
      for (let line = 0; line < 4; line += 2) {
        const from = 2 * node + edge[lines[line]!]!;
        next[from] = 2 * node + edge[lines[line + 1]!]!;
        starts[found++] = from;
      }
      continue;
    }
    const from = 2 * node + edge[FROM[corners]!]!;
    next[from] = 2 * node + edge[TO[corners]!]!;
    starts[found++] = from;
  }
  return found;
}

/** Whether the two high corners of a saddle are joined: by the mean of the four. At the border, below every level, they are apart. */
function isJoined({ nx, ny, width }: ContourRoom, values: Float64Array, node: number, level: number): boolean {
  const i = (node % width) - 1;
  const j = Math.floor(node / width) - 1;
  if (i < 0 || j < 0 || i + 1 >= nx || j + 1 >= ny) return false;
  const at = j * nx + i;
  return (values[at]! + values[at + 1]! + values[at + nx]! + values[at + nx + 1]!) / 4 >= level;
}

/** Follows the lines from edge to edge until all are walked; `next` is left clean. */
function followRings(room: ContourRoom, values: Float64Array, level: number, found: number): Rings {
  const { nx, ny, width, next, starts } = room;
  if (room.points.length < 2 * found) room.points = new Float64Array(4 * found);
  const { points } = room;
  const ends: number[] = [];
  const perWidth = 1 / width;
  let written = 0;
  for (let s = 0; s < found; s++) {
    let edge = starts[s]!;
    if (next[edge] === -1) continue;
    for (let following = next[edge]!; following !== -1; following = next[edge]!) {
      next[edge] = -1;
      const node = edge >> 1;
      const j = Math.floor((node + 0.5) * perWidth);
      const i = node - j * width;
      // The crossing between node (i, j) and the next one to the right or upward; a border node hands it to the other one.
      if ((edge & 1) === 1) {
        points[written] = i - 1;
        points[written + 1] = j === 0 ? 0 : j === ny ? ny - 1 : j - 1 + share(values[(j - 1) * nx + i - 1]!, values[j * nx + i - 1]!, level);
      } else {
        points[written] = i === 0 ? 0 : i === nx ? nx - 1 : i - 1 + share(values[(j - 1) * nx + i - 1]!, values[(j - 1) * nx + i]!, level);
        points[written + 1] = j - 1;
      }
      written += 2;
      edge = following;
    }
    ends.push(written / 2);
  }
  return { points: points.slice(0, written), ends };
}

/** Where between a and b, on either side of it, the level lies. Values that are no number or infinite give the crossing to the other node. */
function share(a: number, b: number, level: number): number {
  const at = (level - a) / (b - a);
  return Number.isFinite(a) && Number.isFinite(b) ? at : Number.isFinite(a) ? 0 : 1;
}

/** True where both positions lie on the same side of the grid's border: the ring runs along the border there, no isoline does. */
export const runsAlongBorder = (nx: number, ny: number, ax: number, ay: number, bx: number, by: number): boolean =>
  (ax === bx && (ax === 0 || ax === nx - 1)) || (ay === by && (ay === 0 || ay === ny - 1));

/** Area inside the rings by the even-odd rule for nested rings that do not cross, grid units squared. */
export function ringsArea({ points, ends }: Rings): number {
  let area = 0;
  let from = 0;
  for (const end of ends) {
    for (let k = from; k < end; k++) {
      const l = k + 1 < end ? k + 1 : from;
      area += points[2 * k]! * points[2 * l + 1]! - points[2 * l]! * points[2 * k + 1]!;
    }
    from = end;
  }
  return area / 2;
}
