import { useQueryClient } from '@tanstack/react-query';
import { useEffect } from 'react';
import { Link, Outlet, ScrollRestoration, useLocation, useMatches, useNavigate, useNavigation } from 'react-router-dom';
import { apiPaths } from '../../shared/api-paths';
import { formatDayYear, formatOffset, formatTimeOfDay } from '../../shared/format';
import { Menu } from '../components/menu';
import { api } from '../lib/api-client';
import { useChangeEvents, useConnection } from '../lib/events';
import { sessionQuery, useDefaultOffset, useSession } from '../lib/session';
import { useNow } from '../lib/use-now';
import { DemoLine } from './demo-line';
import { PlaceLinks } from './place-links';
import { ThemeSwitch } from './theme-switch';
import { Wordmark } from './wordmark';

/** `handle: { isFullBleed: true }` on a route gives its page the whole window below the head. */
const useIsFullBleed = (): boolean => useMatches().some((match) => (match.handle as { isFullBleed?: boolean } | undefined)?.isFullBleed);

export function SignedInFrame() {
  const client = useQueryClient();
  const session = useSession();
  const isFullBleed = useIsFullBleed();
  const isBusy = useNavigation().state === 'loading';
  useChangeEvents(client, !!session?.person);
  useLeaveWhenSignedOut(session !== undefined && session.person === null);
  if (!session?.person) return null;
  return (
    <div className={isFullBleed ? 'flex h-dvh flex-col print:h-auto' : ''}>
      <a href="#page" className="absolute top-1 left-1 z-50 -translate-y-20 bg-paper px-4 py-2.5 focus:translate-y-0">
        Skip to the page
      </a>
      <header>
        <div className="no-print flex min-h-14 flex-wrap items-stretch justify-between gap-x-4 border-b border-ink bg-paper px-4 sm:px-6 lg:px-8">
          <div className="flex items-stretch gap-x-3 lg:gap-x-6">
            <Link to="/" className="flex items-center no-underline" aria-label="Downreach, to the first page">
              <Wordmark />
            </Link>
            <PlaceLinks roles={session.person.roles} />
          </div>
          <div className="flex items-center gap-1">
            <WatchClock />
            <ThemeSwitch />
            <PersonMenu name={session.person.name} />
          </div>
        </div>
        {session.isDemo && <DemoLine />}
        <ConnectionLine />
        <PrintedLine />
      </header>
      <main id="page" tabIndex={-1} className={`outline-none ${isFullBleed ? 'min-h-0 flex-1' : ''}`} aria-busy={isBusy || undefined}>
        <Outlet />
      </main>
      <ScrollRestoration />
    </div>
  );
}

function WatchClock() {
  const offset = useDefaultOffset();
  const now = useNow(1_000);
  const isOnWatch = useLocation().pathname === '/';
  if (isOnWatch) return null;
  return (
    <span className="mr-2 hidden text-lead whitespace-nowrap md:inline" title="The time where this installation stands">
      <span className="font-semibold">{formatTimeOfDay(now, offset)}</span> <span className="text-note text-ink2">{formatOffset(offset)}</span>
    </span>
  );
}

/** On paper only: a copy goes out of date, so it says when it was made. */
function PrintedLine() {
  const offset = useDefaultOffset();
  const now = useNow(30_000);
  return (
    <p className="hidden px-4 py-1 text-note print:block">
      Printed {formatDayYear(now, offset)} {formatTimeOfDay(now, offset)} {formatOffset(offset)}. This copy is not renewed.
    </p>
  );
}

function ConnectionLine() {
  const offset = useDefaultOffset();
  const { isUp, sinceMs } = useConnection();
  if (isUp) return null;
  return (
    <p role="alert" className="border-b border-attention bg-sheet px-4 py-2 font-semibold text-attention sm:px-6 lg:px-8">
      No connection to the server since {formatTimeOfDay(sinceMs, offset)}. What you see was true then; this page tries again by itself.
    </p>
  );
}

function PersonMenu({ name }: { name: string }) {
  const client = useQueryClient();
  const navigate = useNavigate();
  const signOut = async () => {
    await api.post(apiPaths.signOut);
    client.clear();
    await navigate('/sign-in');
  };
  return (
    <Menu
      label={<span className="max-w-40 truncate max-md:sr-only">{name}</span>}
      icon="person"
      kind="quiet"
      hasArrow={false}
      anchor="bottom end"
      buttonClassName="text-ink! font-normal! max-md:min-w-11"
      entries={[
        { label: 'Your account', to: '/account' },
        { label: 'Sign out', onSelect: () => void signOut() },
      ]}
    />
  );
}

/** A session that ends elsewhere ends here too; the address is kept for afterwards. */
function useLeaveWhenSignedOut(isSignedOut: boolean): void {
  const navigate = useNavigate();
  const { pathname, search } = useLocation();
  const client = useQueryClient();
  useEffect(() => {
    if (!isSignedOut) return;
    client.removeQueries({ predicate: (query) => query.queryKey[0] !== sessionQuery.queryKey[0] });
    void navigate(`/sign-in?next=${encodeURIComponent(pathname + search)}`);
  }, [isSignedOut, navigate, pathname, search, client]);
}
