import { useCallback, useMemo } from 'react';
import type { EstimateWater } from '../../shared/schemas/estimate';
import type { Level } from '../../shared/schemas/estimate-result';
import type { Draw } from './canvas-overlay';
import { drawnLevels, type Frame } from './frame';
import { paintEnvelope } from './envelope-painter';
import type { MapTheme } from './palette';
import { prepareFrame } from './sheets';
import { useCanvasOverlay } from './use-canvas-overlay';
import { waterPathKeeper } from './water-path';

const pane = { name: 'envelope', zIndex: 425 };
const canvases = ['map-envelope'];

/** Everywhere the cloud comes at any time: the outline of the lowest action value, or of the lowest level when there is none. */
export function EnvelopeLayer({ envelope, levels, water, theme, measure = 'mass' }: { envelope: Frame | null; levels: readonly Level[]; water: EstimateWater; theme: MapTheme; measure?: 'mass' | 'count' }) {
  const outlined = useMemo(() => {
    const drawn = drawnLevels(levels);
    return (drawn.find((level) => level.isActionValue) ?? drawn[0]) || null;
  }, [levels]);
  const waterPath = useMemo(() => waterPathKeeper(water), [water]);
  const prepared = useMemo(() => (envelope && outlined ? prepareFrame(envelope, [outlined], water) : null), [envelope, outlined, water]);
  const draw = useCallback<Draw>(
    (view, [context]) => (prepared ? paintEnvelope(context!, prepared, view, prepared.clipsToWater ? waterPath(view) : null, { theme, measure }) : []),
    [prepared, waterPath, theme, measure],
  );
  useCanvasOverlay(pane, canvases, draw);
  return null;
}
