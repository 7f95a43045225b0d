import { useEffect, useState } from 'react';
import { useMap, useMapEvents } from 'react-leaflet';
import type { LonLat } from '../../shared/schemas/basics';
import { coordinateStyleName, coordinateStyles, formatCoordinates, type CoordinateStyle } from './coordinates';
import { useMapState } from './map-tools';
import { lonLatOf } from './pointer-relay';
import { ScaleBar } from './scale-bar';
import { useShield } from './use-shield';

const REMEMBERED = 'downreach.coordinates';
const remembered = (): CoordinateStyle => coordinateStyles.find((style) => style === localStorage.getItem(REMEMBERED)) ?? 'decimal';

/** Scale, coordinates under the pointer (or the cross-hair) and where the map's data comes from. */
export function MapFoot() {
  const shield = useShield();
  return (
    <div className="map-foot">
      <ScaleBar />
      <div ref={shield}>
        <CoordinateReadOut />
      </div>
      <p className="map-attribution">District map: Downreach · World: Natural Earth</p>
    </div>
  );
}

function CoordinateReadOut() {
  const map = useMap();
  const { byKeyboard } = useMapState();
  const [style, setStyle] = useState<CoordinateStyle>(remembered);
  const [pointer, setPointer] = useState<LonLat | null>(null);
  const [centre, setCentre] = useState<LonLat>(() => lonLatOf(map.getCenter()));
  useMapEvents({ mousemove: (event) => setPointer(lonLatOf(event.latlng)), mouseout: () => setPointer(null), move: () => setCentre(lonLatOf(map.getCenter())) });
  useEffect(() => localStorage.setItem(REMEMBERED, style), [style]);
  const isCentre = byKeyboard || pointer === null;
  const next = coordinateStyles[(coordinateStyles.indexOf(style) + 1) % coordinateStyles.length]!;
  return (
    <button type="button" className="map-coordinates" onClick={() => setStyle(next)} title={`Coordinates in ${coordinateStyleName[style]}. Press for ${coordinateStyleName[next]}`}>
      <span className="map-coordinates-where">{isCentre ? 'Centre' : 'Pointer'}</span> {formatCoordinates(isCentre ? centre : pointer, style)}
    </button>
  );
}
