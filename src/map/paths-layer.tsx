import { useCallback, useMemo } from 'react';
import type { EstimateWater } from '../../shared/schemas/estimate';
import type { Paths } from '../../shared/schemas/estimate-result';
import type { Draw } from './canvas-overlay';
import { mapInk, type MapTheme } from './palette';
import { pathTraces, type PathTrace } from './path-traces';
import { useCanvasOverlay } from './use-canvas-overlay';
import { waterPathKeeper } from './water-path';

const pane = { name: 'paths', zIndex: 422 };
const canvases = ['map-paths'];
/** Many lines over one another make the way darker; one alone is just seen. */
const OPACITY = 0.22;
const WIDTH_PX = 0.8;

/** Random paths as thin lines of ink from the release to where each is at the time shown. */
export function PathsLayer({ paths, water, timeS, theme }: { paths: Paths; water: EstimateWater; timeS: number; theme: MapTheme }) {
  const traces = useMemo(() => pathTraces(paths, water), [paths, water]);
  const waterPath = useMemo(() => waterPathKeeper(water), [water]);
  const shown = useMemo(() => paths.timesS.filter((t) => t <= timeS).length, [paths, timeS]);
  const draw = useCallback<Draw>(
    (view, [context]) => {
      const clip = waterPath(view);
      context!.save();
      if (clip) context!.clip(clip, 'evenodd');
      context!.strokeStyle = mapInk[theme].ink;
      context!.globalAlpha = OPACITY;
      context!.lineWidth = WIDTH_PX;
      context!.lineJoin = 'round';
      for (const trace of traces) strokeTrace(context!, trace, trace.upTo[shown - 1 - trace.firstTime] ?? 0, view);
      context!.restore();
      return [];
    },
    [traces, waterPath, shown, theme],
  );
  useCanvasOverlay(pane, canvases, draw);
  return null;
}

const pixel = { x: 0, y: 0 };

function strokeTrace(context: CanvasRenderingContext2D, trace: PathTrace, vertices: number, view: Parameters<Draw>[0]): void {
  if (vertices < 2) return;
  context.beginPath();
  for (let i = 0; i < vertices; i++) {
    trace.at(i, view, pixel);
    if (i === 0) context.moveTo(pixel.x, pixel.y);
    else context.lineTo(pixel.x, pixel.y);
  }
  context.stroke();
}
