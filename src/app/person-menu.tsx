import { useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import type { Unsent } from '../lib/browser-store.ts';
import { paths } from '../lib/paths.ts';
import { prefer, type Theme, usePreferences } from '../lib/preferences.ts';
import { usePerson } from '../lib/session.ts';
import { announce } from '../ui/announce.tsx';
import { Button } from '../ui/button.tsx';
import { Dialog, DialogActions } from '../ui/dialog.tsx';
import { MenuAct, MenuChoice, MenuLink, MenuRule } from '../ui/menu.tsx';
import { signOut, unsentOf } from './sign-out.ts';

const THEMES = [
  { value: 'system', label: 'As this machine' },
  { value: 'light', label: 'Light' },
  { value: 'dark', label: 'Dark' },
] as const satisfies readonly { value: Theme; label: string }[];

/** The acts of the person signed in, inside a menu. */
export function PersonActs({ onSignOut }: { onSignOut: () => void }) {
  const { theme } = usePreferences();
  return (
    <>
      <MenuLink>
        <Link to={paths.account()}>Account</Link>
      </MenuLink>
      <MenuRule />
      <MenuChoice label="Paper" options={THEMES} value={theme} onChange={(next) => prefer({ theme: next })} />
      <MenuRule />
      <MenuAct onSelect={onSignOut}>Sign out</MenuAct>
    </>
  );
}

/** Signing out: at once, or after a question when something typed here has not reached the server. */
export function useSignOut() {
  const person = usePerson();
  const queries = useQueryClient();
  const navigate = useNavigate();
  const [unsent, setUnsent] = useState<readonly Unsent[]>([]);
  const [failed, setFailed] = useState<string | null>(null);
  const [isActing, setActing] = useState(false);

  const leave = async () => {
    setActing(true);
    const failure = await signOut(person.id, queries);
    setActing(false);
    if (failure === null) {
      await navigate(paths.signIn(), { replace: true });
      return;
    }
    setFailed(failure.message);
    announce(`Not signed out. ${failure.message}`, 'assertive');
  };
  const begin = async () => {
    setFailed(null);
    const found = await unsentOf(person.id);
    setUnsent(found);
    if (found.length === 0) await leave();
  };
  const close = () => {
    setUnsent([]);
    setFailed(null);
  };

  const question = (
    <Dialog
      title={unsent.length > 0 ? 'Sign out and lose what was not sent?' : 'Not signed out'}
      isOpen={unsent.length > 0 || failed !== null}
      onClose={close}
      {...(failed === null ? {} : { description: failed })}
    >
      {unsent.length > 0 && (
        <>
          <p>The server has not got these yet. Signing out clears them from this browser.</p>
          <ul className="mt-2 list-disc pl-5">
            {unsent.map((each) => (
              <li key={`${each.label} ${each.at}`}>{each.label}</li>
            ))}
          </ul>
        </>
      )}
      <DialogActions>
        <Button kind="hard" acting="Signing out" isActing={isActing} onClick={() => void leave()}>
          {failed === null ? 'Sign out and lose them' : 'Try again'}
        </Button>
        <Button onClick={close}>Stay signed in</Button>
      </DialogActions>
    </Dialog>
  );
  return { begin: () => void begin(), question };
}
