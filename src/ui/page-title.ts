import { useEffect } from 'react';

/** Names the page in the tab and for what is read out after a change of page; null while the name is not known yet. */
export function usePageTitle(title: string | null): void {
  useEffect(() => {
    if (title !== null) document.title = `${title} · Quadrille`;
  }, [title]);
}
