import { Link } from 'react-router-dom';
import type { Watch } from '../../../../shared/schemas/incidents';
import { Button } from '../../../components/button';
import { Section } from '../../../components/page';
import { ProgressText } from '../../../components/progress-text';
import { RuledList, RuledRow } from '../../../components/ruled-list';
import { useCan } from '../../../lib/session';
import { useCancelRun } from '../api';

/** Forecasts being solved now. */
export function RunningList({ runs }: { runs: Watch['runningRuns'] }) {
  const cancel = useCancelRun();
  const canCancel = useCan('run:cancel');
  return (
    <Section title="Being solved">
      {runs.length === 0 && <p className="py-4 text-ink2">No forecast is being solved.</p>}
      <RuledList label="Forecasts being solved">
        {runs.map((run) => (
          <RuledRow
            key={run.runId}
            trail={
              canCancel && (
                <Button kind="quiet" className="max-sm:-ml-2" onClick={() => cancel.mutate(run.runId)} isBusy={cancel.isPending && cancel.variables === run.runId} aria-label={`Stop solving ${run.scenarioName}`}>
                  Stop
                </Button>
              )
            }
          >
            <Link to={`/scenarios/${run.scenarioId}?run=${run.runId}`} className="font-semibold pointer-coarse:inline-flex pointer-coarse:min-h-11 pointer-coarse:items-center">
              {run.scenarioName}
            </Link>
            <div className="text-ink2">{run.state === 'queued' ? 'Waits for its turn' : <ProgressText stage="Solving" done={run.done} of={run.of} />}</div>
          </RuledRow>
        ))}
      </RuledList>
    </Section>
  );
}
