import { render, screen } from '@testing-library/react';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { describe, expect, it, vi } from 'vitest';
import { ApiError } from '../lib/api-client';
import { RouteError } from './route-error';

function renderFailing(error: Error) {
  vi.spyOn(console, 'error').mockImplementation(() => undefined);
  vi.spyOn(console, 'warn').mockImplementation(() => undefined);
  const Failing = (): never => {
    throw error;
  };
  render(<RouterProvider router={createMemoryRouter([{ path: '/', Component: Failing, ErrorBoundary: RouteError }])} />);
}

describe('a page that fails', () => {
  it('shows what the server said and the request id to quote', async () => {
    renderFailing(new ApiError(404, { type: 'about:blank', title: 'There is nothing here', status: 404, detail: 'There is no incident i9', instance: 'req-7f3a', code: 'not-found' }));
    expect(await screen.findByRole('heading', { name: 'There is nothing here' })).toBeTruthy();
    expect(screen.getByText('There is no incident i9')).toBeTruthy();
    expect(screen.getByText('req-7f3a')).toBeTruthy();
  });

  it('tells nothing of the inside of a mistake of ours', async () => {
    renderFailing(new TypeError('cannot read properties of undefined'));
    expect(await screen.findByRole('heading', { name: 'Something went wrong in this page' })).toBeTruthy();
    expect(document.body.textContent).not.toContain('undefined');
  });
});
