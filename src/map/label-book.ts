import type { MapView, PixelBox } from './mercator';
import { mapInk, type MapTheme } from './palette';

/** Font of figures on the map; the family is the page's own. */
export const mapFont = (px: number, weight: 400 | 600 = 600): string => `${weight} ${px}px "Source Sans 3", system-ui, sans-serif`;

/** Text with a halo in the colour of the ground, so that it is read on any band. */
export function haloText(context: CanvasRenderingContext2D, theme: MapTheme, text: string, x: number, y: number, haloPx = 3.5): void {
  const ink = mapInk[theme];
  context.textAlign = 'center';
  context.textBaseline = 'middle';
  context.lineJoin = 'round';
  context.setLineDash([]);
  context.lineWidth = haloPx;
  context.strokeStyle = ink.paper;
  context.strokeText(text, x, y);
  context.fillStyle = ink.ink;
  context.fillText(text, x, y);
}

/** Prints figures on lines where they are seen and do not cover one another. */
export class LabelBook {
  /** Boxes of what was printed or kept. */
  readonly printed: PixelBox[] = [];

  constructor(
    private readonly context: CanvasRenderingContext2D,
    private readonly theme: MapTheme,
    private readonly view: Pick<MapView, 'marks'>,
    private readonly seen: PixelBox,
  ) {}

  widthOf(text: string, fontPx: number, weight: 400 | 600): number {
    this.context.font = mapFont(fontPx, weight);
    return this.context.measureText(text).width;
  }

  /** Prints at the first of the places that is in sight and free; false when there is none. */
  print(text: string, places: readonly (readonly [number, number])[], fontPx: number, weight: 400 | 600): boolean {
    const half = this.widthOf(text, fontPx, weight) / 2 + 3;
    for (const [x, y] of places) {
      const box = { left: x - half, right: x + half, top: y - fontPx * 0.6, bottom: y + fontPx * 0.6 };
      if (!this.take(box)) continue;
      haloText(this.context, this.theme, text, x, y);
      return true;
    }
    return false;
  }

  /** Keeps a place for something drawn by other hands; false when it is taken or out of sight. */
  take(box: PixelBox): boolean {
    if (!this.isFree(box)) return false;
    this.printed.push(box);
    return true;
  }

  private isFree(box: PixelBox): boolean {
    const { seen } = this;
    if (box.left < seen.left || box.right > seen.right || box.top < seen.top || box.bottom > seen.bottom) return false;
    const clear = (other: PixelBox) => box.right < other.left || box.left > other.right || box.bottom < other.top || box.top > other.bottom;
    return this.printed.every(clear) && this.view.marks.every(clear);
  }
}
