import { ROUTES, type RouteName } from '#api';
import { fail } from '#text';
import type { Services } from '../../server/http/route.ts';

/** Services for tests of the frame: those given, and for every other endpoint one that refuses. */
export function standIns(given: Partial<Services>): Services {
  const refuse = { act: async () => fail({ kind: 'gone', detail: 'A stand-in.' } as const) };
  return {
    ...Object.fromEntries(Object.keys(ROUTES).map((name) => [name as RouteName, refuse])),
    ...given,
  } as Services;
}
