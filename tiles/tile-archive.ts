import { createHash } from 'node:crypto';
import Database from 'better-sqlite3';

/** Facts an MBTiles file tells about itself. */
export type ArchiveFacts = { name: string; attribution: string; description: string; bounds: [number, number, number, number]; minzoom: number; maxzoom: number; format: string };

const SCHEMA = `
  CREATE TABLE IF NOT EXISTS metadata (name TEXT PRIMARY KEY, value TEXT);
  CREATE TABLE IF NOT EXISTS images (tile_id TEXT PRIMARY KEY, tile_data BLOB NOT NULL) WITHOUT ROWID;
  CREATE TABLE IF NOT EXISTS map (zoom_level INTEGER, tile_column INTEGER, tile_row INTEGER, tile_id TEXT NOT NULL, PRIMARY KEY (zoom_level, tile_column, tile_row)) WITHOUT ROWID;
  CREATE VIEW IF NOT EXISTS tiles AS SELECT zoom_level, tile_column, tile_row, tile_data FROM map JOIN images USING (tile_id);
`;
/** MBTiles counts rows from the south; web tiles count them from the north. */
const flip = (zoom: number, y: number) => 2 ** zoom - 1 - y;

/** An MBTiles 1.3 file of raster tiles. Equal images are stored once. */
export class TileArchive {
  private readonly select: Database.Statement<[number, number, number], { tile_data: Buffer }>;

  private constructor(private readonly db: Database.Database, readonly isWritable: boolean) {
    this.select = db.prepare('SELECT tile_data FROM tiles WHERE zoom_level = ? AND tile_column = ? AND tile_row = ?');
  }

  /** Opens a file somebody else made; throws when it is no MBTiles file. */
  static openReadOnly(file: string): TileArchive {
    return new TileArchive(new Database(file, { readonly: true, fileMustExist: true }), false);
  }

  /** Opens or makes a file of our own. */
  static openWritable(file: string): TileArchive {
    const db = new Database(file, { timeout: 5_000 });
    db.pragma('journal_mode = WAL');
    // A tile lost in a power cut is drawn again: no need to wait for the disk.
    db.pragma('synchronous = OFF');
    db.exec(SCHEMA);
    return new TileArchive(db, true);
  }

  get(zoom: number, x: number, y: number): Buffer | null {
    return this.select.get(zoom, x, flip(zoom, y))?.tile_data ?? null;
  }

  has(zoom: number, x: number, y: number): boolean {
    return this.db.prepare('SELECT 1 FROM tiles WHERE zoom_level = ? AND tile_column = ? AND tile_row = ?').get(zoom, x, flip(zoom, y)) !== undefined;
  }

  put(tiles: readonly { zoom: number; x: number; y: number; png: Buffer }[]): void {
    const image = this.db.prepare('INSERT OR IGNORE INTO images (tile_id, tile_data) VALUES (?, ?)');
    const place = this.db.prepare('INSERT OR REPLACE INTO map (zoom_level, tile_column, tile_row, tile_id) VALUES (?, ?, ?, ?)');
    this.db.transaction(() => {
      for (const { zoom, x, y, png } of tiles) {
        const id = createHash('sha1').update(png).digest('hex');
        image.run(id, png);
        place.run(zoom, x, flip(zoom, y), id);
      }
    })();
  }

  readMetadata(): Map<string, string> {
    const rows = this.db.prepare('SELECT name, value FROM metadata').all() as { name: string; value: string }[];
    return new Map(rows.map(({ name, value }) => [name, String(value)]));
  }

  writeMetadata(entries: Record<string, string>): void {
    const statement = this.db.prepare('INSERT OR REPLACE INTO metadata (name, value) VALUES (?, ?)');
    this.db.transaction(() => { for (const [name, value] of Object.entries(entries)) statement.run(name, value); })();
  }

  /** Metadata with what is missing read from the tiles themselves. */
  facts(fallbackName: string): ArchiveFacts {
    const meta = this.readMetadata();
    const zooms = this.db.prepare('SELECT min(zoom_level) AS least, max(zoom_level) AS most FROM tiles').get() as { least: number | null; most: number | null };
    const bounds = (meta.get('bounds') ?? '').split(',').map(Number);
    const zoomOf = (name: string, found: number | null) => (Number.isInteger(Number(meta.get(name) ?? NaN)) ? Number(meta.get(name)) : (found ?? 0));
    return {
      name: meta.get('name') || fallbackName,
      attribution: meta.get('attribution') ?? '',
      description: meta.get('description') ?? '',
      bounds: bounds.length === 4 && bounds.every(Number.isFinite) ? (bounds as [number, number, number, number]) : [-180, -85.0511, 180, 85.0511],
      minzoom: zoomOf('minzoom', zooms.least),
      maxzoom: zoomOf('maxzoom', zooms.most),
      format: (meta.get('format') ?? 'png').toLowerCase(),
    };
  }

  /** Forgets every tile. */
  clear(): void {
    this.db.exec('DELETE FROM map; DELETE FROM images;');
  }

  /** Number of tiles placed, of different images, and the bytes of these. Own files only. */
  size(): { tiles: number; images: number; bytes: number } {
    const { tiles } = this.db.prepare('SELECT count(*) AS tiles FROM map').get() as { tiles: number };
    return { tiles, ...(this.db.prepare('SELECT count(*) AS images, coalesce(sum(length(tile_data)), 0) AS bytes FROM images').get() as { images: number; bytes: number }) };
  }

  close(): void {
    this.db.close();
  }
}
