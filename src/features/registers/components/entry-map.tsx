import L from 'leaflet';
import { useEffect, useMemo } from 'react';
import { useMap } from 'react-leaflet';
import type { LonLat } from '../../../../shared/schemas/basics';
import type { Reach } from '../../../../shared/schemas/estimate';
import { useTheme } from '../../../lib/theme';
import { DistrictMap } from '../../../map/district-map';
import { escapeHtml } from '../../../map/escape-html';
import { RiverLayer } from '../../../map/river-layer';
import { latLngOf, useMarks, type Mark } from '../../../map/use-marks';

type Props = {
  label: string;
  reaches: readonly Reach[];
  area: readonly (readonly LonLat[])[];
  mark: { code: string; name: string; position: LonLat } | null;
  fitTo: [LonLat, LonLat] | null;
  onClick?: ((position: LonLat) => void) | undefined;
};

/** Where an entry is: its water, and its mark. */
export function EntryMap({ label, reaches, area, mark, fitTo, onClick }: Props) {
  const { theme } = useTheme();
  return (
    <div className="h-80 border border-rule lg:h-[26rem]">
      <DistrictMap theme={theme} label={label} fitTo={fitTo} {...(onClick ? { onClick } : {})}>
        {reaches.length > 0 && <RiverLayer reaches={reaches} />}
        <AreaOutline area={area} />
        <WheelWhenFocused />
        <PlaceMark mark={mark} />
      </DistrictMap>
    </div>
  );
}

/** The wheel scrolls the page over a map that stands in it; it zooms once the map has been pressed or reached by keyboard. */
function WheelWhenFocused() {
  const map = useMap();
  useEffect(() => {
    const stage = map.getContainer();
    const zoom = () => map.scrollWheelZoom.enable();
    const scroll = () => map.scrollWheelZoom.disable();
    scroll();
    stage.addEventListener('focusin', zoom);
    stage.addEventListener('focusout', scroll);
    return () => {
      stage.removeEventListener('focusin', zoom);
      stage.removeEventListener('focusout', scroll);
    };
  }, [map]);
  return null;
}

/** The outline as it is written, islands cut out. */
function AreaOutline({ area }: { area: Props['area'] }) {
  const map = useMap();
  useEffect(() => {
    if (area.length === 0) return;
    const shape = L.polygon(area.map((ring) => ring.map(latLngOf)), { className: 'area-outline', interactive: false }).addTo(map);
    return () => {
      shape.remove();
    };
  }, [map, area]);
  return null;
}

function PlaceMark({ mark }: { mark: Props['mark'] }) {
  const [lon, lat] = mark?.position ?? [null, null];
  const code = mark?.code ?? '';
  const name = mark?.name ?? '';
  const marks = useMemo<Mark[]>(() => {
    if (lon === null || lat === null) return [];
    const html = `<svg viewBox="-12 -12 24 24" width="24" height="24" aria-hidden="true"><circle class="place-mark-ring" r="8"/><circle class="place-mark-dot" r="2.5"/></svg><span class="mark-label">${escapeHtml(code)}</span>`;
    return [{ id: 'place', position: [lon, lat], html, size: [24, 24], anchor: [12, 12], className: 'place-mark', label: `${code} ${name}`.trim() || 'This entry', zIndexOffset: 1_000 }];
  }, [lon, lat, code, name]);
  useMarks(marks, {});
  return null;
}
