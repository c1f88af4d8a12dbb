import { useSearchParams } from 'react-router-dom';
import { useMay, useMe } from '../../lib/session.ts';
import { usePageTitle } from '../../ui/page-title.ts';
import { MarginNote, PageHead, Sheet } from '../../ui/sheet.tsx';
import { type Tab, Tabs } from '../../ui/tabs.tsx';
import { AuditTab } from './audit-tab.tsx';
import { MailTab } from './mail-tab.tsx';
import { PeopleTab } from './people-tab.tsx';
import { SettingsTab } from './settings-tab.tsx';
import { StartTab } from './start-tab.tsx';

const FIRST_TAB = 'people';

/** Editors see who is here; admins run the team. */
export function TeamPage() {
  usePageTitle('Team');
  const { team } = useMe();
  const sees = useMay('see the team');
  const runs = useMay('run the team');
  const [search, setSearch] = useSearchParams();
  if (!sees) {
    return (
      <Sheet>
        <PageHead title="Team">Editors and admins see this sheet. Your account is under your name, top right.</PageHead>
      </Sheet>
    );
  }
  const tabs: readonly Tab[] = [
    { value: 'people', label: 'People', content: <PeopleTab /> },
    ...(runs
      ? [
          { value: 'start', label: 'First steps', content: <StartTab /> },
          { value: 'settings', label: 'Settings', content: <SettingsTab /> },
          { value: 'mail', label: 'Mail', content: <MailTab /> },
          { value: 'log', label: 'Audit log', content: <AuditTab /> },
        ]
      : []),
  ];
  const asked = search.get('tab');
  const value = tabs.find((tab) => tab.value === asked)?.value ?? FIRST_TAB;
  return (
    <Sheet
      margin={
        <div className="hidden lg:block lg:pt-10">
          <MarginNote label="Team">{team.name}</MarginNote>
          <MarginNote label="Time zone">{team.timeZone}</MarginNote>
        </div>
      }
    >
      <PageHead title="Team" />
      {tabs.length === 1 ? (
        <PeopleTab />
      ) : (
        <Tabs
          label="Parts of the team sheet"
          tabs={tabs}
          value={value}
          onChange={(tab) => setSearch({ tab }, { replace: true })}
        />
      )}
    </Sheet>
  );
}
