import { useState } from 'react';
import { useMap, useMapEvents } from 'react-leaflet';
import type { LonLat } from '../../shared/schemas/basics';
import { fitAll } from './fit';
import { GoTo } from './go-to';
import { MapIcon, type MapIconName } from './map-icons';
import { useMapState } from './map-tools';
import { useShield } from './use-shield';

function Tool({ icon, label, onClick, pressed, disabled = false }: { icon: MapIconName; label: string; onClick: () => void; pressed?: boolean; disabled?: boolean }) {
  return (
    <button type="button" className="map-tool" aria-label={label} title={label} aria-pressed={pressed} aria-disabled={disabled || undefined} onClick={disabled ? undefined : onClick}>
      <MapIcon name={icon} />
    </button>
  );
}

export function MapToolbar({ fitTo }: { fitTo: [LonLat, LonLat] | null }) {
  const map = useMap();
  const shield = useShield();
  const { tool, setTool } = useMapState();
  const [zoom, setZoom] = useState(map.getZoom());
  const [goesTo, setGoesTo] = useState(false);
  useMapEvents({ zoomend: () => setZoom(map.getZoom()) });
  return (
    <div className="map-toolbar" ref={shield}>
      <div className="map-tool-group" role="group" aria-label="Zoom">
        <Tool icon="plus" label="Zoom in" disabled={zoom >= map.getMaxZoom()} onClick={() => map.zoomIn(1)} />
        <Tool icon="minus" label="Zoom out" disabled={zoom <= map.getMinZoom()} onClick={() => map.zoomOut(1)} />
        {fitTo && <Tool icon="fit" label="Show everything" onClick={() => fitAll(map, fitTo, true)} />}
      </div>
      <div className="map-tool-group" role="group" aria-label="Map tools">
        <Tool icon="measure" label="Measure a distance" pressed={tool === 'measure'} onClick={() => setTool(tool === 'measure' ? 'none' : 'measure')} />
        <Tool icon="goTo" label="Go to coordinates" pressed={goesTo} onClick={() => setGoesTo(!goesTo)} />
      </div>
      {goesTo && <GoTo onClose={() => setGoesTo(false)} />}
    </div>
  );
}
