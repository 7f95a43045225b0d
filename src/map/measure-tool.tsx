import L from 'leaflet';
import { useEffect, useState } from 'react';
import { useMap, useMapEvents } from 'react-leaflet';
import { distanceM } from '../../shared/geo';
import type { LonLat } from '../../shared/schemas/basics';
import { parseCoordinates } from './coordinates';
import { useMapState } from './map-tools';
import { lonLatOf } from './pointer-relay';
import { useShield } from './use-shield';

/** Length along positions, m (great circles). */
export const lengthAlongM = (positions: readonly LonLat[]): number => positions.reduce((sum, position, k) => sum + (k === 0 ? 0 : distanceM(positions[k - 1]!, position)), 0);

/** Metres below 1 km, then kilometres with figures that the hand can set on a map. */
export const lengthText = (lengthM: number): string => (lengthM < 1_000 ? `${Math.round(lengthM)} m` : `${(lengthM / 1_000).toFixed(lengthM < 10_000 ? 2 : 1)} km`);

const toLatLng = ([lon, lat]: LonLat): L.LatLngTuple => [lat, lon];

/** A tape: click or type positions, read the running length; Escape ends it, Backspace takes the last back. */
export function MeasureTool() {
  const map = useMap();
  const shield = useShield();
  const { setTool } = useMapState();
  const [positions, setPositions] = useState<LonLat[]>([]);
  const [pointer, setPointer] = useState<LonLat | null>(null);
  const [typed, setTyped] = useState('');
  const [refusal, setRefusal] = useState('');
  useMapEvents({
    click: (event) => setPositions((before) => [...before, lonLatOf(event.latlng)]),
    mousemove: (event) => setPointer(lonLatOf(event.latlng)),
    mouseout: () => setPointer(null),
  });

  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.key === 'Escape') setTool('none');
      else if (event.key === 'Backspace' && !(event.target instanceof HTMLInputElement)) setPositions((before) => before.slice(0, -1));
    };
    document.addEventListener('keydown', onKey);
    map.getContainer().classList.add('map-is-measuring');
    return () => {
      document.removeEventListener('keydown', onKey);
      map.getContainer().classList.remove('map-is-measuring');
    };
  }, [map, setTool]);

  useEffect(() => {
    const group = L.layerGroup().addTo(map);
    const ahead = pointer && positions.length > 0 ? [...positions, pointer] : positions;
    L.polyline(ahead.map(toLatLng), { className: 'map-tape', interactive: false }).addTo(group);
    for (const position of positions) L.circleMarker(toLatLng(position), { radius: 4, className: 'map-tape-knot', interactive: false }).addTo(group);
    return () => void group.remove();
  }, [map, positions, pointer]);

  const add = () => {
    const parsed = parseCoordinates(typed);
    setRefusal(parsed.ok ? '' : parsed.message);
    if (!parsed.ok) return;
    setPositions([...positions, parsed.position]);
    setTyped('');
    map.panTo(toLatLng(parsed.position));
  };
  const running = lengthAlongM(pointer && positions.length > 0 ? [...positions, pointer] : positions);
  return (
    <div className="map-panel map-measure" ref={shield}>
      <p className="map-measure-figure" aria-live="polite">
        {positions.length === 0 ? 'Click the first place to measure from' : lengthText(running)}
      </p>
      <div className="map-panel-row">
        <input aria-label="Next position of the tape" placeholder="or type a position" value={typed} onChange={(event) => setTyped(event.target.value)} onKeyDown={(event) => event.key === 'Enter' && add()} autoComplete="off" spellCheck={false} />
        <button type="button" onClick={add}>Add</button>
        <button type="button" disabled={positions.length === 0} onClick={() => setPositions(positions.slice(0, -1))}>Undo</button>
        <button type="button" onClick={() => setTool('none')}>Done</button>
      </div>
      {refusal && <p className="map-panel-note" role="alert">{refusal}</p>}
    </div>
  );
}
