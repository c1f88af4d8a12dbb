import { useQuery } from '@tanstack/react-query';
import { type ReactNode, useState } from 'react';
import { Link } from 'react-router-dom';
import type { STARTING_STEPS, TeamSettings } from '#api';
import { paths } from '../../lib/paths.ts';
import { type ActParts, useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button, buttonClass } from '../../ui/button.tsx';
import { InviteDialog } from './invite-dialog.tsx';
import { teamReading } from './queries.ts';
import { ReadSection } from './read-section.tsx';

type Step = (typeof STARTING_STEPS)[number];

const TITLES = {
  address: 'Tell people the address',
  mail: 'See to mail',
  backups: 'Say where backups go',
  'time zone': 'Set the time zone',
  'second editor': 'Invite a second editor',
  'open a starter recipe': 'Open a starter recipe',
  'start your own': 'Start a recipe of your own',
} as const satisfies Record<Step, string>;

/** The list of first steps. Lines tick themselves; it can be put away, and found again here. */
export function StartTab() {
  const team = useQuery(teamReading);
  return (
    <ReadSection query={team} label="Reading the list">
      {(settings) => <StartingList settings={settings} />}
    </ReadSection>
  );
}

function StartingList({ settings }: { settings: TeamSettings }) {
  const update = useAct('team.update', ['team.read', 'me.read']);
  const [failed, setFailed] = useState<string | null>(null);
  const { steps, putAway } = settings.starting;
  const change = async (body: ActParts<'team.update'>['body'], said: string) => {
    const answer = await update.act({ body });
    setFailed(answer.ok ? null : answer.error.message);
    if (answer.ok) announce(said);
    else announce(`Not kept. ${answer.error.message}`, 'assertive');
  };
  const left = steps.filter((step) => !step.done).length;
  if (putAway) {
    return (
      <div className="grid justify-items-start gap-3">
        <p>The list is put away; {left === 0 ? 'all of it is done.' : `${left} of ${steps.length} lines are open.`}</p>
        <Button onClick={() => void change({ startingPutAway: false }, 'The list is back')}>Show it again</Button>
      </div>
    );
  }
  return (
    <>
      <p className="mb-4 max-w-measure text-ink-2">
        A recipe earns trust when somebody else has checked it, so you need one circuit and one colleague. These lines
        tick themselves as you go; all of them can wait.
      </p>
      {failed !== null && <Failure lead="Not kept.">{failed}</Failure>}
      <ol className="border-ink border-t">
        {steps.map((step, at) => (
          <li
            key={step.step}
            className="grid min-h-[72px] grid-cols-[32px_minmax(0,1fr)] items-center gap-x-4 gap-y-2 border-rule border-b py-2 sm:grid-cols-[32px_minmax(0,1fr)_auto]"
          >
            <StepMark number={at + 1} isDone={step.done} />
            <div>
              <p className="font-head font-read text-read">{TITLES[step.step]}</p>
              <p className="text-ink-2 text-table">{step.detail}</p>
            </div>
            <div className="col-start-2 sm:col-start-3">
              {!step.done && (
                <StepAct step={step.step} settings={settings} isActing={update.isActing} onChange={change} />
              )}
            </div>
          </li>
        ))}
      </ol>
      <div className="mt-4">
        <Button small onClick={() => void change({ startingPutAway: true }, 'The list is put away')}>
          Put the list away
        </Button>
      </div>
    </>
  );
}

function StepMark({ number, isDone }: { number: number; isDone: boolean }) {
  if (!isDone) return <span className="text-ink-3">{number}</span>;
  return (
    <span className="text-green">
      <svg viewBox="0 0 16 16" className="size-4" aria-hidden="true">
        <path d="M2 8.5l4 4 8-9" fill="none" stroke="currentColor" strokeWidth="2" />
      </svg>
      <span className="sr-only">done</span>
    </span>
  );
}

interface StepActProps {
  readonly step: Step;
  readonly settings: TeamSettings;
  readonly isActing: boolean;
  readonly onChange: (body: ActParts<'team.update'>['body'], said: string) => Promise<void>;
}

function StepAct({ step, settings, isActing, onChange }: StepActProps): ReactNode {
  const [isInviting, setInviting] = useState(false);
  switch (step) {
    case 'address':
      return (
        <Button
          acting="Keeping"
          isActing={isActing}
          onClick={() => void onChange({ addressConfirmed: true }, 'The address is confirmed')}
        >
          {settings.publicUrl} is right
        </Button>
      );
    case 'mail':
    case 'backups':
    case 'time zone':
      return (
        <Link className={buttonClass('plain')} to={paths.team('settings')}>
          To the settings
        </Link>
      );
    case 'second editor':
      return (
        <div className="flex flex-wrap gap-2">
          <Button onClick={() => setInviting(true)}>Invite an editor</Button>
          <Button
            onClick={() => void onChange({ allowSelfSignOff: true }, 'Authors may sign off what they wrote')}
            acting="Keeping"
            isActing={isActing}
          >
            Allow signing off one’s own
          </Button>
          {isInviting && <InviteDialog firstRole="editor" onClose={() => setInviting(false)} />}
        </div>
      );
    case 'open a starter recipe':
      return (
        <Link className={buttonClass('plain')} to={paths.recipes()}>
          See the recipes
        </Link>
      );
    case 'start your own':
      return (
        <Link className={buttonClass('main')} to={paths.start()}>
          Write a recipe
        </Link>
      );
    default:
      return step satisfies never;
  }
}
