import { useQueryClient } from '@tanstack/react-query';
import { useCallback, useEffect, useRef, useState } from 'react';
import type { Scenario } from '../../../../shared/schemas/incidents';
import { ApiError } from '../../../lib/api-client';
import { saveDraft, scenarioQuery, type DraftState } from '../api';
import type { Draft } from '../model/draft';
import { dropKeptDraft, keepDraft } from '../model/draft-store';

const WAIT_MS = 600;
const RETRY_MS = 5_000;

/** What the server holds, as far as this page knows. */
type Held = { draft: Draft; version: number; at: string; by: string };
type Trouble = { kind: 'waiting'; since: number } | { kind: 'refused'; text: string; draft: Draft } | { kind: 'conflict'; theirs: DraftState };

export type SaveState = { phase: 'saved'; at: string; by: string } | { phase: 'saving' } | { phase: 'waiting' } | { phase: 'refused'; text: string } | { phase: 'conflict'; theirs: DraftState };

/**
 * Sends the draft to the server a moment after each change, one request at a time. Until the server has confirmed, a copy is
 * kept in this browser. A write by somebody else in between stops the saving and is shown: nothing is overwritten silently.
 */
export function useDraftSave(scenario: Scenario, draft: Draft, first: { draft: Draft; version: number }, isEditable: boolean, isUrgent: boolean) {
  const client = useQueryClient();
  const [held, setHeld] = useState<Held>({ ...first, at: scenario.draftSavedAt, by: scenario.draftSavedBy });
  const [trouble, setTrouble] = useState<Trouble | null>(null);
  const isBusy = useRef(false);
  const isDirty = draft !== held.draft;
  const isRefused = trouble?.kind === 'refused' && trouble.draft === draft;
  const mayTry = isEditable && isDirty && trouble?.kind !== 'conflict' && !isRefused;

  useEffect(() => {
    if (!mayTry) return;
    keepDraft(scenario.id, { draft, baseVersion: held.version, keptAtMs: Date.now() });
    const send = async () => {
      if (isBusy.current) return;
      isBusy.current = true;
      try {
        const saved = await saveDraft(scenario.id, draft, held.version);
        client.setQueryData(scenarioQuery(scenario.id).queryKey, (before) => before && { ...before, ...saved });
        dropKeptDraft(scenario.id);
        setHeld({ draft, version: saved.draftVersion, at: saved.draftSavedAt, by: saved.draftSavedBy });
        setTrouble(null);
      } catch (error) {
        setTrouble(await troubleOf(error, draft, () => client.fetchQuery({ ...scenarioQuery(scenario.id), staleTime: 0 })));
      } finally {
        isBusy.current = false;
      }
    };
    const timer = setTimeout(() => void send(), trouble?.kind === 'waiting' ? RETRY_MS : isUrgent ? 0 : WAIT_MS);
    return () => clearTimeout(timer);
  }, [mayTry, draft, held.version, trouble, scenario.id, client, isUrgent]);

  /** Goes on from a draft the server already holds. */
  const adopt = useCallback(
    (stored: DraftState, read: Draft) => {
      dropKeptDraft(scenario.id);
      setHeld({ draft: read, version: stored.draftVersion, at: stored.draftSavedAt, by: stored.draftSavedBy });
      setTrouble(null);
    },
    [scenario.id],
  );

  return { state: stateOf(trouble, isEditable && isDirty, isRefused, held), held, isDirty, adopt };
}

async function troubleOf(error: unknown, draft: Draft, askForTheirs: () => Promise<DraftState>): Promise<Trouble> {
  if (!(error instanceof ApiError)) return { kind: 'waiting', since: Date.now() };
  if (error.is('stale-version')) return { kind: 'conflict', theirs: await askForTheirs() };
  if (error.status >= 400 && error.status < 500) return { kind: 'refused', text: `${error.problem.title}. ${error.problem.detail}`, draft };
  return { kind: 'waiting', since: Date.now() };
}

function stateOf(trouble: Trouble | null, isDirty: boolean, isRefused: boolean, held: Held): SaveState {
  if (trouble?.kind === 'conflict') return { phase: 'conflict', theirs: trouble.theirs };
  if (trouble?.kind === 'refused' && isRefused) return { phase: 'refused', text: trouble.text };
  if (isDirty) return trouble?.kind === 'waiting' ? { phase: 'waiting' } : { phase: 'saving' };
  return { phase: 'saved', at: held.at, by: held.by };
}
