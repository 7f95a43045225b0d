import 'leaflet/dist/leaflet.css';
import './map.css';
import type L from 'leaflet';
import { useEffect, useId, useMemo, useState, type ReactNode } from 'react';
import { MapContainer } from 'react-leaflet';
import type { LonLat } from '../../shared/schemas/basics';
import { BaseTiles } from './base-tiles';
import { fitAll } from './fit';
import { MapFoot } from './map-foot';
import { MapKeys } from './map-keys';
import { MapToolbar } from './map-toolbar';
import { MapStateContext, type MapTool } from './map-tools';
import { MeasureTool } from './measure-tool';
import type { MapTheme } from './palette';
import { PointerRelay } from './pointer-relay';
import { ZoomClasses } from './zoom-classes';

export type InitialView = { centre: LonLat; zoom: number } | { bounds: [LonLat, LonLat] };

type Props = {
  theme: MapTheme;
  /** What the map shows, for those who hear it. */
  label: string;
  /** Clicked or, by keyboard, chosen with Enter at the cross-hair. */
  onClick?: (position: LonLat) => void;
  onPointer?: (position: LonLat | null) => void;
  initialView?: InitialView;
  /** Where "show everything" goes and what the map fits to whenever it changes. */
  fitTo?: [LonLat, LonLat] | null;
  children?: ReactNode;
};

const toLeaflet = ([sw, ne]: [LonLat, LonLat]): L.LatLngBoundsExpression => [[sw[1], sw[0]], [ne[1], ne[0]]];
/** The demonstration district; used when neither a view nor bounds are given. */
const DISTRICT: [LonLat, LonLat] = [[-117.6, -44.72], [-116.6, -44.28]];

export function DistrictMap({ theme, label, onClick, onPointer, initialView, fitTo = null, children }: Props) {
  const [map, setMap] = useState<L.Map | null>(null);
  const [tool, setTool] = useState<MapTool>('none');
  const [byKeyboard, setByKeyboard] = useState(false);
  const helpId = useId();
  const state = useMemo(() => ({ theme, tool, setTool, byKeyboard }), [theme, tool, byKeyboard]);
  const first = initialView ?? { bounds: fitTo ?? DISTRICT };
  const everything = fitTo ?? ('bounds' in first ? first.bounds : null);

  useEffect(() => {
    if (!map) return;
    const element = map.getContainer();
    element.setAttribute('role', 'application');
    element.setAttribute('aria-roledescription', 'map');
    element.setAttribute('aria-label', label);
    element.setAttribute('aria-describedby', helpId);
    element.tabIndex = 0;
  }, [map, label, helpId]);

  useEffect(() => {
    if (!map) return;
    const observer = new ResizeObserver(() => map.invalidateSize({ animate: false, pan: false }));
    observer.observe(map.getContainer());
    return () => observer.disconnect();
  }, [map]);

  const fitKey = fitTo ? fitTo.flat().join(',') : '';
  useEffect(() => {
    if (map && fitTo) fitAll(map, fitTo, false);
    // Bounds are compared by value: a page may build the same ones anew at each render.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [map, fitKey]);

  return (
    <MapStateContext value={state}>
      <div className="district-map" data-map-theme={theme}>
        <p id={helpId} className="sr-only">
          Arrow keys move the map, plus and minus zoom, Home shows everything, Enter chooses the place under the cross-hair. Everything on the map is also in the lists beside it.
        </p>
        <MapContainer
          ref={setMap}
          className="district-map-stage"
          minZoom={3}
          maxZoom={17}
          zoomControl={false}
          attributionControl={false}
          keyboard={false}
          wheelPxPerZoomLevel={90}
          worldCopyJump
          maxBounds={[[-85.05, -540], [85.05, 540]]}
          {...('bounds' in first ? { bounds: toLeaflet(first.bounds), boundsOptions: { padding: [24, 24] } } : { center: [first.centre[1], first.centre[0]] as L.LatLngTuple, zoom: first.zoom })}
        >
          <ZoomClasses />
          <BaseTiles theme={theme} />
          <PointerRelay onClick={onClick} onPointer={onPointer} />
          <MapKeys onKeyboard={setByKeyboard} fitTo={everything} />
          {tool === 'measure' && <MeasureTool />}
          {children}
          <MapToolbar fitTo={everything} />
          <MapFoot />
        </MapContainer>
      </div>
    </MapStateContext>
  );
}
