import type { ComponentType } from 'react';
import { createBrowserRouter, redirect, type LoaderFunctionArgs, type RouteObject } from 'react-router-dom';
import { registerNames, type RegisterName } from '../../shared/schemas/registers';
import { Loading } from '../components/progress-text';
import { queryClient } from '../lib/query-client';
import { sessionQuery } from '../lib/session';
import { homeOf } from './places';
import { RouteError } from './route-error';
import { SignedInFrame } from './signed-in-frame';
import { VisitorFrame } from './visitor-frame';

/** One page of the product, fetched when it is first visited. */
function page<Name extends string>(load: () => Promise<Record<Name, ComponentType>>, name: Name): Pick<RouteObject, 'lazy'> {
  return { lazy: async () => ({ Component: (await load())[name] }) };
}

/** List and entry of one register: five registers, one pair of pages. */
function registerPlaces(register: RegisterName): RouteObject[] {
  return [
    {
      path: register,
      lazy: async () => {
        const { RegisterListPage } = await import('../features/registers/routes/register-list-page');
        return { Component: () => <RegisterListPage key={register} register={register} /> };
      },
    },
    {
      path: `${register}/:itemId`,
      lazy: async () => {
        const { RegisterItemPage } = await import('../features/registers/routes/register-item-page');
        return { Component: () => <RegisterItemPage key={register} register={register} /> };
      },
    },
  ];
}

/** Sends visitors to the sign-in page, and back afterwards; people without incidents go to the first place that is theirs. */
async function requirePerson({ request }: LoaderFunctionArgs) {
  const { person } = await queryClient.ensureQueryData(sessionQuery);
  const { pathname, search } = new URL(request.url);
  if (!person) return redirect(pathname === '/' ? '/sign-in' : `/sign-in?next=${encodeURIComponent(pathname + search)}`);
  if (pathname === '/' && homeOf(person.roles) !== '/') return redirect(homeOf(person.roles));
  return null;
}

const places: RouteObject[] = [
  { index: true, ...page(() => import('../features/incidents/routes/watch-page'), 'WatchPage') },
  { path: 'incidents', ...page(() => import('../features/incidents/routes/incident-list-page'), 'IncidentListPage') },
  { path: 'incidents/:incidentId', ...page(() => import('../features/incidents/routes/incident-page'), 'IncidentPage') },
  { path: 'scenarios/:scenarioId', handle: { isFullBleed: true }, ...page(() => import('../features/chart/routes/chart-page'), 'ChartPage') },
  ...registerNames.flatMap(registerPlaces),
  { path: 'office/people', ...page(() => import('../features/office/routes/people-page'), 'PeoplePage') },
  { path: 'office/outbox', ...page(() => import('../features/office/routes/outbox-page'), 'OutboxPage') },
  { path: 'office/audit', ...page(() => import('../features/office/routes/audit-page'), 'AuditPage') },
  { path: 'account', ...page(() => import('../features/account/routes/account-page'), 'AccountPage') },
];

const visitorPages: RouteObject[] = [
  { path: 'sign-in', ...page(() => import('../features/account/routes/sign-in-page'), 'SignInPage') },
  { path: 'forgotten-password', ...page(() => import('../features/account/routes/forgotten-password-page'), 'ForgottenPasswordPage') },
  { path: 'set-password/:token', ...page(() => import('../features/account/routes/set-password-page'), 'SetPasswordPage') },
];

export const router = createBrowserRouter([
  {
    HydrateFallback: () => <Loading what="the page" />,
    ErrorBoundary: RouteError,
    children: [
      { Component: VisitorFrame, children: [{ ErrorBoundary: RouteError, children: visitorPages }] },
      {
        id: 'signed-in',
        Component: SignedInFrame,
        loader: requirePerson,
        children: [{ ErrorBoundary: RouteError, children: [...places, { path: '*', ...page(() => import('./not-found-page'), 'NotFoundPage') }] }],
      },
    ],
  },
]);
