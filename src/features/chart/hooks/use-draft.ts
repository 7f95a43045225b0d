import { useCallback, useMemo, useReducer } from 'react';
import type { Draft } from '../model/draft';
import { changed, redone, startHistory, undone, type History } from '../model/draft-history';

type Act = { kind: 'change'; change: (draft: Draft) => Draft; key: string; atMs: number } | { kind: 'undo' } | { kind: 'redo' } | { kind: 'start'; draft: Draft };

function reduce(history: History, act: Act): History {
  switch (act.kind) {
    case 'change':
      return changed(history, act.change(history.present), act.key, act.atMs);
    case 'undo':
      return undone(history);
    case 'redo':
      return redone(history);
    case 'start':
      return startHistory(act.draft);
  }
}

export type ChangeDraft = (change: (draft: Draft) => Draft, key?: string) => void;

/** The draft with its undo and redo. `key` names the field, so that typing one figure is one step back. */
export function useDraft(first: Draft) {
  const [history, act] = useReducer(reduce, first, startHistory);
  const change = useCallback<ChangeDraft>((apply, key = '') => act({ kind: 'change', change: apply, key, atMs: performance.now() }), []);
  const undo = useCallback(() => act({ kind: 'undo' }), []);
  const redo = useCallback(() => act({ kind: 'redo' }), []);
  const start = useCallback((draft: Draft) => act({ kind: 'start', draft }), []);
  return useMemo(
    () => ({ draft: history.present, change, undo, redo, start, canUndo: history.past.length > 0, canRedo: history.future.length > 0 }),
    [history, change, undo, redo, start],
  );
}
export type DraftHandle = ReturnType<typeof useDraft>;
