import type { EstimateWater } from '../../shared/schemas/estimate';
import { toWorld, type MapView } from './mercator';
import { traceWorldRings } from './trace';

/** Rings of an open water in world units. */
export const worldRings = (water: EstimateWater): Float64Array[] =>
  water.kind === 'open' ? water.area.map((ring) => Float64Array.from(ring.flatMap((position) => toWorld(position)))) : [];

/** The open water as a path for clipping, kept until the view changes. */
export function waterPathKeeper(water: EstimateWater): (view: MapView) => Path2D | null {
  const rings = worldRings(water);
  let keptFor: MapView | null = null;
  let kept: Path2D | null = null;
  return (view) => {
    if (rings.length === 0) return null;
    if (kept && keptFor === view) return kept;
    kept = new Path2D();
    keptFor = view;
    traceWorldRings(rings, view, kept);
    return kept;
  };
}
