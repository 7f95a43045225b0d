import { useCallback, useMemo, useState } from 'react';
import { useMap, useMapEvents } from 'react-leaflet';
import type { Reach } from '../../shared/schemas/estimate';
import type { Draw } from './canvas-overlay';
import { courseOf, ribbonPx } from './channel-course';
import { useMapState } from './map-tools';
import { metresPerPixelAt } from './mercator';
import { paintRiver, type RiverReach } from './river-painter';
import { useCanvasOverlay } from './use-canvas-overlay';

const pane = { name: 'river', zIndex: 410 };
const canvases = ['map-river'];

/** Reaches as ribbons wide enough to be seen, with flow arrows, chainages and, closer by, the names of the banks. */
export function RiverLayer({ reaches, widthM }: { reaches: readonly Reach[]; widthM?: (reach: Reach) => number }) {
  const { theme } = useMapState();
  const drawn = useMemo<RiverReach[]>(
    () => reaches.map((reach) => ({ course: courseOf(reach), widthM: widthM?.(reach) ?? reach.hydraulics[0]!.widthM, prefix: reach.chainagePrefix })),
    [reaches, widthM],
  );
  const draw = useCallback<Draw>((view, [context]) => paintRiver(context!, drawn, view, theme), [drawn, theme]);
  useCanvasOverlay(pane, canvases, draw);
  const times = useWidening(drawn);
  return times >= 2 ? <p className="map-ribbon-note">River drawn {times} times its width</p> : null;
}

/** How many times wider than it is the widest reach is drawn, where one is near enough to take the ribbon for the river. */
function useWidening(reaches: readonly RiverReach[]): number {
  const map = useMap();
  const read = () => {
    const zoom = map.getZoom();
    const metresPerPixel = metresPerPixelAt(map.getCenter().lat, zoom);
    const widest = reaches.reduce((most, reach) => Math.max(most, reach.widthM), 0);
    return zoom < 12 || widest === 0 ? 0 : Math.round((ribbonPx(widest, metresPerPixel, zoom) * metresPerPixel) / widest);
  };
  const [times, setTimes] = useState(read);
  useMapEvents({ zoomend: () => setTimes(read()) });
  return times;
}
