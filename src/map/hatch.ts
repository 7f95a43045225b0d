import { mapInk, type MapTheme } from './palette';

const patterns = new Map<MapTheme, CanvasPattern>();

/** Slanting lines: no estimate here. */
export function hatchPattern(context: CanvasRenderingContext2D, theme: MapTheme): CanvasPattern | string {
  const kept = patterns.get(theme);
  if (kept) return kept;
  const tile = document.createElement('canvas');
  tile.width = tile.height = 8;
  const pen = tile.getContext('2d')!;
  pen.strokeStyle = mapInk[theme].hatch;
  pen.lineWidth = 1.2;
  pen.beginPath();
  for (const shift of [-8, 0, 8]) {
    pen.moveTo(shift - 1, 9);
    pen.lineTo(shift + 9, -1);
  }
  pen.stroke();
  const pattern = context.createPattern(tile, 'repeat');
  if (pattern) patterns.set(theme, pattern);
  return pattern ?? mapInk[theme].hatch;
}
