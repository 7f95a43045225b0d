import { useQuery } from '@tanstack/react-query';
import { Dialog } from '../../../components/dialog';
import { Notice } from '../../../components/notice';
import { Loading } from '../../../components/progress-text';
import { TimeText } from '../../../components/time-text';
import { errorText } from '../../../lib/form-errors';
import { useDefaultOffset } from '../../../lib/session';
import { mailQuery } from '../api';
import { MailStateWord } from './mail-state-word';

export function MailView({ id, onClose }: { id: string; onClose: () => void }) {
  const { data: mail, error } = useQuery(mailQuery(id));
  const offset = useDefaultOffset();
  return (
    <Dialog isOpen onClose={onClose} width="wide" title={mail?.subject ?? 'Mail'}>
      {error && (
        <Notice tone="bad" title="The mail cannot be read">
          {errorText(error)}
        </Notice>
      )}
      {!mail && !error && <Loading what="the mail" />}
      {mail && (
        <>
          <dl className="grid grid-cols-[auto_minmax(0,1fr)] gap-x-6 gap-y-1">
            <dt className="text-ink2">To</dt>
            <dd className="break-words">{mail.to}</dd>
            <dt className="text-ink2">Written</dt>
            <dd>
              <TimeText iso={mail.createdAt} offset={offset} />
            </dd>
            <dt className="text-ink2">State</dt>
            <dd className="flex flex-wrap gap-x-3">
              <MailStateWord state={mail.state} />
              {mail.sentAt && <TimeText iso={mail.sentAt} offset={offset} />}
            </dd>
            {mail.attempts > 0 && (
              <>
                <dt className="text-ink2">Attempts</dt>
                <dd>{mail.attempts}</dd>
              </>
            )}
            {mail.nextAttemptAt && (
              <>
                <dt className="text-ink2">Next attempt</dt>
                <dd>
                  <TimeText iso={mail.nextAttemptAt} offset={offset} />
                </dd>
              </>
            )}
          </dl>
          {mail.lastError && (
            <Notice tone={mail.state === 'failed' ? 'bad' : 'attention'} title={mail.state === 'failed' ? 'The mail could not be delivered' : 'The last attempt failed'}>
              The mail host says: {mail.lastError}
            </Notice>
          )}
          <div className="border-y border-rule bg-sheet px-4 py-3 break-words whitespace-pre-wrap">
            <LinkedText text={mail.text} />
          </div>
        </>
      )}
    </Dialog>
  );
}

/** The text with its addresses of this installation as links. */
function LinkedText({ text }: { text: string }) {
  return text.split(/(https?:\/\/\S+)/).map((part, i) =>
    i % 2 === 1 ? (
      <a key={i} href={part} className="text-kingfisher underline underline-offset-2">
        {part}
      </a>
    ) : (
      part
    ),
  );
}
