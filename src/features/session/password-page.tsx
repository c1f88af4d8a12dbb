import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import * as z from 'zod';
import { newPassword } from '#api';
import { authRequest } from '../../lib/client.ts';
import { paths } from '../../lib/paths.ts';
import { meReading } from '../../lib/session.ts';
import { announce } from '../../ui/announce.tsx';
import { buttonClass } from '../../ui/button.tsx';
import { PasswordField } from '../../ui/field.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';
import { BlockRow, CoverSheet } from './cover-sheet.tsx';
import { FormFoot } from './form-foot.tsx';
import { useFragmentToken } from './fragment-token.ts';
import { DeadLink } from './link-gate.tsx';
import { PASSWORD_HINT } from './words.ts';

const resetBody = z.object({ newPassword });

export function PasswordPage() {
  usePageTitle('New password');
  const token = useFragmentToken();
  const me = useQuery(meReading);
  const [isSet, setIsSet] = useState(false);
  return (
    <CoverSheet
      title="Set a new password"
      lead="It replaces the one before, and ends every session that was opened with that one."
      team={me.data?.team.name ?? ''}
      signedBy="you, in a moment"
    >
      {token === null && <DeadLink>The link was not copied whole: the part after “#” is missing.</DeadLink>}
      {token !== null && !isSet && (
        <ResetForm
          token={token}
          onSet={() => {
            setIsSet(true);
            announce('Your new password is set');
          }}
        />
      )}
      {isSet && (
        <BlockRow>
          <p>
            <b>Your new password is set.</b> Every session was ended.
          </p>
          <p className="mt-2">
            <Link className={buttonClass('main')} to={paths.signIn()}>
              Sign in
            </Link>
          </p>
        </BlockRow>
      )}
    </CoverSheet>
  );
}

function ResetForm({ token, onSet }: { token: string; onSet: () => void }) {
  const form = useEndpointForm({
    schema: resetBody,
    defaultValues: { newPassword: '' },
    send: (values) => authRequest('reset-password', { ...values, token }),
    onDone: onSet,
  });
  return (
    <form aria-label="Set a new password" noValidate onSubmit={form.onSubmit}>
      <BlockRow>
        <PasswordField
          label="New password"
          hint={PASSWORD_HINT}
          autoComplete="new-password"
          {...form.field('newPassword')}
        />
      </BlockRow>
      <FormFoot form={form} label="Set password" acting="Setting" />
    </form>
  );
}
