import { apiPaths } from '../../../shared/api-paths';
import { watchSchema } from '../../../shared/schemas/incidents';
import type { Deps } from '../../deps';
import { type Route, route } from '../../http/routes';
import { WatchService } from './watch.service';

export function watchRoutes(deps: Deps): Route[] {
  const watch = new WatchService(deps);
  return [
    route({
      method: 'get', path: apiPaths.watch, action: 'session:use', tag: 'Watch', summary: 'What runs now and what waits for this person',
      response: watchSchema,
      handle: ({ actor }) => watch.get(actor),
    }),
  ];
}
