import { useQuery } from '@tanstack/react-query';
import { useParams, useNavigate } from 'react-router-dom';
import type { RegisterName } from '../../../../shared/schemas/registers';
import { ButtonLink } from '../../../components/button';
import { EmptyState } from '../../../components/empty-state';
import { Notice } from '../../../components/notice';
import { Page } from '../../../components/page';
import { Loading } from '../../../components/progress-text';
import { ApiError } from '../../../lib/api-client';
import { errorText } from '../../../lib/form-errors';
import { registerWriteActions } from '../../../../shared/permissions';
import { useCan } from '../../../lib/session';
import { registerItemQuery } from '../api';
import { EntryWriting } from '../components/entry-writing';
import { StoredEntry } from '../components/stored-entry';
import { RegisterLink } from '../components/register-link';
import { emptyEntry } from '../model/empty-entry';
import { registerWords } from '../model/register-words';
import '../components/registers.css';

/** One entry of a register, or a new one. */
export function RegisterItemPage({ register }: { register: RegisterName }) {
  const { itemId = '' } = useParams();
  return itemId === 'new' ? <NewEntry register={register} /> : <EntryPage key={itemId} register={register} id={itemId} />;
}

function NewEntry({ register }: { register: RegisterName }) {
  const navigate = useNavigate();
  const canAdd = useCan(registerWriteActions[register]);
  const { one } = registerWords[register];
  return (
    <Page title={`New ${one}`} above={<RegisterLink register={register} />}>
      {canAdd ? (
        <EntryWriting
          register={register}
          start={null}
          current={null}
          initial={emptyEntry(register)}
          onSaved={(item) => void navigate(`/${register}/${item.id}`, { replace: true })}
          onLeave={() => void navigate(`/${register}`)}
        />
      ) : (
        <Notice className="mt-6" title="Your role reads this register">Ask an engineer to add the {one}.</Notice>
      )}
    </Page>
  );
}

function EntryPage({ register, id }: { register: RegisterName; id: string }) {
  const { data: item, error } = useQuery(registerItemQuery(register, id));
  const { one, title } = registerWords[register];
  if (item) return <StoredEntry register={register} item={item} />;
  if (error instanceof ApiError && error.is('not-found'))
    return (
      <Page title={`No such ${one}`} above={<RegisterLink register={register} />}>
        <EmptyState title={`There is no ${one} "${id}" in the register`} action={<ButtonLink to={`/${register}`}>Back to {title.toLowerCase()}</ButtonLink>}>The address may be mistyped.</EmptyState>
      </Page>
    );
  return (
    <Page title={title} above={<RegisterLink register={register} />}>
      {error ? <Notice tone="bad" className="mt-6" title={`The ${one} could not be read`}>{errorText(error)}</Notice> : <Loading what={`the ${one}`} />}
    </Page>
  );
}
