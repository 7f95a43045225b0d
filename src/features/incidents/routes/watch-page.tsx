import { useQuery } from '@tanstack/react-query';
import { formatDayYear, formatOffset, formatTimeOfDay } from '../../../../shared/format';
import type { Watch } from '../../../../shared/schemas/incidents';
import { EmptyState } from '../../../components/empty-state';
import { EstimateCaution } from '../../../components/estimate-caution';
import { Notice } from '../../../components/notice';
import { Page } from '../../../components/page';
import { Loading } from '../../../components/progress-text';
import { errorText } from '../../../lib/form-errors';
import { useCan, useDefaultOffset, useSession } from '../../../lib/session';
import { useNow } from '../../../lib/use-now';
import { watchQuery } from '../api';
import { RunningList } from '../components/running-list';
import { StartForecast } from '../components/start-forecast';
import { WaitingList } from '../components/waiting-list';
import { WatchIncident } from '../components/watch-incident';
import { byUrgency } from '../order';

/** What runs now: open incidents with their next arrivals, forecasts being solved, what waits for this person. */
export function WatchPage() {
  const { data, error } = useQuery(watchQuery);
  const nowMs = useNow(1_000);
  const offset = useDefaultOffset();
  const canOpen = useCan('incident:create');
  const canSketch = useCan('scenario:write');
  const canStart = canOpen && canSketch;
  return (
    <Page
      title={formatDayYear(nowMs, offset)}
      tabTitle="Watch"
      above={<WatchHead />}
      actions={
        <div className="flex flex-wrap items-center gap-x-6 gap-y-3">
          <p className="text-title font-semibold whitespace-nowrap">
            {formatTimeOfDay(nowMs, offset)} <span className="text-body font-normal text-ink2">{formatOffset(offset)}</span>
          </p>
          {canStart && <StartForecast />}
        </div>
      }
    >
      {error && !data && (
        <Notice tone="bad" title="The Watch cannot be read" className="mt-6">
          {errorText(error)}
        </Notice>
      )}
      {!data && !error && <Loading what="the Watch" />}
      {data && <WatchBody watch={data} nowMs={nowMs} canStart={canStart} />}
    </Page>
  );
}

function WatchHead() {
  const organisation = useSession()?.organisation;
  return <>Watch{organisation ? `, ${organisation}` : ''}</>;
}

function WatchBody({ watch, nowMs, canStart }: { watch: Watch; nowMs: number; canStart: boolean }) {
  const open = [...watch.incidents].sort(byUrgency);
  return (
    <div className="grid gap-x-12 xl:grid-cols-[minmax(0,1fr)_23rem]">
      <div className="min-w-0">
        {open.map((incident) => (
          <WatchIncident key={incident.id} incident={incident} nowMs={nowMs} />
        ))}
        {open.length === 0 ? (
          <EmptyState title="No incident is open" action={canStart && <StartForecast kind="plain" />}>
            Open incidents stand here with their next arrivals counting down.
          </EmptyState>
        ) : (
          <EstimateCaution className="pt-6" />
        )}
      </div>
      <div className="min-w-0">
        <RunningList runs={watch.runningRuns} />
        <WaitingList waiting={watch.waiting} />
      </div>
    </div>
  );
}
