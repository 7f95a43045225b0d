import { runsAlongBorder, type Rings } from '../../shared/contours';
import type { Place, Sheet } from './sheets';

/** What a canvas context and a Path2D have in common. */
export type PathSink = { moveTo(x: number, y: number): void; lineTo(x: number, y: number): void; closePath(): void };

/** Open lines in pixels: x, y pairs; line k ends before vertex `ends[k]`. */
export type Lines = { points: number[]; ends: number[] };

/** Longest straight piece of a line that follows a bending grid, px. */
const PIECE_PX = 6;
const MOST_PIECES = 400;

/** Walks from one grid position to the next in pieces short enough to follow the grid's bends; gives each pixel but the first. */
function walk(place: Place, ax: number, ay: number, bx: number, by: number, out: Float64Array, visit: (x: number, y: number) => void): void {
  place(ax, ay, out);
  const [fromX, fromY] = [out[0]!, out[1]!];
  place(bx, by, out);
  const pieces = Math.min(MOST_PIECES, Math.ceil(Math.hypot(out[0]! - fromX, out[1]! - fromY) / PIECE_PX) || 1);
  const [toX, toY] = [out[0]!, out[1]!];
  for (let k = 1; k < pieces; k++) {
    place(ax + ((bx - ax) * k) / pieces, ay + ((by - ay) * k) / pieces, out);
    visit(out[0]!, out[1]!);
  }
  visit(toX, toY);
}

/** Closed rings, for filling. */
export function traceRings(rings: Rings, place: Place, bends: boolean, sink: PathSink): void {
  const out = new Float64Array(2);
  const { points, ends } = rings;
  const lineTo = (x: number, y: number) => sink.lineTo(x, y);
  let from = 0;
  for (const end of ends) {
    place(points[2 * from]!, points[2 * from + 1]!, out);
    sink.moveTo(out[0]!, out[1]!);
    for (let k = from + 1; k < end; k++) {
      if (bends) walk(place, points[2 * k - 2]!, points[2 * k - 1]!, points[2 * k]!, points[2 * k + 1]!, out, lineTo);
      else {
        place(points[2 * k]!, points[2 * k + 1]!, out);
        sink.lineTo(out[0]!, out[1]!);
      }
    }
    if (bends) walk(place, points[2 * end - 2]!, points[2 * end - 1]!, points[2 * from]!, points[2 * from + 1]!, out, lineTo);
    sink.closePath();
    from = end;
  }
}

/** The rings without the stretches where they only follow the grid's border: the isolines proper. */
export function traceLines(sheet: Pick<Sheet, 'nx' | 'ny' | 'bends'>, rings: Rings, place: Place): Lines {
  const lines: Lines = { points: [], ends: [] };
  const out = new Float64Array(2);
  const { points, ends } = rings;
  const visit = (x: number, y: number) => void lines.points.push(x, y);
  let from = 0;
  for (const end of ends) {
    let open = false;
    for (let k = from; k < end; k++) {
      const l = k + 1 < end ? k + 1 : from;
      const [ax, ay, bx, by] = [points[2 * k]!, points[2 * k + 1]!, points[2 * l]!, points[2 * l + 1]!];
      if (runsAlongBorder(sheet.nx, sheet.ny, ax, ay, bx, by)) {
        if (open) lines.ends.push(lines.points.length / 2);
        open = false;
        continue;
      }
      if (!open) {
        place(ax, ay, out);
        visit(out[0]!, out[1]!);
        open = true;
      }
      if (sheet.bends) walk(place, ax, ay, bx, by, out, visit);
      else {
        place(bx, by, out);
        visit(out[0]!, out[1]!);
      }
    }
    if (open) lines.ends.push(lines.points.length / 2);
    from = end;
  }
  return lines;
}

export function strokeLines(lines: Lines, sink: PathSink): void {
  let from = 0;
  for (const end of lines.ends) {
    sink.moveTo(lines.points[2 * from]!, lines.points[2 * from + 1]!);
    for (let k = from + 1; k < end; k++) sink.lineTo(lines.points[2 * k]!, lines.points[2 * k + 1]!);
    from = end;
  }
}

/** Boxes of the grid as closed paths that follow its bends. */
export function traceBoxes(boxes: Sheet['blanks'], place: Place, bends: boolean, sink: PathSink): void {
  for (const [x0, x1, y0, y1] of boxes) traceRings({ points: Float64Array.of(x0, y0, x1, y0, x1, y1, x0, y1), ends: [4] }, place, bends, sink);
}

/** Rings of longitude and latitude already in world units, skipping vertices that fall on the pixel before. */
export function traceWorldRings(rings: readonly Float64Array[], view: { scale: number; offsetX: number; offsetY: number }, sink: PathSink): void {
  for (const ring of rings) {
    let lastX = Infinity;
    let lastY = Infinity;
    for (let k = 0; k < ring.length; k += 2) {
      const x = ring[k]! * view.scale - view.offsetX;
      const y = ring[k + 1]! * view.scale - view.offsetY;
      if (Math.abs(x - lastX) + Math.abs(y - lastY) < 0.7) continue;
      if (lastX === Infinity) sink.moveTo(x, y);
      else sink.lineTo(x, y);
      lastX = x;
      lastY = y;
    }
    sink.closePath();
  }
}
