import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link } from 'react-router-dom';
import type { Person } from '#api';
import { dayText } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { useMay, usePerson } from '../../lib/session.ts';
import { Button } from '../../ui/button.tsx';
import { Menu, MenuAct, MenuRule } from '../../ui/menu.tsx';
import { RegisterTable } from '../../ui/register-table.tsx';
import { ChangeRole } from './change-role.tsx';
import { InvitationList } from './invitation-list.tsx';
import { InviteDialog } from './invite-dialog.tsx';
import { LinkQuestion } from './link-question.tsx';
import { peopleReading } from './queries.ts';
import { ReadSection } from './read-section.tsx';
import { SwitchActive } from './switch-active.tsx';

type Asked = { readonly about: Person; readonly what: 'role' | 'active' | 'link' };

export function PeopleTab() {
  const people = useQuery(peopleReading);
  const runs = useMay('run the team');
  const [isInviting, setInviting] = useState(false);
  const [asked, setAsked] = useState<Asked | null>(null);
  const close = () => setAsked(null);
  return (
    <>
      {runs && (
        <div className="mb-4">
          <Button kind="main" onClick={() => setInviting(true)}>
            Invite a person
          </Button>
        </div>
      )}
      <ReadSection query={people} label="Reading the list of people">
        {(read) => (
          <RegisterTable
            caption="People of the team"
            heads={[
              { label: 'Name' },
              { label: 'Role' },
              ...(runs ? [{ label: 'E-mail' }, { label: 'Last seen' }] : []),
              { label: 'Since' },
              ...(runs ? [{ label: 'Acts', hidden: true }] : []),
            ]}
          >
            {read.people.map((person) => (
              <PersonRow key={person.id} person={person} runs={runs} onAsk={setAsked} />
            ))}
          </RegisterTable>
        )}
      </ReadSection>
      {runs && <InvitationList />}
      {isInviting && <InviteDialog onClose={() => setInviting(false)} />}
      {asked?.what === 'role' && <ChangeRole person={asked.about} onClose={close} />}
      {asked?.what === 'active' && <SwitchActive person={asked.about} onClose={close} />}
      {asked?.what === 'link' && <LinkQuestion about={{ kind: 'person', person: asked.about }} onClose={close} />}
    </>
  );
}

interface PersonRowProps {
  readonly person: Person;
  readonly runs: boolean;
  readonly onAsk: (asked: Asked) => void;
}

function PersonRow({ person, runs, onAsk }: PersonRowProps) {
  const isSelf = usePerson().id === person.id;
  return (
    <tr>
      <td className="name">
        {person.name}
        {isSelf && <span className="note [font-family:var(--face-ui)]"> you</span>}
      </td>
      <td data-head="Role">
        {person.role}
        {!person.active && <small>deactivated</small>}
      </td>
      {runs && (
        <>
          <td data-head="E-mail">{person.email}</td>
          <td data-head="Last seen">{person.lastSeen ? dayText(person.lastSeen) : 'not yet'}</td>
        </>
      )}
      <td data-head="Since">{dayText(person.since)}</td>
      {runs && (
        <td className="sm:text-right">
          {isSelf ? (
            <Link to={paths.account()}>Your account</Link>
          ) : (
            <Menu
              trigger={
                <Button small aria-label={`Acts for ${person.name}`}>
                  Acts
                </Button>
              }
            >
              <MenuAct onSelect={() => onAsk({ about: person, what: 'role' })}>Change the role…</MenuAct>
              <MenuAct onSelect={() => onAsk({ about: person, what: 'link' })}>Make a password link…</MenuAct>
              <MenuRule />
              <MenuAct onSelect={() => onAsk({ about: person, what: 'active' })}>
                {person.active ? 'Deactivate…' : 'Let back in…'}
              </MenuAct>
            </Menu>
          )}
        </td>
      )}
    </tr>
  );
}
