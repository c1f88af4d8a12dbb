import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { Invitation } from '#api';
import { dayText } from '../../lib/locale.ts';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Menu, MenuAct, MenuRule } from '../../ui/menu.tsx';
import { RegisterTable } from '../../ui/register-table.tsx';
import { LinkQuestion } from './link-question.tsx';
import { invitationsReading } from './queries.ts';
import { ReadSection } from './read-section.tsx';

/** Invitations that nobody has accepted yet. */
export function InvitationList() {
  const invitations = useQuery(invitationsReading);
  const resend = useAct('invitations.resend', ['invitations.list', 'team.mail', 'team.audit']);
  const revoke = useAct('invitations.revoke', ['invitations.list', 'team.audit', 'team.read']);
  const [linkFor, setLinkFor] = useState<Invitation | null>(null);
  const [failed, setFailed] = useState<string | null>(null);

  const act = async (invitation: Invitation, what: 'resend' | 'revoke') => {
    const parts = { params: { id: invitation.id }, body: {} };
    const answer = what === 'resend' ? await resend.act(parts) : await revoke.act(parts);
    setFailed(answer.ok ? null : answer.error.message);
    if (!answer.ok) announce(`Not done. ${answer.error.message}`, 'assertive');
    else
      announce(
        what === 'resend' ? `Sent to ${invitation.email} again` : `The invitation of ${invitation.email} is revoked`,
      );
  };

  return (
    <section aria-label="Invitations" className="mt-8">
      <h2 className="mb-2">Invitations</h2>
      {failed !== null && <Failure lead="Not done.">{failed}</Failure>}
      <ReadSection query={invitations} label="Reading the invitations">
        {(read) =>
          read.invitations.length === 0 ? (
            <p className="border-ink border-t py-3 text-ink-2">None is open.</p>
          ) : (
            <RegisterTable
              caption="Open invitations"
              heads={[
                { label: 'E-mail' },
                { label: 'Role' },
                { label: 'State' },
                { label: 'Invited by' },
                { label: 'Acts', hidden: true },
              ]}
            >
              {read.invitations.map((invitation) => (
                <tr key={invitation.id}>
                  <td>{invitation.email}</td>
                  <td data-head="Role">{invitation.role}</td>
                  <td data-head="State">
                    {invitation.state === 'pending' ? 'pending' : 'ran out'}
                    <small>
                      {invitation.state === 'pending' ? 'until' : 'on'} {dayText(invitation.expiresAt)}
                    </small>
                  </td>
                  <td data-head="Invited by">
                    {invitation.invitedBy}
                    <small>{dayText(invitation.sentAt)}</small>
                  </td>
                  <td className="sm:text-right">
                    <Menu
                      trigger={
                        <Button small aria-label={`Acts for the invitation of ${invitation.email}`}>
                          Acts
                        </Button>
                      }
                    >
                      <MenuAct onSelect={() => void act(invitation, 'resend')}>Send again</MenuAct>
                      <MenuAct onSelect={() => setLinkFor(invitation)}>Make a link…</MenuAct>
                      <MenuRule />
                      <MenuAct onSelect={() => void act(invitation, 'revoke')}>Revoke</MenuAct>
                    </Menu>
                  </td>
                </tr>
              ))}
            </RegisterTable>
          )
        }
      </ReadSection>
      {linkFor !== null && (
        <LinkQuestion about={{ kind: 'invitation', invitation: linkFor }} onClose={() => setLinkFor(null)} />
      )}
    </section>
  );
}
