import { ROLES, type Role } from '#api';

const ROLE_LABELS = {
  reader: 'reader: uses recipes',
  author: 'author: also writes them',
  editor: 'editor: also signs off',
  admin: 'admin: also runs the team',
} as const satisfies Record<Role, string>;

/** Roles for lists to choose from, each with what it adds. */
export const ROLE_OPTIONS = ROLES.map((role) => ({ value: role, label: ROLE_LABELS[role] }));
