/** The four roles, each including the ones before it. */
export const ROLES = ['reader', 'author', 'editor', 'admin'] as const;
export type Role = (typeof ROLES)[number];

/**
 * Every action and the least role that may do it. `anyone` needs no sign-in. What also depends on the object (own draft, own design,
 * second person) is decided in `server/services/access.ts`; this table is the first gate, on the server and in the client alike.
 */
export const ACTIONS = {
  'use a link': 'anyone',
  'see who is signed in': 'anyone',
  'read recipes': 'reader',
  'keep inputs': 'reader',
  'keep designs': 'reader',
  'manage own account': 'reader',
  'write drafts': 'author',
  'see reviews': 'author',
  'decide reviews': 'editor',
  'see the team': 'editor',
  'run the team': 'admin',
} as const satisfies Record<string, Role | 'anyone'>;

export type Action = keyof typeof ACTIONS;

/** Tells whether a person of this role (null: nobody signed in) passes the first gate. */
export function mayDo(role: Role | null, action: Action): boolean {
  const least = ACTIONS[action];
  if (least === 'anyone') return true;
  return role !== null && ROLES.indexOf(role) >= ROLES.indexOf(least);
}
