import { Outlet } from 'react-router-dom';
import { paths } from '../lib/paths.ts';
import { useServerNews } from '../lib/server-news.ts';
import { Button } from '../ui/button.tsx';
import { HeaderStrip } from './header-strip.tsx';
import { Notices } from './notices.tsx';
import { RouteChange } from './route-change.tsx';
import { KeysHelp } from './single-keys.tsx';

/** Header strip, sheet, and what every page shares. */
export function Shell() {
  return (
    <>
      <a href="#sheet" className="btn btn-main skip">
        Skip to sheet
      </a>
      <HeaderStrip />
      <ServerNewsBar />
      <Notices />
      <RouteChange />
      <KeysHelp />
      <main id="sheet" className="page" tabIndex={-1}>
        <Outlet />
      </main>
    </>
  );
}

function ServerNewsBar() {
  const { isUpdated, isSignedOut } = useServerNews();
  if (!isUpdated && !isSignedOut) return null;
  return (
    <div role="status" className="flex flex-wrap items-center gap-4 border-ink border-b bg-wash px-8 py-2">
      {isSignedOut ? (
        <>
          <span>Your session has ended. What you typed is kept in this browser until you sign in again.</span>
          <a href={paths.signIn(window.location.pathname + window.location.search)}>Sign in</a>
        </>
      ) : (
        <>
          <span>Quadrille was updated. What you typed is kept.</span>
          <Button small onClick={() => window.location.reload()}>
            Reload
          </Button>
        </>
      )}
    </div>
  );
}
