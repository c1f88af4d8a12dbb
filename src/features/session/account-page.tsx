import { useState } from 'react';
import * as z from 'zod';
import { newPassword } from '#api';
import { authRequest } from '../../lib/client.ts';
import { prefer, type Theme, usePreferences } from '../../lib/preferences.ts';
import { usePerson } from '../../lib/session.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Checkbox, PasswordField, Segments } from '../../ui/field.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { MarginNote, PageHead, Sheet } from '../../ui/sheet.tsx';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';
import { PASSWORD_HINT, ROLE_WORDS } from './words.ts';

const THEMES = [
  { value: 'system', label: 'As this machine' },
  { value: 'light', label: 'Light' },
  { value: 'dark', label: 'Dark' },
] as const satisfies readonly { value: Theme; label: string }[];

export function AccountPage() {
  usePageTitle('Account');
  const person = usePerson();
  return (
    <Sheet
      margin={
        <div className="lg:pt-10">
          <MarginNote label={person.role}>You may {ROLE_WORDS[person.role]}.</MarginNote>
        </div>
      }
    >
      <PageHead title={person.name}>{person.email}</PageHead>
      <PagePreferences />
      <Section title="Password">
        <ChangePasswordForm email={person.email} />
      </Section>
      <Section title="Other sessions">
        <OtherSessions />
      </Section>
    </Sheet>
  );
}

function Section({ title, children }: { title: string; children: React.ReactNode }) {
  return (
    <section className="border-ink border-t pt-4 pb-8" aria-label={title}>
      <h2 className="mb-3">{title}</h2>
      {children}
    </section>
  );
}

function PagePreferences() {
  const { theme, singleKeys } = usePreferences();
  return (
    <Section title="On this browser">
      <div className="grid gap-4">
        <Segments label="Paper" options={THEMES} value={theme} onChange={(next) => prefer({ theme: next })} />
        <Checkbox
          label="Single keys act"
          hint="“/” goes to the box for number or name, “?” lists keys. Off, they only write themselves."
          checked={singleKeys}
          onChange={(event) => prefer({ singleKeys: event.target.checked })}
        />
      </div>
    </Section>
  );
}

const changeBody = z.object({
  currentPassword: z.string().min(1, 'Write the password you use now.'),
  newPassword,
  revokeOtherSessions: z.boolean(),
});

function ChangePasswordForm({ email }: { email: string }) {
  const [isChanged, setChanged] = useState(false);
  const form = useEndpointForm({
    schema: changeBody,
    defaultValues: { currentPassword: '', newPassword: '', revokeOtherSessions: true },
    send: (values) => {
      setChanged(false);
      return authRequest('change-password', values);
    },
    onDone: () => {
      form.form.reset();
      setChanged(true);
      announce('Password changed');
    },
  });
  return (
    <form aria-label="Change password" noValidate onSubmit={form.onSubmit} className="grid max-w-form gap-4">
      <input type="hidden" name="username" autoComplete="username" value={email} readOnly />
      <PasswordField label="Password you use now" autoComplete="current-password" {...form.field('currentPassword')} />
      <PasswordField
        label="New password"
        hint={PASSWORD_HINT}
        autoComplete="new-password"
        {...form.field('newPassword')}
      />
      <Checkbox label="End my other sessions" {...form.field('revokeOtherSessions')} />
      {form.refusal !== null && <Failure lead="Not changed.">{form.refusal.message}</Failure>}
      {form.mending !== null && <p className="field-error">{form.mending}</p>}
      {isChanged && <p className="text-green">Password changed.</p>}
      <div>
        <Button kind="main" type="submit" acting="Changing" isActing={form.isSending}>
          Change password
        </Button>
      </div>
    </form>
  );
}

function OtherSessions() {
  const [outcome, setOutcome] = useState<'rest' | 'acting' | 'ended' | { readonly failed: string }>('rest');
  const end = async () => {
    setOutcome('acting');
    const ended = await authRequest('revoke-other-sessions', {});
    setOutcome(ended.ok ? 'ended' : { failed: ended.error.message });
    announce(
      ended.ok ? 'Other sessions ended' : `Not ended. ${ended.error.message}`,
      ended.ok ? 'polite' : 'assertive',
    );
  };
  return (
    <div className="grid justify-items-start gap-3">
      <p className="max-w-form text-ink-2">
        Signs you out everywhere but here, for instance on a machine you left behind.
      </p>
      {typeof outcome === 'object' && <Failure lead="Not ended.">{outcome.failed}</Failure>}
      {outcome === 'ended' && <p className="text-green">Other sessions ended.</p>}
      <Button acting="Ending" isActing={outcome === 'acting'} onClick={() => void end()}>
        End my other sessions
      </Button>
    </div>
  );
}
