import { Popover as Radix } from 'radix-ui';
import { type ReactNode, useEffect, useRef, useState } from 'react';

/** Long enough to cross the gap between mark and note. Source: common practice, no source. */
const LEAVE_MS = 200;

export interface HintProps {
  /** What is pointed at; it becomes a button. */
  readonly children: ReactNode;
  readonly note: ReactNode;
  readonly className?: string;
  /** Said before the note's own words; needed when `children` is only a mark. */
  readonly label?: string;
}

/** A note on hover, focus or tap. It can be pointed at without going, and Esc closes it (WCAG 2.2, 1.4.13). */
export function Hint({ children, note, className = '', label }: HintProps) {
  const [isOpen, setOpen] = useState(false);
  const mark = useRef<HTMLButtonElement>(null);
  // Inside the landmark, or the dialog, that the mark belongs to.
  const [home, setHome] = useState<HTMLElement | null>(null);
  const leaving = useRef<ReturnType<typeof setTimeout> | undefined>(undefined);
  useEffect(() => () => clearTimeout(leaving.current), []);
  const stay = () => clearTimeout(leaving.current);
  const enter = () => {
    stay();
    setHome(mark.current?.closest<HTMLElement>('[role="dialog"], main, header') ?? null);
    setOpen(true);
  };
  const leave = () => {
    stay();
    leaving.current = setTimeout(() => setOpen(false), LEAVE_MS);
  };
  return (
    <Radix.Root open={isOpen} onOpenChange={setOpen}>
      <Radix.Anchor asChild>
        <button
          ref={mark}
          type="button"
          aria-label={label}
          aria-expanded={isOpen}
          className={`text-left ${className}`}
          onPointerEnter={(event) => event.pointerType === 'mouse' && enter()}
          onPointerLeave={(event) => event.pointerType === 'mouse' && leave()}
          onFocus={enter}
          onBlur={leave}
          onClick={enter}
        >
          {children}
        </button>
      </Radix.Anchor>
      <Radix.Portal container={home}>
        <Radix.Content
          role="note"
          sideOffset={6}
          collisionPadding={8}
          className="float max-w-[min(420px,calc(100vw-16px))] p-3 text-note"
          onOpenAutoFocus={(event) => event.preventDefault()}
          onCloseAutoFocus={(event) => event.preventDefault()}
          onPointerEnter={stay}
          onPointerLeave={leave}
        >
          {note}
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}
