import { useEffect, useState } from 'react';
import { usePreferences } from '../lib/preferences.ts';
import { Dialog } from '../ui/dialog.tsx';
import { isTypedInto } from './go-to.tsx';

const KEYS = [
  ['/', 'go to a recipe by number or name'],
  ['?', 'list these keys'],
  ['↑ ↓', 'in a list: the row above, the row below'],
  ['Enter', 'in a list: open the row'],
  ['Space', 'in a list: tick the row'],
  ['↑ ↓', 'in a value: one step of its last digit up or down; with Shift ten'],
  ['Esc', 'close what is open; the harmless answer to a question'],
] as const;

/** `?` lists the keys. */
export function KeysDialog() {
  const { singleKeys } = usePreferences();
  const [isOpen, setOpen] = useState(false);
  useEffect(() => {
    if (!singleKeys) return;
    const onKey = (event: KeyboardEvent) => {
      if (event.key === '?' && !event.ctrlKey && !event.metaKey && !isTypedInto(event.target)) setOpen(true);
    };
    window.addEventListener('keydown', onKey);
    return () => window.removeEventListener('keydown', onKey);
  }, [singleKeys]);
  return (
    <Dialog title="Keys" isOpen={isOpen} onClose={() => setOpen(false)}>
      <dl className="grid grid-cols-[64px_1fr] gap-y-2">
        {KEYS.map(([key, act]) => (
          <div key={act} className="contents">
            <dt>
              <kbd>{key}</kbd>
            </dt>
            <dd>{act}</dd>
          </div>
        ))}
      </dl>
    </Dialog>
  );
}
