import { useMapEvents } from 'react-leaflet';
import type { LonLat } from '../../shared/schemas/basics';
import { useMapState, type PointerHandler } from './map-tools';

export const lonLatOf = ({ lng, lat }: { lng: number; lat: number }): LonLat => [((((lng + 180) % 360) + 360) % 360) - 180, Math.max(-85, Math.min(85, lat))];

/** Hands the map's clicks and pointer positions to the page, unless a tool has them. */
export function PointerRelay({ onClick, onPointer }: { onClick?: (position: LonLat) => void; onPointer?: PointerHandler }) {
  const { tool } = useMapState();
  useMapEvents({
    click: (event) => {
      if (tool === 'none') onClick?.(lonLatOf(event.latlng));
    },
    mousemove: (event) => onPointer?.(lonLatOf(event.latlng)),
    mouseout: () => onPointer?.(null),
  });
  return null;
}
