import { useState } from 'react';
import type { Incident } from '../../../../shared/schemas/incidents';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { Notice } from '../../../components/notice';
import { errorText } from '../../../lib/form-errors';
import { useMoveIncident } from '../api';

/** Closing and reopening, each asked once more: a closed incident takes no entries and leaves the Watch. */
export function CloseIncident({ incident }: { incident: Incident }) {
  const move = useMoveIncident(incident.id);
  const [isAsking, setIsAsking] = useState(false);
  const to = incident.state === 'open' ? 'close' : 'reopen';
  const words = to === 'close' ? { verb: 'Close incident', says: 'It leaves the Watch and takes no more entries or scenarios until it is reopened. Nothing is deleted.' } : { verb: 'Reopen incident', says: 'It returns to the Watch and takes entries and scenarios again.' };
  const confirm = () => move.mutate(to, { onSuccess: () => setIsAsking(false) });
  return (
    <>
      <Button onClick={() => setIsAsking(true)}>{words.verb}</Button>
      <Dialog
        isOpen={isAsking}
        onClose={() => setIsAsking(false)}
        title={`${words.verb} ${incident.number}?`}
        says={words.says}
        actions={
          <>
            <Button kind="primary" onClick={confirm} isBusy={move.isPending}>
              {words.verb}
            </Button>
            <Button kind="quiet" onClick={() => setIsAsking(false)}>
              Cancel
            </Button>
          </>
        }
      >
        {move.error && (
          <Notice tone="bad" title="This was not done">
            {errorText(move.error)}
          </Notice>
        )}
      </Dialog>
    </>
  );
}
