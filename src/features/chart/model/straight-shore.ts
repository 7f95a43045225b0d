import { fromPlane, toPlane } from '../../../../shared/geo';
import type { LonLat } from '../../../../shared/schemas/basics';

/** Shore on both sides of the nearest point that the straight line is laid through, m. */
const SPAN_M = 1_500;

/** A straight line along the shore nearest to a position: through the shore's points `SPAN_M` to either side. */
export function shoreNear(position: LonLat, area: readonly (readonly LonLat[])[]): { from: LonLat; to: LonLat } | null {
  const plane = { originLon: position[0], originLat: position[1] };
  let best: { ring: readonly LonLat[]; i: number; d: number } | null = null;
  for (const ring of area)
    ring.forEach((point, i) => {
      const d = Math.hypot(...toPlane(plane, point));
      if (!best || d < best.d) best = { ring, i, d };
    });
  if (!best) return null;
  const { ring, i } = best as { ring: readonly LonLat[]; i: number };
  const xy = ring.map((point) => toPlane(plane, point));
  const walk = (direction: 1 | -1): [number, number] => {
    let left = SPAN_M;
    let at = i;
    for (let n = 0; n < ring.length; n++) {
      const next = (at + direction + ring.length) % ring.length;
      const step = Math.hypot(xy[next]![0] - xy[at]![0], xy[next]![1] - xy[at]![1]);
      if (step >= left && step > 0) return [xy[at]![0] + ((xy[next]![0] - xy[at]![0]) * left) / step, xy[at]![1] + ((xy[next]![1] - xy[at]![1]) * left) / step];
      left -= step;
      at = next;
    }
    return xy[at]!;
  };
  const [a, b] = [walk(-1), walk(1)];
  return { from: fromPlane(plane, a[0], a[1]), to: fromPlane(plane, b[0], b[1]) };
}
