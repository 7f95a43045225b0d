import type { Measure } from '../../../../shared/format';
import type { EstimateDocument } from '../../../../shared/schemas/estimate';
import { Button } from '../../../components/button';
import { classNames } from '../../../lib/class-names';
import { useTheme } from '../../../lib/theme';
import type { Clock } from '../model/arrival-words';
import type { Forecast } from '../model/forecast';
import { ArrivalTable } from './arrival-table';
import { ConcentrationChart } from './concentration-chart';
import { DistanceTimeChart } from './distance-time-chart';
import { ReceptorDetail } from './receptor-detail';
import type { Rows } from './receptors-panel';
import { WorkingView } from './working-view';

export const drawerTabs = { curve: 'Concentration and time', distance: 'Distance and time', table: 'All receptors', working: 'The working' } as const;
export type DrawerTab = keyof typeof drawerTabs;

type Props = {
  tab: DrawerTab | null;
  onTab: (tab: DrawerTab | null) => void;
  forecast: Forecast;
  document: EstimateDocument;
  rows: Rows;
  clock: Clock;
  measure: Measure;
  selectedId: string | null;
  onSelect: (id: string) => void;
  timeS: number;
  onTime: (s: number) => void;
};

/** Under the rail: curve, distance-time, table, working. Closed it is a line of buttons. */
export function ResultDrawer(props: Props) {
  const { tab, onTab, forecast } = props;
  const tabs = (Object.keys(drawerTabs) as DrawerTab[]).filter((one) => one !== 'distance' || forecast.result?.distanceTime);
  return (
    <section aria-label="Results" className="flex min-h-0 flex-col border-t border-rule bg-paper [grid-area:drawer] print:hidden" onKeyDown={(event) => event.key === 'Escape' && onTab(null)}>
      <div className="flex items-center overflow-x-auto px-2">
        {tabs.map((one) => (
          <button
            key={one}
            type="button"
            aria-expanded={tab === one}
            onClick={() => onTab(tab === one ? null : one)}
            className={classNames('min-h-10 border-b-3 px-3 whitespace-nowrap pointer-coarse:min-h-11', tab === one ? 'border-kingfisher font-semibold text-ink' : 'border-transparent text-ink2 hover:text-kingfisher')}
          >
            {drawerTabs[one]}
          </button>
        ))}
        {tab && <Button kind="quiet" icon="close" className="ml-auto" aria-label="Close the drawer" onClick={() => onTab(null)} />}
      </div>
      {tab && (
        <div className="h-[clamp(13rem,28dvh,26rem)] @container overflow-auto border-t border-rule p-4" tabIndex={-1}>
          <DrawerLeaf {...props} tab={tab} />
        </div>
      )}
    </section>
  );
}

function DrawerLeaf({ tab, forecast, document, rows, clock, measure, selectedId, onSelect, timeS, onTime }: Props & { tab: DrawerTab }) {
  const { theme } = useTheme();
  const row = rows.find((one) => one.receptor.id === selectedId) ?? rows[0] ?? null;
  const shared = { measure, startMs: clock.startMs, horizonS: document.horizonS, offset: clock.offset, timeS, onTime };
  if (tab === 'table') return <ArrivalTable rows={rows} clock={clock} measure={measure} selectedId={selectedId} onSelect={onSelect} />;
  if (tab === 'distance') {
    const field = forecast.result?.distanceTime;
    return field ? <DistanceTimeChart {...shared} field={field} levels={forecast.levels} water={document.water} receptors={document.receptors} theme={theme} /> : <p className="text-ink2">Comes with the whole solution.</p>;
  }
  if (tab === 'working') return forecast.result ? <WorkingView result={forecast.result} receptor={row?.receptor ?? null} answer={row?.answer ?? null} /> : <p className="text-ink2">Comes with the whole solution.</p>;
  if (!row?.answer) return <p className="text-ink2">{row ? 'Not solved yet.' : 'No receptor on this water.'}</p>;
  return (
    <div className="grid gap-x-6 gap-y-4 @xl:grid-cols-[minmax(0,1fr)_16rem] @4xl:grid-cols-[minmax(0,1fr)_24rem]">
      <div className="min-w-0">
        <h2 className="font-semibold">
          {row.receptor.code} {row.receptor.name}
        </h2>
        <ConcentrationChart {...shared} receptor={row.receptor} answer={row.answer} />
      </div>
      <ReceptorDetail receptor={row.receptor} answer={row.answer} clock={clock} measure={measure} />
    </div>
  );
}
