import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import { roleWords } from '../../../../shared/permissions';
import type { Person } from '../../../../shared/schemas/people';
import { EmptyState } from '../../../components/empty-state';
import { CheckInput, SearchInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { Page } from '../../../components/page';
import { Loading } from '../../../components/progress-text';
import { RuledList, RuledRow } from '../../../components/ruled-list';
import { StatusWord } from '../../../components/status-word';
import { TimeText } from '../../../components/time-text';
import { errorText } from '../../../lib/form-errors';
import { useCan, useDefaultOffset, useSession } from '../../../lib/session';
import { peopleQuery } from '../api';
import { EditPerson } from '../components/edit-person';
import { InvitePerson } from '../components/invite-person';

const textOf = ({ name, email, roles }: Person): string => [name, email, ...roles.map((role) => roleWords[role].title)].join(' ').toLowerCase();
const matches = (person: Person, typed: string): boolean => typed.toLowerCase().split(/\s+/).every((word) => textOf(person).includes(word));

/** Everybody who has access, what they may do, and when they were last here. */
export function PeoplePage() {
  const { data, error } = useQuery(peopleQuery);
  const canWrite = useCan('person:write');
  const [address, setAddress] = useSearchParams();
  const typed = address.get('search') ?? '';
  const hasInactive = address.get('show') === 'all';
  const [editing, setEditing] = useState<Person | null>(null);
  const [invited, setInvited] = useState<{ name: string; email: string } | null>(null);
  const set = (key: string, value: string) =>
    setAddress(
      (now) => {
        if (value) now.set(key, value);
        else now.delete(key);
        return now;
      },
      { replace: true },
    );
  const shown = data?.filter((person) => (hasInactive || person.isActive) && matches(person, typed));
  const hidden = data?.filter((person) => !hasInactive && !person.isActive && matches(person, typed)).length ?? 0;
  return (
    <Page title="People" above="Office" actions={canWrite && <InvitePerson onInvited={(name, email) => setInvited({ name, email })} />}>
      <div className="no-print flex flex-wrap items-center gap-x-6 gap-y-2 border-b border-rule py-4">
        <SearchInput label="Search people" placeholder="Search name, e-mail, role" value={typed} onChange={(value) => set('search', value)} className="w-full sm:w-96" />
        <CheckInput label="Deactivated ones too" checked={hasInactive} onChange={(event) => set('show', event.target.checked ? 'all' : '')} />
        <p role="status" className="ml-auto text-ink2">
          {shown && `${shown.length} ${shown.length === 1 ? 'person' : 'people'}${hidden > 0 ? `, ${hidden} deactivated not shown` : ''}`}
        </p>
      </div>
      {invited && (
        <Notice tone="good" title={`${invited.name} is invited`} className="my-4">
          The link goes to {invited.email} and works for 72 hours. Where no mail server is set it waits in the outbox.
        </Notice>
      )}
      {error && !data && (
        <Notice tone="bad" title="The people cannot be read" className="mt-6">
          {errorText(error)}
        </Notice>
      )}
      {!data && !error && <Loading what="the people" />}
      {shown?.length === 0 && <EmptyState title={`Nobody matches "${typed}"`}>Every word must stand in the name, the e-mail or a role.</EmptyState>}
      <RuledList label="People">{shown?.map((person) => <PersonRow key={person.id} person={person} {...(canWrite ? { onOpen: () => setEditing(person) } : {})} />)}</RuledList>
      {editing && <EditPerson key={editing.id} person={editing} onClose={() => setEditing(null)} />}
    </Page>
  );
}

function PersonRow({ person, onOpen }: { person: Person; onOpen?: () => void }) {
  const offset = useDefaultOffset();
  const isSelf = useSession()?.person?.id === person.id;
  const { name, email, roles, phone, licenceNumber, lastSignInAt } = person;
  return (
    <RuledRow
      {...(onOpen ? { onOpen, openLabel: `Edit ${name}` } : {})}
      lead={<AccessWord person={person} />}
      trail={
        <div className="pointer-events-none sm:w-56 sm:text-right">
          {lastSignInAt ? <TimeText iso={lastSignInAt} offset={offset} /> : <span className="text-ink2">never signed in</span>}
          {lastSignInAt && <div className="text-note text-ink2">last sign-in</div>}
        </div>
      }
    >
      <p className="flex flex-wrap items-baseline gap-x-3">
        <span className="text-lead font-semibold">{name}</span>
        {isSelf && <span className="text-note text-ink2">you</span>}
        <span>{roles.map((role) => roleWords[role].title).join(', ')}</span>
      </p>
      <p className="break-words text-ink2">{[email, phone, licenceNumber && `licence ${licenceNumber}`].filter(Boolean).join(' · ')}</p>
    </RuledRow>
  );
}

function AccessWord({ person }: { person: Person }) {
  if (!person.isActive) return <StatusWord tone="neutral">deactivated</StatusWord>;
  return person.hasPassword ? <StatusWord tone="good">active</StatusWord> : <StatusWord tone="attention">invited</StatusWord>;
}
