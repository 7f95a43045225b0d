/**
 * Isolines of values on a regular grid by marching squares. Positions are in grid units: node (i, j) lies at
 * (i, j), so that one set of lines serves any projection of the grid.
 */

/** Closed rings, vertices as x, y pairs one ring after another; ring k ends before vertex `ends[k]`. */
export type Rings = { points: Float64Array; ends: number[] };

/** Room for the walk over one grid, kept between calls so that playing frames allocates next to nothing. */
export type ContourRoom = { nx: number; ny: number; padded: Float64Array; next: Int32Array };

export function contourRoom(nx: number, ny: number): ContourRoom {
  if (!(nx >= 1 && ny >= 1)) throw new RangeError(`A grid to contour needs nodes, got ${nx} x ${ny}`);
  const nodes = (nx + 2) * (ny + 2);
  return { nx, ny, padded: new Float64Array(nodes), next: new Int32Array(2 * nodes).fill(-1) };
}

/** Copies the values into the room, with a border below every level round them. Row-major, x fastest. */
export function fillRoom(room: ContourRoom, values: ArrayLike<number>): void {
  const { nx, ny, padded } = room;
  const width = nx + 2;
  padded.fill(Number.NEGATIVE_INFINITY);
  for (let j = 0; j < ny; j++) for (let i = 0; i < nx; i++) padded[(j + 1) * width + i + 1] = values[j * nx + i]!;
}

/** Edges crossed in a cell for each pattern of corners at or above the level, as from, to pairs; the high side is on the left. */
const BOTTOM = 0;
const RIGHT = 1;
const TOP = 2;
const LEFT = 3;
const CROSSINGS: readonly (readonly number[])[] = [
  [], [BOTTOM, LEFT], [RIGHT, BOTTOM], [RIGHT, LEFT], [TOP, RIGHT], [], [TOP, BOTTOM], [TOP, LEFT],
  [LEFT, TOP], [BOTTOM, TOP], [], [RIGHT, TOP], [LEFT, RIGHT], [BOTTOM, RIGHT], [LEFT, BOTTOM], [],
];
/** The two saddles: corners joined through the middle, or apart. */
const SADDLES = {
  5: { joined: [BOTTOM, RIGHT, TOP, LEFT], apart: [BOTTOM, LEFT, TOP, RIGHT] },
  10: { joined: [LEFT, BOTTOM, RIGHT, TOP], apart: [RIGHT, BOTTOM, LEFT, TOP] },
} as const;

/**
 * Rings round everything at or above `level` in the room's values, for filling with the even-odd rule.
 * Crossings are linear between nodes; a saddle is settled by the mean of its corners. Where the grid's border cuts
 * through, the ring runs along the border. Outer rings turn anticlockwise (x right, y up), holes clockwise.
 * Cost O(nx*ny + vertices); the room's `next` is left clean. Error: order 2 in the spacing for a smooth field.
 */
export function contourRings(room: ContourRoom, level: number): Rings {
  const starts = markCrossings(room, level);
  const points: number[] = [];
  const ends: number[] = [];
  const { next } = room;
  for (const start of starts) {
    if (next[start] === -1) continue;
    for (let edge = start; next[edge] !== -1; ) {
      pushCrossing(room, level, edge, points);
      const following = next[edge]!;
      next[edge] = -1;
      edge = following;
    }
    ends.push(points.length / 2);
  }
  return { points: Float64Array.from(points), ends };
}

/** Writes for each crossed edge the edge that follows it along its line; answers the crossed edges. */
function markCrossings({ nx, ny, padded, next }: ContourRoom, level: number): number[] {
  const width = nx + 2;
  const starts: number[] = [];
  for (let j = 0; j <= ny; j++) {
    const row = j * width;
    let left = (padded[row]! >= level ? 1 : 0) | (padded[row + width]! >= level ? 8 : 0);
    for (let i = 0; i <= nx; i++) {
      const node = row + i;
      const right = (padded[node + 1]! >= level ? 2 : 0) | (padded[node + width + 1]! >= level ? 4 : 0);
      const corners = left | right;
      left = (right >> 1 & 1) | (right << 1 & 8);
      if (corners === 0 || corners === 15) continue;
      const crossings = corners === 5 || corners === 10 ? saddle(padded, node, width, level, corners) : CROSSINGS[corners]!;
      for (let k = 0; k < crossings.length; k += 2) {
        const from = edgeOf(node, width, crossings[k]!);
        next[from] = edgeOf(node, width, crossings[k + 1]!);
        starts.push(from);
      }
    }
  }
  return starts;
}

function saddle(padded: Float64Array, node: number, width: number, level: number, corners: 5 | 10): readonly number[] {
  const mean = (padded[node]! + padded[node + 1]! + padded[node + width]! + padded[node + width + 1]!) / 4;
  return mean >= level ? SADDLES[corners].joined : SADDLES[corners].apart;
}

/** Each grid edge once: 2n for the edge from node n to the right, 2n + 1 for the one upward. */
const edgeOf = (node: number, width: number, side: number): number =>
  side === BOTTOM ? 2 * node : side === RIGHT ? 2 * (node + 1) + 1 : side === TOP ? 2 * (node + width) : 2 * node + 1;

function pushCrossing({ nx, ny, padded }: ContourRoom, level: number, edge: number, points: number[]): void {
  const width = nx + 2;
  const node = edge >> 1;
  const upward = (edge & 1) === 1;
  const a = padded[node]!;
  const b = padded[upward ? node + width : node + 1]!;
  // Against the border, which is minus infinity, the crossing is clamped onto the outermost node.
  const share = a === Number.NEGATIVE_INFINITY ? 1 : b === Number.NEGATIVE_INFINITY ? 0 : (level - a) / (b - a);
  const x = (node % width) - 1 + (upward ? 0 : share);
  const y = Math.floor(node / width) - 1 + (upward ? share : 0);
  points.push(x < 0 ? 0 : x > nx - 1 ? nx - 1 : x, y < 0 ? 0 : y > ny - 1 ? ny - 1 : y);
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
