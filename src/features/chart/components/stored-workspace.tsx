import { useMemo, useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { apiPaths } from '../../../../shared/api-paths';
import { instantMs } from '../../../../shared/civil';
import { formatClock } from '../../../../shared/format';
import type { EstimateDocument } from '../../../../shared/schemas/estimate';
import type { Run, Scenario } from '../../../../shared/schemas/incidents';
import { Button } from '../../../components/button';
import { useCancelRun } from '../api';
import { ChartContext, type ChartWork } from '../hooks/chart-context';
import { useStoredRun } from '../hooks/use-stored-run';
import { readDraft } from '../model/draft';
import type { Registers } from '../model/draft-actions';
import { ChartHead } from './chart-head';
import { ChartLayout } from './chart-layout';

type Props = { scenario: Scenario; registers: Registers; document: EstimateDocument; revisionNumber: number; runId: string | null };

const nothing = () => undefined;

/** A saved revision with its run: to read, and to go on from. */
export function StoredWorkspace({ scenario, registers, document, revisionNumber, runId }: Props) {
  const navigate = useNavigate();
  const { run, forecast, isBroken } = useStoredRun(runId);
  const cancel = useCancelRun();
  const [selectedReleaseId, selectRelease] = useState<string | null>(null);
  const draft = useMemo(() => readDraft(document, document.startAt), [document]);
  const work = useMemo<ChartWork>(
    () => ({ draft, change: nothing, registers, offset: scenario.utcOffset, errors: [], isReadOnly: true, selectedReleaseId, selectRelease, placing: null, setPlacing: nothing, setInHand: nothing }),
    [draft, registers, scenario.utcOffset, selectedReleaseId],
  );
  const saved = scenario.revisions.find((revision) => revision.number === revisionNumber);
  return (
    <ChartContext.Provider value={work}>
      <ChartLayout
        head={
          <ChartHead
            scenario={scenario}
            offset={scenario.utcOffset}
            shownRevision={revisionNumber}
            state={saved ? <span className="text-note text-ink2">{`saved by ${saved.savedBy}, ${formatClock(instantMs(saved.savedAt), scenario.utcOffset)}`}</span> : null}
            actions={
              <>
                {run?.abilities.cancel && (run.state === 'queued' || run.state === 'running') && (
                  <Button isBusy={cancel.isPending} onClick={() => cancel.mutate(run.id)}>
                    Cancel run
                  </Button>
                )}
                {run?.state === 'done' && (
                  <a className="inline-flex min-h-9 items-center px-2 text-kingfisher underline underline-offset-2 pointer-coarse:min-h-11" href={apiPaths.runExport(run.id)} download>
                    GeoJSON
                  </a>
                )}
                <Button kind="quiet" icon="print" aria-label="Print" onClick={() => window.print()} />
                {scenario.abilities.edit && (
                  <Button kind="primary" icon="edit" onClick={() => void navigate(`/scenarios/${scenario.id}`, { state: { fromRevision: revisionNumber } })}>
                    Edit from here
                  </Button>
                )}
              </>
            }
          />
        }
        forecast={forecast && forecast.frames.length + forecast.answers.length > 0 ? forecast : null}
        document={document}
        isBehind={false}
        missing={forecast?.failed ? `${forecast.failed.title}. ${forecast.failed.detail}` : isBroken ? 'The stored frames could not be read: load the page again' : null}
        note={storedNote(run, revisionNumber)}
        horizonS={document.horizonS}
      />
    </ChartContext.Provider>
  );
}

function storedNote(run: Run | null, revisionNumber: number): string {
  if (!run) return `Revision ${revisionNumber}, to read`;
  if (run.state === 'queued') return `Revision ${revisionNumber}: its run waits`;
  if (run.state === 'running') return `Revision ${revisionNumber}: being solved${run.progress ? `, ${run.progress.stage} ${run.progress.done} of ${run.progress.of}` : ''}`;
  if (run.state === 'failed') return `Revision ${revisionNumber}: the run failed. ${run.failure?.detail ?? ''}`;
  return `Revision ${revisionNumber}, ${run.state}, engine ${run.engineVersion}, seed ${run.seed}`;
}
