import { Dialog } from '../ui/dialog.tsx';

const KEYS = [
  ['/', 'go to a recipe by number or name'],
  ['?', 'list these keys'],
  ['↑ ↓', 'in a list: the row above, the row below'],
  ['Enter', 'in a list: open the row'],
  ['Space', 'in a list: tick the row'],
  ['↑ ↓', 'in a value: one step of its last digit up or down; with Shift ten'],
  ['Esc', 'close what is open; the harmless answer to a question'],
] as const;

export function KeysDialog({ onClose }: { onClose: () => void }) {
  return (
    <Dialog title="Keys" isOpen onClose={onClose}>
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
