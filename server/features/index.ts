import type { Deps } from '../deps';
import type { Route } from '../http/routes';
import { auditRoutes } from './audit/audit.routes';
import { estimateRoutes } from './estimates/estimate.routes';
import { eventRoutes } from './events/event.routes';
import { incidentRoutes } from './incidents/incident.routes';
import { outboxRoutes } from './outbox/outbox.routes';
import { personRoutes } from './people/person.routes';
import { registerRoutes } from './registers/register.routes';
import { runRoutes } from './runs/run.routes';
import { scenarioRoutes } from './scenarios/scenario.routes';
import { sessionRoutes } from './session/session.routes';
import { systemRoutes } from './system/system.routes';
import { watchRoutes } from './watch/watch.routes';

/** Every route of the API. The app mounts them, the OpenAPI page describes them, the tests walk them. */
export function allRoutes(deps: Deps): Route[] {
  const routes: Route[] = [
    ...sessionRoutes(deps),
    ...personRoutes(deps),
    ...outboxRoutes(deps),
    ...auditRoutes(deps),
    ...registerRoutes(deps),
    ...watchRoutes(deps),
    ...incidentRoutes(deps),
    ...scenarioRoutes(deps),
    ...runRoutes(deps),
    ...estimateRoutes(deps),
    ...eventRoutes(deps),
    ...systemRoutes(() => routes),
  ];
  return routes;
}
