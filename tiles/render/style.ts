export const themes = ['day', 'night'] as const;
export type Theme = (typeof themes)[number];

export type Palette = {
  land: string; heights: string[]; shade: string; lit: string; wood: string; hedge: string; contour: string;
  deep: string; water: string; shallow: string; flats: string; shoreline: string; depthLine: string;
  marsh: string; tuft: string; town: string; block: string;
  road: string; roadThin: string; roadCore: string; rail: string; wall: string;
  ink: string; softInk: string; halo: string; waterInk: string; waterHalo: string; sounding: string;
};

export const palettes: Record<Theme, Palette> = {
  day: {
    land: '#f1ece3', heights: ['#eee8dc', '#ebe4d5', '#e8e0ce', '#e5dbc8', '#e1d6c1', '#ddd1ba', '#d9ccb4'], shade: 'rgba(96,82,66,0.09)', lit: 'rgba(255,253,246,0.36)',
    wood: 'rgba(176,190,150,0.42)', hedge: '#e2dace', contour: 'rgba(150,128,98,0.42)',
    deep: '#8fb1bf', water: '#a5c4cc', shallow: '#c2d9dd', flats: '#d9dccb', shoreline: '#6f949f', depthLine: 'rgba(92,132,148,0.55)',
    marsh: '#c8d7bb', tuft: '#6f8b66', town: '#e3d7cc', block: '#d2c2b3',
    road: '#b1a9a1', roadThin: '#b1a9a1', roadCore: '#fbf8f3', rail: '#77706a', wall: '#5c5650',
    ink: '#1c2832', softInk: '#49545e', halo: 'rgba(249,246,242,0.92)', waterInk: '#2c5666', waterHalo: 'rgba(180,207,214,0.75)', sounding: '#41707f',
  },
  night: {
    land: '#312d27', heights: ['#35312a', '#39352e', '#3d3931', '#413d34', '#454138', '#49453b', '#4d493f'], shade: 'rgba(0,0,0,0.2)', lit: 'rgba(255,246,224,0.045)',
    wood: 'rgba(64,78,52,0.42)', hedge: '#3a352e', contour: 'rgba(190,170,136,0.2)',
    deep: '#0b1a22', water: '#0f222b', shallow: '#18323c', flats: '#2b352f', shoreline: '#4f7683', depthLine: 'rgba(91,140,158,0.4)',
    marsh: '#2f3b2f', tuft: '#718a66', town: '#403a33', block: '#4d463d',
    road: '#1f1c18', roadThin: '#6a6155', roadCore: '#756c60', rail: '#978d80', wall: '#a79d90',
    ink: '#ebe7e0', softInk: '#b8b4ac', halo: 'rgba(33,30,26,0.9)', waterInk: '#8fbccb', waterHalo: 'rgba(13,30,38,0.8)', sounding: '#5f8c9b',
  },
};

/** A width in px that grows with zoom, straight between the listed stops. */
export function stops(zoom: number, ...pairs: [zoom: number, px: number][]): number {
  for (let i = 1; i < pairs.length; i++) {
    const [z0, p0] = pairs[i - 1]!;
    const [z1, p1] = pairs[i]!;
    if (zoom <= z1) return p0 + ((p1 - p0) * Math.max(0, zoom - z0)) / (z1 - z0);
  }
  return pairs[pairs.length - 1]![1];
}
