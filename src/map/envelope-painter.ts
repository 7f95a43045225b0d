import { concentrationText, type PaintOptions } from './frame-painter';
import { haloText, mapFont } from './label-book';
import type { MapView } from './mercator';
import { mapInk } from './palette';
import type { PreparedFrame, Sheet } from './sheets';
import { strokeLines, traceLines, traceRings, type PathSink } from './trace';

/** Keeps the outline of a river's envelope off its ribbon, px. */
const CLEAR_OF_RIBBON_PX = 5;

/** Where the words go: below the outline of a river, to the right of an outline on open water; isolines print theirs at the top. */
type Spot = { x: number; y: number; score: number };

/** Strokes the outline of the first level over all time, dotted, with its words once. */
export function paintEnvelope(context: CanvasRenderingContext2D, prepared: PreparedFrame, view: MapView, water: Path2D | null, options: PaintOptions): void {
  const ink = mapInk[options.theme];
  const words = prepared.levels[0] ? `reached at any time: ${concentrationText(prepared.levels[0].value, options.measure)}` : '';
  context.font = mapFont(11, 400);
  const room = context.measureText(words).width + 8;
  const spot: Spot = { x: 0, y: 0, score: -Infinity };
  context.save();
  if (water) context.clip(water, 'evenodd');
  context.beginPath();
  for (const entry of prepared.sheets) {
    if (entry.thin) outlineRibbon(context, entry.thin, entry.widthPx(view), view, room, spot);
    else outlineOpen(context, entry.full, view, room, spot);
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
  if (spot.score > -Infinity) haloText(context, options.theme, words, spot.x, spot.y);
}

function outlineOpen(sink: PathSink, sheet: Sheet, view: MapView, room: number, spot: Spot): void {
  const lines = traceLines(sheet, sheet.bands[0]!, sheet.placeIn(view), Infinity);
  strokeLines(lines, sink);
  for (let k = 0; k < lines.points.length; k += 2) note(lines.points[k]! + room / 2 + 4, lines.points[k + 1]!, lines.points[k]!, view, room, spot);
}

/** Rings of the thin sheet widened to both sides, so that the outline runs beside the ribbon. */
function outlineRibbon(sink: PathSink, sheet: Sheet, ribbon: number, view: MapView, room: number, spot: Spot): void {
  const place = sheet.placeIn(view);
  const grow = CLEAR_OF_RIBBON_PX / ribbon;
  const wider: typeof place = (x, y, out) => {
    place(x <= 0 ? -grow : x >= 1 ? 1 + grow : x, y, out);
    note(out[0]!, out[1]! + 13, out[1]!, view, room, spot);
  };
  traceRings(sheet.bands[0]!, wider, sheet.bendEvery(view), sink);
}

function note(x: number, y: number, score: number, { seen }: MapView, room: number, spot: Spot): void {
  if (score <= spot.score || x - room / 2 < seen.left || x + room / 2 > seen.right || y < seen.top + 10 || y > seen.bottom - 50) return;
  Object.assign(spot, { x, y, score });
}
