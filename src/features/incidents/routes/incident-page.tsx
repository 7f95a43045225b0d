import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, useParams } from 'react-router-dom';
import type { Incident } from '../../../../shared/schemas/incidents';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { EstimateCaution } from '../../../components/estimate-caution';
import { Notice } from '../../../components/notice';
import { Page, Section } from '../../../components/page';
import { Loading } from '../../../components/progress-text';
import { StatusWord } from '../../../components/status-word';
import { TimeText } from '../../../components/time-text';
import { errorText } from '../../../lib/form-errors';
import { useNow } from '../../../lib/use-now';
import { incidentQuery, useUpdateIncident } from '../api';
import { ArrivalList } from '../components/arrival-list';
import { CloseIncident } from '../components/close-incident';
import { IncidentForm } from '../components/incident-form';
import { Log } from '../components/log';
import { ScenarioList } from '../components/scenario-list';

export function IncidentPage() {
  const { incidentId = '' } = useParams();
  const { data: incident, error } = useQuery(incidentQuery(incidentId));
  // Without data the error is the page: the boundary around it shows title and request id.
  if (error && !incident) throw error;
  if (!incident) return <Loading what="the incident" />;
  return (
    <Page title={incident.name} marking={incident.marking} above={<Above incident={incident} />} below={<Below incident={incident} />} actions={<Actions incident={incident} />}>
      {error && (
        <Notice tone="attention" title="This may be out of date" className="mt-6">
          {errorText(error)}
        </Notice>
      )}
      <div className="grid gap-x-12 xl:grid-cols-[minmax(0,1.35fr)_minmax(0,1fr)]">
        <div className="min-w-0">
          <NextArrivals incident={incident} />
          <ScenarioList incident={incident} />
        </div>
        <div className="min-w-0">
          <Log incident={incident} />
        </div>
      </div>
    </Page>
  );
}

const Above = ({ incident }: { incident: Incident }) => (
  <>
    <Link to="/incidents" className="pointer-coarse:inline-flex pointer-coarse:min-h-11 pointer-coarse:items-center">Incidents</Link> / {incident.number}
  </>
);

function Below({ incident }: { incident: Incident }) {
  return (
    <>
      <p className="flex flex-wrap items-center gap-x-4">
        <StatusWord tone={incident.state === 'open' ? 'active' : 'neutral'}>{incident.state}</StatusWord>
        <span>
          opened <TimeText iso={incident.openedAt} offset={incident.utcOffset} /> by {incident.openedBy}
        </span>
        {incident.closedAt && (
          <span>
            closed <TimeText iso={incident.closedAt} offset={incident.utcOffset} />
          </span>
        )}
      </p>
      {incident.summary && <p className="mt-2 max-w-[75ch] whitespace-pre-line text-ink">{incident.summary}</p>}
    </>
  );
}

function NextArrivals({ incident }: { incident: Incident }) {
  const nowMs = useNow(1_000);
  if (incident.state === 'closed') return null;
  return (
    <Section title="Next arrivals">
      {incident.nextArrivals.length === 0 ? (
        <p className="border-b border-rule py-4 text-ink2">No saved forecast has an arrival still to come. This does not say that the water is fit for any use.</p>
      ) : (
        <ArrivalList label="Next arrivals" arrivals={incident.nextArrivals} offset={incident.utcOffset} nowMs={nowMs} />
      )}
      <EstimateCaution className="pt-3" />
    </Section>
  );
}

function Actions({ incident }: { incident: Incident }) {
  const [isEditing, setIsEditing] = useState(false);
  const update = useUpdateIncident(incident.id);
  return (
    <>
      {incident.abilities.update && (
        <Button icon="edit" onClick={() => setIsEditing(true)}>
          Edit details
        </Button>
      )}
      {incident.abilities.close && <CloseIncident incident={incident} />}
      <Dialog isOpen={isEditing} onClose={() => setIsEditing(false)} title="Edit details">
        <IncidentForm
          start={{ name: incident.name, marking: incident.marking, summary: incident.summary, utcOffset: incident.utcOffset }}
          hasMarking={false}
          submitLabel="Save details"
          onCancel={() => setIsEditing(false)}
          onSubmit={async ({ name, summary, utcOffset }) => {
            await update.mutateAsync({ name, summary, utcOffset, version: incident.version });
            setIsEditing(false);
          }}
        />
      </Dialog>
    </>
  );
}
