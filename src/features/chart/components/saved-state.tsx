import { StatusWord } from '../../../components/status-word';
import { useNow } from '../../../lib/use-now';
import type { SaveState } from '../hooks/use-draft-save';
import { savedWords } from './chart-head';

/** Where the draft is: kept by the server, on its way, or only in this browser. */
export function SavedState({ state, offset }: { state: SaveState; offset: string }) {
  const now = useNow(60_000);
  return (
    <span role="status" aria-live="polite" className="text-note text-ink2">
      {state.phase === 'saved' && savedWords(state.at, offset, now)}
      {state.phase === 'saving' && 'keeping the draft'}
      {state.phase === 'waiting' && <StatusWord tone="attention">kept in this browser, server does not answer</StatusWord>}
      {state.phase === 'refused' && <StatusWord tone="bad">draft not kept: {state.text}</StatusWord>}
      {state.phase === 'conflict' && <StatusWord tone="attention">changed by somebody else</StatusWord>}
    </span>
  );
}
