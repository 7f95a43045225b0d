import { toShape, type Shape } from './shapes';

/** Oceans lettered on the overview: name, longitude, latitude, first zoom, last zoom. */
const oceans: [text: string, lon: number, lat: number, minZoom: number, maxZoom: number][] = [
  ['South Pacific Ocean', -128, -33, 2, 4],
  ['South Pacific Ocean', -122, -41.5, 5, 6],
  ['North Pacific Ocean', -150, 28, 2, 6],
  ['North Pacific Ocean', 165, 30, 2, 6],
  ['North Atlantic Ocean', -40, 30, 2, 6],
  ['South Atlantic Ocean', -15, -28, 2, 6],
  ['Indian Ocean', 78, -22, 2, 6],
  ['Southern Ocean', 100, -61, 2, 6],
  ['Southern Ocean', -25, -60, 3, 6],
  ['Arctic Ocean', -160, 78, 2, 6],
  ['Mediterranean Sea', 18, 34.8, 4, 6],
  ['Tasman Sea', 160, -40, 3, 6],
  ['Caribbean Sea', -75, 15, 4, 6],
  ['Arabian Sea', 64, 16, 4, 6],
  ['Bay of Bengal', 88.5, 14.5, 4, 6],
  ['North Sea', 3, 56.5, 5, 6],
];

export const oceanNames = (): Shape[] =>
  oceans.map(([text, lon, lat, minZoom, maxZoom]) => toShape({ type: 'Feature', properties: { kind: 'name', text, style: 'ocean', rank: 1, minZoom, maxZoom }, geometry: { type: 'Point', coordinates: [lon, lat] } }));
