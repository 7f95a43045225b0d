import { z } from 'zod';
import { apiPaths } from '../../../shared/api-paths';
import { mailSchema, outboxQuerySchema, outboxSchema } from '../../../shared/schemas/office';
import type { Deps } from '../../deps';
import { AppError } from '../../http/problems';
import { type Route, route } from '../../http/routes';
import { presentMail, presentMailSummary } from './outbox.presenter';
import { OutboxRepository } from './outbox.repository';

const tag = 'Outbox';

export function outboxRoutes(deps: Deps): Route[] {
  const outbox = new OutboxRepository(deps.db);
  return [
    route({
      method: 'get', path: apiPaths.outbox, action: 'outbox:read', tag, summary: 'Lists mails, the newest first',
      query: outboxQuerySchema, response: outboxSchema,
      handle: async ({ query }) => {
        const [mails, total] = await outbox.list(query);
        return { mails: mails.map(presentMailSummary), total, hasMailServer: deps.config.smtpUrl !== null };
      },
    }),
    route({
      method: 'get', path: apiPaths.outboxMail(':mailId'), action: 'outbox:read', tag, summary: 'Gives one mail with its text',
      params: z.object({ mailId: z.string().min(1).max(64) }), response: mailSchema,
      handle: async ({ params }) => {
        const mail = await outbox.find(params.mailId);
        if (!mail) throw new AppError('not-found', `There is no mail ${params.mailId}`);
        return presentMail(mail);
      },
    }),
  ];
}
