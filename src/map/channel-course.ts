import type { EstimateWater, Reach } from '../../shared/schemas/estimate';
import { metresPerPixelAt, metresPerWorldUnit, worldX, worldY } from './mercator';

/**
 * A reach's centreline in world units with a unit normal to the left at every vertex. Between vertices the normal
 * is turned evenly and kept at unit length, so that a ribbon has no gaps at bends and a position across it is never
 * farther from the centreline than its offset.
 */
export type Course = {
  reachId: string;
  /** Falls with the index: vertices run downstream. */
  chainageKm: Float64Array;
  x: Float64Array;
  y: Float64Array;
  leftX: Float64Array;
  leftY: Float64Array;
  metresPerUnit: number;
};

export function courseOf(reach: Pick<Reach, 'id' | 'centreline'>): Course {
  const n = reach.centreline.length;
  const course: Course = {
    reachId: reach.id,
    chainageKm: Float64Array.from(reach.centreline, (vertex) => vertex[2]),
    x: Float64Array.from(reach.centreline, (vertex) => worldX(vertex[0])),
    y: Float64Array.from(reach.centreline, (vertex) => worldY(vertex[1])),
    leftX: new Float64Array(n),
    leftY: new Float64Array(n),
    metresPerUnit: metresPerWorldUnit(reach.centreline[n >> 1]![1]),
  };
  for (let i = 0; i < n; i++) setNormal(course, i, n);
  return course;
}

/** Mean of the unit normals of the two segments that meet at vertex i. World y runs south, so left of (dx, dy) is (dy, -dx). */
function setNormal(course: Course, i: number, n: number): void {
  let nx = 0;
  let ny = 0;
  for (const k of [i - 1, i]) {
    if (k < 0 || k >= n - 1) continue;
    const dx = course.x[k + 1]! - course.x[k]!;
    const dy = course.y[k + 1]! - course.y[k]!;
    const length = Math.hypot(dx, dy) || 1;
    nx += dy / length;
    ny -= dx / length;
  }
  const length = Math.hypot(nx, ny) || 1;
  course.leftX[i] = nx / length;
  course.leftY[i] = ny / length;
}

/** Position, normal and downstream direction at a chainage; reused between calls. */
export type CoursePoint = { x: number; y: number; leftX: number; leftY: number };
export const coursePoint = (): CoursePoint => ({ x: 0, y: 0, leftX: 0, leftY: 0 });

/** Sets `out` to the course at a chainage (km), clamped to the course. Cost O(log vertices). */
export function alongCourse(course: Course, chainageKm: number, out: CoursePoint): CoursePoint {
  const km = course.chainageKm;
  let low = 0;
  let high = km.length - 1;
  while (high - low > 1) {
    const mid = (low + high) >> 1;
    if (km[mid]! > chainageKm) low = mid;
    else high = mid;
  }
  const share = Math.min(1, Math.max(0, (chainageKm - km[low]!) / (km[high]! - km[low]!)));
  const nx = course.leftX[low]! + share * (course.leftX[high]! - course.leftX[low]!);
  const ny = course.leftY[low]! + share * (course.leftY[high]! - course.leftY[low]!);
  const length = Math.hypot(nx, ny) || 1;
  out.x = course.x[low]! + share * (course.x[high]! - course.x[low]!);
  out.y = course.y[low]! + share * (course.y[high]! - course.y[low]!);
  out.leftX = nx / length;
  out.leftY = ny / length;
  return out;
}

/** Least width in which a river is drawn, px: it grows as one zooms in, so that the place across the river can be told closer by. */
const leastRibbonPx = (zoom: number): number => (zoom <= 10 ? 5 : Math.min(24, 5 + (zoom - 10) * 3.2));

/** Width in which a river is drawn, px: its real width, or where that is less a ribbon in which a cloud is seen at district scale. */
export const ribbonPx = (widthM: number, metresPerPixel: number, zoom: number): number => Math.max(widthM / metresPerPixel, leastRibbonPx(zoom));

/** Least width in which a river is drawn, m on the ground: clicks within it are meant for the river. */
export const leastRibbonM = (lat: number, zoom: number): number => leastRibbonPx(zoom) * metresPerPixelAt(lat, zoom);

/** Width of a reach at the flow of the estimate, m: the named flow, or the row nearest to a discharge set for the reach. */
export function reachWidthM(reach: Reach, water: Extract<EstimateWater, { kind: 'river' }>): number {
  const set = water.flow.discharges.find((entry) => entry.reachId === reach.id)?.dischargeM3s;
  const rows = reach.hydraulics;
  if (set !== undefined) return rows.reduce((best, row) => (Math.abs(row.dischargeM3s - set) < Math.abs(best.dischargeM3s - set) ? row : best)).widthM;
  return (rows.find((row) => row.flowName === water.flow.name) ?? rows[0]!).widthM;
}
