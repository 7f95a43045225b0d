import { useQuery } from '@tanstack/react-query';
import { useCallback, useEffect, useMemo, useState } from 'react';
import { useNavigate } from 'react-router-dom';
import type { Scenario } from '../../../../shared/schemas/incidents';
import { Button } from '../../../components/button';
import { errorText } from '../../../lib/form-errors';
import { copyScenario, revisionQuery, runQuery, useSaveRevision } from '../api';
import { ChartContext, type ChartWork } from '../hooks/chart-context';
import { useDraft } from '../hooks/use-draft';
import { useDraftSave } from '../hooks/use-draft-save';
import { useLiveEstimate } from '../hooks/use-live-estimate';
import { usePageKeys } from '../hooks/use-page-keys';
import { buildDocument } from '../model/build-document';
import { readDraft, type Draft } from '../model/draft';
import type { Registers } from '../model/draft-actions';
import { readKeptDraft } from '../model/draft-store';
import { isMissing, sayError } from '../model/field-words';
import { automaticHorizonS } from '../model/horizon';
import { ChartHead } from './chart-head';
import { ChartLayout } from './chart-layout';
import { ConflictDialog } from './conflict-dialog';
import { SavedState } from './saved-state';

type Props = { scenario: Scenario; registers: Registers; nowIso: string; from: Draft | null };

/** What this page starts from: an unsent draft kept in this browser wins over the server's. */
function firstDrafts(scenario: Scenario, nowIso: string, from: Draft | null) {
  const stored = readDraft(scenario.draft, nowIso);
  const kept = readKeptDraft(scenario.id);
  return { held: { draft: stored, version: from || !kept ? scenario.draftVersion : kept.baseVersion }, shown: from ?? (kept ? readDraft(kept.draft, nowIso) : stored) };
}

/** The Chart while it is being worked on. */
export function EditWorkspace({ scenario, registers, nowIso, from }: Props) {
  const navigate = useNavigate();
  const offset = scenario.utcOffset;
  const [first] = useState(() => firstDrafts(scenario, nowIso, from));
  const [isSaveWanted, setSaveWanted] = useState(false);
  const handle = useDraft(first.shown);
  const { draft, change, undo, redo } = handle;
  const { state, held, isDirty, adopt } = useDraftSave(scenario, draft, first.held, scenario.abilities.edit, isSaveWanted);
  const [inHand, setInHand] = useState<Draft | null>(null);
  const built = useMemo(() => buildDocument(inHand ?? draft), [inHand, draft]);
  const live = useLiveEstimate(built.document);
  const saveRevision = useSaveRevision(scenario.id);
  const saved = useSavedRevision(scenario, built.document);
  const [selectedReleaseId, selectRelease] = useState<string | null>(null);
  const [placing, setPlacing] = useState<ChartWork['placing']>(null);
  const [isPutOff, setPutOff] = useState(false);
  const [copying, setCopying] = useState<{ isBusy: boolean; error: string | null }>({ isBusy: false, error: null });

  // Somebody else's draft, while nothing here is unsent, is taken over.
  useEffect(() => {
    if (isDirty || scenario.draftVersion <= held.version) return;
    const theirs = readDraft(scenario.draft, nowIso);
    change(() => theirs);
    adopt(scenario, theirs);
  }, [isDirty, scenario, held.version, change, adopt, nowIso]);

  const canSave = scenario.abilities.run && built.document !== null && saved.number === null;
  const save = useCallback(() => {
    if (canSave) setSaveWanted(true);
  }, [canSave]);
  const { mutate } = saveRevision;
  const document = built.document;
  useEffect(() => {
    if (!isSaveWanted || isDirty) return;
    if (document) mutate({ document, draftVersion: held.version, note: '' }, { onSettled: () => setSaveWanted(false) });
  }, [isSaveWanted, isDirty, document, held.version, mutate]);
  usePageKeys({ undo, redo, save });

  // While the first forecast is still being put together, what has not been given yet is asked for, not refused.
  const isComposing = live.forecast === null;
  const errors = useMemo(() => [...built.errors.filter((error) => !(isComposing && isMissing(error))), ...(live.failure?.errors ?? [])], [built.errors, live.failure, isComposing]);
  const work = useMemo<ChartWork>(
    () => ({ draft, change, registers, offset, errors, isReadOnly: !scenario.abilities.edit, selectedReleaseId, selectRelease, placing, setPlacing, setInHand }),
    [draft, change, registers, offset, errors, scenario.abilities.edit, selectedReleaseId, placing],
  );
  const missing = (built.errors[0] && sayError(built.errors[0])) ?? live.failure?.text ?? null;
  const keepCopy = async () => {
    setCopying({ isBusy: true, error: null });
    try {
      const copy = await copyScenario(scenario.incidentId, `${scenario.name} (my copy)`.slice(0, 120), draft);
      if (state.phase === 'conflict') adopt(state.theirs, readDraft(state.theirs.draft, nowIso));
      await navigate(`/scenarios/${copy.id}`);
    } catch (error) {
      setCopying({ isBusy: false, error: errorText(error) });
    }
  };
  const takeTheirs = () => {
    if (state.phase !== 'conflict') return;
    const theirs = readDraft(state.theirs.draft, nowIso);
    change(() => theirs);
    adopt(state.theirs, theirs);
  };

  return (
    <ChartContext.Provider value={work}>
      <ChartLayout
        head={
          <ChartHead
            scenario={scenario}
            offset={offset}
            shownRevision={null}
            state={<SavedState state={state} offset={offset} />}
            actions={
              <>
                {state.phase === 'conflict' && <Button onClick={() => setPutOff(false)}>Compare and choose</Button>}
                <Button kind="quiet" icon="undo" aria-label="Undo" disabled={!handle.canUndo} onClick={undo} />
                <Button kind="quiet" icon="redo" aria-label="Redo" disabled={!handle.canRedo} onClick={redo} />
                <Button kind="quiet" icon="print" aria-label="Print" className="max-sm:hidden" onClick={() => window.print()} />
                <Button kind="primary" aria-label="Save scenario" className="max-sm:px-3" disabled={!canSave} isBusy={isSaveWanted} onClick={save}>
                  <span>
                    Save<span className="max-sm:hidden"> scenario</span>
                  </span>
                </Button>
              </>
            }
          />
        }
        forecast={live.forecast}
        document={live.document}
        isBehind={live.isBehind}
        missing={missing}
        note={saveRevision.error ? errorText(saveRevision.error) : noteOf(built.document !== null && live.forecast !== null, saved)}
        horizonS={draft.horizonS ?? automaticHorizonS(draft)}
      />
      {state.phase === 'conflict' && !isPutOff && (
        <ConflictDialog theirs={state.theirs} theirDraft={readDraft(state.theirs.draft, nowIso)} myDraft={draft} offset={offset} isBusy={copying.isBusy} error={copying.error} onTake={takeTheirs} onCopy={() => void keepCopy()} onPutOff={() => setPutOff(true)} />
      )}
    </ChartContext.Provider>
  );
}

type Saved = { number: number | null; run: { state: string; done: number; of: number } | null };

/** Whether the latest revision is the very document on this page, and how its run goes. */
function useSavedRevision(scenario: Scenario, document: ReturnType<typeof buildDocument>['document']): Saved {
  const latest = scenario.revisions.reduce<Scenario['revisions'][number] | null>((most, revision) => (most === null || revision.number > most.number ? revision : most), null);
  const revision = useQuery({ ...revisionQuery(scenario.id, latest?.number ?? 0), enabled: latest !== null });
  const isRunning = latest?.runState === 'queued' || latest?.runState === 'running';
  const run = useQuery({ ...runQuery(latest?.runId ?? ''), enabled: latest?.runId != null && isRunning });
  const isSame = useMemo(() => document !== null && revision.data !== undefined && JSON.stringify(revision.data.document) === JSON.stringify(document), [document, revision.data]);
  if (!isSame || !latest) return { number: null, run: null };
  return { number: latest.number, run: latest.runState === null ? null : { state: latest.runState, done: run.data?.progress?.done ?? 0, of: run.data?.progress?.of ?? 0 } };
}

function noteOf(hasForecast: boolean, { number, run }: Saved): string {
  if (!hasForecast) return '';
  if (number === null) return 'Forecast not saved';
  if (run?.state === 'queued') return `Revision ${number} saved, its run waits`;
  if (run?.state === 'running') return `Revision ${number} saved, run ${run.of > 0 ? `${Math.floor((100 * run.done) / run.of)} %` : 'under way'}`;
  if (run?.state === 'failed') return `Revision ${number} saved, its run failed: open the revision to read why`;
  return `Saved as revision ${number}`;
}
