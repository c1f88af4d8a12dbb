import { useState } from 'react';
import type { Answer, Invitation, Person } from '#api';
import { momentText } from '../../lib/locale.ts';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { CopyButton } from '../../ui/copy-button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';
import { TextField } from '../../ui/field.tsx';

export type LinkAbout =
  | { readonly kind: 'person'; readonly person: Person }
  | { readonly kind: 'invitation'; readonly invitation: Invitation };

type MadeLink = Answer<'people.makeLink'>;

/** Makes a link to hand over by other means. It is shown once, and the log says who made it. */
export function LinkQuestion({ about, onClose }: { about: LinkAbout; onClose: () => void }) {
  const forPerson = useAct('people.makeLink', ['team.audit']);
  const forInvitation = useAct('invitations.makeLink', ['invitations.list', 'team.audit']);
  const [made, setMade] = useState<MadeLink | null>(null);
  const [failed, setFailed] = useState<string | null>(null);
  const whom = about.kind === 'person' ? about.person.name : about.invitation.email;

  const make = async () => {
    const answer =
      about.kind === 'person'
        ? await forPerson.act({ params: { id: about.person.id }, body: {} })
        : await forInvitation.act({ params: { id: about.invitation.id }, body: {} });
    if (answer.ok) {
      setMade(answer.value);
      setFailed(null);
      announce('Link made');
    } else {
      setFailed(answer.error.message);
      announce(`Not made. ${answer.error.message}`, 'assertive');
    }
  };

  return (
    <Dialog title={`Make a link for ${whom}`} description={CONSEQUENCES[about.kind]} isOpen onClose={onClose} wide>
      {failed !== null && <Failure lead="Not made.">{failed}</Failure>}
      {made === null ? (
        <DialogActions>
          <Button
            kind="hard"
            acting="Making"
            isActing={forPerson.isActing || forInvitation.isActing}
            onClick={() => void make()}
          >
            Make the link
          </Button>
          <Button onClick={onClose}>Leave it</Button>
        </DialogActions>
      ) : (
        <>
          <TextField
            label="The link, shown this once"
            hint={`Works until ${momentText(made.expiresAt)}, once. Whoever has it can use it: hand it over in person or by a way you trust.`}
            readOnly
            ref={focusIt}
            value={made.url}
            onFocus={(event) => event.target.select()}
          />
          <DialogActions>
            <CopyButton kind="main" label="Copy the link" text={made.url} />
            <Button onClick={onClose}>Done</Button>
          </DialogActions>
        </>
      )}
    </Dialog>
  );
}

/** After the act the focus goes to what it gave. */
function focusIt(field: HTMLInputElement | null): void {
  field?.focus();
}

const CONSEQUENCES = {
  person:
    'With it they set a new password. Using it ends all their sessions; they are told at their next sign-in that you made it, and the audit log says so.',
  invitation:
    'It replaces the link in the mail, which stops working. Whoever uses it joins the team. The audit log says that you made it.',
} as const satisfies Record<LinkAbout['kind'], string>;
