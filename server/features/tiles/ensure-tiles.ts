import { firstPlaces, MapStore } from '../../../tiles/map-store';
import { sharedRenderer } from '../../../tiles/render/renderer';

/**
 * Draws what the first look at the map needs and the folder does not hold yet: about 570 tiles, 3 s, 10 MB on a first
 * start, nothing afterwards. Other work runs between two tiles.
 */
export async function ensureTiles({ folder, log }: { folder: string; log: (line: string) => void }): Promise<void> {
  const startedMs = performance.now();
  const store = new MapStore(sharedRenderer(), folder);
  try {
    const drawn = await store.fill(firstPlaces());
    if (drawn > 0) log(`Map: drew ${drawn} tiles in ${((performance.now() - startedMs) / 1000).toFixed(1)} s; the rest is drawn when it is looked at`);
  } finally {
    store.close();
  }
}
