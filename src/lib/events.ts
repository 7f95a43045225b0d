import type { QueryClient, QueryKey } from '@tanstack/react-query';
import { useEffect, useSyncExternalStore } from 'react';
import { apiPaths } from '../../shared/api-paths';
import type { ChangeEvent, Run, RunState, Watch } from '../../shared/schemas/incidents';

/** What a change makes out of date; each also leaves its line in the audit trail. */
export const keysOf = (event: ChangeEvent): QueryKey[] => [...subjectKeys(event), ['audit']];

function subjectKeys(event: ChangeEvent): QueryKey[] {
  switch (event.topic) {
    case 'incident':
      return [['incidents'], ['incident', event.id], ['watch']];
    case 'scenario':
      return [['scenario', event.id], ...(event.incidentId ? [['scenarios', event.incidentId], ['incident', event.incidentId]] : [['scenarios'], ['incident']]), ['watch']];
    case 'run':
      return [['run', event.id], ['scenario', event.scenarioId], ['scenarios', event.incidentId], ['incident', event.incidentId], ['watch']];
    case 'register':
      return [['register'], ['watch']];
    case 'person':
      return [['people'], ['session']];
    case 'outbox':
      return [['outbox'], ['watch']];
  }
}

type RunEvent = Extract<ChangeEvent, { topic: 'run' }>;

/** Progress comes several times a second: it is written into what is known instead of asking for it again. */
function noteProgress(client: QueryClient, { id, state, progress }: RunEvent): void {
  if (!progress) return;
  client.setQueryData<Run>(['run', id], (run) => run && { ...run, state, progress });
  client.setQueryData<Watch>(['watch'], (watch) => watch && { ...watch, runningRuns: watch.runningRuns.map((run) => (run.runId === id ? { ...run, state, done: progress.done, of: progress.of } : run)) });
}

/** Gathers what went out of date for a moment, so that a burst of changes asks once. */
export class ChangeFollower {
  private readonly stale = new Map<string, QueryKey>();
  private readonly states = new Map<string, RunState>();
  private timer: ReturnType<typeof setTimeout> | null = null;

  constructor(
    private readonly client: QueryClient,
    private readonly waitMs = 200,
  ) {}

  take(event: ChangeEvent): void {
    if (event.topic === 'run') {
      const isOnlyProgress = this.states.get(event.id) === event.state && event.progress !== null;
      this.states.set(event.id, event.state);
      noteProgress(this.client, event);
      if (isOnlyProgress) return;
    }
    for (const key of keysOf(event)) this.stale.set(JSON.stringify(key), key);
    this.timer ??= setTimeout(() => this.flush(), this.waitMs);
  }

  private flush(): void {
    this.timer = null;
    const keys = [...this.stale.values()];
    this.stale.clear();
    for (const queryKey of keys) void this.client.invalidateQueries({ queryKey });
  }

  stop(): void {
    if (this.timer) clearTimeout(this.timer);
  }
}

const RETRY_MS = 3_000;

type Connection = { isUp: boolean; sinceMs: number };
let connection: Connection = { isUp: true, sinceMs: Date.now() };
const listeners = new Set<() => void>();
function setConnection(isUp: boolean): void {
  if (isUp === connection.isUp) return;
  connection = { isUp, sinceMs: Date.now() };
  listeners.forEach((listener) => listener());
}
const subscribe = (listener: () => void) => {
  listeners.add(listener);
  return () => listeners.delete(listener);
};

/** Whether this page hears what others do; false after the stream broke, with the time it did. */
export const useConnection = (): Connection => useSyncExternalStore(subscribe, () => connection);

/** Keeps one stream open for the whole page while somebody is signed in. */
export function useChangeEvents(client: QueryClient, isOn: boolean): void {
  useEffect(() => {
    if (!isOn) return;
    const follower = new ChangeFollower(client);
    let source: EventSource;
    let retry: ReturnType<typeof setTimeout> | undefined;
    const open = () => {
      source = new EventSource(apiPaths.events);
      source.onmessage = (message: MessageEvent<string>) => follower.take(JSON.parse(message.data) as ChangeEvent);
      source.onopen = () => {
        // What happened while the stream was down is unknown: ask for everything in sight.
        if (!connection.isUp) void client.invalidateQueries();
        setConnection(true);
      };
      source.onerror = () => {
        setConnection(false);
        // A refused stream is never tried again by the browser: the session may have ended, or the server is starting.
        if (source.readyState !== EventSource.CLOSED) return;
        void client.invalidateQueries({ queryKey: ['session'] });
        retry = setTimeout(open, RETRY_MS);
      };
    };
    open();
    return () => {
      clearTimeout(retry);
      source.close();
      follower.stop();
      setConnection(true);
    };
  }, [client, isOn]);
}
