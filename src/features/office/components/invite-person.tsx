import { useState } from 'react';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';
import { useInvitePerson } from '../api';
import { PersonForm } from './person-form';

export function InvitePerson({ onInvited }: { onInvited: (name: string, email: string) => void }) {
  const [isOpen, setIsOpen] = useState(false);
  const invite = useInvitePerson();
  const close = () => setIsOpen(false);
  return (
    <>
      <Button kind="primary" icon="add" onClick={() => setIsOpen(true)}>
        Invite somebody
      </Button>
      <Dialog isOpen={isOpen} onClose={close} title="Invite somebody" says="A mailed link, good for 72 hours, lets the person choose a password.">
        <PersonForm
          start={{ name: '', email: '', roles: [], phone: '', licenceNumber: '' }}
          hasEmail
          submitLabel="Send invitation"
          onCancel={close}
          onSubmit={async (input) => {
            const person = await invite.mutateAsync(input);
            onInvited(person.name, person.email);
            close();
          }}
        />
      </Dialog>
    </>
  );
}
