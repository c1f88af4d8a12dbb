import { useQuery } from '@tanstack/react-query';
import { useEffect } from 'react';
import { Navigate, Outlet, useLocation } from 'react-router-dom';
import { paths } from '../lib/paths.ts';
import { openPreferences } from '../lib/preferences.ts';
import { meReading } from '../lib/session.ts';
import { Failure, Loading } from '../ui/blocks.tsx';
import { Sheet } from '../ui/sheet.tsx';

/** Lets people through who are signed in; others go to the sign-in page, which brings them back here. */
export function SessionGate() {
  const me = useQuery({ ...meReading, staleTime: 60_000 });
  const { pathname, search, hash } = useLocation();
  const personId = me.data?.person?.id ?? null;
  useEffect(() => {
    if (me.data !== undefined) openPreferences(personId);
  }, [me.data, personId]);

  if (me.data === undefined) {
    return (
      <main id="sheet" className="page">
        <Sheet className="pt-16">
          {me.isError ? (
            <Failure lead="Not opened." onAgain={() => void me.refetch()}>
              {me.error.message}
            </Failure>
          ) : (
            <Loading label="Opening" />
          )}
        </Sheet>
      </main>
    );
  }
  if (me.data.person === null) {
    const wanted = pathname + search + hash;
    return <Navigate to={wanted === '/' ? paths.signIn() : paths.signIn(wanted)} replace />;
  }
  return <Outlet />;
}
