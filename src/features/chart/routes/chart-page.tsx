import { useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { useLocation, useParams, useSearchParams } from 'react-router-dom';
import { isoWithOffset } from '../../../../shared/civil';
import type { Scenario } from '../../../../shared/schemas/incidents';
import { Notice } from '../../../components/notice';
import { Loading } from '../../../components/progress-text';
import { errorText } from '../../../lib/form-errors';
import { serverNowMs } from '../../../lib/server-clock';
import { registerQuery, revisionQuery, runQuery, scenarioQuery } from '../api';
import { EditWorkspace } from '../components/edit-workspace';
import { StoredWorkspace } from '../components/stored-workspace';
import { readDraft } from '../model/draft';
import type { Registers } from '../model/draft-actions';

function useRegisters(): { registers: Registers | null; error: Error | null } {
  const waters = useQuery(registerQuery('waters'));
  const receptors = useQuery(registerQuery('receptors'));
  const sources = useQuery(registerQuery('sources'));
  const substances = useQuery(registerQuery('substances'));
  const registers = useMemo(
    () => (waters.data && receptors.data && sources.data && substances.data ? { waters: waters.data, receptors: receptors.data, sources: sources.data, substances: substances.data } : null),
    [waters.data, receptors.data, sources.data, substances.data],
  );
  return { registers, error: waters.error ?? receptors.error ?? sources.error ?? substances.error };
}

const wholeNumber = (text: string | null): number | null => (text !== null && /^\d+$/.test(text) ? Number(text) : null);

/** The workspace of one scenario: its draft, or with ?revision= or ?run= a stored one. */
export function ChartPage() {
  const { scenarioId = '' } = useParams();
  const [search] = useSearchParams();
  const scenario = useQuery(scenarioQuery(scenarioId));
  const { registers, error } = useRegisters();
  const failure = scenario.error ?? error;
  if (failure && !scenario.data) return <Failed error={failure} />;
  if (!scenario.data || !registers) return error ? <Failed error={error} /> : <Padded><Loading what="the scenario" /></Padded>;
  const runId = search.get('run');
  const revision = wholeNumber(search.get('revision'));
  return (
    <>
      <title>{`${scenario.data.name} · ${scenario.data.marking} · Downreach`}</title>
      {runId !== null || revision !== null ? (
        <Stored key={`${runId}-${revision}`} scenario={scenario.data} registers={registers} runId={runId} revision={revision} />
      ) : (
        <Edited key={scenario.data.id} scenario={scenario.data} registers={registers} />
      )}
    </>
  );
}

/** Starts from the draft, or from a revision when "Edit from here" was pressed on it. */
function Edited({ scenario, registers }: { scenario: Scenario; registers: Registers }) {
  const location = useLocation();
  const fromRevision = (location.state as { fromRevision?: number } | null)?.fromRevision ?? null;
  const revision = useQuery({ ...revisionQuery(scenario.id, fromRevision ?? 0), enabled: fromRevision !== null });
  // A new draft starts at the present minute.
  const [nowIso] = useState(() => isoWithOffset(Math.floor(serverNowMs() / 60_000) * 60_000, scenario.utcOffset));
  if (fromRevision !== null && !revision.data) return revision.error ? <Failed error={revision.error} /> : <Padded><Loading what={`revision ${fromRevision}`} /></Padded>;
  return <EditWorkspace scenario={scenario} registers={registers} nowIso={nowIso} from={fromRevision !== null && revision.data ? readDraft(revision.data.document, nowIso) : null} />;
}

function Stored({ scenario, registers, runId, revision }: { scenario: Scenario; registers: Registers; runId: string | null; revision: number | null }) {
  const run = useQuery({ ...runQuery(runId ?? ''), enabled: runId !== null });
  const stored = useQuery({ ...revisionQuery(scenario.id, revision ?? 0), enabled: runId === null && revision !== null });
  const failure = run.error ?? stored.error;
  if (failure) return <Failed error={failure} />;
  if (run.data) return <StoredWorkspace scenario={scenario} registers={registers} document={run.data.document} revisionNumber={run.data.revisionNumber} runId={run.data.id} />;
  if (stored.data)
    return <StoredWorkspace scenario={scenario} registers={registers} document={stored.data.document} revisionNumber={stored.data.number} runId={scenario.revisions.find((one) => one.number === stored.data.number)?.runId ?? null} />;
  return <Padded><Loading what="the stored revision" /></Padded>;
}

const Padded = ({ children }: { children: React.ReactNode }) => <div className="p-6">{children}</div>;
const Failed = ({ error }: { error: Error }) => (
  <Padded>
    <Notice tone="bad" title="The scenario cannot be shown">
      {errorText(error)}
    </Notice>
  </Padded>
);
