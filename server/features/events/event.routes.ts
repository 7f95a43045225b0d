import type { Request, Response } from 'express';
import { apiPaths } from '../../../shared/api-paths';
import { type Action, allows } from '../../../shared/permissions';
import type { ChangeEvent } from '../../../shared/schemas/incidents';
import type { Deps } from '../../deps';
import { type Actor, type Route, route } from '../../http/routes';
import { findActor } from '../people/person.service';

const HEARTBEAT_MS = 20_000;

/** What a person must be allowed to read to be told that it changed. */
const actionOf: Record<ChangeEvent['topic'], Action> = {
  incident: 'incident:read',
  scenario: 'incident:read',
  run: 'incident:read',
  register: 'register:read',
  person: 'person:read',
  outbox: 'outbox:read',
};

export function eventRoutes(deps: Deps): Route[] {
  return [
    route({
      method: 'get', path: apiPaths.events, action: 'session:use', tag: 'Events', summary: 'Server-sent events: tells what changed, so that pages ask again',
      produces: 'text/event-stream',
      handle: ({ actor, req, res }) => openStream(deps, actor, req, res),
    }),
  ];
}

function openStream(deps: Deps, actor: Actor, req: Request, res: Response): void {
  let { roles } = actor;
  res.set({ 'content-type': 'text/event-stream', 'cache-control': 'no-cache, no-transform', 'x-accel-buffering': 'no' });
  res.flushHeaders();
  res.write('retry: 3000\n: connected\n\n');

  const send = (text: string): void => {
    if (!res.writableEnded) res.write(text);
  };
  const unsubscribe = deps.changes.subscribe((event) => {
    if (event.topic === 'person' && event.id === actor.id) recheck();
    if (allows(roles, actionOf[event.topic])) send(`data: ${JSON.stringify(event)}\n\n`);
  });
  const heartbeat = setInterval(() => {
    send(': still here\n\n');
    recheck();
  }, HEARTBEAT_MS);
  deps.sessions.on('ended', recheck);
  res.once('close', () => {
    clearInterval(heartbeat);
    unsubscribe();
    deps.sessions.off('ended', recheck);
  });

  /** Roles may have changed and the session may have ended since the stream was opened. */
  function recheck(): void {
    if (!isSessionLive(deps, req.sessionID)) return void res.end();
    findActor(deps.db, actor.id).then(
      (present) => (present ? (roles = present.roles) : res.end()),
      () => res.end(),
    );
  }
}

function isSessionLive(deps: Deps, sid: string): boolean {
  let isLive = false;
  deps.sessions.get(sid, (_error, data) => {
    isLive = data?.personId !== undefined && deps.now().getTime() - (data.signedInAt ?? 0) <= deps.config.absoluteMs;
  });
  return isLive;
}
