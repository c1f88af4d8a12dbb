import { randomBytes, randomUUID } from 'node:crypto';

/** Makes ids; passed in, so that tests can count on them. */
export interface Ids {
  /** For rows. */
  uuid(): string;
  /** For links: 256 bits as base64url, 43 characters. */
  token(): string;
}

export const randomIds: Ids = { uuid: randomUUID, token: () => randomBytes(32).toString('base64url') };
