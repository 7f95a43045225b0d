import { concentrationText, type PaintOptions } from './frame-painter';
import { LabelBook } from './label-book';
import type { MapView } from './mercator';
import { mapInk } from './palette';
import type { PreparedFrame, Sheet } from './sheets';
import { strokeLines, traceLines, traceRings, type Lines, type PathSink } from './trace';

/** Keeps the outline of a river's envelope off its ribbon, px. */
const CLEAR_OF_RIBBON_PX = 5;

/** Strokes the outline of the first level over all time, long-dashed, with its words once. */
export function paintEnvelope(context: CanvasRenderingContext2D, prepared: PreparedFrame, view: MapView, water: Path2D | null, options: PaintOptions): void {
  const ink = mapInk[options.theme];
  context.save();
  if (water) context.clip(water, 'evenodd');
  context.beginPath();
  const lowest = { x: 0, y: -Infinity };
  for (const entry of prepared.sheets) {
    if (entry.thin) outlineRibbon(context, entry.thin, entry.widthPx(view), view, lowest);
    else strokeAndNote(context, traceLines(entry.full, entry.full.bands[0]!, entry.full.placeIn(view), Infinity), view, lowest);
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
  const level = prepared.levels[0];
  if (level && lowest.y > -Infinity) new LabelBook(context, options.theme, view.seen).print(`reached at any time: ${concentrationText(level.value, options.measure)}`, [[lowest.x, lowest.y + 13]], 11, 400);
}

function strokeAndNote(sink: PathSink, lines: Lines, view: MapView, lowest: { x: number; y: number }): void {
  strokeLines(lines, sink);
  for (let k = 0; k < lines.points.length; k += 2) note(lines.points[k]!, lines.points[k + 1]!, view, lowest);
}

/** Remembers the lowest vertex in sight that leaves room for a line of words below it; the figures of the isolines prefer the top. */
function note(x: number, y: number, { seen }: MapView, lowest: { x: number; y: number }): void {
  if (y <= lowest.y || y < seen.top || x < seen.left + 110 || x > seen.right - 110 || y > seen.bottom - 60) return;
  lowest.x = x;
  lowest.y = y;
}

/** Rings of the thin sheet widened to both sides, so that the outline runs beside the ribbon. */
function outlineRibbon(sink: PathSink, sheet: Sheet, ribbon: number, view: MapView, lowest: { x: number; y: number }): void {
  const place = sheet.placeIn(view);
  const grow = CLEAR_OF_RIBBON_PX / ribbon;
  const wider: typeof place = (x, y, out) => {
    place(x <= 0 ? -grow : x >= 1 ? 1 + grow : x, y, out);
    note(out[0]!, out[1]!, view, lowest);
  };
  traceRings(sheet.bands[0]!, wider, sheet.bendEvery(view), sink);
}
