import { useMemo } from 'react';
import type { LonLat } from '../../shared/schemas/basics';
import { escapeHtml } from './escape-html';
import { useMarks, type Mark } from './use-marks';

export type StationMark = { id: string; code: string; name: string; kind: 'gauge' | 'sampling'; position: LonLat };

const drawings = {
  gauge: 'M-2 -7V7M-2 -6H4M-2 -3H2M-2 0H4M-2 3H2M-2 6H4',
  sampling: 'M-2.5 -7H2.5M-1.5 -7V-2L-4 6A1.5 1.5 0 0 0 -2.5 7.5H2.5A1.5 1.5 0 0 0 4 6L1.5 -2V-7',
} as const;
const words = { gauge: 'gauging station', sampling: 'sampling point' } as const;
/** Gauges (a small staff) and sampling points (a small bottle). */
export function StationLayer({ stations, onSelect }: { stations: readonly StationMark[]; onSelect?: (stationId: string) => void }) {
  const marks = useMemo<Mark[]>(
    () =>
      stations.map((station) => ({
        id: station.id,
        position: station.position,
        html: `<svg class="station" viewBox="-10 -10 20 20" width="20" height="20" aria-hidden="true"><circle class="station-ground" r="9.2"/><path d="${drawings[station.kind]}"/></svg><span class="mark-label mark-label-small">${escapeHtml(station.code)}</span>`,
        size: [24, 24],
        anchor: [12, 12],
        className: 'station-mark',
        label: `${station.code} ${station.name}, ${words[station.kind]}`,
      })),
    [stations],
  );
  useMarks(marks, { onPress: onSelect });
  return null;
}
