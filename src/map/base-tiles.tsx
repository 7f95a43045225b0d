import L from 'leaflet';
import { useEffect } from 'react';
import { useMap } from 'react-leaflet';
import { apiPaths } from '../../shared/api-paths';
import type { MapTheme } from './palette';

/** Tiles are drawn up to this zoom; above it they are enlarged. */
const DEEPEST_TILES = 15;

/** The base map of the theme. A tile that fails leaves the ground colour of the theme, never a hole. */
export function BaseTiles({ theme }: { theme: MapTheme }) {
  const map = useMap();
  useEffect(() => {
    const layer = L.tileLayer(apiPaths.tile(theme), { minZoom: 3, maxZoom: 17, maxNativeZoom: DEEPEST_TILES, noWrap: false, keepBuffer: 3, updateWhenIdle: false });
    layer.addTo(map);
    return () => void layer.remove();
  }, [map, theme]);
  return null;
}
