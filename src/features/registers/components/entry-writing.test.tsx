import { QueryClient, QueryClientProvider, useQuery } from '@tanstack/react-query';
import { act, fireEvent, render, screen, waitFor, within } from '@testing-library/react';
import type { ReactElement } from 'react';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { beforeEach, expect, it, vi } from 'vitest';
import type { Problem } from '../../../../shared/problem';
import type { RegisterItem } from '../../../../shared/schemas/registers';
import { registerItemQuery } from '../api';
import { emptyEntry, valuesOf } from '../model/empty-entry';
import { EntryWriting } from './entry-writing';

const phenol: RegisterItem<'substances'> = {
  id: 'phenol', register: 'substances', code: 'PHE', name: 'Phenol', ownerName: 'Water quality desk', lastCheckedOn: '2031-01-01', isStale: false, version: 3, updatedAt: '2031-01-01T00:00:00Z', updatedBy: 'Tobin', isArchived: false, abilities: { update: true },
  data: { ...(emptyEntry('substances').data as RegisterItem<'substances'>['data']), cas: '108-95-2', hazards: 'Burns the skin' },
};
const client = new QueryClient({ defaultOptions: { queries: { retry: false, staleTime: Infinity } } });
const fetchMock = vi.fn<typeof fetch>();
const onSaved = vi.fn();

beforeEach(() => {
  client.clear();
  client.setQueryData(['session'], { person: null, utcOffset: '-08:00' });
  fetchMock.mockReset();
  onSaved.mockReset();
  vi.stubGlobal('fetch', fetchMock);
});

const json = (status: number, body: unknown) => new Response(JSON.stringify(body), { status, headers: { 'content-type': 'application/json' } });
const problem = (patch: Partial<Problem>): Problem => ({ type: 'urn:x', title: 'Refused', status: 422, detail: 'Refused', instance: 'request-1', code: 'bad-input', ...patch });

function Writing({ item }: { item: RegisterItem | null }) {
  return <EntryWriting register="substances" start={item} current={item} initial={item ? valuesOf(item) : emptyEntry('substances')} onSaved={onSaved} onLeave={() => undefined} />;
}

function show(element: ReactElement) {
  const router = createMemoryRouter([{ path: '*', element }]);
  return render(<QueryClientProvider client={client}><RouterProvider router={router} /></QueryClientProvider>);
}
const type = (label: RegExp | string, value: string) => fireEvent.change(screen.getByLabelText(label), { target: { value } });
const save = (name = 'Save changes') => fireEvent.click(screen.getByRole('button', { name }));
const sentBody = () => JSON.parse(String(fetchMock.mock.calls.findLast(([, init]) => init?.body)![1]!.body)) as Record<string, unknown>;

it('names everything that is missing before anything is sent', async () => {
  show(<Writing item={null} />);
  save('Save entry');
  const summary = await screen.findByText('2 things to mend before this can be saved');
  expect(within(summary.parentElement!).getByText(/Give a short code/)).toBeTruthy();
  expect(fetchMock).not.toHaveBeenCalled();
});

it('sends what was typed with the version it began with', async () => {
  fetchMock.mockImplementation(async () => json(200, { ...phenol, version: 4 }));
  show(<Writing item={phenol} />);
  type('Name', 'Phenol, molten');
  save();
  await waitFor(() => expect(onSaved).toHaveBeenCalled());
  expect(sentBody()).toMatchObject({ name: 'Phenol, molten', version: 3, data: { cas: '108-95-2' } });
});

it('places what the server refuses on its field and keeps what was typed', async () => {
  fetchMock.mockImplementation(async () => json(409, problem({ status: 409, code: 'duplicate', errors: [{ path: 'code', message: 'The code BEN is taken by Benzene: choose another' }] })));
  show(<Writing item={phenol} />);
  type(/^Code/, 'BEN');
  save();
  await waitFor(() => expect(screen.getByLabelText(/^Code/).getAttribute('aria-invalid')).toBe('true'));
  expect(screen.getAllByText(/taken by Benzene/).length).toBeGreaterThan(0);
  expect((screen.getByLabelText(/^Code/) as HTMLInputElement).value).toBe('BEN');
});

it('keeps what was typed when the server does not answer', async () => {
  fetchMock.mockImplementation(async () => { throw new TypeError('network'); });
  show(<Writing item={phenol} />);
  type('Name', 'Typed at night');
  save();
  await screen.findByText('This could not be saved');
  expect((screen.getByLabelText('Name') as HTMLInputElement).value).toBe('Typed at night');
});

it('shows what another person saved meanwhile, takes their untouched parts and saves on top of theirs', async () => {
  const theirs = { ...phenol, version: 4, updatedBy: 'Ilse', ownerName: 'Laboratory', name: 'Phenol (theirs)' };
  fetchMock.mockImplementation(async () => json(200, { ...theirs, version: 5 }));
  const element = (current: RegisterItem) => <EntryWriting register="substances" start={phenol} current={current} initial={valuesOf(phenol)} onSaved={onSaved} onLeave={() => undefined} />;
  const { queryKey } = registerItemQuery('substances', 'phenol');
  client.setQueryData(queryKey, phenol);
  function Follows() {
    return element(useQuery(registerItemQuery('substances', 'phenol')).data ?? phenol);
  }
  show(<Follows />);
  type('Name', 'Phenol (mine)');
  act(() => void client.setQueryData(queryKey, theirs));
  await screen.findByText('Ilse saved version 4 while you were editing version 3');
  expect((screen.getByRole('button', { name: 'Save changes' }) as HTMLButtonElement).disabled).toBe(true);
  fireEvent.click(screen.getByRole('button', { name: 'Go on from version 4' }));
  save();
  await waitFor(() => expect(onSaved).toHaveBeenCalled());
  expect(sentBody()).toMatchObject({ name: 'Phenol (mine)', ownerName: 'Laboratory', version: 4 });
});

it('puts the present entry in reach when its version turns out to be old', async () => {
  fetchMock.mockImplementation(async () => json(409, problem({ status: 409, code: 'stale-version', current: { ...phenol, version: 9 } })));
  show(<Writing item={phenol} />);
  type('Name', 'Late');
  save();
  await waitFor(() => expect(client.getQueryData<RegisterItem>(registerItemQuery('substances', 'phenol').queryKey)?.version).toBe(9));
});
