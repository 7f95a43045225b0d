// @vitest-environment node
import { copyFileSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { createServer, get as httpGet, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createCanvas, loadImage } from '@napi-rs/canvas';
import Database from 'better-sqlite3';
import express from 'express';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { tileIndexSchema } from '../../../shared/schemas/tiles';
import { latitudeOf, mercatorX, mercatorY } from '../../../tiles/render/mercator';
import { palettes } from '../../../tiles/render/style';
import { ensureTiles } from './ensure-tiles';
import { createTilesRouter, type TilesRouter } from './tiles.router';

const folder = mkdtempSync(join(tmpdir(), 'downreach-tiles-'));
let router: TilesRouter;
let server: Server;
let base = '';

beforeAll(async () => {
  router = createTilesRouter({ folder });
  server = createServer(express().use('/tiles', router));
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  base = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
});
afterAll(async () => {
  server.closeAllConnections();
  await new Promise((resolve) => server.close(resolve));
  router.close();
  rmSync(folder, { recursive: true, force: true });
});

const get = (path: string) => fetch(base + path);
const place = (lon: number, lat: number, zoom: number) => {
  const [x, y] = [mercatorX(lon) * 2 ** zoom, mercatorY(lat) * 2 ** zoom];
  return { tile: `${zoom}/${Math.floor(x)}/${Math.floor(y)}`, px: Math.floor((x % 1) * 256), py: Math.floor((y % 1) * 256) };
};
/** Colour of the map under a position. */
async function colourAt(theme: 'day' | 'night', lon: number, lat: number, zoom: number): Promise<string> {
  const { tile, px, py } = place(lon, lat, zoom);
  const answer = await get(`/tiles/${theme}/${tile}.png`);
  const ctx = createCanvas(256, 256).getContext('2d');
  ctx.drawImage(await loadImage(Buffer.from(await answer.arrayBuffer())), 0, 0);
  return `#${[...ctx.getImageData(px, py, 1, 1).data.slice(0, 3)].map((v) => v.toString(16).padStart(2, '0')).join('')}`;
}

describe('the product map', () => {
  it('answers a PNG with a tag and a cache time, and 304 to the same tag', async () => {
    const first = await get('/tiles/day/0/0/0.png');
    expect(first.status).toBe(200);
    expect(first.headers.get('content-type')).toBe('image/png');
    expect(first.headers.get('cache-control')).toContain('max-age=86400');
    // fetch adds "no-cache" beside a tag of one's own, so this asks plainly, as a browser does.
    const again = await new Promise((resolve) => httpGet(`${base}/tiles/day/0/0/0.png`, { headers: { 'if-none-match': first.headers.get('etag') ?? '' } }, (res) => resolve(res.resume().statusCode)));
    expect(again).toBe(304);
  });

  it('is never blank: any place on Earth at any zoom from 0 to 15 has a tile in both themes', async () => {
    const places = [[-117.28, -44.49], [-117.43, -44.48], [0, 0], [179.99, 66], [-179.99, -80], [10, 50], [-150, 84.9], [60, -84.9]] as const;
    for (const zoom of [0, 3, 5, 6, 9, 12, 15])
      for (const [lon, lat] of places)
        for (const theme of ['day', 'night']) expect((await get(`/tiles/${theme}/${place(lon, lat, zoom).tile}.png`)).status).toBe(200);
  });

  it('shows land as land and water as water, far away and in the district', async () => {
    expect(await colourAt('day', 20, 48, 9)).toBe(palettes.day.land);
    expect(await colourAt('day', -140, -40, 9)).toBe(palettes.day.deep);
    expect(await colourAt('night', -140, -40, 15)).toBe(palettes.night.deep);
    // The coast receptors and the demonstration release at sea lie on water, the lake intake on the lake.
    expect(await colourAt('day', -117.43, -44.4792, 15)).toBe(palettes.day.water);
    expect(await colourAt('day', -117.372, -44.545, 15)).toBe(palettes.day.water);
    expect(await colourAt('day', -116.8765, -44.561, 15)).toBe(palettes.day.water);
  });

  it('keeps district tiles once drawn and does not keep tiles from elsewhere', async () => {
    const near = place(-117.05, -44.5, 13).tile.split('/').map(Number);
    const far = place(10, 50, 13).tile.split('/').map(Number);
    await get(`/tiles/day/${near.join('/')}.png`);
    await get(`/tiles/day/${far.join('/')}.png`);
    const db = new Database(join(folder, 'downreach-day.mbtiles'), { readonly: true });
    const stored = ([z, x, y]: number[]) => db.prepare('SELECT count(*) AS n FROM tiles WHERE zoom_level = ? AND tile_column = ? AND tile_row = ?').get(z, x, 2 ** z! - 1 - y!) as { n: number };
    expect(stored(near).n).toBe(1);
    expect(stored(far).n).toBe(0);
    db.close();
  });

  it('draws the same tile byte for byte again', async () => {
    const path = `/tiles/night/${place(-117.06, -44.48, 14).tile}.png`;
    const first = Buffer.from(await (await get(path)).arrayBuffer());
    const other = mkdtempSync(join(tmpdir(), 'downreach-tiles-'));
    const second = createTilesRouter({ folder: other });
    const twin = createServer(express().use('/tiles', second));
    await new Promise<void>((resolve) => twin.listen(0, '127.0.0.1', resolve));
    const answer = Buffer.from(await (await fetch(`http://127.0.0.1:${(twin.address() as AddressInfo).port}${path}`)).arrayBuffer());
    twin.closeAllConnections();
    second.close();
    rmSync(other, { recursive: true, force: true });
    expect(answer.equals(first)).toBe(true);
  });

  it.each(['/tiles/day/16/0/0.png', '/tiles/day/3/8/0.png', '/tiles/day/3/0/8.png', '/tiles/day/-1/0/0.png', '/tiles/day/a/0/0.png', '/tiles/day/3/0/0.pbf', '/tiles/dusk/3/0/0.png', '/tiles/%2e%2e%2fdownreach-day/0/0/0.png', '/tiles/', '/tiles/day'])('answers 404 as a problem to %s', async (path) => {
    const answer = await get(path);
    expect(answer.status).toBe(404);
    expect(answer.headers.get('content-type')).toContain('application/problem+json');
  });
});

describe('maps of the operator', () => {
  const makeArchive = (name: string, metadata: Record<string, string>) => {
    const db = new Database(join(folder, `${name}.mbtiles`));
    db.exec('CREATE TABLE metadata (name TEXT, value TEXT); CREATE TABLE tiles (zoom_level INTEGER, tile_column INTEGER, tile_row INTEGER, tile_data BLOB)');
    for (const [key, value] of Object.entries(metadata)) db.prepare('INSERT INTO metadata VALUES (?, ?)').run(key, value);
    db.prepare('INSERT INTO tiles VALUES (?, ?, ?, ?)').run(2, 1, 3, Buffer.from('picture'));
    db.close();
  };

  it('are listed as soon as their file lies in the folder, and served with rows counted from the north', async () => {
    makeArchive('survey-2030', { name: 'Harbour survey', attribution: 'Harbour office', format: 'jpg', bounds: '-117.4,-44.6,-117.2,-44.4', minzoom: '2', maxzoom: '2' });
    const index = tileIndexSchema.parse(await (await get('/tiles/index.json')).json());
    expect(index.maps.map((map) => map.id)).toEqual(['day', 'night', 'survey-2030']);
    expect(index.maps[2]).toMatchObject({ name: 'Harbour survey', attribution: 'Harbour office', bounds: [-117.4, -44.6, -117.2, -44.4], minzoom: 2, maxzoom: 2, url: '/tiles/survey-2030/{z}/{x}/{y}.jpg' });
    const tile = await get('/tiles/survey-2030/2/1/0.jpg');
    expect(tile.headers.get('content-type')).toBe('image/jpeg');
    expect(await tile.text()).toBe('picture');
    expect((await get('/tiles/survey-2030/2/1/3.jpg')).status).toBe(404);
  });

  it('that cannot be shown are named with the reason', async () => {
    makeArchive('streets', { name: 'Streets', format: 'pbf' });
    writeFileSync(join(folder, 'broken.mbtiles'), 'not a database');
    copyFileSync(join(folder, 'streets.mbtiles'), join(folder, 'my map.mbtiles'));
    const { unusable } = tileIndexSchema.parse(await (await get('/tiles/index.json')).json());
    const reasons = new Map(unusable.map(({ file, reason }) => [file, reason]));
    expect(reasons.get('streets.mbtiles')).toContain('"pbf"');
    expect(reasons.get('broken.mbtiles')).toContain('cannot be read');
    expect(reasons.get('my map.mbtiles')).toContain('Rename');
  });
});

it('a first start draws what the first look needs, a second one nothing', async () => {
  const fresh = mkdtempSync(join(tmpdir(), 'downreach-tiles-'));
  const lines: string[] = [];
  await ensureTiles({ folder: fresh, log: (line) => lines.push(line) });
  await ensureTiles({ folder: fresh, log: (line) => lines.push(line) });
  const db = new Database(join(fresh, 'downreach-night.mbtiles'), { readonly: true });
  const { most } = db.prepare('SELECT max(zoom_level) AS most FROM tiles').get() as { most: number };
  db.close();
  rmSync(fresh, { recursive: true, force: true });
  expect(lines).toHaveLength(1);
  expect(most).toBe(15);
}, 60_000);

it('latitude and mercator row are inverse to each other', () => {
  for (const lat of [-84, -44.5, 0, 51, 84]) expect(latitudeOf(mercatorY(lat))).toBeCloseTo(lat, 9); // rounding of doubles
});
