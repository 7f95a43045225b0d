import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import { mailStates } from '../../../../shared/schemas/office';
import { Button } from '../../../components/button';
import { EmptyState } from '../../../components/empty-state';
import { SelectInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { Page } from '../../../components/page';
import { Loading } from '../../../components/progress-text';
import { RuledList, RuledRow } from '../../../components/ruled-list';
import { TimeText } from '../../../components/time-text';
import { errorText } from '../../../lib/form-errors';
import { useDefaultOffset } from '../../../lib/session';
import { OUTBOX_PAGE, outboxQuery, type MailState } from '../api';
import { MailStateWord, mailStateWords } from '../components/mail-state-word';
import { MailView } from '../components/mail-view';

/** Every mail the product wrote and what became of it. */
export function OutboxPage() {
  const [address, setAddress] = useSearchParams();
  const state = mailStates.find((known) => known === address.get('state'));
  const page = Math.max(0, Number.parseInt(address.get('page') ?? '1', 10) - 1 || 0);
  const { data, error, isPlaceholderData } = useQuery(outboxQuery(state, page));
  const [openId, setOpenId] = useState<string | null>(null);
  const offset = useDefaultOffset();
  const show = (next: { state?: MailState | undefined; page?: number }) => setAddress({ ...(next.state ? { state: next.state } : {}), ...(next.page ? { page: String(next.page + 1) } : {}) });
  return (
    <Page title="Outbox" above="Office">
      <div className="no-print flex flex-wrap items-center gap-x-6 gap-y-3 border-b border-rule py-4">
        <SelectInput aria-label="State of mails shown" value={state ?? ''} onChange={(event) => show({ state: mailStates.find((known) => known === event.target.value) })} className="w-48!">
          <option value="">All mails</option>
          {mailStates.map((known) => (
            <option key={known} value={known}>
              {mailStateWords[known].word}
            </option>
          ))}
        </SelectInput>
        <p role="status" className="ml-auto text-ink2">
          {data && `${data.total} ${data.total === 1 ? 'mail' : 'mails'}`}
        </p>
      </div>
      {data && !data.hasMailServer && (
        <Notice tone="note" title="No mail server is set" className="my-4">
          Mails are kept here and go nowhere. Open one to read it or to pass its link on. Set SMTP_URL to send them.
        </Notice>
      )}
      {error && !data && (
        <Notice tone="bad" title="The outbox cannot be read" className="mt-6">
          {errorText(error)}
        </Notice>
      )}
      {!data && !error && <Loading what="the outbox" />}
      {data?.mails.length === 0 && <EmptyState title={state || page > 0 ? 'No mail here' : 'No mail yet'}>Invitations, links for new passwords and notices will be listed here, with what became of them.</EmptyState>}
      <div aria-busy={isPlaceholderData || undefined}>
        <RuledList label="Mails">
          {data?.mails.map((mail) => (
            <RuledRow key={mail.id} lead={<TimeText iso={mail.createdAt} offset={offset} />} leadWidth="wide" trail={<MailStateWord state={mail.state} />} onOpen={() => setOpenId(mail.id)} openLabel={`Read the mail to ${mail.to}: ${mail.subject}`}>
              <p className="font-semibold">{mail.subject}</p>
              <p className="break-words text-ink2">to {mail.to}</p>
              {mail.lastError && <p className="break-words text-note text-ink2">{mail.lastError}</p>}
            </RuledRow>
          ))}
        </RuledList>
      </div>
      {data && data.total > OUTBOX_PAGE && (
        <div className="no-print flex items-center gap-4 pt-5">
          <Button icon="left" disabled={page === 0} onClick={() => show({ state, page: page - 1 })}>
            Newer
          </Button>
          <span className="text-ink2">
            {page * OUTBOX_PAGE + 1} to {Math.min(data.total, (page + 1) * OUTBOX_PAGE)} of {data.total}
          </span>
          <Button icon="right" disabled={(page + 1) * OUTBOX_PAGE >= data.total} onClick={() => show({ state, page: page + 1 })}>
            Older
          </Button>
        </div>
      )}
      {openId && <MailView id={openId} onClose={() => setOpenId(null)} />}
    </Page>
  );
}
