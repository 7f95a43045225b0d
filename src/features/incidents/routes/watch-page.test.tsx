import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { fireEvent, render, screen, waitFor } from '@testing-library/react';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { afterEach, beforeAll, describe, expect, it, vi } from 'vitest';
import { WatchPage } from './watch-page';

// The browser that these tests run in lays nothing out and has no observer of sizes; the dialog asks for one.
beforeAll(() => {
  vi.stubGlobal('ResizeObserver', class {
    observe() {}
    unobserve() {}
    disconnect() {}
  });
});
afterEach(() => void vi.restoreAllMocks());

const session = {
  person: { id: 'p1', name: 'Edda Rook', email: 'e@example.org', roles: ['planner'] },
  isDemo: false,
  demoSignIns: [],
  productVersion: '1',
  engineVersion: '1',
  utcOffset: '-08:00',
  organisation: 'River board',
};
const watch = { incidents: [], waiting: [{ kind: 'failed-run', text: 'forecast could not be solved', href: '/scenarios/s2', count: 1 }], runningRuns: [], serverTime: '2031-05-12T14:40:00Z' };

type Answer = { status: number; body: unknown };
function renderWatch(answers: Record<string, Answer | Answer[]>) {
  const sent: { method: string; path: string; body: unknown }[] = [];
  vi.spyOn(globalThis, 'fetch').mockImplementation((path, init) => {
    const key = `${init?.method ?? 'GET'} ${String(path)}`;
    sent.push({ method: init?.method ?? 'GET', path: String(path), body: init?.body ? JSON.parse(String(init.body)) : undefined });
    const answer = answers[key];
    const { status, body } = (Array.isArray(answer) ? answer.shift() : answer) ?? { status: 404, body: {} };
    return Promise.resolve(new Response(JSON.stringify(body), { status }));
  });
  const router = createMemoryRouter([
    { path: '/', Component: WatchPage },
    { path: '/scenarios/:id', element: <p>The chart</p> },
  ]);
  render(
    <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
  return { router, sent };
}

describe('the Watch page', () => {
  it('says what will be here when no incident is open, and what waits for this person', async () => {
    renderWatch({ 'GET /api/session': { status: 200, body: session }, 'GET /api/watch': { status: 200, body: watch } });
    expect(await screen.findByText('No incident is open')).toBeTruthy();
    expect(screen.getByRole('link', { name: 'forecast could not be solved' }).getAttribute('href')).toBe('/scenarios/s2');
  });

  it('leads from one press to a chart, making the incident once even when the scenario fails at first', async () => {
    const problem = { type: 'about:blank', title: 'Not available just now', status: 503, detail: 'Try again.', instance: 'req-1', code: 'unavailable' };
    const { router, sent } = renderWatch({
      'GET /api/session': { status: 200, body: session },
      'GET /api/watch': { status: 200, body: watch },
      'POST /api/incidents': { status: 201, body: { id: 'i1' } },
      'POST /api/incidents/i1/scenarios': [
        { status: 503, body: problem },
        { status: 201, body: { id: 's1' } },
      ],
    });
    fireEvent.click((await screen.findAllByRole('button', { name: 'Start a forecast' }))[0]!);
    fireEvent.click(await screen.findByRole('button', { name: 'Start forecast' }));
    expect((await screen.findByRole('alert')).textContent).toContain('Request req-1.');
    fireEvent.click(screen.getByRole('button', { name: 'Start forecast' }));
    await waitFor(() => expect(router.state.location.pathname).toBe('/scenarios/s1'));
    expect(sent.filter(({ method, path }) => method === 'POST' && path === '/api/incidents')).toHaveLength(1);
    expect(sent.find(({ path }) => path === '/api/incidents')?.body).toMatchObject({ marking: 'PLANNING', utcOffset: '-08:00' });
  });
});
