import { createHash } from 'node:crypto';
import { Router, type Response } from 'express';
import type { TileIndex } from '../../../shared/schemas/tiles';
import { MapStore, MAX_ZOOM } from '../../../tiles/map-store';
import { sharedRenderer } from '../../../tiles/render/renderer';
import { themes, type Theme } from '../../../tiles/render/style';
import { sendProblem } from '../../http/problems';
import { TileLibrary } from './tile-library';

const isTheme = (set: string): set is Theme => (themes as readonly string[]).includes(set);
const attribution = 'Made with Natural Earth. Orlavane District: invented.';
const ownMaps: TileIndex['maps'] = themes.map((theme) => ({
  id: theme,
  name: theme === 'day' ? 'Downreach map, day' : 'Downreach map, night',
  attribution,
  description: 'Overview of the Earth (1:50 million, not a survey) and the demonstration district',
  bounds: [-180, -85.0511, 180, 85.0511],
  minzoom: 0,
  maxzoom: MAX_ZOOM,
  url: `/tiles/${theme}/{z}/{x}/{y}.png`,
  isOwn: true,
}));

/** Tile numbers of a web map, or null where no such tile exists. */
function tileNumbers(z: string, x: string, y: string): { zoom: number; x: number; y: number } | null {
  if (![z, x, y].every((part) => /^\d{1,8}$/.test(part))) return null;
  const [zoom, column, row] = [Number(z), Number(x), Number(y)];
  return zoom <= 24 && column < 2 ** zoom && row < 2 ** zoom ? { zoom, x: column, y: row } : null;
}

/** A day without asking again, then a month in which an old tile may be shown while asking. 304 when the tag still holds. */
function sendTile(res: Response, bytes: Buffer, format: string): void {
  res.set('cache-control', 'public, max-age=86400, stale-while-revalidate=2592000');
  res.set('etag', `"${createHash('sha1').update(bytes).digest('base64url')}"`);
  res.type(`image/${format}`).send(bytes);
}

export type TilesRouter = Router & { close: () => void };

/**
 * Mounted at /tiles: GET index.json and GET :set/:z/:x/:y.png, open to everybody. `set` is day, night, or the name of an
 * MBTiles file in the folder. The product's own tiles are drawn when they are missing, so its map is never blank.
 */
export function createTilesRouter({ folder }: { folder: string }): TilesRouter {
  const store = new MapStore(sharedRenderer(), folder);
  const library = new TileLibrary(folder);
  library.scan();
  const router = Router();

  router.get('/index.json', (_req, res) => {
    const found = library.list();
    res.set('cache-control', 'no-cache').json({ maps: [...ownMaps, ...found.maps], unusable: found.unusable } satisfies TileIndex);
  });

  router.get('/:set/:z/:x/:y.:format', async (req, res) => {
    const { set, z, x, y, format } = req.params;
    const place = tileNumbers(z, x, y);
    if (place && isTheme(set) && place.zoom <= MAX_ZOOM && format === 'png') return sendTile(res, await store.tile(set, place), 'png');
    const tile = place && !isTheme(set) ? library.tile(set, place.zoom, place.x, place.y) : null;
    if (tile) return sendTile(res, tile.bytes, tile.format);
    return sendProblem(res, 'not-found', `There is no tile ${z}/${x}/${y} in the map "${set}"`);
  });

  router.use((req, res) => sendProblem(res, 'not-found', `No ${req.method} ${req.baseUrl}${req.path} here`));

  return Object.assign(router, {
    close: () => {
      store.close();
      library.close();
    },
  });
}
