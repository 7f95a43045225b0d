import { useState } from 'react';
import type { Person } from '../../../../shared/schemas/people';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { Notice } from '../../../components/notice';
import { ApiError } from '../../../lib/api-client';
import { errorText } from '../../../lib/form-errors';
import { type PersonUpdate, useSendLink, useUpdatePerson } from '../api';
import { PersonForm } from './person-form';

/** What is known of a person, to be changed; and the acts on their access. `person` is the state that was opened. */
export function EditPerson({ person, onClose }: { person: Person; onClose: () => void }) {
  const [base, setBase] = useState(person);
  const update = useUpdatePerson(person.id);
  const [newer, setNewer] = useState<Person | null>(null);
  const save = async (input: Partial<PersonUpdate>) => {
    const { name, roles, phone, licenceNumber, isActive, version } = { ...base, ...input };
    try {
      await update.mutateAsync({ name, roles, phone, licenceNumber, isActive, version });
    } catch (error) {
      if (error instanceof ApiError && error.is('stale-version')) setNewer(error.problem.current as Person);
      throw error;
    }
    onClose();
  };
  return (
    <Dialog isOpen onClose={onClose} title={base.name} says={base.email}>
      {newer && (
        <Notice
          tone="attention"
          title="Somebody else has changed this person"
          actions={
            <Button
              onClick={() => {
                setBase(newer);
                setNewer(null);
              }}
            >
              Take the newer state
            </Button>
          }
        >
          What you typed is still here. Taking the newer state replaces it.
        </Notice>
      )}
      <PersonForm key={base.version} start={base} hasEmail={false} submitLabel="Save person" onCancel={onClose} onSubmit={save} />
      <Access person={base} onSetActive={(isActive) => save({ isActive })} />
    </Dialog>
  );
}

function Access({ person, onSetActive }: { person: Person; onSetActive: (isActive: boolean) => Promise<void> }) {
  const [isAsking, setIsAsking] = useState(false);
  const [isBusy, setIsBusy] = useState(false);
  const [failure, setFailure] = useState<string | null>(null);
  const sendLink = useSendLink(person.id);
  const set = async (isActive: boolean) => {
    setIsBusy(true);
    setFailure(null);
    try {
      await onSetActive(isActive);
    } catch (error) {
      setFailure(errorText(error));
      setIsBusy(false);
    }
  };
  return (
    <section aria-label="Access" className="border-t border-edge pt-4">
      <h3 className="font-semibold">Access</h3>
      {sendLink.isSuccess && (
        <Notice tone="good" title="The link is on its way" className="mt-3">
          It goes to {person.email}. Earlier links no longer work.
        </Notice>
      )}
      {(failure ?? sendLink.error) && (
        <Notice tone="bad" title="This was not done" className="mt-3">
          {failure ?? errorText(sendLink.error)}
        </Notice>
      )}
      {isAsking ? (
        <div className="pt-2">
          <p className="mb-3 text-ink2">{person.name} is signed out at once and cannot sign in again until activated. Everything they did stays under their name.</p>
          <div className="flex flex-wrap gap-3">
            <Button kind="danger" isBusy={isBusy} onClick={() => void set(false)}>
              Deactivate {person.name}
            </Button>
            <Button kind="quiet" onClick={() => setIsAsking(false)}>
              Keep active
            </Button>
          </div>
        </div>
      ) : (
        <div className="flex flex-wrap gap-3 pt-3">
          {person.isActive ? (
            <>
              <Button icon="mail" isBusy={sendLink.isPending} onClick={() => sendLink.mutate()}>
                {person.hasPassword ? 'Send link for a new password' : 'Send invitation again'}
              </Button>
              <Button kind="danger" onClick={() => setIsAsking(true)}>
                Deactivate
              </Button>
            </>
          ) : (
            <Button isBusy={isBusy} onClick={() => void set(true)}>
              Activate
            </Button>
          )}
        </div>
      )}
    </section>
  );
}
