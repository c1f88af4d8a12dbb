import { useQuery } from '@tanstack/react-query';
import { momentText } from '../../lib/locale.ts';
import { EmptyLines } from '../../ui/blocks.tsx';
import { RegisterTable } from '../../ui/register-table.tsx';
import { mailReading } from './queries.ts';
import { ReadSection } from './read-section.tsx';

/** Mail that the program wrote. While no mail server is set, it is kept here to be read. */
export function MailTab() {
  const mail = useQuery(mailReading);
  return (
    <ReadSection query={mail} label="Reading the mail">
      {(read) =>
        read.mail.length === 0 ? (
          <EmptyLines>No mail was written yet. Invitations and password links will stand here.</EmptyLines>
        ) : (
          <RegisterTable
            caption="Mail"
            heads={[{ label: 'Written' }, { label: 'To' }, { label: 'Mail' }, { label: 'State' }]}
          >
            {read.mail.map((row) => (
              <tr key={row.id}>
                <td className="whitespace-nowrap">{momentText(row.at)}</td>
                <td data-head="To">{row.to}</td>
                <td>
                  <details>
                    <summary>{row.subject}</summary>
                    <p className="mt-1 whitespace-pre-wrap text-ink-2">{row.body}</p>
                  </details>
                </td>
                <td data-head="State">{row.state}</td>
              </tr>
            ))}
          </RegisterTable>
        )
      }
    </ReadSection>
  );
}
