import type { QueryClient } from '@tanstack/react-query';
import { browserStore, type Unsent } from '../lib/browser-store.ts';
import { authRequest } from '../lib/client.ts';
import type { ClientFailure } from '../lib/failure.ts';
import { meReading } from '../lib/session.ts';

/** What this person typed here and the server has not got yet. */
export async function unsentOf(personId: string): Promise<readonly Unsent[]> {
  return (await browserStore(personId).list()).map((each) => each.unsent);
}

/** Ends the session, then clears what the browser keeps of this person. Gives the failure when the server did not end it. */
export async function signOut(personId: string, queries: QueryClient): Promise<ClientFailure | null> {
  const ended = await authRequest('sign-out', {});
  if (!ended.ok) return ended.error;
  await browserStore(personId).clear();
  queries.removeQueries({ predicate: (query) => query.queryKey[0] !== meReading.queryKey[0] });
  await queries.invalidateQueries({ queryKey: [meReading.queryKey[0]] });
  return null;
}
