/**
 * Draws the whole map into MBTiles files, both themes: the Earth to zoom 5, the island to 12, the district to 15.
 * The server needs none of this: it draws what is missing when it is asked for.
 *
 *   npm run tiles [-- folder]         default folder: tiles/ in DOWNREACH_DATA, or data/tiles
 */
import { join } from 'node:path';
import { allPlaces, MapStore } from './map-store';
import { sharedRenderer } from './render/renderer';

const folder = process.argv[2] ?? join(process.env['DOWNREACH_DATA'] ?? 'data', 'tiles');
const started = Date.now();
const store = new MapStore(sharedRenderer(), folder);
const total = 2 * [...allPlaces()].length;
const drawn = await store.fill(allPlaces(), (count) => {
  if (count % 800 < 8) console.error(`${count} of at most ${total} tiles drawn, ${((Date.now() - started) / 1000).toFixed(0)} s`);
});
for (const { theme, tiles, images, bytes } of store.sizes()) console.log(`${theme}: ${tiles} tiles, ${images} different, ${(bytes / 1e6).toFixed(1)} MB`);
console.log(`${drawn} drawn in ${((Date.now() - started) / 1000).toFixed(1)} s into ${folder}`);
store.close();
