import { runsAlongBorder, type Rings } from '../../shared/contours';
import type { Place, Sheet } from './sheets';

/** What a canvas context and a Path2D have in common. */
export type PathSink = { moveTo(x: number, y: number): void; lineTo(x: number, y: number): void; closePath(): void };

/** Open lines in pixels: x, y pairs; line k ends before vertex `ends[k]`. */
export type Lines = { points: number[]; ends: number[] };

/** Walks from one grid position towards the next and gives the pixels on the way, the last included. */
function walk(place: Place, bendEvery: number, ax: number, ay: number, bx: number, by: number, out: Float64Array, visit: (x: number, y: number) => void): void {
  const steps = Math.min(400, Math.ceil(Math.abs(by - ay) / bendEvery) || 1);
  for (let k = 1; k <= steps; k++) {
    place(ax + ((bx - ax) * k) / steps, ay + ((by - ay) * k) / steps, out);
    visit(out[0]!, out[1]!);
  }
}

/** Closed rings, for filling. */
export function traceRings(rings: Rings, place: Place, bendEvery: number, sink: PathSink): void {
  const out = new Float64Array(2);
  const { points, ends } = rings;
  let from = 0;
  const lineTo = (x: number, y: number) => sink.lineTo(x, y);
  for (const end of ends) {
    place(points[2 * from]!, points[2 * from + 1]!, out);
    sink.moveTo(out[0]!, out[1]!);
    for (let k = from + 1; k < end; k++) {
      if (bendEvery === Infinity) {
        place(points[2 * k]!, points[2 * k + 1]!, out);
        sink.lineTo(out[0]!, out[1]!);
      } else walk(place, bendEvery, points[2 * k - 2]!, points[2 * k - 1]!, points[2 * k]!, points[2 * k + 1]!, out, lineTo);
    }
    if (bendEvery !== Infinity) walk(place, bendEvery, points[2 * end - 2]!, points[2 * end - 1]!, points[2 * from]!, points[2 * from + 1]!, out, lineTo);
    sink.closePath();
    from = end;
  }
}

/** The rings without the stretches where they only follow the grid's border: the isolines proper. */
export function traceLines(sheet: Pick<Sheet, 'nx' | 'ny'>, rings: Rings, place: Place, bendEvery: number): Lines {
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
      walk(place, bendEvery, ax, ay, bx, by, out, visit);
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
export function traceBoxes(boxes: Sheet['blanks'], place: Place, bendEvery: number, sink: PathSink): void {
  for (const [x0, x1, y0, y1] of boxes) traceRings({ points: Float64Array.of(x0, y0, x1, y0, x1, y1, x0, y1), ends: [4] }, place, bendEvery, sink);
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
