import { useInfiniteQuery } from '@tanstack/react-query';
import { Link, useSearchParams } from 'react-router-dom';
import { allows } from '../../../../shared/permissions';
import { type AuditEntry, auditKinds } from '../../../../shared/schemas/office';
import { Button } from '../../../components/button';
import { EmptyState } from '../../../components/empty-state';
import { SelectInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { Page } from '../../../components/page';
import { Loading } from '../../../components/progress-text';
import { RuledList, RuledRow } from '../../../components/ruled-list';
import { TimeText } from '../../../components/time-text';
import { errorText } from '../../../lib/form-errors';
import { useDefaultOffset, useSession } from '../../../lib/session';
import { auditQuery, type AuditKind } from '../api';
import { auditLines, auditSubjectLink, auditWord } from '../audit-words';

const kindWords: Record<AuditKind, string> = { session: 'Sign-ins and passwords', person: 'People', register: 'Registers', incident: 'Incidents', scenario: 'Scenarios', revision: 'Revisions', run: 'Runs', mail: 'Mails' };

/** Who did what and when. Nothing here can be changed. */
export function AuditPage() {
  const [address, setAddress] = useSearchParams();
  const kind = auditKinds.find((known) => known === address.get('kind'));
  const { data, error, hasNextPage, isFetchingNextPage, fetchNextPage } = useInfiniteQuery(auditQuery(kind));
  const entries = data?.pages.flatMap((page) => page.entries);
  return (
    <Page title="Audit trail" above="Office" below="Who did what, the newest first. Entries are never changed or taken out.">
      <div className="no-print flex flex-wrap items-center gap-x-6 gap-y-3 border-b border-rule py-4">
        <SelectInput aria-label="Kind of entries shown" value={kind ?? ''} onChange={(event) => setAddress(event.target.value ? { kind: event.target.value } : {}, { replace: true })} className="w-56!">
          <option value="">Everything</option>
          {auditKinds.map((known) => (
            <option key={known} value={known}>
              {kindWords[known]}
            </option>
          ))}
        </SelectInput>
      </div>
      {error && !data && (
        <Notice tone="bad" title="The audit trail cannot be read" className="mt-6">
          {errorText(error)}
        </Notice>
      )}
      {!data && !error && <Loading what="the audit trail" />}
      {entries?.length === 0 && <EmptyState title="No entry here">Every change of people, registers, incidents and scenarios will leave one.</EmptyState>}
      <RuledList label="Audit entries">{entries?.map((entry) => <EntryRow key={entry.id} entry={entry} />)}</RuledList>
      {hasNextPage && (
        <Button className="no-print mt-5" isBusy={isFetchingNextPage} onClick={() => void fetchNextPage()}>
          Show older entries
        </Button>
      )}
    </Page>
  );
}

function EntryRow({ entry }: { entry: AuditEntry }) {
  const offset = useDefaultOffset();
  const person = useSession()?.person;
  const link = auditSubjectLink(entry);
  const isOpenToPerson = !!link && !!person && allows(person.roles, link.action);
  const lines = auditLines(entry.detail);
  return (
    <RuledRow
      leadWidth="wide"
      lead={
        <>
          <TimeText iso={entry.at} offset={offset} say="day" /> <TimeText iso={entry.at} offset={offset} say="time" />
        </>
      }
      trail={
        isOpenToPerson && (
          <Link to={link.to} className="inline-flex min-h-10 items-center text-kingfisher underline underline-offset-2">
            {link.words}
          </Link>
        )
      }
    >
      <p>
        <span className="font-semibold">{entry.personName}</span> {auditWord(entry.action)}
      </p>
      {lines.length > 0 && <p className="max-w-[90ch] break-words text-note text-ink2">{lines.join(' · ')}</p>}
    </RuledRow>
  );
}
