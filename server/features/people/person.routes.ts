import { z } from 'zod';
import { apiPaths } from '../../../shared/api-paths';
import { personCreateSchema, personSchema, personUpdateSchema } from '../../../shared/schemas/people';
import type { Deps } from '../../deps';
import { type Route, route } from '../../http/routes';
import { PersonService } from './person.service';

const tag = 'People';
const params = z.object({ personId: z.string().min(1).max(64) });
const id = ':personId';

export function personRoutes(deps: Deps): Route[] {
  const people = new PersonService(deps);
  return [
    route({
      method: 'get', path: apiPaths.people, action: 'person:read', tag, summary: 'Lists people by name',
      response: z.array(personSchema),
      handle: () => people.list(),
    }),
    route({
      method: 'post', path: apiPaths.people, action: 'person:write', tag, summary: 'Takes a person in and mails the invitation',
      body: personCreateSchema, response: personSchema, status: 201,
      handle: async ({ actor, body, res }) => {
        const person = await people.create(actor, body);
        res.location(apiPaths.person(person.id));
        return person;
      },
    }),
    route({
      method: 'get', path: apiPaths.person(id), action: 'person:read', tag, summary: 'Gives one person',
      params, response: personSchema,
      handle: ({ params }) => people.get(params.personId),
    }),
    route({
      method: 'put', path: apiPaths.person(id), action: 'person:write', tag, summary: 'Changes a person; deactivating ends their sessions at once',
      params, body: personUpdateSchema, response: personSchema,
      handle: ({ actor, params, body }) => people.update(actor, params.personId, body),
    }),
    route({
      method: 'post', path: apiPaths.personInvite(id), action: 'person:write', tag, summary: 'Mails the invitation again, or a link for a new password',
      params,
      handle: ({ actor, params }) => people.invite(actor, params.personId),
    }),
  ];
}
