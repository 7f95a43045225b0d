import { queryOptions, useQuery } from '@tanstack/react-query';
import { apiPaths } from '../../shared/api-paths';
import { allows, type Action } from '../../shared/permissions';
import type { Session } from '../../shared/schemas/people';
import { api } from './api-client';

export const sessionQuery = queryOptions({
  queryKey: ['session'],
  queryFn: ({ signal }) => api.get<Session>(apiPaths.session, { signal }),
  staleTime: 60_000,
});

/** Who is signed in; undefined until it is known. */
export const useSession = (): Session | undefined => useQuery(sessionQuery).data;

export function useCan(action: Action): boolean {
  const person = useSession()?.person;
  return !!person && allows(person.roles, action);
}

/** Offset used where no incident sets one. */
export const useDefaultOffset = (): string => useSession()?.utcOffset ?? '+00:00';
