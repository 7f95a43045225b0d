import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useNavigate, useSearchParams } from 'react-router-dom';
import { instantMs } from '../../../../shared/civil';
import { formatDayYear, formatOffset, formatTimeOfDay } from '../../../../shared/format';
import type { Incident } from '../../../../shared/schemas/incidents';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { EmptyState } from '../../../components/empty-state';
import { SearchInput } from '../../../components/inputs';
import { MarkingWord } from '../../../components/marking-band';
import { Notice } from '../../../components/notice';
import { Page } from '../../../components/page';
import { Loading } from '../../../components/progress-text';
import { RuledList, RuledRow } from '../../../components/ruled-list';
import { StatusWord } from '../../../components/status-word';
import { errorText } from '../../../lib/form-errors';
import { useCan, useDefaultOffset } from '../../../lib/session';
import { incidentsQuery, useCreateIncident } from '../api';
import { IncidentForm } from '../components/incident-form';
import { matches } from '../order';

/** Every incident, the newest first; what is searched for stands in the address. */
export function IncidentListPage() {
  const { data, error } = useQuery(incidentsQuery);
  const [address, setAddress] = useSearchParams();
  const typed = address.get('search') ?? '';
  const isOnlyOpen = address.get('show') !== 'all';
  const canCreate = useCan('incident:create');
  const set = (key: string, value: string) =>
    setAddress(
      (now) => {
        if (value) now.set(key, value);
        else now.delete(key);
        return now;
      },
      { replace: true },
    );
  const shown = data?.filter((incident) => (!isOnlyOpen || incident.state === 'open') && matches(incident, typed));
  const hidden = data?.filter((incident) => isOnlyOpen && incident.state === 'closed' && matches(incident, typed)).length ?? 0;
  return (
    <Page title="Incidents" actions={canCreate && <OpenIncident />}>
      <div className="no-print flex flex-wrap items-center gap-x-6 gap-y-3 border-b border-rule py-4">
        <SearchInput label="Search incidents" placeholder="Search name, number, marking" value={typed} onChange={(value) => set('search', value)} className="w-full sm:w-96" />
        <label className="flex min-h-11 cursor-pointer items-center gap-2.5">
          <input type="checkbox" checked={!isOnlyOpen} onChange={(event) => set('show', event.target.checked ? 'all' : '')} className="size-4.5 accent-kingfisher" />
          Closed ones too
        </label>
        <p role="status" className="ml-auto text-ink2">
          {shown && `${shown.length} ${shown.length === 1 ? 'incident' : 'incidents'}${hidden > 0 ? `, ${hidden} closed not shown` : ''}`}
        </p>
      </div>
      {error && !data && (
        <Notice tone="bad" title="The incidents cannot be read" className="mt-6">
          {errorText(error)}
        </Notice>
      )}
      {!data && !error && <Loading what="the incidents" />}
      {shown?.length === 0 && (
        <EmptyState title={typed ? `Nothing matches "${typed}"` : 'No incident yet'}>
          {typed ? 'Every word must stand in the number, name, marking, summary or the name of who opened it.' : 'An incident holds scenarios, their forecasts and a log of what was known and done when.'}
        </EmptyState>
      )}
      <RuledList label="Incidents">{shown?.map((incident) => <IncidentRow key={incident.id} incident={incident} />)}</RuledList>
    </Page>
  );
}

function IncidentRow({ incident }: { incident: Incident }) {
  const { number, name, marking, state, summary, utcOffset, openedAt, openedBy, scenarioCount, nextArrivals } = incident;
  const [next] = nextArrivals;
  return (
    <RuledRow
      to={`/incidents/${incident.id}`}
      openLabel={`${marking}: ${number} ${name}`}
      lead={
        <>
          <div className="font-semibold text-ink">{number}</div>
          <div className="text-note">{formatDayYear(instantMs(openedAt), utcOffset)}</div>
        </>
      }
      trail={
        <div className="pointer-events-none sm:w-72 sm:text-right">
          <StatusWord tone={state === 'open' ? 'active' : 'neutral'}>{state}</StatusWord>
          <div className="text-note text-ink2">{next ? `${next.receptorCode} from ${formatDayYear(instantMs(next.earliestAt), utcOffset)} ${formatTimeOfDay(instantMs(next.earliestAt), utcOffset)} ${formatOffset(utcOffset)}` : `${scenarioCount} ${scenarioCount === 1 ? 'scenario' : 'scenarios'}`}</div>
        </div>
      }
    >
      <p className="flex flex-wrap items-center gap-x-3 gap-y-1">
        <span className="text-lead font-semibold">{name}</span>
        <MarkingWord marking={marking} />
      </p>
      <p className="max-w-[75ch] text-ink2">{summary || `Opened by ${openedBy}`}</p>
    </RuledRow>
  );
}

function OpenIncident() {
  const [isOpen, setIsOpen] = useState(false);
  const create = useCreateIncident();
  const navigate = useNavigate();
  const offset = useDefaultOffset();
  return (
    <>
      <Button kind="primary" icon="add" onClick={() => setIsOpen(true)}>
        Open an incident
      </Button>
      <Dialog isOpen={isOpen} onClose={() => setIsOpen(false)} title="Open an incident">
        <IncidentForm
          start={{ name: '', marking: 'PLANNING', summary: '', utcOffset: offset }}
          hasMarking
          submitLabel="Open incident"
          onCancel={() => setIsOpen(false)}
          onSubmit={async (input) => {
            const incident = await create.mutateAsync(input);
            await navigate(`/incidents/${incident.id}`);
          }}
        />
      </Dialog>
    </>
  );
}
