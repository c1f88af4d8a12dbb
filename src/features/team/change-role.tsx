import * as z from 'zod';
import { type Person, ROLES } from '#api';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';
import { SelectField } from '../../ui/field.tsx';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';
import { ROLE_OPTIONS } from './words.ts';

const roleBody = z.object({ role: z.enum(ROLES) });

export function ChangeRole({ person, onClose }: { person: Person; onClose: () => void }) {
  const update = useAct('people.update', ['people.list', 'team.audit', 'team.read']);
  const form = useEndpointForm({
    schema: roleBody,
    defaultValues: { role: person.role },
    send: (values) => update.act({ params: { id: person.id }, body: values }),
    onDone: (changed) => {
      announce(`${changed.name} is ${changed.role} now`);
      onClose();
    },
  });
  return (
    <Dialog
      title={`The role of ${person.name}`}
      description="Each role may do what the ones before it may."
      isOpen
      onClose={onClose}
    >
      <form noValidate onSubmit={form.onSubmit}>
        <SelectField label="Role" options={ROLE_OPTIONS} {...form.field('role')} />
        {form.refusal !== null && (
          <div className="mt-3">
            <Failure lead="Not changed.">{form.refusal.message}</Failure>
          </div>
        )}
        <DialogActions>
          <Button kind="main" type="submit" acting="Changing" isActing={form.isSending}>
            Change the role
          </Button>
          <Button onClick={onClose}>Leave it</Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}
