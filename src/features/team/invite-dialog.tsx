import * as z from 'zod';
import { email, ROLES, type Role } from '#api';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';
import { SelectField, TextField } from '../../ui/field.tsx';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';
import { ROLE_OPTIONS } from './words.ts';

const inviteBody = z.object({ email, role: z.enum(ROLES) });

export function InviteDialog({ onClose, firstRole = 'reader' }: { onClose: () => void; firstRole?: Role }) {
  const invite = useAct('invitations.create', ['invitations.list', 'team.mail', 'team.read', 'team.audit']);
  const form = useEndpointForm({
    schema: inviteBody,
    defaultValues: { email: '', role: firstRole },
    send: (values) => invite.act({ body: values }),
    onDone: (invitation) => {
      announce(`${invitation.email} is invited`);
      onClose();
    },
  });
  return (
    <Dialog
      title="Invite a person"
      description="They set their name and a password by a link that lives 7 days. No mail server is set up, so make the link under “Acts” afterwards and hand it over."
      isOpen
      onClose={onClose}
    >
      <form noValidate onSubmit={form.onSubmit} className="grid gap-3">
        <TextField label="Work e-mail" type="email" autoComplete="off" {...form.field('email')} />
        <SelectField label="Role" options={ROLE_OPTIONS} {...form.field('role')} />
        {form.refusal !== null && <Failure lead="Not invited.">{form.refusal.message}</Failure>}
        {form.mending !== null && <p className="field-error">{form.mending}</p>}
        <DialogActions>
          <Button kind="main" type="submit" acting="Inviting" isActing={form.isSending}>
            Invite
          </Button>
          <Button onClick={onClose}>Leave it</Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}
