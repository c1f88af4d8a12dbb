import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { Link, Navigate, useLocation, useNavigate } from 'react-router-dom';
import * as z from 'zod';
import { email } from '#api';
import { authRequest } from '../../lib/client.ts';
import { waitText } from '../../lib/locale.ts';
import { paths, wantedPath } from '../../lib/paths.ts';
import { tellNews } from '../../lib/server-news.ts';
import { meReading } from '../../lib/session.ts';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { PasswordField, TextField } from '../../ui/field.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';
import { BlockRow, CoverSheet } from './cover-sheet.tsx';

const signInBody = z.object({
  email: email.check(z.overwrite((typed) => typed.trim())),
  password: z.string().min(1, 'Write your password.'),
});

export function SignInPage() {
  usePageTitle('Sign in');
  const me = useQuery(meReading);
  const { search } = useLocation();
  if (me.data?.person) return <Navigate to={wantedPath(search)} replace />;
  return (
    <CoverSheet
      title="Circuits your team has already worked out"
      lead="Put in your numbers, take away the parts, and see who checked the arithmetic."
      team={me.data?.team.name ?? ''}
      signedBy="you, in a moment"
    >
      {me.isError && (
        <Failure lead="No answer yet." onAgain={() => void me.refetch()}>
          {me.error.message}
        </Failure>
      )}
      {me.data !== undefined && <OtherAddress publicUrl={me.data.team.publicUrl} />}
      {me.data?.team.needsSetUp && (
        <BlockRow>
          <p>
            <b>Nobody can sign in yet.</b> Open the set-up link that the server printed when it started.
          </p>
        </BlockRow>
      )}
      <SignInForm />
    </CoverSheet>
  );
}

/** Said where the page was opened at an address other than the one the team uses: cookies and links belong to that one. */
function OtherAddress({ publicUrl }: { publicUrl: string }) {
  const here = window.location.origin;
  if (publicUrl === '' || new URL(publicUrl).origin === here) return null;
  return (
    <BlockRow>
      <p>
        <b>Your team uses Quadrille at another address.</b> This is {here}; sign in at{' '}
        <a href={publicUrl}>{publicUrl}</a>.
      </p>
    </BlockRow>
  );
}

function SignInForm() {
  const queries = useQueryClient();
  const navigate = useNavigate();
  const { search } = useLocation();
  const wait = useCountdown();
  const form = useEndpointForm({
    schema: signInBody,
    defaultValues: { email: '', password: '' },
    send: (values) => authRequest('sign-in/email', values),
    onRefused: (failure) => {
      if (failure.kind === 'refused') wait.start(failure.problem.retryAfterSeconds ?? 0);
    },
    onDone: async () => {
      queries.clear();
      tellNews({ isSignedOut: false });
      await queries.fetchQuery({ ...meReading, staleTime: 0 });
      await navigate(wantedPath(search), { replace: true });
    },
  });
  return (
    <form aria-label="Sign in" noValidate onSubmit={form.onSubmit}>
      <BlockRow split>
        <TextField
          label="Work e-mail"
          type="email"
          autoComplete="username"
          autoCapitalize="none"
          {...form.field('email')}
        />
        <PasswordField label="Password" autoComplete="current-password" {...form.field('password')} />
      </BlockRow>
      <BlockRow>
        <div className="grid grid-cols-[minmax(0,1fr)_auto] items-start gap-4">
          <div>
            {form.refusal !== null && <p className="field-error">{form.refusal.message}</p>}
            {form.mending !== null && <p className="field-error">{form.mending}</p>}
            <Link to={paths.forgotten()}>I cannot sign in</Link>
          </div>
          <Button
            kind="main"
            type="submit"
            acting="Signing in"
            isActing={form.isSending}
            cannot={wait.seconds > 0 ? `In ${waitText(wait.seconds)}` : undefined}
          >
            Sign in
          </Button>
        </div>
      </BlockRow>
    </form>
  );
}

/** Seconds left of a wait. */
function useCountdown() {
  const [until, setUntil] = useState(0);
  const [now, setNow] = useState(0);
  const seconds = Math.max(0, Math.ceil((until - now) / 1000));
  useEffect(() => {
    if (seconds === 0) return;
    const timer = setTimeout(() => setNow(Date.now()), 1000);
    return () => clearTimeout(timer);
  });
  const start = (wait: number) => {
    setNow(Date.now());
    setUntil(Date.now() + wait * 1000);
  };
  return { seconds, start };
}
