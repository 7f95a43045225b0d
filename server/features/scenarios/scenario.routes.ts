import { z } from 'zod';
import { apiPaths } from '../../../shared/api-paths';
import { draftSaveSchema, revisionCreateSchema, revisionCreatedSchema, revisionSchema, scenarioCreateSchema, scenarioRenameSchema, scenarioSchema, scenarioSummarySchema } from '../../../shared/schemas/incidents';
import type { Deps } from '../../deps';
import { type Route, route } from '../../http/routes';
import { ScenarioService } from './scenario.service';

const tag = 'Scenarios';
const incidentParams = z.object({ incidentId: z.string().min(1).max(64) });
const params = z.object({ scenarioId: z.string().min(1).max(64) });
const revisionParams = params.extend({ number: z.coerce.number().int().min(1, 'Revisions are numbered from 1').max(1_000_000) });
const id = ':scenarioId';

export function scenarioRoutes(deps: Deps): Route[] {
  const scenarios = new ScenarioService(deps);
  return [
    route({
      method: 'get', path: apiPaths.incidentScenarios(':incidentId'), action: 'incident:read', tag, summary: 'Lists the scenarios of an incident',
      params: incidentParams, response: z.array(scenarioSummarySchema),
      handle: ({ params }) => scenarios.listOfIncident(params.incidentId),
    }),
    route({
      method: 'post', path: apiPaths.incidentScenarios(':incidentId'), action: 'scenario:write', tag, summary: 'Adds a scenario, empty or as a copy of another one',
      params: incidentParams, body: scenarioCreateSchema, response: scenarioSchema, status: 201,
      handle: async ({ actor, params, body, res }) => {
        const scenario = await scenarios.create(actor, params.incidentId, body);
        res.location(apiPaths.scenario(scenario.id));
        return scenario;
      },
    }),
    route({
      method: 'get', path: apiPaths.scenario(id), action: 'incident:read', tag, summary: 'Gives a scenario with its draft and its revisions',
      params, response: scenarioSchema,
      handle: ({ actor, params }) => scenarios.get(actor, params.scenarioId),
    }),
    route({
      method: 'put', path: apiPaths.scenario(id), action: 'scenario:write', tag, summary: 'Renames a scenario',
      params, body: scenarioRenameSchema, response: scenarioSchema,
      handle: ({ actor, params, body }) => scenarios.rename(actor, params.scenarioId, body.name),
    }),
    route({
      method: 'put', path: apiPaths.scenarioDraft(id), action: 'scenario:write', tag, summary: 'Keeps work in progress; refused when somebody else has written since',
      params, body: draftSaveSchema, response: scenarioSchema.pick({ draft: true, draftVersion: true, draftSavedAt: true, draftSavedBy: true }),
      handle: ({ actor, params, body }) => scenarios.saveDraft(actor, params.scenarioId, body),
    }),
    route({
      method: 'post', path: apiPaths.scenarioRevisions(id), action: 'scenario:write', tag, summary: 'Saves a numbered revision for good and queues its run',
      params, body: revisionCreateSchema, response: revisionCreatedSchema, status: 201,
      handle: async ({ actor, params, body, res }) => {
        const created = await scenarios.saveRevision(actor, params.scenarioId, body);
        res.location(apiPaths.scenarioRevision(params.scenarioId, created.number));
        return created;
      },
    }),
    route({
      method: 'get', path: `${apiPaths.scenario(id)}/revisions/:number`, action: 'incident:read', tag, summary: 'Gives a saved revision with its document',
      params: revisionParams, response: revisionSchema,
      handle: ({ params }) => scenarios.getRevision(params.scenarioId, params.number),
    }),
  ];
}
