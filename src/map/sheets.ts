import { contourBands, contourRoom, type ContourRoom, type Rings } from '../../shared/contours';
import { NO_ESTIMATE, type ChannelGridPart, type PlaneGrid } from '../../shared/frames';
import { fromPlane } from '../../shared/geo';
import type { EstimateWater } from '../../shared/schemas/estimate';
import type { Level } from '../../shared/schemas/estimate-result';
import { alongCourse, courseOf, coursePoint, reachWidthM, ribbonPx, type Course } from './channel-course';
import { dryNodes } from '../../shared/dry-nodes';
import { assertWholeFrame, bridgedCodes, codeOfLevel, type Frame } from './frame';
import { worldX, worldY, type MapView } from './mercator';

/** Sets `out[0]`, `out[1]` to the pixel of a position in grid units. */
export type Place = (x: number, y: number, out: Float64Array) => void;

/** A grid with its rings per level, and how it lies on the map. Rings and boxes are in grid units. */
export type Sheet = {
  nx: number;
  ny: number;
  bands: Rings[];
  /** Boxes without an estimate: x from, x to, y from, y to. */
  blanks: [number, number, number, number][];
  placeIn(view: MapView): Place;
  /** True where the grid bends, so that lines between its nodes are not straight. */
  bends: boolean;
};

/** A grid as drawn: the full sheet, and one with the largest value right across for rivers too thin to show more. */
export type PreparedFrame = { levels: Level[]; sheets: { full: Sheet; thin: Sheet | null; widthPx(view: MapView): number }[]; clipsToWater: boolean };

/** Below this width in pixels the structure across a river cannot be told. */
export const THIN_RIBBON_PX = 9;

const rooms = new Map<string, ContourRoom>();
function roomFor(nx: number, ny: number): ContourRoom {
  const key = `${nx}x${ny}`;
  const room = rooms.get(key) ?? contourRoom(nx, ny);
  if (rooms.size > 40) rooms.clear();
  rooms.set(key, room);
  return room;
}

const bandsOf = (codes: ArrayLike<number>, nx: number, ny: number, levelCodes: readonly number[]): Rings[] => contourBands(roomFor(nx, ny), codes, levelCodes);

/** Runs of nodes without an estimate as boxes reaching half a step to all sides, kept inside the grid. */
function blanksOf(codes: Uint16Array, nx: number, ny: number): [number, number, number, number][] {
  const boxes: [number, number, number, number][] = [];
  if (!codes.includes(NO_ESTIMATE)) return boxes;
  for (let j = 0; j < ny; j++)
    for (let i = 0; i < nx; i++) {
      if (codes[j * nx + i] !== NO_ESTIMATE) continue;
      const from = i;
      while (i + 1 < nx && codes[j * nx + i + 1] === NO_ESTIMATE) i++;
      boxes.push([Math.max(0, from - 0.5), Math.min(nx - 1, i + 0.5), Math.max(0, j - 0.5), Math.min(ny - 1, j + 0.5)]);
    }
  return boxes;
}

/** The contours of a frame at levels (lowest first), ready to be drawn in any view. */
export function prepareFrame(frame: Frame, levels: Level[], water: EstimateWater): PreparedFrame {
  assertWholeFrame(frame);
  const levelCodes = levels.map((level) => codeOfLevel(level.value, frame.head.scale));
  const grid = frame.head.grid;
  if (grid.kind === 'plane') return { levels, sheets: [{ full: planeSheet(grid, frame.codes, levelCodes, water), thin: null, widthPx: () => Infinity }], clipsToWater: true };
  const sheets: PreparedFrame['sheets'] = [];
  let from = 0;
  for (const part of grid.parts) {
    const codes = frame.codes.subarray(from, from + part.chainageKm.length * part.nAcross);
    from += codes.length;
    const reach = water.kind === 'river' ? water.reaches.find((candidate) => candidate.id === part.reachId) : undefined;
    if (!reach || water.kind !== 'river' || part.chainageKm.length < 2) continue;
    sheets.push(channelSheets(part, codes, levelCodes, courseOf(reach), reachWidthM(reach, water)));
  }
  return { levels, sheets, clipsToWater: false };
}

function planeSheet(grid: PlaneGrid, codes: Uint16Array, levelCodes: number[], water: EstimateWater): Sheet {
  const { nx, ny } = grid;
  const dry = water.kind === 'open' ? dryNodes(grid, water.area) : null;
  const x0 = worldX(fromPlane(grid, grid.x0M, 0)[0]);
  const stepX = (worldX(fromPlane(grid, grid.x0M + (nx - 1) * grid.dxM, 0)[0]) - x0) / Math.max(1, nx - 1);
  const rowY = Float64Array.from({ length: ny }, (_, j) => worldY(fromPlane(grid, 0, grid.y0M + j * grid.dyM)[1]));
  return {
    nx,
    ny,
    bands: bandsOf(bridgedCodes(codes, nx, ny, dry), nx, ny, levelCodes),
    blanks: blanksOf(codes, nx, ny),
    bends: false,
    placeIn: ({ scale, offsetX, offsetY }) => (x, y, out) => {
      const row = Math.min(ny - 2, Math.max(0, Math.floor(y)));
      const below = rowY[row]!;
      out[0] = (x0 + x * stepX) * scale - offsetX;
      out[1] = (below + (y - row) * ((rowY[row + 1] ?? below) - below)) * scale - offsetY;
    },
  };
}

function channelSheets(part: ChannelGridPart, codes: Uint16Array, levelCodes: number[], course: Course, widthM: number): PreparedFrame['sheets'][number] {
  const ny = part.chainageKm.length;
  const widthPx = (view: MapView) => ribbonPx(widthM, view.metresPerPixel, view.zoom);
  const wide = part.nAcross === 1 ? twoAcross(codes) : codes;
  const nx = Math.max(2, part.nAcross);
  const lies = channelLie(part.chainageKm, course, widthPx);
  const across = acrossMaximum(codes, part.nAcross);
  return {
    widthPx,
    full: { nx, ny, bands: bandsOf(bridgedCodes(wide, nx, ny), nx, ny, levelCodes), blanks: blanksOf(wide, nx, ny), ...lies(nx) },
    thin: { nx: 2, ny, bands: bandsOf(bridgedCodes(across, 2, ny), 2, ny, levelCodes), blanks: blanksOf(across, 2, ny), ...lies(2) },
  };
}

const twoAcross = (codes: Uint16Array): Uint16Array => Uint16Array.from({ length: 2 * codes.length }, (_, k) => codes[k >> 1]!);

/** The largest code across each section, twice; without an estimate only where no node of the section has one. */
function acrossMaximum(codes: Uint16Array, nAcross: number): Uint16Array {
  const out = new Uint16Array((2 * codes.length) / nAcross);
  for (let row = 0; row < out.length / 2; row++) {
    let most = -1;
    for (let i = 0; i < nAcross; i++) {
      const code = codes[row * nAcross + i]!;
      if (code !== NO_ESTIMATE && code > most) most = code;
    }
    out[2 * row] = out[2 * row + 1] = most < 0 ? NO_ESTIMATE : most;
  }
  return out;
}

/** Grid x runs from the left bank (0) to the right (nx - 1), grid y along the chainages: both follow the bends of the course. */
const channelLie = (chainageKm: number[], course: Course, widthPx: (view: MapView) => number) => (nx: number): Pick<Sheet, 'placeIn' | 'bends'> => ({
  placeIn: (view) => {
    const point = coursePoint();
    const width = widthPx(view);
    return (x, y, out) => {
      const row = Math.min(chainageKm.length - 2, Math.max(0, Math.floor(y)));
      const km = chainageKm[row]! + (y - row) * (chainageKm[row + 1]! - chainageKm[row]!);
      alongCourse(course, km, point);
      const offset = (0.5 - x / (nx - 1)) * width;
      out[0] = point.x * view.scale - view.offsetX + point.leftX * offset;
      out[1] = point.y * view.scale - view.offsetY + point.leftY * offset;
    };
  },
  bends: true,
});
