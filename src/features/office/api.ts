import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import { apiPaths } from '../../../shared/api-paths';
import type { AuditPage, auditKinds, Mail, mailStates, Outbox } from '../../../shared/schemas/office';
import type { Person, personCreateSchema, personUpdateSchema } from '../../../shared/schemas/people';
import { api } from '../../lib/api-client';

export type PersonInput = z.input<typeof personCreateSchema>;
export type PersonUpdate = z.input<typeof personUpdateSchema>;
export type MailState = (typeof mailStates)[number];
export type AuditKind = (typeof auditKinds)[number];

const withQuery = (path: string, values: Record<string, string | number | undefined>): string => {
  const query = new URLSearchParams(Object.entries(values).flatMap(([key, value]) => (value === undefined ? [] : [[key, String(value)]])));
  return query.size === 0 ? path : `${path}?${query}`;
};

export const peopleQuery = queryOptions({ queryKey: ['people'], queryFn: ({ signal }) => api.get<Person[]>(apiPaths.people, { signal }) });

export const OUTBOX_PAGE = 50;
export const outboxQuery = (state: MailState | undefined, page: number) =>
  queryOptions({ queryKey: ['outbox', 'list', state, page], queryFn: ({ signal }) => api.get<Outbox>(withQuery(apiPaths.outbox, { state, offset: page * OUTBOX_PAGE, limit: OUTBOX_PAGE }), { signal }), placeholderData: (before) => before });
export const mailQuery = (id: string) => queryOptions({ queryKey: ['outbox', 'mail', id], queryFn: ({ signal }) => api.get<Mail>(apiPaths.outboxMail(id), { signal }) });

export const auditQuery = (kind: AuditKind | undefined) =>
  infiniteQueryOptions({
    queryKey: ['audit', kind],
    queryFn: ({ pageParam, signal }) => api.get<AuditPage>(withQuery(apiPaths.audit, { kind, before: pageParam ?? undefined }), { signal }),
    initialPageParam: null as number | null,
    getNextPageParam: (page) => page.nextBefore,
  });

function useRenewPeople() {
  const client = useQueryClient();
  return () => Promise.all([client.invalidateQueries({ queryKey: ['people'] }), client.invalidateQueries({ queryKey: ['outbox'] })]);
}

export function useInvitePerson() {
  const renew = useRenewPeople();
  return useMutation({ mutationFn: (body: PersonInput) => api.post<Person>(apiPaths.people, body), onSuccess: renew });
}

export function useUpdatePerson(id: string) {
  const renew = useRenewPeople();
  return useMutation({ mutationFn: (body: PersonUpdate) => api.put<Person>(apiPaths.person(id), body), onSettled: renew });
}

export function useSendLink(id: string) {
  const renew = useRenewPeople();
  return useMutation({ mutationFn: () => api.post<undefined>(apiPaths.personInvite(id)), onSuccess: renew });
}
