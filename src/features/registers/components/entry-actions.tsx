import { useState } from 'react';
import type { RegisterItem } from '../../../../shared/schemas/registers';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { Notice } from '../../../components/notice';
import { useMoveEntry } from '../api';
import { refusalText } from '../model/form-errors';

/** What can be done with an entry besides reading it. */
export function EntryActions({ item, onEdit }: { item: RegisterItem; onEdit: () => void }) {
  const move = useMoveEntry(item.register, item.id);
  const [isAsking, setIsAsking] = useState(false);
  const go = (kind: 'archive' | 'restore' | 'checked') => move.mutate({ move: kind, version: item.version }, { onSuccess: () => setIsAsking(false) });
  const failure = move.error ? <Notice tone="bad" title="This was not done">{refusalText(move.error)}</Notice> : null;
  if (item.isArchived)
    return (
      <>
        {failure}
        <Button kind="primary" isBusy={move.isPending} onClick={() => go('restore')}>Restore entry</Button>
      </>
    );
  return (
    <>
      {!isAsking && failure}
      <Button kind={item.isStale ? 'primary' : 'plain'} icon="check" isBusy={move.isPending && move.variables?.move === 'checked'} onClick={() => go('checked')}>Mark as checked today</Button>
      <Button kind={item.isStale ? 'plain' : 'primary'} icon="edit" onClick={onEdit}>Edit entry</Button>
      <Button kind="quiet" onClick={() => { move.reset(); setIsAsking(true); }}>Archive…</Button>
      <Dialog
        isOpen={isAsking}
        onClose={() => setIsAsking(false)}
        title={`Archive ${item.code} ${item.name}?`}
        says="It leaves the lists and new forecasts. Saved forecasts keep it, nothing is lost, and it can be restored at any time."
        actions={
          <>
            <Button kind="danger" isBusy={move.isPending} onClick={() => go('archive')}>Archive entry</Button>
            <Button onClick={() => setIsAsking(false)}>Keep it</Button>
          </>
        }
      >
        {failure}
      </Dialog>
    </>
  );
}
