import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import * as z from 'zod';
import { email } from '#api';
import { authRequest } from '../../lib/client.ts';
import { paths } from '../../lib/paths.ts';
import { meReading } from '../../lib/session.ts';
import { announce } from '../../ui/announce.tsx';
import { TextField } from '../../ui/field.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';
import { BlockRow, CoverSheet } from './cover-sheet.tsx';
import { FormFoot } from './form-foot.tsx';

const askBody = z.object({ email });

export function ForgottenPage() {
  usePageTitle('I cannot sign in');
  const me = useQuery(meReading);
  const [asked, setAsked] = useState<string | null>(null);
  return (
    <CoverSheet
      title="A new way in"
      lead="A link to set a new password goes to your e-mail address. If your team sends no mail, an admin of your team can make such a link for you."
      team={me.data?.team.name ?? ''}
      signedBy="not yet"
    >
      {asked === null ? (
        <AskForm
          onAsked={(address) => {
            setAsked(address);
            announce('Asked');
          }}
        />
      ) : (
        <BlockRow>
          <p>
            <b>Asked.</b> If {asked} belongs to somebody here, a link goes there; it works once. Where the team sends no
            mail, an admin hands it over.
          </p>
        </BlockRow>
      )}
      <BlockRow>
        <Link to={paths.signIn()}>Back to sign in</Link>
      </BlockRow>
    </CoverSheet>
  );
}

function AskForm({ onAsked }: { onAsked: (email: string) => void }) {
  const form = useEndpointForm({
    schema: askBody,
    defaultValues: { email: '' },
    send: (values) => authRequest('request-password-reset', values),
    onDone: (_answer, values) => onAsked(values.email),
  });
  return (
    <form aria-label="Ask for a link" noValidate onSubmit={form.onSubmit}>
      <BlockRow>
        <TextField label="Work e-mail" type="email" autoComplete="username" {...form.field('email')} />
      </BlockRow>
      <FormFoot form={form} label="Ask for a link" acting="Asking" />
    </form>
  );
}
