import { useState } from 'react';
import type { Person } from '#api';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';

/** Asks before somebody is shut out, or let back in. */
export function SwitchActive({ person, onClose }: { person: Person; onClose: () => void }) {
  const update = useAct('people.update', ['people.list', 'team.audit', 'team.read']);
  const [failed, setFailed] = useState<string | null>(null);
  const { active } = person;
  const act = async () => {
    const changed = await update.act({ params: { id: person.id }, body: { active: !active } });
    if (changed.ok) {
      announce(active ? `${person.name} is deactivated` : `${person.name} may sign in again`);
      onClose();
    } else {
      setFailed(changed.error.message);
      announce(`Not changed. ${changed.error.message}`, 'assertive');
    }
  };
  return (
    <Dialog
      title={active ? `Deactivate ${person.name}?` : `Let ${person.name} back in?`}
      description={
        active
          ? 'All their sessions end now and they cannot sign in. What they wrote and signed stays, under their name. You can let them back in later.'
          : `They may sign in again as ${person.role}, with the password they had.`
      }
      isOpen
      onClose={onClose}
    >
      {failed !== null && <Failure lead="Not changed.">{failed}</Failure>}
      <DialogActions>
        <Button
          kind={active ? 'hard' : 'main'}
          acting={active ? 'Deactivating' : 'Letting in'}
          isActing={update.isActing}
          onClick={() => void act()}
        >
          {active ? 'Deactivate' : 'Let back in'}
        </Button>
        <Button onClick={onClose}>Leave it</Button>
      </DialogActions>
    </Dialog>
  );
}
