import { useEffect, useState } from 'react';
import { useMap } from 'react-leaflet';
import { CanvasOverlay, ensurePane, type Draw } from './canvas-overlay';

/** Keeps canvases on the map while mounted and draws with the newest `draw`. */
export function useCanvasOverlay(pane: { name: string; zIndex: number }, classNames: readonly string[], draw: Draw): void {
  const map = useMap();
  const [overlay] = useState(() => new CanvasOverlay(ensurePane(map, pane.name, pane.zIndex), classNames, draw));
  useEffect(() => {
    overlay.addTo(map);
    return () => void overlay.remove();
  }, [map, overlay]);
  useEffect(() => overlay.setDraw(draw), [overlay, draw]);
}
