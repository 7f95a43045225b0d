import { useCallback, useEffect, useMemo, useState } from 'react';
import { useMapEvents } from 'react-leaflet';
import type L from 'leaflet';
import { isRiver } from '../../../../shared/assemble';
import type { Measure } from '../../../../shared/format';
import type { LonLat } from '../../../../shared/schemas/basics';
import type { EstimateDocument, EstimateWater } from '../../../../shared/schemas/estimate';
import { Button } from '../../../components/button';
import { classNames } from '../../../lib/class-names';
import { useTheme } from '../../../lib/theme';
import { DistrictMap } from '../../../map/district-map';
import { EnvelopeLayer } from '../../../map/envelope-layer';
import { FrameLayer } from '../../../map/frame-layer';
import { PathsLayer } from '../../../map/paths-layer';
import { ReceptorLayer } from '../../../map/receptor-layer';
import { ReleaseLayer, type ReleaseMark } from '../../../map/release-layer';
import { RiverLayer } from '../../../map/river-layer';
import { leastRibbonM } from '../../../map/channel-course';
import { metresPerPixelAt } from '../../../map/mercator';
import { PlacePreview, type Snapped } from '../../../map/place-preview';
import { useChart } from '../hooks/chart-context';
import type { Clock } from '../model/arrival-words';
import { formatTimeOfDay } from '../../../../shared/format';
import { placeRelease } from '../model/draft-actions';
import { frameIndexAt, type Forecast } from '../model/forecast';
import { NEAR_WATER_M, placeAt, type Place } from '../model/place';
import { boundsOf } from '../model/bounds';
import { ArrivalLines } from './arrival-lines';
import { MapLegend } from './map-legend';
import { ReadOut } from './read-out';
import { StationMarks } from './station-marks';
import type { Rows } from './receptors-panel';

type Props = {
  forecast: Forecast | null;
  document: EstimateDocument | null;
  isBehind: boolean;
  timeS: number;
  clock: Clock;
  measure: Measure;
  rows: Rows;
  selectedId: string | null;
  onSelect: (id: string | null) => void;
  missing: string | null;
  className: string;
};

/** A click this near a drawn river means the river; a release in hand clings to it from farther off. */
const CLICK_PX = 16;
const DRAG_PX = 80;

/** The map: river and receptors from the draft, the cloud from the forecast, releases to place and drag. */
export function MapStage({ forecast, document, isBehind, timeS, clock, measure, rows, selectedId, onSelect, missing, className }: Props) {
  const { draft, change, registers, isReadOnly, placing, setPlacing, setInHand, selectRelease, selectedReleaseId } = useChart();
  const { theme } = useTheme();
  const [probe, setProbe] = useState<LonLat | null>(null);
  const [refused, setRefused] = useState<{ why: string; nearest: Place | null } | null>(null);
  const [showsEnvelope, setShowsEnvelope] = useState(true);
  const [showsPaths, setShowsPaths] = useState(false);
  const [showsArrivals, setShowsArrivals] = useState(false);
  const [{ metresPerPixel, ribbonM }, setScale] = useState({ metresPerPixel: 50, ribbonM: 0 });
  const water = document?.water ?? null;
  const paths = forecast?.result?.paths ?? null;
  const reached = forecast?.result?.reached?.isochrones.length ? forecast.result.reached : null;
  const index = forecast ? frameIndexAt(forecast, timeS) : null;
  const frame = forecast && index !== null ? (forecast.frames[index] ?? null) : null;
  const isPlacing = !isReadOnly && (draft.releases.length === 0 || placing !== null);

  const nearM = (px: number) => Math.max(NEAR_WATER_M, px * metresPerPixel);
  const place = (position: LonLat, moveId: string | null, reachPx = CLICK_PX): LonLat | null => {
    const outcome = placeRelease(draft, position, registers, moveId, nearM(reachPx));
    if (!('draft' in outcome)) {
      setRefused({ why: outcome.refused, nearest: outcome.nearest });
      return null;
    }
    change(() => outcome.draft, moveId ? `${moveId}.move` : '');
    selectRelease(outcome.releaseId);
    setPlacing(null);
    setRefused(null);
    return outcome.draft.releases.find((release) => release.id === outcome.releaseId)?.position ?? null;
  };
  /** While in hand the ring follows the water and the forecast follows the ring; letting go changes the draft. */
  const carry = (id: string, position: LonLat): LonLat | null => {
    const outcome = placeRelease(draft, position, registers, id, nearM(DRAG_PX));
    if (!('draft' in outcome)) return null;
    setInHand(outcome.draft);
    return outcome.draft.releases.find((release) => release.id === id)?.position ?? null;
  };
  const letGo = (id: string, position: LonLat): LonLat | null => {
    setInHand(null);
    return place(position, id, DRAG_PX);
  };
  const click = (position: LonLat) => {
    if (isPlacing) place(position, placing?.moveId ?? null);
    else setProbe(position);
  };

  const preview = useCallback(
    (position: LonLat): Snapped => {
      const answer = placeAt(position, registers.waters, Math.max(NEAR_WATER_M, CLICK_PX * metresPerPixel));
      return answer.place ? { position: answer.place.position, words: answer.place.words } : { position: null, words: answer.why, nearest: answer.nearest?.position ?? null };
    },
    [registers.waters, metresPerPixel],
  );

  const waterId = draft.water?.registerId ?? '';
  const fitTo = useMemo(() => boundsOf([...draft.releases.map((release) => release.position), ...draft.receptors.map((receptor) => receptor.position)]),
    // The view follows a change of water only: it must stay still while a release is dragged.
    // eslint-disable-next-line react-hooks/exhaustive-deps
    [waterId]);
  const reaches = useMemo(() => (draft.water ? (draft.water.kind === 'river' ? draft.water.reaches : []) : registers.waters.flatMap((item) => (isRiver(item.data) ? item.data.reaches : []))), [draft.water, registers.waters]);
  const releases = useMemo<ReleaseMark[]>(() => draft.releases.map((release) => ({ id: release.id, name: release.name, position: release.position, timeLabel: Number.isNaN(clock.startMs) ? '' : formatTimeOfDay(clock.startMs + startOf(release.timing) * 1_000, clock.offset) })), [draft.releases, clock.startMs, clock.offset]);
  const numbers = useMemo(() => new Map(rows.map((row) => [row.receptor.id, row.number] as const)), [rows]);
  const receptors = useMemo(() => rows.map((row) => row.receptor), [rows]);
  const answers = useMemo(() => rows.flatMap((row) => row.answer ?? []), [rows]);

  return (
    <div className={classNames('relative h-full min-h-0 overflow-hidden [grid-area:stage] print:h-[105mm]', className)}>
      <DistrictMap theme={theme} label="Map of the district" onClick={click} fitTo={fitTo}>
        <ScaleReport onScale={setScale} />
        <KeepInView position={receptors.find((receptor) => receptor.id === selectedId)?.position ?? null} />
        <RiverLayer reaches={reaches} />
        {water && forecast && <CloudLayers forecast={forecast} frame={frame} water={water} theme={theme} measure={measure} showsEnvelope={showsEnvelope} />}
        {water && reached && showsArrivals && <ArrivalLines reached={reached} water={water} theme={theme} clock={clock} />}
        {water && paths && showsPaths && <PathsLayer paths={paths} water={water} timeS={timeS} theme={theme} />}
        <StationMarks waterId={waterId} />
        {isPlacing && <PlacePreview snap={preview} />}
        <ReceptorLayer receptors={receptors} answers={answers} numbers={numbers} selectedId={selectedId} onSelect={onSelect} />
        <ReleaseLayer releases={releases} selectedId={selectedReleaseId} onSelect={selectRelease} {...(isReadOnly ? {} : { onMove: (id: string, position: LonLat, ended: boolean) => (ended ? letGo(id, position) : carry(id, position)) })} />
      </DistrictMap>
      {isPlacing && !refused && (
        <p role="status" className="pointer-events-none absolute top-3 left-1/2 z-[1001] w-max max-w-[70%] -translate-x-1/2 rounded-sm bg-sheet px-4 py-2 font-semibold shadow-float print:hidden">
          {placing?.moveId ? 'Click the water where it belongs' : 'Click the water where it got in'}
        </p>
      )}
      {refused && (
        <div role="alert" className="absolute top-3 left-3 z-[1001] flex max-w-[min(28rem,75%)] flex-wrap items-center gap-2 rounded-sm border-l-4 border-bad bg-sheet p-3 shadow-float print:hidden">
          <span className="flex-1 basis-48">{refused.why}</span>
          {refused.nearest && <Button onClick={() => place(refused.nearest!.position, placing?.moveId ?? null)}>Use {refused.nearest.words}</Button>}
          <Button kind="quiet" icon="close" aria-label="Close" onClick={() => setRefused(null)} />
        </div>
      )}
      {forecast && forecast.levels.length > 0 && <MapLegend levels={forecast.levels} measure={measure} theme={theme} showsEnvelope={showsEnvelope} onEnvelope={setShowsEnvelope} showsArrivals={showsArrivals} onArrivals={reached ? setShowsArrivals : null} showsPaths={showsPaths} onPaths={paths ? setShowsPaths : null} />}
      {probe && frame && water && <ReadOut position={probe} frame={frame} envelope={forecast?.envelope ?? null} water={water} ribbonM={ribbonM} timeS={frame.head.timeS} clock={clock} measure={measure} onClose={() => setProbe(null)} />}
      {(missing ? forecast !== null || draft.releases.length > 0 : isBehind) && (
        <p className={classNames('pointer-events-none absolute inset-x-0 bottom-0 z-[999] bg-sheet/85 px-4 py-1.5 text-center font-semibold print:hidden', !missing && 'transition-opacity delay-500 duration-150 starting:opacity-0')}>
          {!missing ? 'Solving the change' : forecast ? <><s className="font-normal text-ink2">Forecast of the last complete figures.</s> {missing}</> : `Next: ${missing.charAt(0).toLowerCase()}${missing.slice(1)}`}
        </p>
      )}
    </div>
  );
}

const startOf = (timing: { kind: string; atS?: number | null; startS?: number | null; rows?: { atS: number | null }[] }): number => timing.atS ?? timing.startS ?? timing.rows?.[0]?.atS ?? 0;

function CloudLayers({ forecast, frame, water, theme, measure, showsEnvelope }: { forecast: Forecast; frame: Forecast['frames'][number] | null; water: EstimateWater; theme: 'day' | 'night'; measure: Measure; showsEnvelope: boolean }) {
  return (
    <>
      <FrameLayer frame={frame ?? null} levels={forecast.levels} water={water} theme={theme} measure={measure} />
      {showsEnvelope && <EnvelopeLayer envelope={forecast.envelope} levels={forecast.levels} water={water} theme={theme} measure={measure} />}
    </>
  );
}

type Scale = { metresPerPixel: number; ribbonM: number };

/** Tells how many metres a pixel and a thin river's ribbon are, so that a click on the ribbon is read as in the river. */
function ScaleReport({ onScale }: { onScale: (scale: Scale) => void }) {
  const map = useMapEvents({ zoomend: () => onScale(scaleOf(map)) });
  useEffect(() => onScale(scaleOf(map)), [map, onScale]);
  return null;
}

/** Keeps the middle of the map in the middle when the drawer opens, and the chosen receptor in sight. */
function KeepInView({ position }: { position: LonLat | null }) {
  const map = useMapEvents({ resize: ({ oldSize, newSize }) => map.panBy(oldSize.subtract(newSize).divideBy(2), { animate: false }) });
  const [lon, lat] = position ?? [null, null];
  useEffect(() => {
    if (lon !== null && lat !== null) map.panInside([lat, lon], { padding: [60, 60], animate: false });
  }, [map, lon, lat]);
  return null;
}

const scaleOf = (map: L.Map): Scale => ({ metresPerPixel: metresPerPixelAt(map.getCenter().lat, map.getZoom()), ribbonM: leastRibbonM(map.getCenter().lat, map.getZoom()) });
