import { useSuspenseQuery } from '@tanstack/react-query';
import { type Action, type Me, mayDo, type Role } from '#api';
import { reading } from './query-client.ts';

export const meReading = reading('me.read', {});

/** Who is signed in, and what the shell needs. Only under the gate or a loader that has read it. */
export function useMe(): Me {
  return useSuspenseQuery({ ...meReading, staleTime: 60_000 }).data;
}

/** The person signed in; pages behind the gate always have one. */
export function usePerson(): {
  readonly id: string;
  readonly name: string;
  readonly email: string;
  readonly role: Role;
} {
  const { person } = useMe();
  if (person === null) throw new Error('a page behind the gate was drawn with nobody signed in');
  return person;
}

/** Whether the person signed in passes the first gate of an action; the server decides again. */
export function useMay(action: Action): boolean {
  return mayDo(useMe().person?.role ?? null, action);
}
