import type { Request } from 'express';
import { z } from 'zod';
import { apiPaths } from '../../../shared/api-paths';
import { passwordChangeSchema, passwordForgottenSchema, passwordLinkAnswerSchema, passwordLinkSchema, passwordSetSchema, type Session, sessionSchema, signInSchema } from '../../../shared/schemas/people';
import type { Deps } from '../../deps';
import { type Actor, type Route, route } from '../../http/routes';
import { ENGINE_VERSION } from '../../solver/engine-version';
import { offeredDemoSignIns } from '../people/demo-people';
import { PRODUCT_VERSION } from '../system/product-version';
import { openSession, SESSION_COOKIE } from '../../http/sessions';
import { SessionService } from './session.service';

const tag = 'Session';

export function sessionRoutes(deps: Deps): Route[] {
  const sessions = new SessionService(deps);
  return [
    route({
      method: 'get', path: apiPaths.session, action: 'public', tag, summary: 'Tells who is signed in, and what this installation is',
      response: sessionSchema,
      handle: ({ actor }) => presentSession(deps, actor),
    }),
    route({
      method: 'post', path: apiPaths.signIn, action: 'public', tag, summary: 'Signs in with e-mail and password',
      body: signInSchema, response: sessionSchema,
      handle: async ({ body, req }) => {
        const person = await sessions.signIn(body.email, body.password, req.ip ?? '');
        await openSession(req, { personId: person.id, signedInAt: deps.now().getTime() });
        return presentSession(deps, person);
      },
    }),
    route({
      method: 'post', path: apiPaths.signOut, action: 'session:use', tag, summary: 'Ends this session',
      handle: async ({ actor, req, res }) => {
        await sessions.signOut(actor, 'here');
        await endSession(req);
        res.clearCookie(SESSION_COOKIE);
      },
    }),
    route({
      method: 'post', path: apiPaths.signOutEverywhere, action: 'session:use', tag, summary: 'Ends every session of this person',
      handle: async ({ actor, req, res }) => {
        await sessions.signOut(actor, 'everywhere');
        await endSession(req);
        res.clearCookie(SESSION_COOKIE);
      },
    }),
    route({
      method: 'post', path: apiPaths.passwordChange, action: 'session:use', tag, summary: 'Changes the own password; the other sessions end',
      body: passwordChangeSchema,
      handle: async ({ actor, body, req }) => {
        await sessions.changePassword(actor, body.currentPassword, body.newPassword);
        await openSession(req, { personId: actor.id, signedInAt: req.session.signedInAt ?? deps.now().getTime() });
        deps.sessions.destroyAllOf(actor.id, req.sessionID);
      },
    }),
    route({
      method: 'post', path: apiPaths.passwordForgotten, action: 'public', tag, summary: 'Mails a one-time link if the address is known; the answer is the same if not',
      body: passwordForgottenSchema,
      handle: ({ body, req }) => sessions.forgotPassword(body.email, req.ip ?? ''),
    }),
    route({
      method: 'post', path: apiPaths.passwordLink, action: 'public', tag, summary: 'Tells whom a one-time link is for; the link stays usable',
      body: passwordLinkSchema, response: passwordLinkAnswerSchema,
      handle: ({ body }) => sessions.describeLink(body.token),
    }),
    route({
      method: 'post', path: apiPaths.passwordSet, action: 'public', tag, summary: 'Sets the password with a one-time link; every session of the person ends',
      body: passwordSetSchema, response: z.object({ email: z.string() }),
      handle: ({ body }) => sessions.setPassword(body.token, body.newPassword),
    }),
  ];
}

async function presentSession(deps: Deps, person: Pick<Actor, 'id' | 'name' | 'email' | 'roles'> | null): Promise<Session> {
  const { config } = deps;
  const demo = config.isDemo && !person ? await offeredDemoSignIns(deps) : [];
  return {
    person: person && { id: person.id, name: person.name, email: person.email, roles: [...person.roles] },
    isDemo: config.isDemo,
    demoSignIns: demo.map(({ email, password, name, role, roles }) => ({ email, password, name, role, roles: [...roles] })),
    productVersion: PRODUCT_VERSION,
    engineVersion: ENGINE_VERSION,
    utcOffset: config.utcOffset,
    organisation: config.organisation,
  };
}

const endSession = (req: Request): Promise<void> => new Promise((resolve, reject) => req.session.destroy((error: unknown) => (error ? reject(error as Error) : resolve())));
