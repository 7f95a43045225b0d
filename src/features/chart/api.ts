import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { apiPaths } from '../../../shared/api-paths';
import type { EstimateDocument } from '../../../shared/schemas/estimate';
import type { Revision, RevisionCreated, Run, Scenario } from '../../../shared/schemas/incidents';
import type { RegisterItem, RegisterName } from '../../../shared/schemas/registers';
import { api } from '../../lib/api-client';
import type { Draft } from './model/draft';

export const scenarioQuery = (id: string) => queryOptions({ queryKey: ['scenario', id], queryFn: ({ signal }) => api.get<Scenario>(apiPaths.scenario(id), { signal }) });

/** A whole register: the district's entries are few, and the Chart snaps against all of them. */
export const registerQuery = <R extends RegisterName>(register: R) =>
  queryOptions({
    queryKey: ['register', register, 'all'],
    queryFn: async ({ signal }) => (await api.get<{ items: RegisterItem<R>[] }>(apiPaths.register(register), { signal })).items,
    staleTime: 60_000,
  });

export const runQuery = (id: string) => queryOptions({ queryKey: ['run', id], queryFn: ({ signal }) => api.get<Run>(apiPaths.run(id), { signal }) });

export const revisionQuery = (scenarioId: string, number: number) =>
  queryOptions({
    queryKey: ['scenario', scenarioId, 'revision', number],
    queryFn: ({ signal }) => api.get<Revision>(apiPaths.scenarioRevision(scenarioId, number), { signal }),
    staleTime: Number.POSITIVE_INFINITY,
  });

export type DraftState = Pick<Scenario, 'draft' | 'draftVersion' | 'draftSavedAt' | 'draftSavedBy'>;
export const saveDraft = (scenarioId: string, draft: Draft, draftVersion: number) => api.put<DraftState>(apiPaths.scenarioDraft(scenarioId), { draft, draftVersion });

export function useSaveRevision(scenarioId: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: { document: EstimateDocument; draftVersion: number; note: string }) => api.post<RevisionCreated>(apiPaths.scenarioRevisions(scenarioId), body),
    onSuccess: () => client.invalidateQueries({ queryKey: ['scenario', scenarioId] }),
  });
}

export function useCancelRun() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (runId: string) => api.post(apiPaths.runCancel(runId)),
    onSettled: (_done, _error, runId) => client.invalidateQueries({ queryKey: ['run', runId] }),
  });
}

export const copyScenario = (incidentId: string, name: string, draft: Draft) => api.post<Scenario>(apiPaths.incidentScenarios(incidentId), { name, draft, copyOfScenarioId: null });
