import { keepPreviousData, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { apiPaths } from '../../../shared/api-paths';
import type { RegisterHistoryEntry, RegisterItem, RegisterList, RegisterName, RegisterVersion } from '../../../shared/schemas/registers';
import { api } from '../../lib/api-client';

export type ListWish = { search: string; stale: boolean; archived: boolean; page: number };
export const PAGE_SIZE = 100;

export const registerListQuery = (register: RegisterName, { search, stale, archived, page }: ListWish) =>
  queryOptions({
    queryKey: ['register', register, 'list', search, stale, archived, page],
    queryFn: ({ signal }) => {
      const query = new URLSearchParams({ search, page: String(page), pageSize: String(PAGE_SIZE), ...(stale ? { stale: '1' } : {}), ...(archived ? { archived: '1' } : {}) });
      return api.get<RegisterList>(`${apiPaths.register(register)}?${query.toString()}`, { signal });
    },
    placeholderData: keepPreviousData,
  });

/** A whole register, for choosing from: the entries in use. */
export const registerChoicesQuery = <R extends RegisterName>(register: R) =>
  queryOptions({
    queryKey: ['register', register, 'all'],
    queryFn: async ({ signal }) => (await api.get<RegisterList<R>>(apiPaths.register(register), { signal })).items,
    staleTime: 60_000,
  });

export const registerItemQuery = (register: RegisterName, id: string) =>
  queryOptions({ queryKey: ['register', register, 'item', id], queryFn: ({ signal }) => api.get<RegisterItem>(apiPaths.registerItem(register, id), { signal }) });

export const registerHistoryQuery = (register: RegisterName, id: string) =>
  queryOptions({ queryKey: ['register', register, 'item', id, 'history'], queryFn: ({ signal }) => api.get<RegisterHistoryEntry[]>(apiPaths.registerHistory(register, id), { signal }) });

/** A stored version never changes. */
export const registerVersionQuery = (register: RegisterName, id: string, version: number) =>
  queryOptions({
    queryKey: ['register', register, 'item', id, 'history', version],
    queryFn: ({ signal }) => api.get<RegisterVersion>(apiPaths.registerVersion(register, id, version), { signal }),
    staleTime: Number.POSITIVE_INFINITY,
  });

function useKeepItem(register: RegisterName) {
  const client = useQueryClient();
  return (item: RegisterItem) => {
    client.setQueryData(registerItemQuery(register, item.id).queryKey, item);
    void client.invalidateQueries({ queryKey: ['register'] });
  };
}

export type EntryBody = Record<string, unknown>;

/** Adds an entry, or changes the one with the id given. */
export function useSaveEntry(register: RegisterName, id: string | null) {
  return useMutation({
    mutationFn: (body: EntryBody) => (id === null ? api.post<RegisterItem>(apiPaths.register(register), body) : api.put<RegisterItem>(apiPaths.registerItem(register, id), body)),
    onSuccess: useKeepItem(register),
  });
}

export type Move = 'archive' | 'restore' | 'checked';
const movePaths = { archive: apiPaths.registerArchive, restore: apiPaths.registerRestore, checked: apiPaths.registerChecked } as const;

export function useMoveEntry(register: RegisterName, id: string) {
  return useMutation({
    mutationFn: ({ move, version, reason }: { move: Move; version: number; reason: string }) => api.post<RegisterItem>(movePaths[move](register, id), { version, reason }),
    onSuccess: useKeepItem(register),
  });
}
