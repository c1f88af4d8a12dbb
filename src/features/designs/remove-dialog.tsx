import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import type { DesignRow } from '#api';
import type { ClientFailure } from '../../lib/failure.ts';
import { paths } from '../../lib/paths.ts';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';

export interface RemoveDialogProps {
  readonly design: DesignRow;
  readonly onClose: () => void;
  readonly onLeave: () => void;
  /** Gives true when the design turned out to have moved, which the page itself then shows. */
  readonly onRefused: (failure: ClientFailure) => boolean;
}

/** Asks before a design goes for good. */
export function RemoveDialog({ design, onClose, onLeave, onRefused }: RemoveDialogProps) {
  const navigate = useNavigate();
  const { act, isActing } = useAct('designs.remove', ['designs.list', 'recipes.list']);
  const [failed, setFailed] = useState<string | null>(null);
  const remove = async () => {
    const removed = await act({ params: { id: design.id }, body: { updatedAt: design.updatedAt } });
    if (removed.ok) {
      announce(`Removed: ${design.name}`);
      onLeave();
      await navigate(paths.designs());
      return;
    }
    announce(`Not removed. ${removed.error.message}`, 'assertive');
    if (onRefused(removed.error)) onClose();
    else setFailed(removed.error.message);
  };
  return (
    <Dialog
      isOpen
      onClose={onClose}
      title={`Remove “${design.name}”?`}
      description="Its numbers and its note go for good; nobody can bring them back. The recipe stays as it is."
    >
      {failed !== null && <Failure lead="Not removed.">{failed}</Failure>}
      <DialogActions>
        <Button onClick={onClose}>Leave it</Button>
        <Button kind="hard" acting="Removing" isActing={isActing} onClick={() => void remove()}>
          Remove
        </Button>
      </DialogActions>
    </Dialog>
  );
}
