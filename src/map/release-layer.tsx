import { useMemo } from 'react';
import { useMap } from 'react-leaflet';
import type { LonLat } from '../../shared/schemas/basics';
import { escapeHtml } from './escape-html';
import { useMarks, type Mark } from './use-marks';

export type ReleaseMark = { id: string; name: string; position: LonLat; timeLabel: string };

type Props = {
  releases: readonly ReleaseMark[];
  selectedId?: string | null;
  onSelect?: (releaseId: string) => void;
  /**
   * Asked while a release is dragged or moved by arrow keys (`ended` false while still in hand): answers where it
   * snaps to, null where it may not lie, and then it goes back.
   */
  onMove?: (releaseId: string, position: LonLat, ended: boolean) => LonLat | null;
};

/** More than a caller rounds chainages by at the closest zoom, so that a step never snaps back. */
const STEP_PX = 8;
const BIG_STEP_PX = 48;
const steps: Record<string, [number, number]> = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, -1], ArrowDown: [0, 1] };
/** Releases as plain rings with their time; dragged by hand or moved by arrow keys (Shift for long steps). */
export function ReleaseLayer({ releases, selectedId = null, onSelect, onMove }: Props) {
  const map = useMap();
  const marks = useMemo<Mark[]>(
    () =>
      releases.map((release) => ({
        id: release.id,
        position: release.position,
        html: `<svg class="release-ring" viewBox="-22 -22 44 44" width="44" height="44" aria-hidden="true"><circle class="release-ring-halo" r="11"/><circle r="11"/><circle class="release-ring-dot" r="2"/></svg><span class="mark-label mark-label-time">${escapeHtml(release.timeLabel)}</span>`,
        size: [44, 44],
        anchor: [22, 22],
        className: `release-mark${release.id === selectedId ? ' is-selected' : ''}${onMove ? ' is-movable' : ''}`,
        label: `Release ${release.name}, ${release.timeLabel}${onMove ? '. Arrow keys move it' : ''}`,
        pressed: onSelect ? release.id === selectedId : undefined,
        draggable: onMove !== undefined,
        zIndexOffset: 2_000,
      })),
    [releases, selectedId, onMove, onSelect],
  );
  useMarks(marks, {
    onPress: onSelect,
    onDrag: onMove,
    onKey: (id, event) => {
      const step = steps[event.key];
      const release = releases.find((candidate) => candidate.id === id);
      if (!step || !release || !onMove) return;
      event.preventDefault();
      event.stopPropagation();
      const size = event.shiftKey ? BIG_STEP_PX : STEP_PX;
      const at = map.latLngToContainerPoint([release.position[1], release.position[0]]).add([step[0] * size, step[1] * size]);
      const { lat, lng } = map.containerPointToLatLng(at);
      onMove(id, [lng, lat], true);
    },
  });
  return null;
}
