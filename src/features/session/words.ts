import type { Role } from '#api';

/** What a role may do, said to the person who gets it. */
export const ROLE_WORDS = {
  reader: 'read recipes, put in numbers and keep designs',
  author: 'read, and write recipes',
  editor: 'read, write, and sign off what others wrote',
  admin: 'read, write, sign off, and run the team',
} as const satisfies Record<Role, string>;

export const PASSWORD_HINT = 'At least 12 characters; any will do. A few words in a row are easy to keep in mind.';
