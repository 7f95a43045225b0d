import { useCallback, useMemo } from 'react';
import type { Reach } from '../../shared/schemas/estimate';
import type { Draw } from './canvas-overlay';
import { courseOf } from './channel-course';
import { useMapState } from './map-tools';
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
  return null;
}
