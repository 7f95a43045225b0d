import { NO_ESTIMATE, type ChannelGrid, type PlaneGrid } from '../../shared/frames';
import { fromPlane, isInArea, snapToReaches, toPlane } from '../../shared/geo';
import type { LonLat } from '../../shared/schemas/basics';
import type { EstimateWater } from '../../shared/schemas/estimate';
import { reachWidthM } from './channel-course';
import { valueOfCode, type Frame } from './frame';

/**
 * Concentration of a frame at a position, kg/m3 or counts/m3; 0 below the frame's floor and off its grid, which
 * reaches round the whole cloud; null on land and where there is no estimate. Linear in the logarithm between nodes,
 * as the drawn isolines are, and equal to the decoded value at a node.
 *
 * @param ribbonM width in which rivers are drawn just now, m: a click on the ribbon counts as in the river
 */
export function readFrameAt(frame: Frame, position: LonLat, water: EstimateWater, ribbonM = 0): number | null {
  const { grid, scale } = frame.head;
  const code = grid.kind === 'plane' ? planeCode(grid, frame.codes, position, water) : channelCode(grid, frame.codes, position, water, ribbonM);
  return code === null ? null : valueOfCode(code, scale);
}

function planeCode(grid: PlaneGrid, codes: Uint16Array, position: LonLat, water: EstimateWater): number | null {
  if (water.kind === 'open' && !isInArea(position, water.area)) return null;
  const [x, y] = toPlane(grid, position);
  const isBare = (i: number, j: number) => water.kind === 'open' && !isInArea(fromPlane(grid, grid.x0M + i * grid.dxM, grid.y0M + j * grid.dyM), water.area);
  return between(codes, 0, grid.nx, grid.ny, (x - grid.x0M) / grid.dxM, (y - grid.y0M) / grid.dyM, isBare);
}

function channelCode(grid: ChannelGrid, codes: Uint16Array, position: LonLat, water: EstimateWater, ribbonM: number): number | null {
  if (water.kind !== 'river') return null;
  const snap = snapToReaches(position, water.reaches);
  const reach = snap && water.reaches.find((candidate) => candidate.id === snap.reachId);
  if (!snap || !reach) return null;
  const widthM = Math.max(reachWidthM(reach, water), ribbonM);
  if (snap.distanceM > widthM / 2) return null;
  const across = 0.5 - ((snap.bank === 'left' ? 1 : -1) * snap.distanceM) / widthM;
  let from = 0;
  for (const part of grid.parts) {
    const ny = part.chainageKm.length;
    const row = part.reachId === snap.reachId ? rowAt(part.chainageKm, snap.chainageKm) : null;
    if (row !== null) return between(codes, from, part.nAcross, ny, Math.min(1, Math.max(0, across)) * (part.nAcross - 1), row);
    from += ny * part.nAcross;
  }
  return 0;
}

/** A chainage so close past the end of a part counts as its end: projecting a position rounds it by less. */
const END_SLACK_KM = 0.002;

/** Place of a chainage among ascending or descending chainages, in rows; null outside. */
function rowAt(chainageKm: readonly number[], km: number): number | null {
  const last = chainageKm.length - 1;
  for (let row = 1; row <= last; row++) {
    const [a, b] = [chainageKm[row - 1]!, chainageKm[row]!];
    if ((km - a) * (km - b) <= 0) return row - 1 + (a === b ? 0 : (km - a) / (b - a));
  }
  return Math.abs(km - chainageKm[0]!) < END_SLACK_KM ? 0 : Math.abs(km - chainageKm[last]!) < END_SLACK_KM ? last : null;
}

const noneBare = (): boolean => false;

/**
 * Code between nodes, linear both ways over the nodes with a value of their own; 0 off the grid, null when the nearest
 * node has no estimate or no node round the place has a value.
 */
function between(codes: Uint16Array, from: number, nx: number, ny: number, x: number, y: number, isBare: (i: number, j: number) => boolean = noneBare): number | null {
  const slack = 1e-6;
  if (x < -slack || y < -slack || x > nx - 1 + slack || y > ny - 1 + slack) return 0;
  const [cx, cy] = [Math.min(nx - 1, Math.max(0, x)), Math.min(ny - 1, Math.max(0, y))];
  if (codes[from + Math.round(cy) * nx + Math.round(cx)] === NO_ESTIMATE) return null;
  const [i, j] = [Math.min(Math.max(0, nx - 2), Math.floor(cx)), Math.min(Math.max(0, ny - 2), Math.floor(cy))];
  let sum = 0;
  let weights = 0;
  for (let dj = 0; dj <= 1 && j + dj < ny; dj++)
    for (let di = 0; di <= 1 && i + di < nx; di++) {
      const code = codes[from + (j + dj) * nx + i + di]!;
      if (code === NO_ESTIMATE || isBare(i + di, j + dj)) continue;
      const weight = (1 - Math.abs(cx - i - di)) * (1 - Math.abs(cy - j - dj));
      sum += weight * code;
      weights += weight;
    }
  return weights > 0 ? sum / weights : null;
}
