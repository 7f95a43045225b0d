import { formatConcentration } from '../../shared/format';
import type { Level } from '../../shared/schemas/estimate-result';
import { hatchPattern } from './hatch';
import { LabelBook } from './label-book';
import type { MapView } from './mercator';
import { bandColours, mapInk, type MapTheme } from './palette';
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
  context.save();
  if (water) context.clip(water, 'evenodd');
  paintHatch(context, prepared, view, options.theme);
  const lines = prepared.levels.map((level, k) => ({ level, lines: isolines(prepared, view, k, level.isActionValue) }));
  for (const { level, lines: each } of lines) if (!level.isActionValue) strokeThin(context, each, options.theme);
  for (const { level, lines: each } of lines) if (level.isActionValue) strokeAction(context, each, options.theme);
  context.restore();
  const book = new LabelBook(context, options.theme, view.seen);
  const labelOf = options.labelOf ?? ((level: Level) => concentrationText(level.value, options.measure));
  for (const { level, lines: each } of lines) if (level.isActionValue) printOn(book, each, labelOf(level), true);
  for (const { level, lines: each } of lines) if (!level.isActionValue) printOn(book, each, labelOf(level), false);
}

export function concentrationText(valueSi: number, measure: 'mass' | 'count'): string {
  const { text, unit } = formatConcentration(valueSi, measure);
  return `${text} ${unit}`;
}

function paintHatch(context: CanvasRenderingContext2D, prepared: PreparedFrame, view: MapView, theme: MapTheme): void {
  for (const entry of prepared.sheets) {
    const sheet = chosenSheet(entry, view);
    if (sheet.blanks.length === 0) continue;
    context.beginPath();
    traceBoxes(sheet.blanks, sheet.placeIn(view), sheet.bendEvery(view), context);
    context.fillStyle = hatchPattern(context, theme);
    context.fill();
  }
}

/** The isolines of one level over all sheets. On a thin ribbon only action values are drawn, reaching past the banks so that they are seen. */
function isolines(prepared: PreparedFrame, view: MapView, level: number, isAction: boolean): Lines[] {
  return prepared.sheets.flatMap((entry) => {
    const sheet = chosenSheet(entry, view);
    const thin = sheet === entry.thin;
    if (thin && !isAction) return [];
    const lines = traceLines(sheet, sheet.bands[level]!, sheet.placeIn(view), sheet.bendEvery(view));
    return [thin ? { ends: lines.ends, points: lengthened(lines, 6) } : lines];
  });
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

function strokeThin(context: CanvasRenderingContext2D, lines: Lines[], theme: MapTheme): void {
  context.beginPath();
  for (const each of lines) strokeLines(each, context);
  context.lineWidth = 0.8;
  context.globalAlpha = 0.75;
  context.strokeStyle = theme === 'day' ? '#691941' : '#f2b1d1';
  context.stroke();
  context.globalAlpha = 1;
}

function strokeAction(context: CanvasRenderingContext2D, lines: Lines[], theme: MapTheme): void {
  context.beginPath();
  for (const each of lines) strokeLines(each, context);
  context.lineJoin = 'round';
  context.lineCap = 'butt';
  context.lineWidth = 5;
  context.strokeStyle = mapInk[theme].paper;
  context.globalAlpha = 0.8;
  context.stroke();
  context.globalAlpha = 1;
  context.lineWidth = 2.5;
  context.strokeStyle = mapInk[theme].ink;
  context.setLineDash([8, 5]);
  context.stroke();
  context.setLineDash([]);
}

/** Lines shorter than this are not worth a figure. */
const LEAST_LABELLED_PX = 70;

function printOn(book: LabelBook, lines: Lines[], text: string, isAction: boolean): void {
  const sizePx = isAction ? 13 : 11;
  for (const each of lines) {
    let from = 0;
    for (const end of each.ends) {
      if (isAction || lengthOf(each, from, end) >= LEAST_LABELLED_PX) book.print(text, extremes(each, from, end), sizePx, isAction ? 600 : 400);
      from = end;
    }
  }
}

function lengthOf({ points }: Lines, from: number, end: number): number {
  let length = 0;
  for (let k = from + 1; k < end; k++) length += Math.hypot(points[2 * k]! - points[2 * k - 2]!, points[2 * k + 1]! - points[2 * k - 1]!);
  return length;
}

/** Places tried for a figure: top, bottom, right and left of the line; there it hardly moves while time plays. */
function extremes({ points }: Lines, from: number, end: number): [number, number][] {
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
