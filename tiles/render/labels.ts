import type { SKRSContext2D } from '@napi-rs/canvas';
import type { Palette } from './style';
import type { Shape } from './shapes';
import { TILE_PX, overlaps, type Box } from './mercator';

/** A piece of lettering placed once for a whole zoom: all glyphs in world px, so every tile draws the same. */
export type Label = { glyphs: { text: string; x: number; y: number; turn: number }[]; font: string; ink: keyof Palette; halo: keyof Palette | null; haloPx: number; spacingPx: number; box: Box; dot: { x: number; y: number; radius: number } | null };

export const fonts = { regular: 'Downreach Sans', semibold: 'Downreach Sans Semibold', italic: 'Downreach Sans Italic', semiboldItalic: 'Downreach Sans Semibold Italic' };

type Lettering = { font: string; sizePx: number; ink: keyof Palette; halo: keyof Palette; spacingPx: number; hasDot: boolean };
function lettering(style: string, rank: number, zoom: number): Lettering {
  const grow = Math.max(0, Math.min(4, zoom - 9));
  const water = { ink: 'waterInk', halo: 'waterHalo', hasDot: false } as const;
  const place = { ink: 'ink', halo: 'halo', hasDot: false } as const;
  switch (style) {
    case 'ocean': return { ...water, font: fonts.italic, sizePx: 15, spacingPx: 3 };
    case 'bay': return { ...water, font: fonts.italic, sizePx: 14 + 2 * grow, spacingPx: 2 + grow };
    case 'lake': return { ...water, font: fonts.italic, sizePx: 12 + grow * 1.3, spacingPx: 1 + 0.5 * grow };
    case 'marsh': return { ...place, font: fonts.italic, sizePx: 11 + 0.7 * grow, ink: 'softInk', spacingPx: 0.6 };
    case 'head': return { ...place, font: fonts.regular, sizePx: 11.5 + 0.4 * grow, ink: 'softInk', spacingPx: 0.2 };
    case 'road': return { ...place, font: fonts.semibold, sizePx: 10.5, ink: 'softInk', spacingPx: 0.4, hasDot: false };
    case 'structure': return { ...place, font: fonts.regular, sizePx: 11.5, ink: 'softInk', spacingPx: 0.2 };
    case 'district': return { ...place, font: fonts.semibold, sizePx: zoom <= 6 ? 13 : 16, ink: 'softInk', spacingPx: zoom <= 6 ? 1 : 4 };
    case 'village': return { ...place, font: fonts.regular, sizePx: 11.5 + 0.6 * grow, ink: 'softInk', spacingPx: 0.2, hasDot: true };
    default: return { ...place, font: rank <= 2 ? fonts.semibold : fonts.regular, sizePx: (rank === 1 ? 14.5 : rank === 2 ? 13 : 12.5) + 0.9 * grow, spacingPx: 0.2, hasDot: zoom <= 10 };
  }
}

/** A town is lettered inside its outline when that is large, otherwise above its dot. */
function placeName(ctx: SKRSContext2D, shape: Shape, zoom: number): Label {
  const { text, style, rank, turnDeg, side } = shape.properties as { text: string; style: string; rank: number; turnDeg?: number; side?: 'left' | 'right' };
  const worldPx = TILE_PX * 2 ** zoom;
  const [mx, my] = shape.parts[0]!.flat;
  const look = lettering(style, rank, zoom);
  const font = `${look.sizePx.toFixed(1)}px "${look.font}"`;
  ctx.font = font;
  const lines = style === 'ocean' ? text.split(' ') : [text];
  const widths = lines.map((line) => ctx.measureText(line).width + look.spacingPx * line.length);
  const width = Math.max(...widths);
  const turn = turnDeg ? (-turnDeg * Math.PI) / 180 : 0;
  const aside = side === 'left' ? -(width / 2 + 8) : side === 'right' ? width / 2 + 8 : 0;
  const rise = look.hasDot ? look.sizePx * 0.85 : 0;
  const [cx, cy] = [mx! * worldPx + aside, my! * worldPx - rise];
  const lead = look.sizePx * 1.25;
  const height = lead * lines.length;
  const [hw, hh] = turn ? [(Math.abs(Math.cos(turn)) * width + Math.abs(Math.sin(turn)) * height) / 2, (Math.abs(Math.sin(turn)) * width + Math.abs(Math.cos(turn)) * height) / 2] : [width / 2, height / 2];
  return {
    glyphs: lines.map((line, i) => ({ text: line, x: cx, y: cy + (i - (lines.length - 1) / 2) * lead, turn })),
    font, ink: look.ink, halo: look.halo, haloPx: 3, spacingPx: look.spacingPx,
    box: { minX: cx - hw - 3, maxX: cx + hw + 3, minY: cy - hh - 1, maxY: cy + hh + 1 + (look.hasDot ? 6 : 0) },
    dot: look.hasDot ? { x: mx! * worldPx, y: my! * worldPx, radius: style === 'village' ? 1.8 : 2.4 } : null,
  };
}

/** Rivers carry their name along the stream, letter by letter, at even distances; null where the water bends too hard. */
function placeAlong(ctx: SKRSContext2D, shape: Shape, zoom: number, atPx: number): Label | null {
  const worldPx = TILE_PX * 2 ** zoom;
  const flat = shape.parts[0]!.flat;
  const line: [number, number][] = [];
  for (let i = 0; i < flat.length; i += 2) line.push([flat[i]! * worldPx, flat[i + 1]! * worldPx]);
  if (line[0]![0] > line[line.length - 1]![0]) line.reverse();
  const sums = [0];
  for (let i = 1; i < line.length; i++) sums.push(sums[i - 1]! + Math.hypot(line[i]![0] - line[i - 1]![0], line[i]![1] - line[i - 1]![1]));
  const pointAt = (s: number): [number, number] => {
    let [low, high] = [1, line.length - 1];
    while (low < high) { const mid = (low + high) >> 1; if (sums[mid]! < s) low = mid + 1; else high = mid; }
    const t = (s - sums[low - 1]!) / (sums[low]! - sums[low - 1]! || 1);
    return [line[low - 1]![0] + t * (line[low]![0] - line[low - 1]![0]), line[low - 1]![1] + t * (line[low]![1] - line[low - 1]![1])];
  };
  const windowPx = zoom <= 12 ? 16 : 11;
  // The baseline follows the stream as seen through a window, so that letters do not wobble with every bend.
  const smooth = (s: number): [number, number] => {
    let [x, y] = [0, 0];
    for (let k = -6; k <= 6; k++) { const p = pointAt(s + k * windowPx); x += p[0] / 13; y += p[1] / 13; }
    return [x, y];
  };
  const sizePx = (shape.kind === 'stream' ? 11 : 12) + Math.max(0, Math.min(3, zoom - 10)) * (shape.properties['rank'] === 1 ? 1.2 : 0.6);
  const font = `${sizePx.toFixed(1)}px "${fonts.italic}"`;
  ctx.font = font;
  const text = String(shape.properties['name']);
  const spacingPx = 1.2;
  const widths = [...text].map((c) => ctx.measureText(c).width + (c === ' ' ? 3 : 1) * spacingPx);
  const total = widths.reduce((a, b) => a + b, 0);
  let s = atPx - total / 2;
  if (s < 40 || s + total > sums[sums.length - 1]! - 40) return null;
  const lift = sizePx * 0.72 + (shape.properties['rank'] === 1 ? 3 + Math.max(0, zoom - 13) * 2.5 : 2);
  const glyphs: Label['glyphs'] = [];
  const box = { minX: Infinity, minY: Infinity, maxX: -Infinity, maxY: -Infinity };
  let before: number | null = null;
  for (const [i, c] of [...text].entries()) {
    const middle = s + widths[i]! / 2;
    const [a, b, p] = [smooth(middle - 5), smooth(middle + 5), smooth(middle)];
    const turn = Math.atan2(b[1] - a[1], b[0] - a[0]);
    if (before !== null && Math.abs(turn - before) > 0.4) return null;
    before = turn;
    const [x, y] = [p[0] + Math.sin(turn) * lift, p[1] - Math.cos(turn) * lift];
    glyphs.push({ text: c, x, y, turn });
    box.minX = Math.min(box.minX, x - sizePx / 2); box.maxX = Math.max(box.maxX, x + sizePx / 2);
    box.minY = Math.min(box.minY, y - sizePx / 2); box.maxY = Math.max(box.maxY, y + sizePx / 2);
    s += widths[i]!;
  }
  return { glyphs, font, ink: 'waterInk', halo: 'halo', haloPx: 3, spacingPx: 0, box, dot: null };
}

function lineLabels(ctx: SKRSContext2D, shape: Shape, zoom: number): Label[] {
  const worldPx = TILE_PX * 2 ** zoom;
  const flat = shape.parts[0]!.flat;
  let length = 0;
  for (let i = 2; i < flat.length; i += 2) length += Math.hypot(flat[i]! - flat[i - 2]!, flat[i + 1]! - flat[i - 1]!) * worldPx;
  const every = 620;
  const count = Math.max(1, Math.floor(length / every));
  return Array.from({ length: count }, (_, k) => {
    // A little to either side of the wished-for place there may be a straighter stretch.
    for (const shift of [0, 30, -30, 60, -60, 95, -95, 130, -130, 170, -170]) {
      const label = placeAlong(ctx, shape, zoom, ((k + 0.5) * length) / count + shift);
      if (label) return label;
    }
    return null;
  }).filter((label) => label !== null);
}

/** Every label of a zoom, the more important first, none over another. */
export function placeLabels(ctx: SKRSContext2D, shapes: { names: Shape[]; rivers: Shape[] }, zoom: number): Label[] {
  const shown = shapes.names
    .filter(({ properties }) => zoom >= Number(properties['minZoom'] ?? 0) && zoom <= Number(properties['maxZoom'] ?? 22))
    .sort((a, b) => Number(a.properties['rank']) - Number(b.properties['rank']));
  const candidates = shown.map((shape) => placeName(ctx, shape, zoom));
  if (zoom >= 10)
    for (const river of shapes.rivers.filter(({ kind, properties }) => properties['name'] && (zoom >= 12 || (kind === 'river' && (zoom >= 11 || properties['rank'] === 1)))))
      candidates.push(...lineLabels(ctx, river, zoom));
  const placed: Label[] = [];
  for (const label of candidates) if (!placed.some((other) => overlaps(label.box, other.box))) placed.push(label);
  return placed;
}

/** Small depth figures that keep clear of the names. */
export function placeSoundings(soundings: Shape[], zoom: number, names: readonly Label[]): Label[] {
  if (zoom < 12) return [];
  const worldPx = TILE_PX * 2 ** zoom;
  return soundings
    .map((shape): Label => {
      const [mx, my] = shape.parts[0]!.flat;
      const [x, y] = [mx! * worldPx, my! * worldPx];
      return { glyphs: [{ text: String(shape.properties['text']), x, y, turn: 0 }], font: `${zoom >= 14 ? 12 : 10.5}px "${fonts.italic}"`, ink: 'sounding', halo: null, haloPx: 0, spacingPx: 0, box: { minX: x - 12, maxX: x + 12, minY: y - 8, maxY: y + 8 }, dot: null };
    })
    .filter((label) => !names.some((other) => overlaps(label.box, other.box)));
}

/** Draws a label with the tile's corner at the origin. */
export function drawLabel(ctx: SKRSContext2D, label: Label, palette: Palette, left: number, top: number): void {
  ctx.font = label.font;
  ctx.textAlign = 'center';
  ctx.textBaseline = 'middle';
  ctx.lineJoin = 'round';
  ctx.letterSpacing = `${label.spacingPx}px`;
  const each = (draw: (text: string) => void) => {
    for (const { text, x, y, turn } of label.glyphs) {
      ctx.save();
      ctx.translate(x - left, y - top);
      if (turn) ctx.rotate(turn);
      draw(text);
      ctx.restore();
    }
  };
  if (label.dot) {
    ctx.beginPath();
    ctx.arc(label.dot.x - left, label.dot.y - top, label.dot.radius, 0, 2 * Math.PI);
    ctx.fillStyle = palette.halo as string;
    ctx.fill();
    ctx.lineWidth = 1.3;
    ctx.strokeStyle = palette.ink;
    ctx.stroke();
  }
  if (label.halo) {
    ctx.strokeStyle = palette[label.halo] as string;
    ctx.lineWidth = label.haloPx;
    each((text) => ctx.strokeText(text, 0, 0));
  }
  ctx.fillStyle = palette[label.ink] as string;
  each((text) => ctx.fillText(text, 0, 0));
  ctx.letterSpacing = '0px';
}
