import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { Answer } from '#api';
import { EmptyLines } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { RegisterTable } from '../../ui/register-table.tsx';
import { auditReading } from './queries.ts';
import { ReadSection } from './read-section.tsx';

type AuditEvent = Answer<'team.audit'>['events'][number];

/** Every act that counts, newest first, in UTC like the server's own logs. */
export function AuditTab() {
  const [pages, setPages] = useState<readonly (string | undefined)[]>([undefined]);
  const before = pages.at(-1);
  const log = useQuery(auditReading(before));
  return (
    <ReadSection query={log} label="Reading the log">
      {(read) =>
        read.events.length === 0 ? (
          <EmptyLines>Nothing has happened yet.</EmptyLines>
        ) : (
          <>
            <RegisterTable
              caption="Audit log"
              heads={[{ label: 'When, in UTC' }, { label: 'Who' }, { label: 'Act' }, { label: 'About' }]}
            >
              {read.events.map((event) => (
                <AuditRow key={event.id} event={event} />
              ))}
            </RegisterTable>
            <div className="mt-4 flex gap-2">
              {pages.length > 1 && (
                <Button small onClick={() => setPages(pages.slice(0, -1))}>
                  Newer
                </Button>
              )}
              {read.more && (
                <Button small onClick={() => setPages([...pages, read.events.at(-1)?.at])}>
                  Older
                </Button>
              )}
            </div>
          </>
        )
      }
    </ReadSection>
  );
}

function AuditRow({ event }: { event: AuditEvent }) {
  return (
    <tr>
      <td className="whitespace-nowrap">
        <time dateTime={event.at}>{event.at.slice(0, 19).replace('T', ' ')}</time>
      </td>
      <td data-head="Who">{event.by}</td>
      <td data-head="Act">{event.act}</td>
      <td data-head="About">
        {event.about}
        {event.detail !== '' && <small>{event.detail}</small>}
      </td>
    </tr>
  );
}
