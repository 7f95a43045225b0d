import type { Rings } from './contours';

/** Rings as lists of flat x, y pairs, first vertex not repeated. */
export function ringList({ points, ends }: Rings): number[][] {
  let from = 0;
  return ends.map((end) => {
    const ring = Array.from(points.subarray(2 * from, 2 * end));
    from = end;
    return ring;
  });
}

/** Twice the area inside a ring, positive where it turns anticlockwise (x right, y up). */
export function turnOf(ring: readonly number[]): number {
  let sum = 0;
  for (let k = 0, l = ring.length - 2; k < ring.length; l = k, k += 2) sum += ring[l]! * ring[k + 1]! - ring[k]! * ring[l + 1]!;
  return sum;
}

function isInside(x: number, y: number, ring: readonly number[]): boolean {
  let inside = false;
  for (let k = 0, l = ring.length - 2; k < ring.length; l = k, k += 2)
    if (ring[k + 1]! > y !== ring[l + 1]! > y && x < ((ring[l]! - ring[k]!) * (y - ring[k + 1]!)) / (ring[l + 1]! - ring[k + 1]!) + ring[k]!) inside = !inside;
  return inside;
}

/** Polygons of rings that do not cross: each anticlockwise ring with the clockwise ones that lie directly in it. */
export function nestRings(rings: readonly number[][]): number[][][] {
  const outers = rings.flatMap((ring) => (turnOf(ring) > 0 ? [{ ring, turn: turnOf(ring), holes: [] as number[][] }] : []));
  outers.sort((a, b) => a.turn - b.turn);
  for (const hole of rings) if (turnOf(hole) < 0) outers.find(({ ring }) => isInside(hole[0]!, hole[1]!, ring))?.holes.push(hole);
  return outers.map(({ ring, holes }) => [ring, ...holes]);
}
