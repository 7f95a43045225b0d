import { alongCourse, coursePoint, ribbonPx, type Course } from './channel-course';
import { haloText, LabelBook, mapFont } from './label-book';
import type { MapView, PixelBox } from './mercator';
import { mapInk, type MapTheme } from './palette';

export type RiverReach = { course: Course; widthM: number; prefix: string };

/** Banks are named from this zoom on. */
const BANKS_FROM_ZOOM = 14;
const ARROW_EVERY_PX = 110;
const BANK_EVERY_PX = 360;

export function paintRiver(context: CanvasRenderingContext2D, reaches: readonly RiverReach[], view: MapView, theme: MapTheme): readonly PixelBox[] {
  context.lineJoin = 'round';
  context.lineCap = 'round';
  context.strokeStyle = mapInk[theme].river;
  for (const { course, widthM } of reaches) {
    context.lineWidth = ribbonPx(widthM, view.metresPerPixel, view.zoom);
    context.beginPath();
    course.x.forEach((x, k) => {
      const [px, py] = [x * view.scale - view.offsetX, course.y[k]! * view.scale - view.offsetY];
      if (k === 0) context.moveTo(px, py);
      else context.lineTo(px, py);
    });
    context.stroke();
  }
  const book = new LabelBook(context, theme, view, { left: 0, top: 0, right: view.width, bottom: view.height });
  for (const reach of reaches) {
    paintArrows(context, reach, view, theme);
    paintChainages(context, book, reach, view, theme);
    if (view.zoom >= BANKS_FROM_ZOOM) paintBanks(context, book, reach, view, theme);
  }
  return book.printed;
}

const span = ({ chainageKm }: Course): [number, number] => [chainageKm[0]!, chainageKm[chainageKm.length - 1]!];
const kmPerPixel = (view: MapView): number => view.metresPerPixel / 1_000;

/** Visits places every so many pixels down the course, at fixed chainages, so that they stay put while the map is dragged, and clear of the round figures that carry ticks. */
function everyPx(course: Course, view: MapView, stepPx: number, visit: (x: number, y: number, leftX: number, leftY: number, km: number) => void): void {
  const [top, bottom] = span(course);
  const stepKm = 2 ** Math.round(Math.log2(stepPx * kmPerPixel(view)));
  const point = coursePoint();
  for (let km = (Math.floor(top / stepKm) + 0.43) * stepKm; km >= bottom; km -= stepKm) {
    if (km > top) continue;
    alongCourse(course, km, point);
    const [x, y] = [point.x * view.scale - view.offsetX, point.y * view.scale - view.offsetY];
    if (x > -20 && y > -20 && x < view.width + 20 && y < view.height + 20) visit(x, y, point.leftX, point.leftY, km);
  }
}

/** Open arrow heads in the stream, pointing the way the water goes. */
function paintArrows(context: CanvasRenderingContext2D, { course, widthM }: RiverReach, view: MapView, theme: MapTheme): void {
  if (view.zoom < 10) return;
  const half = Math.min(6, Math.max(2.5, ribbonPx(widthM, view.metresPerPixel, view.zoom) * 0.32));
  context.beginPath();
  everyPx(course, view, ARROW_EVERY_PX, (x, y, lx, ly) => {
    // Downstream is a quarter turn clockwise from the left bank as the map lies.
    const [dx, dy] = [-ly, lx];
    context.moveTo(x - dx * half + lx * half, y - dy * half + ly * half);
    context.lineTo(x + dx * half * 0.6, y + dy * half * 0.6);
    context.lineTo(x - dx * half - lx * half, y - dy * half - ly * half);
  });
  context.lineWidth = 1.4;
  context.strokeStyle = mapInk[theme].ink2;
  context.stroke();
}

/** Ticks on the left bank with the chainage, at whole kilometres or tenths as room allows. */
function paintChainages(context: CanvasRenderingContext2D, book: LabelBook, { course, widthM, prefix }: RiverReach, view: MapView, theme: MapTheme): void {
  if (view.zoom < 11) return;
  const [top, bottom] = span(course);
  const stepKm = [0.1, 0.2, 0.5, 1, 2, 5, 10].find((step) => step / kmPerPixel(view) >= 85) ?? 20;
  const half = ribbonPx(widthM, view.metresPerPixel, view.zoom) / 2;
  const point = coursePoint();
  context.font = mapFont(11, 400);
  for (let n = Math.floor(top / stepKm + 1e-9); n * stepKm >= bottom - 1e-9; n--) {
    const km = n * stepKm;
    alongCourse(course, km, point);
    const [x, y] = [point.x * view.scale - view.offsetX, point.y * view.scale - view.offsetY];
    if (x < -40 || y < -40 || x > view.width + 40 || y > view.height + 40) continue;
    context.beginPath();
    context.moveTo(x + point.leftX * (half - 1), y + point.leftY * (half - 1));
    context.lineTo(x + point.leftX * (half + 5), y + point.leftY * (half + 5));
    context.lineWidth = 1.2;
    context.strokeStyle = mapInk[theme].ink2;
    context.stroke();
    const text = `${prefix} ${stepKm < 1 ? km.toFixed(1) : km}`;
    const clear = half + 8 + Math.abs(point.leftX) * (context.measureText(text).width / 2) + Math.abs(point.leftY) * 5;
    book.print(text, [[x + point.leftX * clear, y + point.leftY * clear], [x - point.leftX * clear, y - point.leftY * clear]], 11, 400);
  }
}

/** LEFT and RIGHT along the banks, turned with the river but never upside down. */
function paintBanks(context: CanvasRenderingContext2D, book: LabelBook, { course, widthM }: RiverReach, view: MapView, theme: MapTheme): void {
  const half = ribbonPx(widthM, view.metresPerPixel, view.zoom) / 2;
  context.font = mapFont(10, 600);
  everyPx(course, view, BANK_EVERY_PX, (x, y, lx, ly) => {
    const turn = Math.atan2(lx, -ly);
    const upright = Math.abs(turn) > Math.PI / 2 ? turn + Math.PI : turn;
    for (const [word, side] of [['LEFT', 1], ['RIGHT', -1]] as const) {
      const [atX, atY] = [x + lx * side * (half + 9), y + ly * side * (half + 9)];
      const [wide, high] = [6 + 17 * Math.abs(ly), 6 + 17 * Math.abs(lx)];
      if (!book.take({ left: atX - wide, right: atX + wide, top: atY - high, bottom: atY + high })) continue;
      context.save();
      context.translate(atX, atY);
      context.rotate(upright);
      context.letterSpacing = '1.5px';
      haloText(context, theme, word, 0, 0);
      context.restore();
    }
  });
}
