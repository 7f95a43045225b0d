import type { LonLat } from './schemas/basics';
import type { Reach } from './schemas/estimate';

/** Mean Earth radius (IUGG R1), m. */
export const EARTH_RADIUS_M = 6_371_008.8;
const RAD = Math.PI / 180;

/** Local plane around an origin: x east, y north, metres. Error below 0.1 % within 100 km of the origin at mid latitudes. */
export type LocalPlane = { originLon: number; originLat: number };

export const toPlane = (plane: LocalPlane, [lon, lat]: LonLat): [number, number] => [
  (lon - plane.originLon) * RAD * EARTH_RADIUS_M * Math.cos(plane.originLat * RAD),
  (lat - plane.originLat) * RAD * EARTH_RADIUS_M,
];

export const fromPlane = (plane: LocalPlane, x: number, y: number): LonLat => [
  plane.originLon + x / (RAD * EARTH_RADIUS_M * Math.cos(plane.originLat * RAD)),
  plane.originLat + y / (RAD * EARTH_RADIUS_M),
];

/** Even-odd test of a position against one ring. */
export function isInRing([lon, lat]: LonLat, ring: readonly LonLat[]): boolean {
  let inside = false;
  for (let i = 0, j = ring.length - 1; i < ring.length; j = i++) {
    const [ax, ay] = ring[i]!;
    const [bx, by] = ring[j]!;
    if (ay > lat !== by > lat && lon < ((bx - ax) * (lat - ay)) / (by - ay) + ax) inside = !inside;
  }
  return inside;
}

/** Inside the outer ring and outside every island. */
export const isInArea = (position: LonLat, area: readonly (readonly LonLat[])[]): boolean =>
  area.length > 0 && isInRing(position, area[0]!) && !area.slice(1).some((island) => isInRing(position, island));

export type ChannelSnap = { reachId: string; chainageKm: number; bank: 'left' | 'right'; distanceM: number; on: LonLat };

/**
 * Nearest point of the given centrelines: its reach, chainage (km), the bank on which the position lies
 * looking downstream, the distance off the centreline (m) and the point itself. Null without reaches.
 */
export function snapToReaches(position: LonLat, reaches: readonly Pick<Reach, 'id' | 'centreline'>[]): ChannelSnap | null {
  const plane: LocalPlane = { originLon: position[0], originLat: position[1] };
  let best: ChannelSnap | null = null;
  for (const reach of reaches) {
    for (let i = 1; i < reach.centreline.length; i++) {
      const a = reach.centreline[i - 1]!;
      const b = reach.centreline[i]!;
      const [ax, ay] = toPlane(plane, [a[0], a[1]]);
      const [bx, by] = toPlane(plane, [b[0], b[1]]);
      const dx = bx - ax;
      const dy = by - ay;
      const length2 = dx * dx + dy * dy;
      const t = length2 === 0 ? 0 : Math.min(1, Math.max(0, -(ax * dx + ay * dy) / length2));
      const px = ax + t * dx;
      const py = ay + t * dy;
      const distanceM = Math.hypot(px, py);
      if (best && distanceM >= best.distanceM) continue;
      // Looking along (dx, dy), the position (0, 0) is on the left when the cross product is positive.
      const cross = dx * -ay - dy * -ax;
      best = { reachId: reach.id, chainageKm: a[2] + t * (b[2] - a[2]), bank: cross >= 0 ? 'left' : 'right', distanceM, on: fromPlane(plane, px, py) };
    }
  }
  return best;
}

/**
 * Position on a reach's centreline at a chainage (km), moved `offsetM` to the left (positive) or right (negative),
 * with the downstream bearing there (degrees true). Chainage is clamped to the reach.
 */
export function alongReach(reach: Pick<Reach, 'centreline'>, chainageKm: number, offsetM = 0): { position: LonLat; bearingDeg: number } {
  const line = reach.centreline;
  let i = 1;
  while (i < line.length - 1 && line[i]![2] > chainageKm) i++;
  const a = line[i - 1]!;
  const b = line[i]!;
  const t = Math.min(1, Math.max(0, (chainageKm - a[2]) / (b[2] - a[2])));
  const plane: LocalPlane = { originLon: a[0], originLat: a[1] };
  const [bx, by] = toPlane(plane, [b[0], b[1]]);
  const length = Math.hypot(bx, by) || 1;
  const x = t * bx + (-by / length) * offsetM;
  const y = t * by + (bx / length) * offsetM;
  return { position: fromPlane(plane, x, y), bearingDeg: (Math.atan2(bx, by) / RAD + 360) % 360 };
}

/** Great-circle distance, m (haversine). */
export function distanceM(a: LonLat, b: LonLat): number {
  const dLat = (b[1] - a[1]) * RAD;
  const dLon = (b[0] - a[0]) * RAD;
  const h = Math.sin(dLat / 2) ** 2 + Math.cos(a[1] * RAD) * Math.cos(b[1] * RAD) * Math.sin(dLon / 2) ** 2;
  return 2 * EARTH_RADIUS_M * Math.asin(Math.min(1, Math.sqrt(h)));
}

/** Distance from a position to an area, m: 0 inside it, else to its nearest outline. */
export function distanceToAreaM(position: LonLat, area: readonly (readonly LonLat[])[]): number {
  if (isInArea(position, area)) return 0;
  const plane: LocalPlane = { originLon: position[0], originLat: position[1] };
  let nearest = Infinity;
  for (const ring of area) {
    for (let i = 1; i < ring.length; i++) {
      const [ax, ay] = toPlane(plane, ring[i - 1]!);
      const [bx, by] = toPlane(plane, ring[i]!);
      const length2 = (bx - ax) ** 2 + (by - ay) ** 2;
      const t = length2 === 0 ? 0 : Math.min(1, Math.max(0, -(ax * (bx - ax) + ay * (by - ay)) / length2));
      nearest = Math.min(nearest, Math.hypot(ax + t * (bx - ax), ay + t * (by - ay)));
    }
  }
  return nearest;
}
