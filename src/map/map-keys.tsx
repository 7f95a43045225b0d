import { useEffect, useState } from 'react';
import { useMap } from 'react-leaflet';
import type { LonLat } from '../../shared/schemas/basics';
import { fitAll } from './fit';
import { formatCoordinates } from './coordinates';
import { useMapState } from './map-tools';
import { lonLatOf } from './pointer-relay';

const STEP_PX = 80;
const FINE_STEP_PX = 8;
const moves: Record<string, [number, number]> = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, -1], ArrowDown: [0, 1] };

type Props = { onKeyboard: (byKeyboard: boolean) => void; fitTo: [LonLat, LonLat] | null };

/** Works the map by keyboard: arrows (finer with Shift), plus and minus, Home; Enter is a click at the cross-hair. */
export function MapKeys({ onKeyboard, fitTo }: Props) {
  const map = useMap();
  const { byKeyboard } = useMapState();
  const [spoken, setSpoken] = useState(() => formatCoordinates(lonLatOf(map.getCenter()), 'decimal'));

  useEffect(() => {
    const element = map.getContainer();
    const onKeyDown = (event: KeyboardEvent) => {
      if (event.target !== element || event.ctrlKey || event.metaKey || event.altKey) return;
      if (!act(event)) return;
      event.preventDefault();
      onKeyboard(true);
    };
    const act = (event: KeyboardEvent): boolean => {
      const move = moves[event.key];
      if (move) map.panBy([move[0] * (event.shiftKey ? FINE_STEP_PX : STEP_PX), move[1] * (event.shiftKey ? FINE_STEP_PX : STEP_PX)], { animate: false });
      else if (event.key === '+' || event.key === '=') map.zoomIn(1);
      else if (event.key === '-' || event.key === '_') map.zoomOut(1);
      else if (event.key === 'Home' && fitTo) fitAll(map, fitTo, true);
      else if (event.key === 'Enter' || event.key === ' ') map.fire('click', { latlng: map.getCenter() });
      else return false;
      return true;
    };
    const byPointer = () => onKeyboard(false);
    const speak = () => setSpoken(formatCoordinates(lonLatOf(map.getCenter()), 'decimal'));
    element.addEventListener('keydown', onKeyDown);
    element.addEventListener('pointerdown', byPointer);
    element.addEventListener('blur', byPointer);
    map.on('moveend', speak);
    return () => {
      element.removeEventListener('keydown', onKeyDown);
      element.removeEventListener('pointerdown', byPointer);
      element.removeEventListener('blur', byPointer);
      map.off('moveend', speak);
    };
  }, [map, onKeyboard, fitTo]);

  return (
    <>
      {byKeyboard && (
        <svg className="map-cross-hair" viewBox="-24 -24 48 48" aria-hidden="true">
          <path className="map-cross-hair-halo" d="M-22 0H-5M5 0H22M0 -22V-5M0 5V22" />
          <path d="M-22 0H-5M5 0H22M0 -22V-5M0 5V22" />
          <circle r="1.2" />
        </svg>
      )}
      <p className="sr-only" aria-live="polite">
        {byKeyboard ? `Cross-hair at ${spoken}` : ''}
      </p>
    </>
  );
}
