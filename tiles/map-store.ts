import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { tileRange } from './render/mercator';
import { districtBounds, islandBounds, type TileRenderer } from './render/renderer';
import { themes, type Theme } from './render/style';
import { TileArchive } from './tile-archive';

export const MAX_ZOOM = 15;
/** Below this zoom the whole Earth is kept; from here on only the island and the sea round it. */
const ISLAND_ZOOM = 6;
export const archiveFile = (folder: string, theme: Theme): string => join(folder, `downreach-${theme}.mbtiles`);

export type TilePlace = { zoom: number; x: number; y: number };

function* placesIn(bounds: readonly [number, number, number, number], zoom: number): Generator<TilePlace> {
  const { x0, x1, y0, y1 } = tileRange(bounds, zoom);
  for (let x = x0; x <= x1; x++) for (let y = y0; y <= y1; y++) yield { zoom, x, y };
}

const EARTH = [-180, -85, 180, 85] as const;
/** What is drawn before anyone asks: the overview, and the district down to where it fills a screen. */
export function* firstPlaces(): Generator<TilePlace> {
  for (let zoom = 0; zoom <= 3; zoom++) yield* placesIn(EARTH, zoom);
  for (let zoom = 4; zoom <= 11; zoom++) yield* placesIn(islandBounds, zoom);
  yield* placesIn(districtBounds, 12);
  // One tile of each deeper zoom, so that the places of its names are known before somebody waits for them.
  for (let zoom = 13; zoom <= MAX_ZOOM; zoom++) yield* placesIn([-117.07, -44.48, -117.07, -44.48], zoom);
}
/** Everything the archives may hold. */
export function* allPlaces(): Generator<TilePlace> {
  for (let zoom = 0; zoom < ISLAND_ZOOM; zoom++) yield* placesIn(EARTH, zoom);
  for (let zoom = ISLAND_ZOOM; zoom <= 12; zoom++) yield* placesIn(islandBounds, zoom);
  for (let zoom = 13; zoom <= MAX_ZOOM; zoom++) yield* placesIn(districtBounds, zoom);
}

/** Tiles outside the kept part are drawn for each request, so that strangers cannot fill the disk. */
export function isKept({ zoom, x, y }: TilePlace): boolean {
  if (zoom < ISLAND_ZOOM) return true;
  const { x0, x1, y0, y1 } = tileRange(islandBounds, zoom);
  return x >= x0 && x <= x1 && y >= y0 && y <= y1;
}

/** The product's own map: one archive for each theme, filled as tiles are drawn. */
export class MapStore {
  private readonly archives: Map<Theme, TileArchive>;
  private readonly drawing = new Map<string, Promise<Buffer>>();

  constructor(private readonly renderer: TileRenderer, folder: string) {
    mkdirSync(folder, { recursive: true });
    this.archives = new Map(themes.map((theme) => [theme, this.open(folder, theme)]));
  }

  private open(folder: string, theme: Theme): TileArchive {
    const archive = TileArchive.openWritable(archiveFile(folder, theme));
    if (archive.readMetadata().get('downreach_recipe') !== this.renderer.recipe) archive.clear();
    archive.writeMetadata({
      name: theme === 'day' ? 'Downreach map, day' : 'Downreach map, night',
      format: 'png',
      type: 'baselayer',
      version: '1.0',
      bounds: '-180,-85.0511,180,85.0511',
      center: `${(districtBounds[0] + districtBounds[2]) / 2},${(districtBounds[1] + districtBounds[3]) / 2},10`,
      minzoom: '0',
      maxzoom: String(MAX_ZOOM),
      description: 'Overview of the Earth (1:50 million, not a survey) and the invented Orlavane District',
      attribution: 'Made with Natural Earth. Orlavane District: invented.',
      downreach_recipe: this.renderer.recipe,
    });
    return archive;
  }

  private archive(theme: Theme): TileArchive {
    const archive = this.archives.get(theme);
    if (!archive) throw new Error(`No archive for theme ${theme}`);
    return archive;
  }

  /** The tile from the archive, or drawn now and kept. Requests for the same tile share one drawing. */
  async tile(theme: Theme, place: TilePlace): Promise<Buffer> {
    const stored = this.archive(theme).get(place.zoom, place.x, place.y);
    if (stored) return stored;
    const key = `${theme}/${place.zoom}/${place.x}/${place.y}`;
    let pending = this.drawing.get(key);
    if (!pending) {
      pending = this.draw(theme, place).finally(() => this.drawing.delete(key));
      this.drawing.set(key, pending);
    }
    return pending;
  }

  private async draw(theme: Theme, place: TilePlace): Promise<Buffer> {
    const png = await this.renderer.render(theme, place.zoom, place.x, place.y);
    if (isKept(place)) this.archive(theme).put([{ ...place, png }]);
    return png;
  }

  /** Draws those of the places that are missing, in both themes; gives the number drawn. Lets other work run in between. */
  async fill(places: Iterable<TilePlace>, onProgress: (drawn: number) => void = () => {}): Promise<number> {
    let drawn = 0;
    const queue = [...places].flatMap((place) => themes.map((theme) => ({ theme, place })));
    const missing = queue.filter(({ theme, place }) => !this.archive(theme).has(place.zoom, place.x, place.y));
    for (let i = 0; i < missing.length; i += 8) {
      const batch = missing.slice(i, i + 8);
      const pending: Promise<{ theme: Theme; zoom: number; x: number; y: number; png: Buffer }>[] = [];
      for (const { theme, place } of batch) {
        pending.push(this.renderer.render(theme, place.zoom, place.x, place.y).then((png) => ({ theme, ...place, png })));
        await new Promise((resolve) => setImmediate(resolve));
      }
      const done = await Promise.all(pending);
      for (const theme of themes) this.archive(theme).put(done.filter((tile) => tile.theme === theme));
      drawn += done.length;
      onProgress(drawn);
    }
    return drawn;
  }

  sizes(): { theme: Theme; tiles: number; images: number; bytes: number }[] {
    return themes.map((theme) => ({ theme, ...this.archive(theme).size() }));
  }

  close(): void {
    for (const archive of this.archives.values()) archive.close();
  }
}
