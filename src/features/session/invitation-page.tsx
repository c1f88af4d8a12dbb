import { useQuery } from '@tanstack/react-query';
import * as z from 'zod';
import { type Answer, newPassword, personName } from '#api';
import { dayText } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { meReading } from '../../lib/session.ts';
import { useAct } from '../../lib/use-act.ts';
import { PasswordField, TextField } from '../../ui/field.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';
import { BlockRow, CoverSheet } from './cover-sheet.tsx';
import { FormFoot } from './form-foot.tsx';
import { LinkGate } from './link-gate.tsx';
import { useEnter } from './use-enter.ts';
import { PASSWORD_HINT, ROLE_WORDS } from './words.ts';

const acceptBody = z.object({ name: personName, password: newPassword });

export function InvitationPage() {
  usePageTitle('Invitation');
  const me = useQuery(meReading);
  return (
    <CoverSheet
      title="You are invited to the team’s recipes"
      lead="Circuits that colleagues have worked out and checked. Set your name and a password, and you are in."
      team={me.data?.team.name ?? ''}
      signedBy="you, in a moment"
    >
      <LinkGate check="invitations.check">
        {(token, invited) => <AcceptForm token={token} invited={invited} />}
      </LinkGate>
    </CoverSheet>
  );
}

function AcceptForm({ token, invited }: { token: string; invited: Answer<'invitations.check'> }) {
  const accept = useAct('invitations.accept');
  const enter = useEnter();
  const form = useEndpointForm({
    schema: acceptBody,
    defaultValues: { name: '', password: '' },
    send: (values) => accept.act({ body: { ...values, token } }),
    onDone: (answer, values) => enter(answer.email, values.password, paths.recipes()),
  });
  return (
    <form aria-label="Accept the invitation" noValidate onSubmit={form.onSubmit}>
      <BlockRow>
        <p>
          For <b>{invited.email}</b>, as {invited.role}: you may {ROLE_WORDS[invited.role]}.
        </p>
        {/* tells password managers whose password this is */}
        <input type="hidden" name="username" autoComplete="username" value={invited.email} readOnly />
      </BlockRow>
      <BlockRow split>
        <TextField label="Your name" hint="It stands on what you sign." autoComplete="name" {...form.field('name')} />
        <PasswordField
          label="New password"
          hint={PASSWORD_HINT}
          autoComplete="new-password"
          {...form.field('password')}
        />
      </BlockRow>
      <FormFoot
        form={form}
        label="Join the team"
        acting="Joining"
        note={`This link works until ${dayText(invited.expiresAt)}, once.`}
      />
    </form>
  );
}
