import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { Feature, FeatureCollection, MultiPolygon, Polygon, Position } from 'geojson';
import { feature } from 'topojson-client';
import type { GeometryCollection, Topology } from 'topojson-specification';
import { toShape, type Shape } from './shapes';

/** Follows a ring without jumps at the antimeridian: a step over 180 degrees is taken the short way round. */
function unwrap(ring: readonly Position[]): Position[] {
  let turn = 0;
  const out = ring.map(([lon, lat], i): Position => {
    const before = ring[i - 1]?.[0];
    if (before !== undefined && lon! - before > 180) turn -= 360;
    if (before !== undefined && before - lon! > 180) turn += 360;
    return [lon! + turn, lat!];
  });
  const [first, last] = [out[0]!, out[out.length - 1]!];
  // A ring that goes once round a pole is closed along the edge of the map.
  if (Math.abs(last[0]! - first[0]!) > 180) {
    const pole = first[1]! < 0 ? -90 : 90;
    out.push([last[0]!, pole], [first[0]!, pole], [first[0]!, first[1]!]);
  }
  return out;
}

/**
 * Land of the whole Earth (Natural Earth 1:50 m, public domain), one shape for each polygon and, where it reaches
 * over the antimeridian, a copy on the other side of the map. An overview, not a survey.
 */
export function loadWorldLand(): Shape[] {
  const file = createRequire(import.meta.url).resolve('world-atlas/land-50m.json');
  const topology = JSON.parse(readFileSync(file, 'utf8')) as Topology<{ land: GeometryCollection }>;
  const land = feature(topology, topology.objects.land) as FeatureCollection<Polygon | MultiPolygon> | Feature<MultiPolygon>;
  const geometries = land.type === 'FeatureCollection' ? land.features.map((f) => f.geometry) : [land.geometry];
  const polygons = geometries.flatMap((g) => (g.type === 'Polygon' ? [g.coordinates] : g.coordinates));
  return polygons.flatMap((rings) => {
    const outer = unwrap(rings[0]!);
    const middle = (lons: Position[]) => (Math.min(...lons.map((p) => p[0]!)) + Math.max(...lons.map((p) => p[0]!))) / 2;
    const centre = middle(outer);
    // Lakes are brought to the same turn as the land round them.
    const holes = rings.slice(1).map(unwrap).map((hole) => {
      const turn = 360 * Math.round((centre - middle(hole)) / 360);
      return hole.map(([lon, lat]): Position => [lon! + turn, lat!]);
    });
    const lons = outer.map((p) => p[0]!);
    const reach = [Math.min(...lons), Math.max(...lons)];
    return [-360, 0, 360]
      .filter((turn) => reach[0]! + turn < 180 && reach[1]! + turn > -180)
      .map((turn) => toShape({ type: 'Feature', properties: { kind: 'world-land' }, geometry: { type: 'Polygon', coordinates: [outer, ...holes].map((ring) => ring.map(([lon, lat]): Position => [lon! + turn, lat!])) } }));
  });
}
