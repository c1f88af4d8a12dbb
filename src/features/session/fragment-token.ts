import { useLocation } from 'react-router-dom';

/** The token of a link. It stands in the fragment, which browsers send to nobody; null when the link was not copied whole. */
export function useFragmentToken(): string | null {
  const token = new URLSearchParams(useLocation().hash.slice(1)).get('token');
  return token === null || token === '' ? null : token;
}
