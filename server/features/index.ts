import type { Deps } from '../deps';
import type { Route } from '../http/routes';

/** Every route of the API. The app mounts them, the OpenAPI page describes them, the tests walk them. */
export const allRoutes = (_deps: Deps): Route[] => [];
