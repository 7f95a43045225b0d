import { useQuery } from '@tanstack/react-query';
import type { Incident, RunState, ScenarioSummary } from '../../../../shared/schemas/incidents';
import { EmptyState } from '../../../components/empty-state';
import { Notice } from '../../../components/notice';
import { Section } from '../../../components/page';
import { Loading } from '../../../components/progress-text';
import { RuledList, RuledRow } from '../../../components/ruled-list';
import { StatusWord, type StatusTone } from '../../../components/status-word';
import { TimeText } from '../../../components/time-text';
import { errorText } from '../../../lib/form-errors';
import { scenariosQuery } from '../api';
import { NewScenario } from './new-scenario';

const runWords: Record<RunState, { word: string; tone: StatusTone }> = {
  queued: { word: 'waits to be solved', tone: 'active' },
  running: { word: 'being solved', tone: 'active' },
  done: { word: 'solved', tone: 'neutral' },
  failed: { word: 'could not be solved', tone: 'attention' },
  cancelled: { word: 'stopped', tone: 'neutral' },
};

/** The scenarios of an incident with the state of each one's newest run. */
export function ScenarioList({ incident }: { incident: Incident }) {
  const { data, error } = useQuery(scenariosQuery(incident.id));
  return (
    <Section title="Scenarios" actions={incident.abilities.addScenario && <NewScenario incidentId={incident.id} scenarios={data ?? []} />}>
      {error && !data && (
        <Notice tone="bad" title="The scenarios cannot be read" className="mt-4">
          {errorText(error)}
        </Notice>
      )}
      {!data && !error && <Loading what="the scenarios" />}
      {data?.length === 0 && <EmptyState title="No scenario yet">A scenario is one set of assumptions: what was released, where, when, into which water.</EmptyState>}
      <RuledList label="Scenarios">{data?.map((scenario) => <ScenarioRow key={scenario.id} scenario={scenario} offset={incident.utcOffset} />)}</RuledList>
    </Section>
  );
}

function ScenarioRow({ scenario, offset }: { scenario: ScenarioSummary; offset: string }) {
  const { latestRunState, revisionCount } = scenario;
  const state = latestRunState === null ? null : runWords[latestRunState as RunState];
  return (
    <RuledRow
      to={`/scenarios/${scenario.id}`}
      openLabel={`Open the chart of ${scenario.name}`}
      trail={<div className="pointer-events-none sm:text-right">{state ? <StatusWord tone={state.tone}>{state.word}</StatusWord> : <span className="text-ink2">never saved</span>}</div>}
    >
      <p className="text-lead font-semibold">{scenario.name}</p>
      <p className="text-ink2">
        {revisionCount === 0 ? 'draft only' : revisionCount === 1 ? '1 revision' : `${revisionCount} revisions`}, last written <TimeText iso={scenario.draftSavedAt} offset={offset} hasOffset={false} /> by {scenario.draftSavedBy}
      </p>
    </RuledRow>
  );
}
