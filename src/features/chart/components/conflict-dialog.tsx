import { instantMs } from '../../../../shared/civil';
import { formatClockOffset } from '../../../../shared/format';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import type { DraftState } from '../api';
import type { Draft } from '../model/draft';
import { draftDifferences } from '../model/draft-differences';

type Props = { theirs: DraftState; theirDraft: Draft; myDraft: Draft; offset: string; isBusy: boolean; error: string | null; onTake: () => void; onCopy: () => void; onPutOff: () => void };

/** Two people have written: both drafts stay, one here, one as a copy if wanted. */
export function ConflictDialog({ theirs, theirDraft, myDraft, offset, isBusy, error, onTake, onCopy, onPutOff }: Props) {
  const differences = draftDifferences(myDraft, theirDraft);
  return (
    <Dialog
      isOpen
      onClose={onPutOff}
      title={`${theirs.draftSavedBy} has changed this scenario`}
      says={`Their draft was kept ${formatClockOffset(instantMs(theirs.draftSavedAt), offset)}. Yours is not lost: it is kept in this browser until you choose.`}
      actions={
        <>
          <Button kind="primary" isBusy={isBusy} onClick={onCopy}>
            Keep mine as a copy
          </Button>
          <Button onClick={onTake}>Take theirs</Button>
        </>
      }
    >
      <p>
        {differences.length > 0 ? `They differ in: ${differences.join(', ')}.` : 'Both hold the same figures.'} A copy becomes a scenario of its own in this incident. Taking theirs can be undone with Ctrl+Z.
      </p>
      {error && <p className="font-semibold text-bad">{error}</p>}
    </Dialog>
  );
}
