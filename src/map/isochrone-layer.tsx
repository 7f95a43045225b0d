import { useCallback, useMemo } from 'react';
import type { EstimateWater } from '../../shared/schemas/estimate';
import type { Reached } from '../../shared/schemas/estimate-result';
import type { Draw } from './canvas-overlay';
import { isochroneLines, paintIsochrones } from './isochrone-painter';
import type { MapTheme } from './palette';
import { useCanvasOverlay } from './use-canvas-overlay';

const pane = { name: 'isochrones', zIndex: 428 };
const canvases = ['map-isochrones'];

type Props = { reached: Pick<Reached, 'isochrones'>; water: EstimateWater; theme: MapTheme; labelOf: (timeS: number) => string };

/** Lines of first arrival: where the value has come by each of some round times, with the time printed on the line. */
export function IsochroneLayer({ reached, water, theme, labelOf }: Props) {
  const lines = useMemo(() => isochroneLines(reached.isochrones, water), [reached, water]);
  const draw = useCallback<Draw>((view, [context]) => paintIsochrones(context!, lines, view, theme, labelOf), [lines, theme, labelOf]);
  useCanvasOverlay(pane, canvases, draw);
  return null;
}
