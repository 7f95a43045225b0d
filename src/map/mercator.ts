import type { LonLat } from '../../shared/schemas/basics';

/** Web Mercator on a world of 256 units (EPSG:3857 as tiled maps use it): x east, y south. */
const WORLD = 256;
const RAD = Math.PI / 180;
const EQUATOR_M = 2 * Math.PI * 6_378_137;

export const worldX = (lon: number): number => ((lon + 180) / 360) * WORLD;
export const worldY = (lat: number): number => (0.5 - Math.log(Math.tan(Math.PI / 4 + (lat * RAD) / 2)) / (2 * Math.PI)) * WORLD;
export const toWorld = ([lon, lat]: LonLat): [number, number] => [worldX(lon), worldY(lat)];

/** Metres on the ground in one world unit at a latitude. */
export const metresPerWorldUnit = (lat: number): number => (EQUATOR_M * Math.cos(lat * RAD)) / WORLD;

/** Metres on the ground in one pixel of the map at a latitude. */
export const metresPerPixelAt = (lat: number, zoom: number): number => metresPerWorldUnit(lat) / 2 ** zoom;

/** What a canvas shows: pixel = world * scale - offset. */
export type MapView = {
  zoom: number;
  scale: number;
  offsetX: number;
  offsetY: number;
  width: number;
  height: number;
  /** Metres on the ground in one pixel at the middle of the view. */
  metresPerPixel: number;
  /** What of the canvas is in sight, pixels. */
  seen: PixelBox;
  /** Marks and their labels, which stand above the canvas: figures keep clear of them. */
  marks: readonly PixelBox[];
};
export type PixelBox = { left: number; top: number; right: number; bottom: number };
