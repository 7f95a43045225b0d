import { z } from 'zod';
import { apiPaths } from '../../../shared/api-paths';
import { incidentCreateSchema, incidentSchema, incidentUpdateSchema, logEntryCreateSchema, logEntrySchema } from '../../../shared/schemas/incidents';
import type { Deps } from '../../deps';
import { type Route, route } from '../../http/routes';
import { IncidentService } from './incident.service';

const tag = 'Incidents';
const params = z.object({ incidentId: z.string().min(1).max(64) });
const id = ':incidentId';

export function incidentRoutes(deps: Deps): Route[] {
  const incidents = new IncidentService(deps);
  return [
    route({
      method: 'get', path: apiPaths.incidents, action: 'incident:read', tag, summary: 'Lists incidents, the newest first',
      query: z.object({ state: z.enum(['open', 'closed']).optional() }),
      response: z.array(incidentSchema),
      handle: ({ actor, query }) => incidents.list(actor, query.state),
    }),
    route({
      method: 'post', path: apiPaths.incidents, action: 'incident:create', tag, summary: 'Opens an incident; its marking stays for good',
      body: incidentCreateSchema, response: incidentSchema, status: 201,
      handle: async ({ actor, body, res }) => {
        const incident = await incidents.create(actor, body);
        res.location(apiPaths.incident(incident.id));
        return incident;
      },
    }),
    route({
      method: 'get', path: apiPaths.incident(id), action: 'incident:read', tag, summary: 'Gives one incident with its next arrivals',
      params, response: incidentSchema,
      handle: ({ actor, params }) => incidents.get(actor, params.incidentId),
    }),
    route({
      method: 'put', path: apiPaths.incident(id), action: 'incident:update', tag, summary: 'Changes name, summary or time offset of an open incident',
      params, body: incidentUpdateSchema, response: incidentSchema,
      handle: ({ actor, params, body }) => incidents.update(actor, params.incidentId, body),
    }),
    route({
      method: 'post', path: apiPaths.incidentClose(id), action: 'incident:close', tag, summary: 'Closes an incident',
      params, response: incidentSchema,
      handle: ({ actor, params }) => incidents.close(actor, params.incidentId),
    }),
    route({
      method: 'post', path: apiPaths.incidentReopen(id), action: 'incident:close', tag, summary: 'Opens a closed incident again',
      params, response: incidentSchema,
      handle: ({ actor, params }) => incidents.reopen(actor, params.incidentId),
    }),
    route({
      method: 'get', path: apiPaths.incidentLog(id), action: 'incident:read', tag, summary: 'Gives the log, the oldest entry first',
      params, response: z.array(logEntrySchema),
      handle: ({ params }) => incidents.log(params.incidentId),
    }),
    route({
      method: 'post', path: apiPaths.incidentLog(id), action: 'log:write', tag, summary: 'Adds an entry to the log; entries are never changed',
      params, body: logEntryCreateSchema, response: logEntrySchema, status: 201,
      handle: ({ actor, params, body }) => incidents.addLogEntry(actor, params.incidentId, body),
    }),
  ];
}
