import { readdirSync, statSync } from 'node:fs';
import { basename, join } from 'node:path';
import type { TileIndex } from '../../../shared/schemas/tiles';
import { themes } from '../../../tiles/render/style';
import { archiveFile } from '../../../tiles/map-store';
import { TileArchive, type ArchiveFacts } from '../../../tiles/tile-archive';

type Opened = { archive: TileArchive; facts: ArchiveFacts; changedMs: number };
const pictures = new Set(['png', 'jpg', 'jpeg', 'webp']);

/** MBTiles files that operators put into the tiles folder. Looked at again whenever the list is asked for. */
export class TileLibrary {
  private readonly opened = new Map<string, Opened>();
  private readonly unusable = new Map<string, string>();

  constructor(private readonly folder: string) {}

  /** Opens what is new or changed, closes what is gone. */
  scan(): void {
    const own = new Set(themes.map((theme) => basename(archiveFile(this.folder, theme))));
    const files = readdirSync(this.folder).filter((file) => file.endsWith('.mbtiles') && !own.has(file));
    this.unusable.clear();
    for (const [id, { archive }] of this.opened) {
      if (files.includes(`${id}.mbtiles`)) continue;
      archive.close();
      this.opened.delete(id);
    }
    for (const file of files) {
      const reason = this.open(file);
      if (reason) this.unusable.set(file, reason);
    }
  }

  /** Null when the file can be shown, otherwise why not. */
  private open(file: string): string | null {
    const id = file.slice(0, -'.mbtiles'.length);
    if (!/^[A-Za-z0-9][\w.-]{0,63}$/.test(id) || (themes as readonly string[]).includes(id))
      return 'Rename it: use letters, digits, dots, hyphens and underscores, and not "day" or "night"';
    const path = join(this.folder, file);
    try {
      const changedMs = statSync(path).mtimeMs;
      const known = this.opened.get(id);
      if (known?.changedMs === changedMs) return null;
      const archive = TileArchive.openReadOnly(path);
      const facts = archive.facts(id);
      if (!pictures.has(facts.format)) {
        archive.close();
        return `It holds "${facts.format}" tiles; only PNG, JPEG and WebP pictures can be shown`;
      }
      known?.archive.close();
      this.opened.set(id, { archive, facts, changedMs });
      return null;
    } catch (error) {
      return `It cannot be read as MBTiles: ${error instanceof Error ? error.message : String(error)}`;
    }
  }

  list(): TileIndex {
    this.scan();
    const maps = [...this.opened].map(([id, { facts: { format, ...facts } }]) => ({ id, ...facts, url: `/tiles/${id}/{z}/{x}/{y}.${format}`, isOwn: false }));
    return { maps, unusable: [...this.unusable].map(([file, reason]) => ({ file, reason })) };
  }

  /** Null when there is no such map or it has no such tile. */
  tile(id: string, zoom: number, x: number, y: number): { bytes: Buffer; format: string } | null {
    const known = this.opened.get(id);
    const bytes = known?.archive.get(zoom, x, y);
    return known && bytes ? { bytes, format: known.facts.format === 'jpg' ? 'jpeg' : known.facts.format } : null;
  }

  close(): void {
    for (const { archive } of this.opened.values()) archive.close();
    this.opened.clear();
  }
}
