import { useCallback, useMemo } from 'react';
import type { EstimateWater } from '../../shared/schemas/estimate';
import type { Level } from '../../shared/schemas/estimate-result';
import type { Draw } from './canvas-overlay';
import { drawnLevels, type Frame } from './frame';
import { paintBands, paintLines } from './frame-painter';
import type { MapTheme } from './palette';
import { prepareFrame } from './sheets';
import { useCanvasOverlay } from './use-canvas-overlay';
import { waterPathKeeper } from './water-path';

const pane = { name: 'bands', zIndex: 420 };
const canvases = ['map-bands', 'map-lines'];

type Props = { frame: Frame | null; levels: readonly Level[]; water: EstimateWater; theme: MapTheme; measure?: 'mass' | 'count'; ramp?: readonly string[]; labelOf?: (level: Level) => string };

/** The cloud at one time: contour bands and isolines. */
export function FrameLayer({ frame, levels, water, theme, measure = 'mass', ramp, labelOf }: Props) {
  const drawn = useMemo(() => drawnLevels(levels), [levels]);
  const waterPath = useMemo(() => waterPathKeeper(water), [water]);
  const prepared = useMemo(() => (frame ? prepareFrame(frame, drawn, water) : null), [frame, drawn, water]);
  const draw = useCallback<Draw>(
    (view, [bands, lines]) => {
      if (!prepared) return [];
      const path = prepared.clipsToWater ? waterPath(view) : null;
      const options = { theme, measure, ramp, labelOf };
      paintBands(bands!, prepared, view, path, options);
      return paintLines(lines!, prepared, view, path, options);
    },
    [prepared, waterPath, theme, measure, ramp, labelOf],
  );
  useCanvasOverlay(pane, canvases, draw);
  return null;
}
