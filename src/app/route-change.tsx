import { useEffect, useRef } from 'react';
import { useLocation } from 'react-router-dom';
import { announce } from '../ui/announce.tsx';

/** Long enough for a lazy page to draw its heading after the address has changed, in milliseconds. */
const PATIENCE_MS = 4000;

/** After a change of page the focus goes to its heading, which is announced with the page's title. */
export function RouteChange() {
  const { pathname } = useLocation();
  const shown = useRef<string | null>(null);
  useEffect(() => {
    const isFirst = shown.current === null;
    if (shown.current === pathname) return;
    shown.current = pathname;
    // The first page was asked for by the browser, which reads it out itself.
    if (isFirst) return;
    return whenHeadingIsThere((heading) => {
      heading.tabIndex = -1;
      heading.focus({ preventScroll: true });
      window.scrollTo(0, 0);
      announce(document.title.replace(' · Quadrille', ''));
    });
  }, [pathname]);
  return null;
}

function whenHeadingIsThere(act: (heading: HTMLElement) => void): () => void {
  const find = () => document.querySelector<HTMLElement>('main h1');
  const there = find();
  if (there !== null) {
    act(there);
    return () => undefined;
  }
  const observer = new MutationObserver(() => {
    const heading = find();
    if (heading === null) return;
    stop();
    act(heading);
  });
  const timer = setTimeout(() => observer.disconnect(), PATIENCE_MS);
  const stop = () => {
    observer.disconnect();
    clearTimeout(timer);
  };
  observer.observe(document.body, { childList: true, subtree: true });
  return stop;
}
