import type { Feature, FeatureCollection, Position } from 'geojson';
import { simplifyFlat } from './clip';
import { boxOf, mercatorX, mercatorY, TILE_PX, type Box } from './mercator';

/** A feature ready to draw: parts are flat mercator x, y pairs; rings leave out the repeated last position. */
export type Shape = { kind: string; properties: Record<string, unknown>; isArea: boolean; parts: { flat: Float64Array; box: Box }[]; thinned: Map<number, (Float64Array | null)[]> };

const project = (positions: readonly Position[]): Float64Array => {
  const flat = new Float64Array(positions.length * 2);
  positions.forEach(([lon, lat], i) => {
    flat[2 * i] = mercatorX(lon!);
    flat[2 * i + 1] = mercatorY(lat!);
  });
  return flat;
};
const part = (flat: Float64Array) => ({ flat, box: boxOf(flat) });
const ringPart = (ring: readonly Position[]) => part(project(ring.slice(0, -1)));

export function toShape(feature: Feature): Shape {
  const { geometry } = feature;
  const properties = feature.properties ?? {};
  const parts =
    geometry.type === 'Polygon' ? geometry.coordinates.map(ringPart)
    : geometry.type === 'MultiPolygon' ? geometry.coordinates.flat().map(ringPart)
    : geometry.type === 'LineString' ? [part(project(geometry.coordinates))]
    : geometry.type === 'MultiLineString' ? geometry.coordinates.map((l) => part(project(l)))
    : geometry.type === 'MultiPoint' ? geometry.coordinates.map((p) => part(project([p])))
    : geometry.type === 'Point' ? [part(project([geometry.coordinates]))]
    : [];
  return { kind: String(properties['kind'] ?? ''), properties, isArea: geometry.type.endsWith('Polygon'), parts, thinned: new Map() };
}
export const toShapes = (collection: FeatureCollection): Shape[] => collection.features.map(toShape);

/** Part `i` thinned to what can be seen at a zoom (a third of a pixel); null when it is too small to see. Kept for the next tile. */
export function partAt(shape: Shape, i: number, zoom: number): Float64Array | null {
  let level = shape.thinned.get(zoom);
  if (!level) shape.thinned.set(zoom, (level = []));
  const known = level[i];
  if (known !== undefined) return known;
  const { flat, box } = shape.parts[i]!;
  const worldPx = TILE_PX * 2 ** zoom;
  const size = Math.max(box.maxX - box.minX, box.maxY - box.minY) * worldPx;
  const thinned = flat.length <= 8 ? flat : size < 0.7 ? null : simplifyFlat(flat, 0.33 / worldPx);
  level[i] = thinned;
  return thinned;
}
