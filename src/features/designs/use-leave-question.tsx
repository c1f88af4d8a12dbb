import { type ReactNode, useEffect, useRef } from 'react';
import { useBlocker } from 'react-router-dom';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';

export interface LeaveQuestion {
  readonly question: ReactNode;
  /** Lets the next change of page through without asking. */
  readonly letGo: () => void;
}

/** Asks before a page with changes that are not kept is left; a reload or a closed tab is asked about by the browser itself. */
export function useLeaveQuestion(hasChanges: boolean): LeaveQuestion {
  const isFree = useRef(false);
  const blocker = useBlocker(
    ({ currentLocation, nextLocation }) =>
      hasChanges && !isFree.current && currentLocation.pathname !== nextLocation.pathname,
  );
  useEffect(() => {
    if (!hasChanges) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', ask);
    return () => window.removeEventListener('beforeunload', ask);
  }, [hasChanges]);
  const question = blocker.state === 'blocked' && (
    <Dialog
      isOpen
      onClose={() => blocker.reset()}
      title="Leave without keeping your changes?"
      description="The design stays as it was last kept. What you changed since goes."
    >
      <DialogActions>
        <Button kind="main" onClick={() => blocker.reset()}>
          Stay here
        </Button>
        <Button kind="hard" onClick={() => blocker.proceed()}>
          Leave and drop the changes
        </Button>
      </DialogActions>
    </Dialog>
  );
  return {
    question,
    letGo: () => {
      isFree.current = true;
    },
  };
}
