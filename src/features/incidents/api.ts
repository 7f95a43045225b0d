import { queryOptions, useMutation, useQueryClient, type QueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import { apiPaths } from '../../../shared/api-paths';
import type { Incident, incidentCreateSchema, incidentUpdateSchema, LogEntry, logEntryCreateSchema, Scenario, scenarioCreateSchema, ScenarioSummary, Watch } from '../../../shared/schemas/incidents';
import { api } from '../../lib/api-client';

export const watchQuery = queryOptions({ queryKey: ['watch'], queryFn: ({ signal }) => api.get<Watch>(apiPaths.watch, { signal }), refetchInterval: 60_000 });
export const incidentsQuery = queryOptions({ queryKey: ['incidents'], queryFn: ({ signal }) => api.get<Incident[]>(apiPaths.incidents, { signal }) });
export const incidentQuery = (id: string) => queryOptions({ queryKey: ['incident', id], queryFn: ({ signal }) => api.get<Incident>(apiPaths.incident(id), { signal }), refetchInterval: 60_000 });
/** Under the incident's key, so that whatever changes the incident renews its log as well. */
export const logQuery = (incidentId: string) => queryOptions({ queryKey: ['incident', incidentId, 'log'], queryFn: ({ signal }) => api.get<LogEntry[]>(apiPaths.incidentLog(incidentId), { signal }) });
export const scenariosQuery = (incidentId: string) =>
  queryOptions({ queryKey: ['scenarios', incidentId], queryFn: ({ signal }) => api.get<ScenarioSummary[]>(apiPaths.incidentScenarios(incidentId), { signal }) });

const renew = (client: QueryClient, id?: string) =>
  Promise.all([...(id ? [client.invalidateQueries({ queryKey: ['incident', id] }), client.invalidateQueries({ queryKey: ['scenarios', id] })] : []), client.invalidateQueries({ queryKey: ['incidents'] }), client.invalidateQueries({ queryKey: ['watch'] })]);

export type IncidentCreate = z.input<typeof incidentCreateSchema>;
export type IncidentUpdate = z.input<typeof incidentUpdateSchema>;

export const createIncident = (body: IncidentCreate) => api.post<Incident>(apiPaths.incidents, body);
export const createScenario = (incidentId: string, body: z.input<typeof scenarioCreateSchema>) => api.post<Scenario>(apiPaths.incidentScenarios(incidentId), body);

export function useCreateIncident() {
  const client = useQueryClient();
  return useMutation({ mutationFn: createIncident, onSuccess: () => renew(client) });
}

export function useUpdateIncident(id: string) {
  const client = useQueryClient();
  return useMutation({ mutationFn: (body: IncidentUpdate) => api.put<Incident>(apiPaths.incident(id), body), onSettled: () => renew(client, id) });
}

export function useMoveIncident(id: string) {
  const client = useQueryClient();
  return useMutation({ mutationFn: (to: 'close' | 'reopen') => api.post<Incident>(to === 'close' ? apiPaths.incidentClose(id) : apiPaths.incidentReopen(id)), onSettled: () => renew(client, id) });
}

export function useAddLogEntry(incidentId: string) {
  const client = useQueryClient();
  return useMutation({ mutationFn: (body: z.input<typeof logEntryCreateSchema>) => api.post<LogEntry>(apiPaths.incidentLog(incidentId), body), onSuccess: () => renew(client, incidentId) });
}

export function useCreateScenario(incidentId: string) {
  const client = useQueryClient();
  return useMutation({ mutationFn: (body: z.input<typeof scenarioCreateSchema>) => createScenario(incidentId, body), onSuccess: () => renew(client, incidentId) });
}

export function useCancelRun() {
  const client = useQueryClient();
  return useMutation({ mutationFn: (runId: string) => api.post(apiPaths.runCancel(runId)), onSettled: () => renew(client) });
}
