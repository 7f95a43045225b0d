import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { Notice } from '../../../components/notice';
import { errorText } from '../../../lib/form-errors';
import { useSignOutEverywhere } from '../api';

export function EndSessions() {
  const signOut = useSignOutEverywhere();
  const navigate = useNavigate();
  const [isAsking, setIsAsking] = useState(false);
  const close = () => setIsAsking(false);
  return (
    <div className="pt-5">
      <p className="mb-4 max-w-[60ch] text-ink2">After a lost telephone or a shared desk: every page signed in as you ends at once, on this device too.</p>
      <Button onClick={() => setIsAsking(true)}>Sign out everywhere</Button>
      <Dialog
        isOpen={isAsking}
        onClose={close}
        title="Sign out everywhere?"
        says="All your sessions end, this one too. Drafts are kept."
        actions={
          <>
            <Button kind="primary" isBusy={signOut.isPending} onClick={() => signOut.mutate(undefined, { onSuccess: () => void navigate('/sign-in') })}>
              Sign out everywhere
            </Button>
            <Button kind="quiet" onClick={close}>
              Cancel
            </Button>
          </>
        }
      >
        {signOut.error && (
          <Notice tone="bad" title="This was not done">
            {errorText(signOut.error)}
          </Notice>
        )}
      </Dialog>
    </div>
  );
}
