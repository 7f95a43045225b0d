import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import type { RegisterItem, RegisterName } from '../../../../shared/schemas/registers';
import { Button, ButtonLink } from '../../../components/button';
import { Notice } from '../../../components/notice';
import { Page } from '../../../components/page';
import { Loading } from '../../../components/progress-text';
import { TimeText } from '../../../components/time-text';
import { errorText } from '../../../lib/form-errors';
import { useDefaultOffset } from '../../../lib/session';
import { registerVersionQuery } from '../api';
import { type EntryValues, valuesOf } from '../model/empty-entry';
import { CheckedText } from './checked-text';
import { EntryActions } from './entry-actions';
import { EntryReading } from './entry-reading';
import { EntryWriting } from './entry-writing';
import { HistoryPanel } from './history-panel';
import { RegisterLink } from './register-link';

type Edit = { start: RegisterItem; initial: EntryValues };

/** An entry that is stored: read, edited in place, or one of its old versions. */
export function StoredEntry({ register, item }: { register: RegisterName; item: RegisterItem }) {
  const [params, setParams] = useSearchParams();
  const [edit, setEdit] = useState<Edit | null>(null);
  const wanted = Number(params.get('version')) || item.version;
  const isOld = wanted !== item.version;
  const begin = (initial: EntryValues) => {
    setParams({});
    setEdit({ start: item, initial });
  };
  const title = `${item.name}`;
  const above = <><RegisterLink register={register} />{` / ${item.code}`}</>;
  if (edit)
    return (
      <Page title={title} above={above} below={`Editing version ${edit.start.version}`}>
        <EntryWriting register={register} start={edit.start} current={item} initial={edit.initial} onSaved={() => setEdit(null)} onLeave={() => setEdit(null)} />
      </Page>
    );
  const canUpdate = item.abilities.update;
  return (
    <Page title={title} tabTitle={`${item.code} ${item.name}`} above={above} below={<Below item={item} />} actions={canUpdate && !isOld && <EntryActions item={item} onEdit={() => begin(valuesOf(item))} />}>
      {item.isArchived && <Notice className="mt-6" title="This entry is archived">It stands in no list and no new forecast. Restore it to use it again.</Notice>}
      {isOld ? (
        <OldVersion register={register} item={item} version={wanted} onEdit={canUpdate && !item.isArchived ? begin : null} />
      ) : (
        <EntryReading key={item.version} register={register} values={valuesOf(item)} />
      )}
      <HistoryPanel register={register} id={item.id} shownVersion={wanted} />
    </Page>
  );
}

function Below({ item }: { item: RegisterItem }) {
  const offset = useDefaultOffset();
  return (
    <span className="flex flex-wrap gap-x-6 gap-y-1">
      <CheckedText item={item} />
      <span>Version {item.version}, <TimeText iso={item.updatedAt} offset={offset} />, {item.updatedBy}</span>
    </span>
  );
}

type OldProps = { register: RegisterName; item: RegisterItem; version: number; onEdit: ((values: EntryValues) => void) | null };

function OldVersion({ register, item, version, onEdit }: OldProps) {
  const { data: old, error } = useQuery(registerVersionQuery(register, item.id, version));
  const offset = useDefaultOffset();
  if (error) return <Notice tone="bad" className="mt-6" title={`Version ${version} could not be read`} actions={<ButtonLink to="?">Show the present version</ButtonLink>}>{errorText(error)}</Notice>;
  if (!old) return <Loading what={`version ${version}`} />;
  return (
    <>
      <Notice
        tone="attention"
        className="mt-6"
        title={`Version ${version} of ${item.version}, not the present one`}
        actions={<><ButtonLink to="?">Show the present version</ButtonLink>{onEdit && <Button onClick={() => onEdit(valuesOf(old))}>Edit from this version</Button>}</>}
      >
        Written <TimeText iso={old.at} offset={offset} /> by {old.by}{old.reason && `: ${old.reason}`}. Its name was {old.name}.
      </Notice>
      <EntryReading key={`old-${version}`} register={register} values={valuesOf(old)} />
    </>
  );
}
