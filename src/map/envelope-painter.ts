import { concentrationText, extremes, outside, type PaintOptions } from './frame-painter';
import { LabelBook } from './label-book';
import type { MapView, PixelBox } from './mercator';
import { mapInk } from './palette';
import type { PreparedFrame, Sheet } from './sheets';
import { strokeLines, traceLines, traceRings, type PathSink } from './trace';

/** Keeps the outline of a river's envelope off its ribbon, px. */
const CLEAR_OF_RIBBON_PX = 5;

/** Strokes the outline of the first level over all time, dotted, with its words once; answers where they stand. */
export function paintEnvelope(context: CanvasRenderingContext2D, prepared: PreparedFrame, view: MapView, water: Path2D | null, options: PaintOptions): readonly PixelBox[] {
  const ink = mapInk[options.theme];
  const points: number[] = [];
  context.save();
  if (water) context.clip(water, 'evenodd');
  context.beginPath();
  for (const entry of prepared.sheets) {
    if (entry.thin) outlineRibbon(context, entry.thin, entry.widthPx(view), view, points);
    else {
      const lines = traceLines(entry.full, entry.full.bands[0]!, entry.full.placeIn(view));
      strokeLines(lines, context);
      for (const value of lines.points) points.push(value);
    }
  }
  context.lineJoin = 'round';
  context.lineWidth = 3.5;
  context.strokeStyle = ink.paper;
  context.globalAlpha = 0.6;
  context.stroke();
  context.globalAlpha = 1;
  context.lineWidth = 1.4;
  context.strokeStyle = ink.ink2;
  context.setLineDash([2, 4]);
  context.stroke();
  context.restore();
  return prepared.levels[0] ? printWords(context, points, concentrationText(prepared.levels[0].value, options.measure), view, options) : [];
}

/** Isolines print their figures at the top first, so these words go below first. */
function printWords(context: CanvasRenderingContext2D, points: number[], figure: string, { seen, marks }: MapView, { theme }: PaintOptions): readonly PixelBox[] {
  const inSight: number[] = [];
  for (let k = 0; k < points.length; k += 2) if (points[k]! > seen.left && points[k]! < seen.right && points[k + 1]! > seen.top && points[k + 1]! < seen.bottom) inSight.push(points[k]!, points[k + 1]!);
  const book = new LabelBook(context, theme, { marks }, { ...seen, bottom: seen.bottom - 40 });
  const words = `reached at any time: ${figure}`;
  const [top, bottom, right, left] = outside(extremes({ points: inSight }, 0, inSight.length / 2), 13, book.widthOf(words, 11, 400) / 2 + 8);
  if (top && bottom && right && left) book.print(words, [bottom, right, left, top], 11, 400);
  return book.printed;
}

/** Rings of the thin sheet widened to both sides, so that the outline runs beside the ribbon. */
function outlineRibbon(sink: PathSink, sheet: Sheet, ribbon: number, view: MapView, points: number[]): void {
  const place = sheet.placeIn(view);
  const grow = CLEAR_OF_RIBBON_PX / ribbon;
  const wider: typeof place = (x, y, out) => {
    place(x <= 0 ? -grow : x >= 1 ? 1 + grow : x, y, out);
    points.push(out[0]!, out[1]!);
  };
  traceRings(sheet.bands[0]!, wider, sheet.bends, sink);
}
