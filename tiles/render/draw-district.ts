import { metresPerPx } from './mercator';
import type { Pen } from './pen';
import type { Shape } from './shapes';
import { stops, type Palette } from './style';

/** The district's shapes by kind, as read from tiles/district/. */
export type District = Map<string, Shape[]>;
const MIDDLE_LATITUDE = -44.5;

/** Draws the district from the sea bed up; everything but the names. */
export function drawDistrict(pen: Pen, district: District, palette: Palette): void {
  const { zoom, ctx } = pen;
  const of = (kind: string) => district.get(kind) ?? [];
  const mpp = metresPerPx(MIDDLE_LATITUDE, zoom);
  drawSea(pen, of, palette);
  const land = of('land');
  pen.fill(land, palette.land);
  ctx.save();
  if (pen.areaPath(land)) {
    ctx.clip('evenodd');
    drawGround(pen, of, palette);
  }
  ctx.restore();
  drawInlandWaters(pen, of, palette, mpp);
  if (zoom >= 9) pen.stroke(land, palette.shoreline, stops(zoom, [9, 0.5], [12, 0.9], [15, 1.3]));
  // The mouth is water: it covers the line that closes the island there.
  pen.fill(of('estuary'), palette.shallow);
  pen.fill(of('mouth'), palette.shallow);
  pen.fill(of('channel'), palette.water);
  drawWays(pen, of, palette);
}

type Of = (kind: string) => Shape[];

function drawSea(pen: Pen, of: Of, palette: Palette): void {
  const bands = of('within-depth');
  pen.fill(bands.slice(0, 1), palette.water);
  pen.fill(bands.slice(1, 2), palette.shallow);
  if (pen.zoom >= 9) pen.stroke(bands, palette.depthLine, stops(pen.zoom, [9, 0.5], [13, 0.8], [15, 1]));
  if (pen.zoom >= 10) pen.fill(of('flats'), palette.flats);
  if (pen.zoom >= 12) pen.stroke(of('flats'), palette.shoreline, 0.8, { dash: [2, 3], isWhole: true });
}

function drawGround(pen: Pen, of: Of, palette: Palette): void {
  const { zoom } = pen;
  of('height').forEach((height, i) => pen.fill([height], palette.heights[i] ?? palette.land));
  for (const shade of of('shade')) pen.fill([shade], palette.shade);
  pen.fill(of('lit'), palette.lit);
  if (zoom >= 14) pen.stroke(of('hedges'), palette.hedge, stops(zoom, [14, 0.8], [15, 1.2]));
  if (zoom >= 9) pen.fill(of('wood'), palette.wood);
  if (zoom >= 11) pen.stroke(of('height'), palette.contour, stops(zoom, [11, 0.45], [15, 0.8]));
  if (zoom >= 8) pen.fill(of('town'), palette.town);
  if (zoom >= 12) pen.fill(of('blocks'), palette.block);
  pen.fill(of('marsh'), palette.marsh);
}

function drawInlandWaters(pen: Pen, of: Of, palette: Palette, mpp: number): void {
  const { zoom } = pen;
  const bank = zoom >= 12 ? stops(zoom, [12, 0.6], [15, 1]) : 0;
  const width = (shape: Shape, leastPx: number) => Math.max(leastPx, Number(shape.properties['widthM']) / mpp);
  const streams = zoom >= 10 ? of('stream') : zoom >= 8 ? of('stream').filter((s) => Number(s.properties['widthM']) >= 16) : [];
  const leastOf = (shape: Shape) => (shape.kind === 'stream' ? stops(zoom, [10, 0.6], [13, 1.1], [15, 1.6]) : shape.properties['rank'] === 1 ? stops(zoom, [6, 0.6], [9, 1.6], [12, 2.6], [14, 4]) : stops(zoom, [7, 0.4], [9, 0.9], [12, 1.6], [15, 2.6]));
  const rivers = zoom >= 6 ? of('river') : [];
  if (bank) {
    for (const shape of rivers) pen.stroke([shape], palette.shoreline, width(shape, leastOf(shape)) + 2 * bank);
    pen.stroke([...of('bank'), ...of('lake'), ...of('harbour')], palette.shoreline, 2 * bank);
  } else if (zoom >= 10) pen.stroke([...of('bank'), ...of('lake')], palette.shoreline, 1);
  for (const shape of [...streams, ...rivers]) pen.stroke([shape], palette.water, width(shape, leastOf(shape)));
  pen.fill(of('lake'), palette.water);
  for (const basin of of('harbour')) pen.fill([basin], palette.water);
  if (zoom >= 12) {
    const size = stops(zoom, [12, 2.2], [15, 5]);
    const { ctx } = pen;
    ctx.strokeStyle = palette.tuft;
    ctx.lineWidth = stops(zoom, [12, 0.7], [15, 1.1]);
    ctx.beginPath();
    let count = 0;
    pen.points(of('tuft'), (x, y) => {
      if (zoom < 14 && count++ % (zoom === 12 ? 7 : 3) !== 0) return;
      for (const lean of [-0.6, 0, 0.6]) { ctx.moveTo(x + lean * size * 0.35, y); ctx.lineTo(x + lean * size, y - size * (lean === 0 ? 1.15 : 0.85)); }
      ctx.moveTo(x - size, y + 0.5);
      ctx.lineTo(x + size, y + 0.5);
    });
    ctx.stroke();
  }
}

function drawWays(pen: Pen, of: Of, palette: Palette): void {
  const { zoom } = pen;
  const byRank = (rank: number) => of('road').filter((road) => road.properties['rank'] === rank);
  if (zoom >= 9) {
    pen.stroke(of('rail'), palette.rail, stops(zoom, [9, 0.8], [12, 1.6], [15, 3]), { cap: 'butt', isWhole: true });
    if (zoom >= 11) pen.stroke(of('rail'), palette.town, stops(zoom, [11, 0.7], [15, 1.6]), { dash: [7, 7], cap: 'butt', isWhole: true });
  }
  const leastZoom = [0, 7, 9, 10];
  const casing = [0, stops(zoom, [7, 0.9], [10, 2], [12, 4], [15, 8.5]), stops(zoom, [9, 1.1], [12, 3.2], [15, 7]), stops(zoom, [10, 0.7], [12, 1.7], [15, 4.6])];
  const hasCore = (rank: number) => casing[rank]! > 2.4;
  for (const rank of [3, 2, 1]) if (zoom >= leastZoom[rank]!) pen.stroke(byRank(rank), hasCore(rank) ? palette.road : palette.roadThin, casing[rank]!);
  for (const rank of [3, 2, 1]) if (hasCore(rank)) pen.stroke(byRank(rank), palette.roadCore, casing[rank]! - stops(zoom, [11, 1.4], [15, 2.2]));
  if (zoom >= 11) {
    pen.stroke([...of('wall'), ...of('jetty')], palette.wall, stops(zoom, [11, 1.2], [15, 4]), { cap: 'butt' });
    pen.stroke(of('weir'), palette.wall, stops(zoom, [11, 1.2], [15, 3]), { cap: 'butt', dash: [3, 2], isWhole: true });
  }
}
