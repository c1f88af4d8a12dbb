import { useQueryClient } from '@tanstack/react-query';
import { useNavigate } from 'react-router-dom';
import { authRequest } from '../../lib/client.ts';
import { paths } from '../../lib/paths.ts';
import { tellNews } from '../../lib/server-news.ts';
import { meReading } from '../../lib/session.ts';

/** Signs in with what was just set and opens a page; if that does not go through, the sign-in page is the next step. */
export function useEnter(): (email: string, password: string, to: string) => Promise<void> {
  const queries = useQueryClient();
  const navigate = useNavigate();
  return async (email, password, to) => {
    const signedIn = await authRequest('sign-in/email', { email, password });
    queries.clear();
    tellNews({ isSignedOut: false });
    await navigate(signedIn.ok ? to : paths.signIn(to), { replace: true });
    if (signedIn.ok) await queries.invalidateQueries({ queryKey: [meReading.queryKey[0]] });
  };
}
