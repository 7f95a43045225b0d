import { formatConcentration } from '../../shared/format';
import type { Level } from '../../shared/schemas/estimate-result';
import { hatchPattern } from './hatch';
import { LabelBook } from './label-book';
import type { MapView, PixelBox } from './mercator';
import { bandColours, madder, mapInk, type MapTheme } from './palette';
import { THIN_RIBBON_PX, type PreparedFrame, type Sheet } from './sheets';
import { strokeLines, traceBoxes, traceLines, traceRings, type Lines } from './trace';

export type PaintOptions = {
  theme: MapTheme;
  measure: 'mass' | 'count';
  /** Colours of the bands from the lowest level up; by default madder. */
  ramp?: readonly string[];
  /** What is printed on a level's line; by default its concentration. */
  labelOf?: (level: Level) => string;
};

const chosenSheet = (entry: PreparedFrame['sheets'][number], view: MapView): Sheet =>
  entry.thin && entry.widthPx(view) < THIN_RIBBON_PX ? entry.thin : entry.full;

/** Fills the bands, each opaque over the one below; the canvas as a whole is laid over the map at BAND_OPACITY. */
export function paintBands(context: CanvasRenderingContext2D, prepared: PreparedFrame, view: MapView, water: Path2D | null, options: PaintOptions): void {
  const colours = bandColours(prepared.levels.length, options.theme, options.ramp);
  context.save();
  if (water) context.clip(water, 'evenodd');
  for (const entry of prepared.sheets) {
    const sheet = chosenSheet(entry, view);
    const place = sheet.placeIn(view);
    prepared.levels.forEach((_, k) => {
      const rings = sheet.bands[k]!;
      if (rings.ends.length === 0) return;
      context.beginPath();
      traceRings(rings, place, sheet.bends, context);
      context.fillStyle = colours[k]!;
      context.fill('evenodd');
    });
    eraseBlanks(context, sheet, view);
  }
  context.restore();
}

function eraseBlanks(context: CanvasRenderingContext2D, sheet: Sheet, view: MapView): void {
  if (sheet.blanks.length === 0) return;
  context.globalCompositeOperation = 'destination-out';
  context.beginPath();
  traceBoxes(sheet.blanks, sheet.placeIn(view), sheet.bends, context);
  context.fill();
  context.globalCompositeOperation = 'source-over';
}

/** Hatches what has no estimate, strokes each level's isoline, action values heavy and dashed, prints the figures on them; answers where. */
export function paintLines(context: CanvasRenderingContext2D, prepared: PreparedFrame, view: MapView, water: Path2D | null, options: PaintOptions): readonly PixelBox[] {
  const book = new LabelBook(context, options.theme, view, view.seen);
  const drawn = prepared.levels.flatMap((level, k) => prepared.sheets.map((entry) => isolines(entry, view, k, level)));
  context.save();
  if (water) context.clip(water, 'evenodd');
  strokeThin(context, drawn, options.theme);
  strokeActions(context, drawn, options.theme);
  paintHatch(context, prepared, view, options.theme);
  context.restore();
  const labelOf = options.labelOf ?? ((level: Level) => concentrationText(level.value, options.measure));
  for (const isAction of [true, false]) for (const each of drawn) if (each.level.isActionValue === isAction) printOn(book, each, labelOf(each.level));
  return book.printed;
}

/** The isolines of one level on one sheet, with the width in which a river is drawn, infinite for open water. */
type Drawn = { level: Level; lines: Lines; ribbon: number };

export function concentrationText(valueSi: number, measure: 'mass' | 'count'): string {
  const { text, unit } = formatConcentration(valueSi, measure);
  return `${text} ${unit}`;
}

function paintHatch(context: CanvasRenderingContext2D, prepared: PreparedFrame, view: MapView, theme: MapTheme): void {
  for (const entry of prepared.sheets) {
    const sheet = chosenSheet(entry, view);
    if (sheet.blanks.length === 0) continue;
    eraseBlanks(context, sheet, view);
    context.beginPath();
    traceBoxes(sheet.blanks, sheet.placeIn(view), sheet.bends, context);
    context.fillStyle = hatchPattern(context, theme);
    context.fill();
  }
}

/** On a thin ribbon only action values are drawn, reaching past the banks so that they are seen. */
function isolines(entry: PreparedFrame['sheets'][number], view: MapView, k: number, level: Level): Drawn {
  const sheet = chosenSheet(entry, view);
  const isThin = sheet === entry.thin;
  const ribbon = entry.widthPx(view);
  if (isThin && !level.isActionValue) return { level, ribbon, lines: { points: [], ends: [] } };
  const lines = traceLines(sheet, sheet.bands[k]!, sheet.placeIn(view));
  return { level, ribbon, lines: isThin ? { ends: lines.ends, points: lengthened(lines, 6) } : lines };
}

/** Moves the two ends of each line outward by some pixels. */
function lengthened({ points, ends }: Lines, byPx: number): number[] {
  const out = points.slice();
  let from = 0;
  for (const end of ends) {
    const [a, b] = [2 * from, 2 * (end - 1)];
    const [dx, dy] = [out[b]! - out[a]!, out[b + 1]! - out[a + 1]!];
    const length = Math.hypot(dx, dy) || 1;
    out[a]! -= (dx / length) * byPx;
    out[a + 1]! -= (dy / length) * byPx;
    out[b]! += (dx / length) * byPx;
    out[b + 1]! += (dy / length) * byPx;
    from = end;
  }
  return out;
}

function strokeThin(context: CanvasRenderingContext2D, drawn: Drawn[], theme: MapTheme): void {
  context.beginPath();
  for (const { level, lines } of drawn) if (!level.isActionValue) strokeLines(lines, context);
  context.lineWidth = 0.8;
  context.globalAlpha = 0.7;
  context.strokeStyle = theme === 'day' ? madder[5] : madder[1];
  context.stroke();
  context.globalAlpha = 1;
}

/** In rivers and strips narrower than these the heavy line of an action value would hide the bands it parts, px. */
const NARROW_RIVER_PX = 60;
const NARROW_STRIP_PX = 24;
/** In a strip on open water this thin only a fine line leaves anything to see. */
const THREAD_PX = 11;

function strokeActions(context: CanvasRenderingContext2D, drawn: Drawn[], theme: MapTheme): void {
  context.lineJoin = 'round';
  context.lineCap = 'butt';
  for (const { level, lines, ribbon } of drawn) {
    if (!level.isActionValue || lines.ends.length === 0) continue;
    const width = widthOf(lines);
    const isThread = ribbon === Infinity && width < THREAD_PX;
    const isNarrow = ribbon < NARROW_RIVER_PX || width < NARROW_STRIP_PX;
    context.beginPath();
    strokeLines(lines, context);
    context.lineWidth = isThread ? 2 : isNarrow ? 3 : 5;
    context.strokeStyle = mapInk[theme].paper;
    context.globalAlpha = isThread ? 0.4 : 0.75;
    context.stroke();
    context.globalAlpha = 1;
    context.lineWidth = isThread ? 1.1 : isNarrow ? 1.7 : 2.5;
    context.strokeStyle = mapInk[theme].ink;
    context.setLineDash(isNarrow ? [5, 3] : [8, 5]);
    context.stroke();
    context.setLineDash([]);
  }
}

/** Width of what the lines enclose, as that of the long strip with the same area and outline, px. */
function widthOf({ points, ends }: Lines): number {
  let area = 0;
  let length = 0;
  let from = 0;
  for (const end of ends) {
    for (let k = from; k < end; k++) {
      const l = k + 1 < end ? k + 1 : from;
      const [ax, ay, bx, by] = [points[2 * k]!, points[2 * k + 1]!, points[2 * l]!, points[2 * l + 1]!];
      area += ax * by - bx * ay;
      length += Math.hypot(bx - ax, by - ay);
    }
    from = end;
  }
  return length === 0 ? 0 : Math.abs(area) / length;
}

function printOn(book: LabelBook, { level, lines, ribbon }: Drawn, text: string): void {
  const sizePx = level.isActionValue ? 13 : 11;
  const weight = level.isActionValue ? 600 : 400;
  if (ribbon < NARROW_RIVER_PX) {
    // One figure a reach, above or below the river; only the action value, for want of room.
    if (level.isActionValue) book.print(text, outside(extremes(lines, 0, lines.points.length / 2), ribbon / 2 + 9, 0), sizePx, weight);
    return;
  }
  const width = book.widthOf(text, sizePx, weight);
  let from = 0;
  for (const end of lines.ends) {
    const ends = extremes(lines, from, end);
    from = end;
    const [, , right, left] = ends;
    // A line wide enough to carry its figure has it on itself; round a smaller one an action value stands outside.
    if (right![0] - left![0] > 1.6 * width && book.print(text, ends, sizePx, weight)) continue;
    if (level.isActionValue) book.print(text, [...outside(ends, 11, width / 2 + 6), ...outside(ends, 27, width / 2 + 22)], sizePx, weight);
  }
}

/** The four extremes moved outward: so far up and down, and so far to the sides. */
export const outside = ([top, bottom, right, left]: [number, number][], upPx: number, sidePx: number): [number, number][] =>
  top && bottom && right && left ? [[top[0], top[1] - upPx], [bottom[0], bottom[1] + upPx], ...(sidePx > 0 ? ([[right[0] + sidePx, right[1]], [left[0] - sidePx, left[1]]] as [number, number][]) : [])] : [];

/** Places tried for a figure: top, bottom, right and left of the line; there it hardly moves while time plays. */
export function extremes({ points }: Pick<Lines, 'points'>, from: number, end: number): [number, number][] {
  if (end <= from) return [];
  let [top, bottom, right, left] = [from, from, from, from];
  for (let k = from; k < end; k++) {
    const [x, y] = [points[2 * k]!, points[2 * k + 1]!];
    if (y < points[2 * top + 1]!) top = k;
    if (y > points[2 * bottom + 1]!) bottom = k;
    if (x > points[2 * right]!) right = k;
    if (x < points[2 * left]!) left = k;
  }
  return [top, bottom, right, left].map((k) => [points[2 * k]!, points[2 * k + 1]!]);
}
