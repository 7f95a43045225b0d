import { Outlet } from 'react-router-dom';
import { useSession } from '../lib/session';
import { DemoLine } from './demo-line';
import { ThemeSwitch } from './theme-switch';
import { Wordmark } from './wordmark';

/** Around the pages that need no sign-in. */
export function VisitorFrame() {
  const session = useSession();
  return (
    <>
      <header>
        <div className="no-print flex min-h-14 items-center justify-between border-b border-ink px-4 sm:px-6 lg:px-8">
          <Wordmark />
          <ThemeSwitch />
        </div>
        {session?.isDemo && <DemoLine />}
      </header>
      <main id="page">
        <Outlet />
      </main>
    </>
  );
}
