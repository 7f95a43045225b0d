import { useState, type SubmitEvent } from 'react';
import type { RegisterItem } from '../../../../shared/schemas/registers';
import { Button, type ButtonKind } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { Field } from '../../../components/field';
import { TextInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { useMoveEntry, type Move } from '../api';
import { refusalText } from '../model/form-errors';

const LONGEST_REASON = 300;

/** What is asked before each move: its title, what it does, what the reason is about, and the button that does it. */
const questions: Record<Move, { title: (called: string) => string; says: string; reason: string; act: string; kind: ButtonKind }> = {
  checked: { title: (called) => `Is ${called} still right?`, says: 'Its date of the last check becomes today, and the history says that you looked.', reason: 'How it was checked', act: 'Mark as checked today', kind: 'primary' },
  archive: { title: (called) => `Archive ${called}?`, says: 'It leaves the lists and new forecasts. Saved forecasts keep it, nothing is lost, and it can be restored at any time.', reason: 'Why it is archived', act: 'Archive entry', kind: 'danger' },
  restore: { title: (called) => `Restore ${called}?`, says: 'It comes back into the lists and new forecasts as it was.', reason: 'Why it is restored', act: 'Restore entry', kind: 'primary' },
};

/** What can be done with an entry besides reading it. */
export function EntryActions({ item, onEdit }: { item: RegisterItem; onEdit: () => void }) {
  const [asked, setAsked] = useState<Move | null>(null);
  return (
    <>
      {item.isArchived ? (
        <Button kind="primary" onClick={() => setAsked('restore')}>Restore entry…</Button>
      ) : (
        <>
          <Button kind={item.isStale ? 'primary' : 'plain'} icon="check" onClick={() => setAsked('checked')}>Mark as checked…</Button>
          <Button kind={item.isStale ? 'plain' : 'primary'} icon="edit" onClick={onEdit}>Edit entry</Button>
          <Button kind="quiet" onClick={() => setAsked('archive')}>Archive…</Button>
        </>
      )}
      {asked && <MoveDialog key={asked} item={item} asked={asked} onClose={() => setAsked(null)} />}
    </>
  );
}

function MoveDialog({ item, asked, onClose }: { item: RegisterItem; asked: Move; onClose: () => void }) {
  const { title, says, reason, act, kind } = questions[asked];
  const move = useMoveEntry(item.register, item.id);
  const [text, setText] = useState('');
  const handleSubmit = (event: SubmitEvent) => {
    event.preventDefault();
    move.mutate({ move: asked, version: item.version, reason: text.trim() }, { onSuccess: onClose });
  };
  return (
    <Dialog isOpen onClose={onClose} title={title(`${item.code} ${item.name}`)} says={says}>
      <form onSubmit={handleSubmit} className="flex flex-col gap-5">
        {move.error && <Notice tone="bad" title="This was not done">{refusalText(move.error)}</Notice>}
        <Field label={reason} isOptional>
          <TextInput value={text} onChange={(event) => setText(event.target.value)} maxLength={LONGEST_REASON} data-autofocus />
        </Field>
        <div className="flex flex-wrap gap-3">
          <Button type="submit" kind={kind} isBusy={move.isPending}>{act}</Button>
          <Button kind="quiet" onClick={onClose}>Cancel</Button>
        </div>
      </form>
    </Dialog>
  );
}
