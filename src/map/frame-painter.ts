import { formatConcentration } from '../../shared/format';
import type { Level } from '../../shared/schemas/estimate-result';
import { hatchPattern } from './hatch';
import { LabelBook } from './label-book';
import type { MapView } from './mercator';
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
    const bend = sheet.bendEvery(view);
    prepared.levels.forEach((_, k) => {
      const rings = sheet.bands[k]!;
      if (rings.ends.length === 0) return;
      context.beginPath();
      traceRings(rings, place, bend, context);
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
  traceBoxes(sheet.blanks, sheet.placeIn(view), sheet.bendEvery(view), context);
  context.fill();
  context.globalCompositeOperation = 'source-over';
}

/** Hatches what has no estimate, strokes each level's isoline, action values heavy and dashed, and prints the figures on them. */
export function paintLines(context: CanvasRenderingContext2D, prepared: PreparedFrame, view: MapView, water: Path2D | null, options: PaintOptions): void {
  const book = new LabelBook(context, options.theme, view.seen);
  const drawn = prepared.levels.flatMap((level, k) => prepared.sheets.map((entry) => isolines(entry, view, k, level)));
  context.save();
  if (water) context.clip(water, 'evenodd');
  strokeThin(context, drawn, options.theme);
  strokeActions(context, drawn, options.theme);
  paintHatch(context, prepared, view, options.theme);
  context.restore();
  const labelOf = options.labelOf ?? ((level: Level) => concentrationText(level.value, options.measure));
  for (const isAction of [true, false]) for (const each of drawn) if (each.level.isActionValue === isAction) printOn(book, each, labelOf(each.level));
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
    traceBoxes(sheet.blanks, sheet.placeIn(view), sheet.bendEvery(view), context);
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
  const lines = traceLines(sheet, sheet.bands[k]!, sheet.placeIn(view), sheet.bendEvery(view));
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

function strokeActions(context: CanvasRenderingContext2D, drawn: Drawn[], theme: MapTheme): void {
  context.lineJoin = 'round';
  context.lineCap = 'butt';
  for (const { level, lines, ribbon } of drawn) {
    if (!level.isActionValue || lines.ends.length === 0) continue;
    // Inside a river the line gives way to the bands it parts.
    const heavy = ribbon < WIDE_RIBBON_PX ? 1.8 : 2.5;
    context.beginPath();
    strokeLines(lines, context);
    context.lineWidth = 2 * heavy;
    context.strokeStyle = mapInk[theme].paper;
    context.globalAlpha = 0.75;
    context.stroke();
    context.globalAlpha = 1;
    context.lineWidth = heavy;
    context.strokeStyle = mapInk[theme].ink;
    context.setLineDash(ribbon < WIDE_RIBBON_PX ? [5, 3] : [8, 5]);
    context.stroke();
    context.setLineDash([]);
  }
}

/** From this width on a river has room for figures on its water; below, they stand beside it. */
const WIDE_RIBBON_PX = 60;
/** Lines shorter than this are not worth a figure. */
const LEAST_LABELLED_PX = 70;

function printOn(book: LabelBook, { level, lines, ribbon }: Drawn, text: string): void {
  const sizePx = level.isActionValue ? 13 : 11;
  const weight = level.isActionValue ? 600 : 400;
  if (ribbon < WIDE_RIBBON_PX) {
    // One figure a reach, above or below the river; only the action value, for want of room.
    if (level.isActionValue) book.print(text, beside(extremes(lines, 0, lines.points.length / 2), ribbon / 2 + 9), sizePx, weight);
    return;
  }
  let from = 0;
  for (const end of lines.ends) {
    if (level.isActionValue || lengthOf(lines, from, end) >= LEAST_LABELLED_PX) book.print(text, extremes(lines, from, end), sizePx, weight);
    from = end;
  }
}

const beside = ([top, bottom]: [number, number][], clearPx: number): [number, number][] => (top && bottom ? [[top[0], top[1] - clearPx], [bottom[0], bottom[1] + clearPx]] : []);

function lengthOf({ points }: Lines, from: number, end: number): number {
  let length = 0;
  for (let k = from + 1; k < end; k++) length += Math.hypot(points[2 * k]! - points[2 * k - 2]!, points[2 * k + 1]! - points[2 * k - 1]!);
  return length;
}

/** Places tried for a figure: top, bottom, right and left of the line; there it hardly moves while time plays. */
function extremes({ points }: Lines, from: number, end: number): [number, number][] {
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
