import { type RefObject, useEffect, useRef } from 'react';

/**
 * For buttons that may go with what they did: `goTo` names what takes the focus within `box`, should it be lost once the page
 * shows what came of it.
 */
export function useFocusAfter<Box extends HTMLElement>(): {
  readonly box: RefObject<Box | null>;
  readonly goTo: (selector: string) => void;
} {
  const box = useRef<Box>(null);
  const wanted = useRef<string | null>(null);
  useEffect(() => {
    if (wanted.current === null) return;
    const target = box.current?.querySelector<HTMLElement>(wanted.current);
    wanted.current = null;
    if (document.activeElement === document.body) target?.focus();
  });
  return {
    box,
    goTo: (selector) => {
      wanted.current = selector;
    },
  };
}
