import type L from 'leaflet';
import type { LonLat } from '../../shared/schemas/basics';

/** Room kept for what floats over the edges: the legend on the left of a wide map, tools on the right, the foot below, px. */
const LEFT_PX = 150;
const RIGHT_PX = 58;
const FOOT_PX = 44;
const TOP_PX = 32;
const LEAST_PX = 16;
const WIDE_PX = 600;

/** Shows all of the bounds, beside what floats over the map. */
export function fitAll(map: L.Map, [[west, south], [east, north]]: [LonLat, LonLat], animate: boolean): void {
  const isWide = map.getSize().x >= WIDE_PX;
  map.fitBounds([[south, west], [north, east]], { paddingTopLeft: [isWide ? LEFT_PX : LEAST_PX, TOP_PX], paddingBottomRight: [RIGHT_PX, FOOT_PX], maxZoom: 15, animate });
}
