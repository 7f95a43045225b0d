/** Web Mercator: the whole world is the square 0..1 by 0..1, y downwards (spherical, EPSG:3857). */
export const TILE_PX = 256;
export const MAX_LATITUDE = 85.0511287798066;

export const mercatorX = (lon: number): number => (lon + 180) / 360;
export function mercatorY(lat: number): number {
  const clamped = Math.max(-MAX_LATITUDE, Math.min(MAX_LATITUDE, lat));
  return 0.5 - Math.log(Math.tan(Math.PI / 4 + (clamped * Math.PI) / 360)) / (2 * Math.PI);
}
export const latitudeOf = (y: number): number => (Math.atan(Math.sinh(Math.PI * (1 - 2 * y))) * 180) / Math.PI;

/** Ground metres in one screen pixel at a latitude and zoom. */
export const metresPerPx = (latDeg: number, zoom: number): number => (40_075_016.686 * Math.cos((latDeg * Math.PI) / 180)) / (TILE_PX * 2 ** zoom);

export type Box = { minX: number; minY: number; maxX: number; maxY: number };
export const overlaps = (a: Box, b: Box): boolean => a.minX < b.maxX && a.maxX > b.minX && a.minY < b.maxY && a.maxY > b.minY;
export function boxOf(flat: ArrayLike<number>): Box {
  const box = { minX: Infinity, minY: Infinity, maxX: -Infinity, maxY: -Infinity };
  for (let i = 0; i < flat.length; i += 2) {
    box.minX = Math.min(box.minX, flat[i]!);
    box.maxX = Math.max(box.maxX, flat[i]!);
    box.minY = Math.min(box.minY, flat[i + 1]!);
    box.maxY = Math.max(box.maxY, flat[i + 1]!);
  }
  return box;
}

/** Range of tiles (inclusive) that cover a lon/lat box at a zoom. */
export function tileRange([west, south, east, north]: readonly [number, number, number, number], zoom: number) {
  const n = 2 ** zoom;
  const cell = (v: number) => Math.max(0, Math.min(n - 1, Math.floor(v * n)));
  return { x0: cell(mercatorX(west)), x1: cell(mercatorX(east)), y0: cell(mercatorY(north)), y1: cell(mercatorY(south)) };
}
