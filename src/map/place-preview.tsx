import { useEffect, useMemo, useState } from 'react';
import { useMap, useMapEvents } from 'react-leaflet';
import type { LonLat } from '../../shared/schemas/basics';
import { useMapState } from './map-tools';
import { lonLatOf } from './pointer-relay';
import { useMarks, type Mark } from './use-marks';

/** Where a click would put a release, in words; or why it cannot lie there, with the nearest place that can when there is one. */
export type Snapped = { position: LonLat; words: string } | { position: null; words: string; nearest?: LonLat | null };

const RING = '<svg viewBox="-14 -14 28 28" width="28" height="28" aria-hidden="true"><circle r="9"/></svg>';

/**
 * While mounted, shows under the pointer (or the cross-hair) where a click would place something, as `snap` tells.
 * The click itself goes to the map's `onClick`.
 */
export function PlacePreview({ snap }: { snap: (position: LonLat) => Snapped }) {
  const map = useMap();
  const { byKeyboard, tool } = useMapState();
  const [pointer, setPointer] = useState<LonLat | null>(null);
  const [centre, setCentre] = useState<LonLat>(() => lonLatOf(map.getCenter()));
  useMapEvents({ mousemove: (event) => setPointer(lonLatOf(event.latlng)), mouseout: () => setPointer(null), move: () => setCentre(lonLatOf(map.getCenter())) });
  useEffect(() => {
    map.getContainer().classList.add('map-is-placing');
    return () => map.getContainer().classList.remove('map-is-placing');
  }, [map]);

  const at = tool !== 'none' ? null : byKeyboard ? centre : pointer;
  const snapped = useMemo(() => (at ? snap(at) : null), [at, snap]);
  const marks = useMemo<Mark[]>(() => {
    const position = snapped && (snapped.position ?? snapped.nearest);
    if (!snapped || !position) return [];
    return [{ id: 'preview', position, html: RING, size: [28, 28], anchor: [14, 14], className: `map-preview${snapped.position ? '' : ' is-refused'}`, label: snapped.words, zIndexOffset: 3_000 }];
  }, [snapped]);
  useMarks(marks, {});
  return snapped ? (
    <p className="map-hint" role={byKeyboard ? 'status' : undefined}>
      {snapped.words}
    </p>
  ) : null;
}
