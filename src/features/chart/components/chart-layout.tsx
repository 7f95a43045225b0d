import { useMemo, useState, type ReactNode } from 'react';
import { instantMs } from '../../../../shared/civil';
import type { EstimateDocument } from '../../../../shared/schemas/estimate';
import { classNames } from '../../../lib/class-names';
import { useChart } from '../hooks/chart-context';
import { usePlayer } from '../hooks/use-player';
import type { Forecast } from '../model/forecast';
import { arrivalSpan } from '../model/arrival-words';
import { byArrival } from '../model/rail-lanes';
import { MapStage } from './map-stage';
import { PageEdge, usePageWidth } from './page-width';
import { PrintedResults } from './printed-results';
import { ResultDrawer, type DrawerTab } from './result-drawer';
import { RuledPage } from './ruled-page';
import { sheetClass, SheetHandle, stageClass, type SheetHeight } from './sheet-handle';
import { TimeRail } from './time-rail';

type Props = {
  head: ReactNode;
  forecast: Forecast | null;
  /** The document of the shown forecast. */
  document: EstimateDocument | null;
  isBehind: boolean;
  /** What keeps the draft from being solved, said over the map. */
  missing: string | null;
  /** Said in the rail: saved or not, run under way. */
  note: string;
  horizonS: number;
};

const noTimes: number[] = [];

/** Page, map, rail and drawer; on a phone the page is a sheet over the map. */
export function ChartLayout({ head, forecast, document, isBehind, missing, note, horizonS }: Props) {
  const { draft, offset } = useChart();
  const { width, set } = usePageWidth();
  const [sheet, setSheet] = useState<SheetHeight>(missing === null ? 'low' : 'half');
  const [selectedId, setSelectedId] = useState<string | null>(null);
  const [tab, setTab] = useState<DrawerTab | null>(null);
  const shownHorizonS = document?.horizonS ?? horizonS;
  const player = usePlayer(shownHorizonS, forecast?.frameTimesS ?? noTimes);
  const startAt = document?.startAt ?? draft.startAt;
  const clock = useMemo(() => ({ startMs: instantMs(startAt), offset }), [startAt, offset]);
  const measure = (document?.substance ?? draft.substance)?.measure ?? 'mass';
  // Once a forecast is there, its own receptors are judged; before that, those of the draft stand in the list.
  const receptors = useMemo(() => (document && forecast ? document.receptors : draft.receptors.filter((receptor) => !draft.leftOut.includes(receptor.id))), [document, forecast, draft.receptors, draft.leftOut]);
  const rows = useMemo(() => byArrival(receptors, forecast?.answers ?? []), [receptors, forecast?.answers]);
  const select = (id: string | null) => {
    setSelectedId(id);
    if (id === null) return;
    setTab((now) => (now === 'table' || now === 'working' ? now : 'curve'));
    setSheet('low');
  };
  const shown = forecast ? forecast.frames.filter(Boolean).length : 0;
  const solvedShare = forecast && forecast.frameTimesS.length > 0 && shown < forecast.frameTimesS.length ? shown / forecast.frameTimesS.length : null;
  const first = rows[0]?.answer ? arrivalSpan(clock, rows[0].answer) : null;
  const summary = missing && !forecast ? missing : first ? `${rows[0]!.receptor.code} ${first}` : `${rows.length} receptors`;

  return (
    <div className="isolate flex h-full flex-col overflow-y-auto print:block print:h-auto print:overflow-visible">
      {head}
      <div className={classNames(tab ? 'min-h-[38rem]' : 'min-h-[25rem]', "relative grid flex-1 grid-cols-[auto_minmax(0,1fr)] grid-rows-[minmax(0,1fr)_auto_auto] [grid-template-areas:'page_stage''page_rail''page_drawer'] max-md:grid-cols-1 max-md:[grid-template-areas:'stage''rail''drawer'] print:block")}>
        <aside
          aria-label="Scenario"
          className={classNames('relative flex min-h-0 flex-col border-r border-rule bg-paper [grid-area:page] max-md:z-[1100] max-md:w-full! max-md:self-end max-md:border-t max-md:border-r-0 max-md:border-ink max-md:[grid-area:stage] print:hidden', sheetClass[sheet])}
          style={{ width }}
        >
          <SheetHandle height={sheet} summary={summary} onHeight={setSheet} />
          <div className="min-h-0 flex-1 overflow-y-auto">
            <RuledPage forecast={forecast} rows={rows} clock={clock} measure={measure} isBehind={isBehind || missing !== null} selectedId={selectedId} onSelect={select} />
          </div>
          <PageEdge width={width} onWidth={set} />
        </aside>
        <MapStage forecast={forecast} document={document} isBehind={isBehind} timeS={player.timeS} clock={clock} measure={measure} rows={rows} selectedId={selectedId} onSelect={select} missing={missing} className={stageClass[sheet]} />
        <div className={classNames('[grid-area:rail]', (isBehind || missing !== null) && forecast && 'opacity-60')}>
          {!Number.isNaN(clock.startMs) && (
            <TimeRail player={player} startMs={clock.startMs} horizonS={shownHorizonS} offset={offset} place={draft.releases[0]?.position ?? null} rows={rows} selectedId={selectedId} onSelect={select} solvedShare={solvedShare} note={note} />
          )}
        </div>
        {forecast && document && (
          <ResultDrawer tab={tab} onTab={setTab} forecast={forecast} document={document} rows={rows} clock={clock} measure={measure} selectedId={selectedId} onSelect={select} timeS={player.timeS} onTime={player.goTo} />
        )}
      </div>
      {forecast && document && <PrintedResults forecast={forecast} document={document} rows={rows} clock={clock} measure={measure} />}
    </div>
  );
}
