import { lazy, Suspense, useEffect, useState } from 'react';
import { usePreferences } from '../lib/preferences.ts';

const KeysDialog = lazy(async () => ({ default: (await import('./keys-dialog.tsx')).KeysDialog }));

/** Acts on a single key, unless the person has switched these off or is typing. */
export function useSingleKey(key: string, act: () => void): void {
  const { singleKeys } = usePreferences();
  useEffect(() => {
    if (!singleKeys) return;
    const onKey = (event: KeyboardEvent) => {
      if (event.key !== key || event.ctrlKey || event.metaKey || event.altKey || isTypedInto(event.target)) return;
      event.preventDefault();
      act();
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  });
}

function isTypedInto(target: EventTarget | null): boolean {
  return target instanceof HTMLElement && (target.isContentEditable || target.matches('input, textarea, select'));
}

/** `?` lists the keys. */
export function KeysHelp() {
  const [isOpen, setOpen] = useState(false);
  useSingleKey('?', () => setOpen(true));
  if (!isOpen) return null;
  return (
    <Suspense>
      <KeysDialog onClose={() => setOpen(false)} />
    </Suspense>
  );
}
