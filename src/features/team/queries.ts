import { reading } from '../../lib/query-client.ts';

export const teamReading = reading('team.read', {});
export const peopleReading = reading('people.list', {});
export const invitationsReading = reading('invitations.list', {});
export const mailReading = reading('team.mail', {});

/** One page of the audit log, newest first; `before` is the instant of the last line already shown. */
export function auditReading(before: string | undefined) {
  return reading('team.audit', { query: before === undefined ? {} : { before } });
}
