import * as z from 'zod';
import { email, newPassword, personName } from '#api';
import { momentText } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { useAct } from '../../lib/use-act.ts';
import { PasswordField, TextField } from '../../ui/field.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';
import { BlockRow, CoverSheet } from './cover-sheet.tsx';
import { FormFoot } from './form-foot.tsx';
import { LinkGate } from './link-gate.tsx';
import { useEnter } from './use-enter.ts';
import { PASSWORD_HINT } from './words.ts';

const setUpBody = z.object({ name: personName, email, password: newPassword });

export function SetUpPage() {
  usePageTitle('Set up');
  return (
    <CoverSheet
      title="The first sheet is blank"
      lead="You are the first here and will run the team: invite people, give roles, look after backups. Starter recipes are waiting inside."
      team="new"
      signedBy="you, the first admin"
    >
      <LinkGate check="setup.check">
        {(token, { expiresAt }) => <SetUpForm token={token} expiresAt={expiresAt} />}
      </LinkGate>
    </CoverSheet>
  );
}

function SetUpForm({ token, expiresAt }: { token: string; expiresAt: string }) {
  const finish = useAct('setup.finish');
  const enter = useEnter();
  const form = useEndpointForm({
    schema: setUpBody,
    defaultValues: { name: '', email: '', password: '' },
    send: (values) => finish.act({ body: { ...values, token } }),
    onDone: (answer, values) => enter(answer.email, values.password, paths.team('start')),
  });
  return (
    <form aria-label="Set up" noValidate onSubmit={form.onSubmit}>
      <BlockRow split>
        <TextField label="Your name" hint="It stands on what you sign." autoComplete="name" {...form.field('name')} />
        <TextField label="Work e-mail" type="email" autoComplete="username" {...form.field('email')} />
      </BlockRow>
      <BlockRow>
        <PasswordField
          label="New password"
          hint={PASSWORD_HINT}
          autoComplete="new-password"
          {...form.field('password')}
        />
      </BlockRow>
      <FormFoot
        form={form}
        label="Begin"
        acting="Beginning"
        note={`This link works until ${momentText(expiresAt)}, once.`}
      />
    </form>
  );
}
