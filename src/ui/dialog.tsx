import { Dialog as Radix } from 'radix-ui';
import { type ReactNode, useRef } from 'react';

export interface DialogProps {
  readonly title: string;
  readonly description?: ReactNode;
  readonly isOpen: boolean;
  /** Called by Esc, by a press outside and by the close button: always the harmless answer. */
  readonly onClose: () => void;
  readonly wide?: boolean;
  readonly children: ReactNode;
}

/** A question or a short form over the page. The focus is held inside and goes back to where it was. */
export function Dialog({ title, description, isOpen, onClose, wide = false, children }: DialogProps) {
  const opener = useRef<HTMLElement | null>(null);
  const described = description === undefined ? { 'aria-describedby': undefined } : {};
  return (
    <Radix.Root open={isOpen} onOpenChange={(open) => !open && onClose()}>
      <Radix.Portal>
        <Radix.Overlay className="sheet-veil" />
        <Radix.Content
          {...described}
          onOpenAutoFocus={() => {
            opener.current = openerOf(document.activeElement);
          }}
          onCloseAutoFocus={(event) => {
            event.preventDefault();
            const back = opener.current?.isConnected ? opener.current : document.querySelector<HTMLElement>('main h1');
            back?.focus();
          }}
          className={`question fixed top-[12vh] left-1/2 z-40 max-h-[80vh] -translate-x-1/2 overflow-y-auto ${wide ? 'w-[min(720px,calc(100vw-32px))]' : 'w-[min(480px,calc(100vw-32px))]'}`}
        >
          <Radix.Title className="text-section">{title}</Radix.Title>
          {description !== undefined && (
            <Radix.Description asChild>
              <div className="mt-1">{description}</div>
            </Radix.Description>
          )}
          <div className="mt-4">{children}</div>
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}

/** What opened the question; an item of a menu is gone by the time of the answer, the button of its menu is not. */
function openerOf(focused: Element | null): HTMLElement | null {
  const trigger = focused?.closest('[role="menu"]')?.getAttribute('aria-labelledby');
  const opener = trigger ? document.getElementById(trigger) : focused;
  return opener instanceof HTMLElement && opener !== document.body ? opener : null;
}

/** The row of answers at the foot of a question. */
export function DialogActions({ children }: { children: ReactNode }) {
  return <div className="mt-6 flex flex-wrap items-start gap-2">{children}</div>;
}
