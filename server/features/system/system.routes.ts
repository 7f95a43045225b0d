import { z } from 'zod';
import { apiPaths } from '../../../shared/api-paths';
import { type Route, route } from '../../http/routes';
import { describeRoutes } from './openapi';
import { PRODUCT_VERSION } from './product-version';

export function systemRoutes(routes: () => readonly Route[]): Route[] {
  let description: object | undefined;
  return [
    route({
      method: 'get', path: apiPaths.health, action: 'public', tag: 'System', summary: 'Tells that the server answers, and its version',
      response: z.object({ ok: z.literal(true), version: z.string() }),
      handle: () => ({ ok: true, version: PRODUCT_VERSION }),
    }),
    route({
      method: 'get', path: apiPaths.openApi, action: 'public', tag: 'System', summary: 'Describes this API in OpenAPI 3.1',
      response: z.record(z.string(), z.unknown()),
      handle: () => (description ??= describeRoutes(routes(), PRODUCT_VERSION)),
    }),
  ];
}
