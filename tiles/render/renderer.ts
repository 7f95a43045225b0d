import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { createCanvas, GlobalFonts, type SKRSContext2D } from '@napi-rs/canvas';
import type { FeatureCollection } from 'geojson';
import { drawDistrict, type District } from './draw-district';
import { drawLabel, fonts, placeLabels, placeSoundings, type Label } from './labels';
import { boxOf, overlaps, TILE_PX, type Box } from './mercator';
import { oceanNames } from './oceans';
import { Pen } from './pen';
import { toShapes, type Shape } from './shapes';
import { palettes, type Theme } from './style';
import { loadWorldLand } from './world';

/** Counts up when the drawing changes, so that tiles made before are made again. */
const DRAWING_VERSION = 1;
const layers = ['land', 'relief', 'woods', 'fields', 'towns', 'waters', 'ways', 'names'] as const;
const file = (path: string) => fileURLToPath(new URL(path, import.meta.url));

export const districtBounds: readonly [west: number, south: number, east: number, north: number] = [-117.6, -44.72, -116.6, -44.28];
/** The whole island with its sea, a little beyond the district. */
export const islandBounds: readonly [number, number, number, number] = [-117.72, -44.88, -116.2, -44.1];

/** Draws any tile on Earth in either theme. Holds the shapes and, per zoom, where the names stand. */
export class TileRenderer {
  /** Changes whenever a tile could look different. */
  readonly recipe: string;
  private readonly district: District = new Map();
  private readonly world: { shape: Shape; box: Box }[];
  private readonly names: Shape[];
  private readonly districtBox: Box;
  private readonly labels = new Map<number, Label[]>();
  private readonly plain = new Map<number, Buffer>();

  constructor() {
    GlobalFonts.registerFromPath(file('../../fonts/SourceSans3-Regular.ttf'), fonts.regular);
    GlobalFonts.registerFromPath(file('../../fonts/SourceSans3-Semibold.ttf'), fonts.semibold);
    GlobalFonts.registerFromPath(file('../../fonts/SourceSans3-It.ttf'), fonts.italic);
    const hash = createHash('sha256').update(String(DRAWING_VERSION)).update(JSON.stringify(palettes));
    for (const layer of layers) {
      const text = readFileSync(file(`../district/${layer}.geojson`), 'utf8');
      hash.update(text);
      for (const shape of toShapes(JSON.parse(text) as FeatureCollection)) {
        const kind = shape.kind === 'tufts' ? 'tuft' : shape.kind;
        this.district.set(kind, [...(this.district.get(kind) ?? []), shape]);
      }
    }
    this.recipe = hash.digest('hex').slice(0, 16);
    this.names = [...(this.district.get('name') ?? []), ...oceanNames()];
    this.world = loadWorldLand().map((shape) => ({ shape, box: shape.parts[0]!.box }));
    const bands = [...(this.district.get('within-depth') ?? []), ...(this.district.get('land') ?? [])];
    this.districtBox = boxOf(bands.flatMap((band) => band.parts.flatMap(({ box }) => [box.minX, box.minY, box.maxX, box.maxY])));
  }

  private labelsAt(ctx: SKRSContext2D, zoom: number): Label[] {
    let labels = this.labels.get(zoom);
    if (!labels) {
      const names = placeLabels(ctx, { names: this.names, rivers: [...(this.district.get('river') ?? []), ...(this.district.get('stream') ?? [])] }, zoom);
      labels = [...names, ...placeSoundings(this.district.get('sounding') ?? [], zoom, names)];
      this.labels.set(zoom, labels);
    }
    return labels;
  }

  /** Draws one tile as PNG: about 4 ms on the calling thread, then about 2 ms of compressing outside it. */
  async render(theme: Theme, zoom: number, x: number, y: number): Promise<Buffer> {
    const palette = palettes[theme];
    const canvas = createCanvas(TILE_PX, TILE_PX);
    const ctx = canvas.getContext('2d');
    ctx.fillStyle = palette.deep;
    ctx.fillRect(0, 0, TILE_PX, TILE_PX);
    const pen = new Pen(ctx, zoom, x, y);
    const land = this.world.filter(({ box }) => overlaps(box, pen.view)).map(({ shape }) => shape);
    if (land.length) {
      pen.stroke(land, palette.water, zoom < 3 ? 5 : 11);
      pen.stroke(land, palette.shallow, zoom < 3 ? 2 : 4.5);
      pen.fill(land, palette.land);
      pen.stroke(land, palette.shoreline, 0.6);
    }
    if (zoom >= 3 && overlaps(this.districtBox, pen.view)) drawDistrict(pen, this.district, palette);
    const window = { minX: x * TILE_PX, minY: y * TILE_PX, maxX: (x + 1) * TILE_PX, maxY: (y + 1) * TILE_PX };
    for (const label of this.labelsAt(ctx, zoom)) if (overlaps(label.box, window)) drawLabel(ctx, label, palette, window.minX, window.minY);
    const pixels = new Uint32Array(ctx.getImageData(0, 0, TILE_PX, TILE_PX).data.buffer);
    const colour = pixels[0]!;
    if (!pixels.every((pixel) => pixel === colour)) return canvas.encode('png');
    let png = this.plain.get(colour);
    if (!png) this.plain.set(colour, (png = await canvas.encode('png')));
    return png;
  }
}

let shared: TileRenderer | null = null;
/** One renderer for the process: loading the shapes takes about 0.1 s. */
export const sharedRenderer = (): TileRenderer => (shared ??= new TileRenderer());
