import { QueryClient } from '@tanstack/react-query';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { ChangeEvent, Watch } from '../../shared/schemas/incidents';
import { ChangeFollower, keysOf } from './events';

const run = (state: 'queued' | 'running' | 'done', done: number): ChangeEvent => ({ topic: 'run', id: 'r1', scenarioId: 's1', incidentId: 'i1', state, progress: { stage: 'frames', done, of: 48 } });

describe('what others do', () => {
  beforeEach(() => void vi.useFakeTimers());
  afterEach(() => void vi.useRealTimers());

  it('makes the incident, its lists, the Watch and the audit trail out of date, and nothing else', () => {
    expect(keysOf({ topic: 'incident', id: 'i1' })).toEqual([['incidents'], ['incident', 'i1'], ['watch'], ['audit']]);
    expect(keysOf(run('done', 48))).toContainEqual(['scenarios', 'i1']);
    expect(keysOf({ topic: 'outbox', id: 'm1' })).not.toContainEqual(['incidents']);
  });

  it('asks once for a burst of changes', () => {
    const client = new QueryClient();
    const asked = vi.spyOn(client, 'invalidateQueries').mockResolvedValue();
    const follower = new ChangeFollower(client, 200);
    for (let i = 0; i < 10; i++) follower.take({ topic: 'incident', id: 'i1' });
    expect(asked).not.toHaveBeenCalled();
    vi.advanceTimersByTime(200);
    expect(asked.mock.calls.map(([filter]) => filter?.queryKey)).toEqual([['incidents'], ['incident', 'i1'], ['watch'], ['audit']]);
  });

  it('writes the progress of a run into the Watch without asking the server again', () => {
    const client = new QueryClient();
    const runningRuns: Watch['runningRuns'] = [{ runId: 'r1', scenarioId: 's1', scenarioName: 'Whole tank', state: 'queued', done: 0, of: 48 }];
    client.setQueryData<Watch>(['watch'], { incidents: [], waiting: [], runningRuns, serverTime: '2031-05-12T14:40:00Z' });
    const follower = new ChangeFollower(client, 200);
    follower.take(run('running', 1));
    vi.advanceTimersByTime(200);
    const asked = vi.spyOn(client, 'invalidateQueries').mockResolvedValue();
    follower.take(run('running', 20));
    vi.advanceTimersByTime(200);
    expect(asked).not.toHaveBeenCalled();
    expect(client.getQueryData<Watch>(['watch'])?.runningRuns[0]).toMatchObject({ state: 'running', done: 20, of: 48 });
    follower.take(run('done', 48));
    vi.advanceTimersByTime(200);
    expect(asked.mock.calls.map(([filter]) => filter?.queryKey)).toContainEqual(['run', 'r1']);
  });
});
