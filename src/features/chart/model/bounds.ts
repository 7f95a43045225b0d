import type { LonLat } from '../../../../shared/schemas/basics';

/** South-west and north-east corner round positions, with a margin so that a single one still makes a view; null without any. */
export function boundsOf(positions: readonly LonLat[], marginDeg = 0.01): [LonLat, LonLat] | null {
  if (positions.length === 0) return null;
  const lons = positions.map(([lon]) => lon);
  const lats = positions.map(([, lat]) => lat);
  return [
    [Math.min(...lons) - marginDeg, Math.min(...lats) - marginDeg],
    [Math.max(...lons) + marginDeg, Math.max(...lats) + marginDeg],
  ];
}
