import type { EstimateWater } from '../../shared/schemas/estimate';
import type { Isochrone } from '../../shared/schemas/estimate-result';
import { alongCourse, courseOf, coursePoint, reachWidthM, ribbonPx, type Course } from './channel-course';
import { extremes } from './frame-painter';
import { LabelBook } from './label-book';
import { toWorld, type MapView, type PixelBox } from './mercator';
import { mapInk, type MapTheme } from './palette';

/** One time: lines in world units, or places on a river where a line goes right across. */
export type IsochroneLine = { timeS: number; world: Float64Array[]; fronts: { course: Course; widthM: number; chainageKm: number }[] };

/** How far a line across a river stands out on both sides, px. */
const BEYOND_RIBBON_PX = 7;

export function isochroneLines(isochrones: readonly Isochrone[], water: EstimateWater): IsochroneLine[] {
  const courses = new Map(water.kind === 'river' ? water.reaches.map((reach) => [reach.id, { course: courseOf(reach), widthM: reachWidthM(reach, water) }] as const) : []);
  return isochrones.map(({ timeS, lines, fronts }) => ({
    timeS,
    world: lines.map((line) => Float64Array.from(line.flatMap((position) => toWorld(position)))),
    fronts: fronts.flatMap(({ reachId, chainageKm }) => {
      const place = courses.get(reachId);
      return place ? [{ ...place, chainageKm }] : [];
    }),
  }));
}

/** The pixels of one time's lines, each as x, y pairs. */
export function pixelLines({ world, fronts }: IsochroneLine, view: MapView): number[][] {
  const open = world.map((line) => Array.from(line, (value, k) => value * view.scale - (k % 2 === 0 ? view.offsetX : view.offsetY)));
  const point = coursePoint();
  const across = fronts.map(({ course, widthM, chainageKm }) => {
    alongCourse(course, chainageKm, point);
    const half = ribbonPx(widthM, view.metresPerPixel, view.zoom) / 2 + BEYOND_RIBBON_PX;
    const [x, y] = [point.x * view.scale - view.offsetX, point.y * view.scale - view.offsetY];
    return [x + point.leftX * half, y + point.leftY * half, x - point.leftX * half, y - point.leftY * half];
  });
  return [...open, ...across];
}

/** Strokes the lines thin and whole, and prints each time where there is room; answers where the words stand. */
export function paintIsochrones(context: CanvasRenderingContext2D, lines: readonly IsochroneLine[], view: MapView, theme: MapTheme, labelOf: (timeS: number) => string): readonly PixelBox[] {
  const ink = mapInk[theme];
  const book = new LabelBook(context, theme, view, view.seen);
  const drawn = lines.map((line) => ({ line, pixels: pixelLines(line, view) }));
  context.save();
  context.lineJoin = 'round';
  context.lineCap = 'butt';
  for (const [width, colour, alpha] of [[3, ink.paper, 0.6], [1.2, ink.ink, 1]] as const) {
    context.beginPath();
    for (const { pixels } of drawn) for (const points of pixels) strokeLine(context, points);
    context.lineWidth = width;
    context.strokeStyle = colour;
    context.globalAlpha = alpha;
    context.stroke();
  }
  context.restore();
  for (const { line, pixels } of drawn) {
    // Across rivers every line has its time; on open water only the longest piece of each.
    const labelled = line.fronts.length > 0 ? pixels : pixels.filter((points) => pixels.every((other) => other.length <= points.length)).slice(0, 1);
    for (const points of labelled) book.print(labelOf(line.timeS), labelPlaces(points, line.fronts.length > 0), 12, 600);
  }
  return book.printed;
}

function strokeLine(context: CanvasRenderingContext2D, points: readonly number[]): void {
  for (let k = 0; k < points.length; k += 2) {
    if (k === 0) context.moveTo(points[0]!, points[1]!);
    else context.lineTo(points[k]!, points[k + 1]!);
  }
}

/** On open water on the line itself, the end farthest along first; beside a river at the ends of the line across. */
function labelPlaces(points: number[], isAcross: boolean): [number, number][] {
  if (!isAcross) {
    const [top, bottom, right, left] = extremes({ points }, 0, points.length / 2);
    return top && bottom && right && left ? [right, left, top, bottom] : [];
  }
  const [ax, ay, bx, by] = points as [number, number, number, number];
  const length = Math.hypot(bx - ax, by - ay) || 1;
  const [ux, uy] = [(bx - ax) / length, (by - ay) / length];
  return [[bx + ux * 22, by + uy * 12], [ax - ux * 22, ay - uy * 12]];
}
