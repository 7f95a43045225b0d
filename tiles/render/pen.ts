import type { SKRSContext2D } from '@napi-rs/canvas';
import { clipLine, clipRing } from './clip';
import { overlaps, TILE_PX, type Box } from './mercator';
import { partAt, type Shape } from './shapes';

/** Draws shapes into one tile: world mercator in, tile pixels out, clipped a margin outside the tile. */
export class Pen {
  readonly view: Box;
  private readonly worldPx: number;
  private readonly left: number;
  private readonly top: number;

  constructor(readonly ctx: SKRSContext2D, readonly zoom: number, x: number, y: number, marginPx = 40) {
    const n = 2 ** zoom;
    const margin = marginPx / TILE_PX;
    this.worldPx = TILE_PX * n;
    this.left = x * TILE_PX;
    this.top = y * TILE_PX;
    this.view = { minX: (x - margin) / n, minY: (y - margin) / n, maxX: (x + 1 + margin) / n, maxY: (y + 1 + margin) / n };
  }

  private trace(flat: ArrayLike<number>, isClosed: boolean): void {
    for (let i = 0; i < flat.length; i += 2) {
      const px = flat[i]! * this.worldPx - this.left;
      const py = flat[i + 1]! * this.worldPx - this.top;
      if (i === 0) this.ctx.moveTo(px, py);
      else this.ctx.lineTo(px, py);
    }
    if (isClosed) this.ctx.closePath();
  }

  /** Starts a path of the shapes' areas; false when none of them touches the tile. */
  areaPath(shapes: readonly Shape[]): boolean {
    this.ctx.beginPath();
    let isAny = false;
    for (const shape of shapes)
      shape.parts.forEach(({ box }, i) => {
        if (!overlaps(box, this.view)) return;
        const ring = partAt(shape, i, this.zoom);
        if (!ring) return;
        const clipped = clipRing(ring, this.view);
        if (clipped.length < 6) return;
        this.trace(clipped, true);
        isAny = true;
      });
    return isAny;
  }

  fill(shapes: readonly Shape[], colour: string): void {
    if (!this.areaPath(shapes)) return;
    this.ctx.fillStyle = colour;
    this.ctx.fill('evenodd');
  }

  /** Strokes lines, or the edges of areas without the edges made by clipping. `isWhole` keeps the rhythm of dashes. */
  stroke(shapes: readonly Shape[], colour: string, widthPx: number, options: { dash?: number[]; isWhole?: boolean; cap?: 'round' | 'butt' } = {}): void {
    const { ctx } = this;
    ctx.beginPath();
    let isAny = false;
    for (const shape of shapes)
      shape.parts.forEach(({ box }, i) => {
        if (!overlaps(box, this.view)) return;
        const flat = partAt(shape, i, this.zoom);
        if (!flat) return;
        const line = shape.isArea ? [...flat, flat[0]!, flat[1]!] : flat;
        for (const part of options.isWhole ? [line] : clipLine(line, this.view)) {
          this.trace(part, false);
          isAny = true;
        }
      });
    if (!isAny) return;
    ctx.strokeStyle = colour;
    ctx.lineWidth = widthPx;
    ctx.lineJoin = 'round';
    ctx.lineCap = options.cap ?? 'round';
    ctx.setLineDash(options.dash ?? []);
    ctx.stroke();
    ctx.setLineDash([]);
  }

  /** Calls back with the tile pixel of every point of the shapes that lies in view. */
  points(shapes: readonly Shape[], draw: (x: number, y: number) => void): void {
    for (const shape of shapes)
      for (const { flat } of shape.parts) {
        const [mx, my] = flat;
        if (mx! < this.view.minX || mx! > this.view.maxX || my! < this.view.minY || my! > this.view.maxY) continue;
        draw(mx! * this.worldPx - this.left, my! * this.worldPx - this.top);
      }
  }
}
