import { z } from 'zod';
import { apiPaths } from '../../../shared/api-paths';
import { registerWriteActions } from '../../../shared/permissions';
import { registerCheckedSchema, registerHistoryEntrySchema, registerItemSchema, registerListQuerySchema, registerListSchema, registerMoveSchema, type RegisterName, registerNames, registerUpdateSchema, registerVersionSchema, registerWriteSchema } from '../../../shared/schemas/registers';
import type { Deps } from '../../deps';
import { type Route, route } from '../../http/routes';
import { RegisterService } from './register.service';

const tag = 'Registers';
const id = ':itemId';
const params = z.object({ itemId: z.string().min(1).max(64) });
const versionParams = params.extend({ version: z.coerce.number().int().min(1, 'Versions count from 1').max(1e9) });

/** The same routes for every register; each has its own addresses, because who may write differs. */
export function registerRoutes(deps: Deps): Route[] {
  const service = new RegisterService(deps);
  return registerNames.flatMap((register) => [...readRoutes(service, register), ...writeRoutes(service, register)]);
}

function readRoutes(service: RegisterService, register: RegisterName): Route[] {
  const action = 'register:read';
  return [
    route({
      method: 'get', path: apiPaths.register(register), action, tag, summary: `Lists ${register}, by code; search looks into code, name, owner, other names and CAS number`,
      query: registerListQuerySchema, response: registerListSchema,
      handle: ({ actor, query }) => service.list(actor, register, query),
    }),
    route({
      method: 'get', path: apiPaths.registerItem(register, id), action, tag, summary: `Gives one entry of ${register}`,
      params, response: registerItemSchema,
      handle: ({ actor, params }) => service.get(actor, register, params.itemId),
    }),
    route({
      method: 'get', path: apiPaths.registerHistory(register, id), action, tag, summary: `Gives the versions of an entry of ${register}, the newest first, with what changed`,
      params, response: z.array(registerHistoryEntrySchema),
      handle: ({ params }) => service.history(register, params.itemId),
    }),
    route({
      method: 'get', path: apiPaths.registerVersion(register, id, ':version'), action, tag, summary: `Gives one stored version of an entry of ${register}, whole`,
      params: versionParams, response: registerVersionSchema,
      handle: ({ params }) => service.version(register, params.itemId, params.version),
    }),
  ];
}

function writeRoutes(service: RegisterService, register: RegisterName): Route[] {
  const action = registerWriteActions[register];
  return [
    route({
      method: 'post', path: apiPaths.register(register), action, tag, summary: `Adds an entry to ${register}`,
      body: registerWriteSchema(register), response: registerItemSchema, status: 201,
      handle: async ({ actor, body, res }) => {
        const item = await service.create(actor, register, body);
        res.location(apiPaths.registerItem(register, item.id));
        return item;
      },
    }),
    route({
      method: 'put', path: apiPaths.registerItem(register, id), action, tag, summary: `Changes an entry of ${register}; the version says which one was read`,
      params, body: registerUpdateSchema(register), response: registerItemSchema,
      handle: ({ actor, params, body }) => service.update(actor, register, params.itemId, body),
    }),
    route({
      method: 'post', path: apiPaths.registerChecked(register, id), action, tag, summary: `Notes that an entry of ${register} was checked and found right`,
      params, body: registerCheckedSchema, response: registerItemSchema,
      handle: ({ actor, params, body }) => service.markChecked(actor, register, params.itemId, body),
    }),
    route({
      method: 'post', path: apiPaths.registerArchive(register, id), action, tag, summary: `Takes an entry of ${register} out of use; nothing is lost`,
      params, body: registerMoveSchema, response: registerItemSchema,
      handle: ({ actor, params, body }) => service.archive(actor, register, params.itemId, body),
    }),
    route({
      method: 'post', path: apiPaths.registerRestore(register, id), action, tag, summary: `Takes an archived entry of ${register} into use again`,
      params, body: registerMoveSchema, response: registerItemSchema,
      handle: ({ actor, params, body }) => service.restore(actor, register, params.itemId, body),
    }),
  ];
}
