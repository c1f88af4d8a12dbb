import * as z from 'zod';
import { endpoint, id, instant, onlyRequestId, requestId } from './endpoint.ts';
import { ROLES } from './permissions.ts';

export const role = z.enum(ROLES);
export const email = z.email('Write an address like name@example.org.').max(254, 'Use at most 254 characters.');
export const personName = z.string().trim().min(1, 'Write a name.').max(100);
/** At least 12 characters and no rules of composition; common ones are refused by the server. Source: NIST SP 800-63B, section 5.1.1.2. */
export const newPassword = z.string().min(12, 'Use at least 12 characters.').max(128, 'Use at most 128 characters.');
export const linkToken = z.string().min(16).max(128);

export const notice = z.strictObject({ id, kind: z.string(), text: z.string(), at: instant });
export const me = z.strictObject({
  person: z.strictObject({ id: z.string(), name: z.string(), email: z.string(), role }).nullable(),
  team: z.strictObject({
    name: z.string(),
    timeZone: z.string(),
    allowSelfSignOff: z.boolean(),
    /** The address people are meant to use; the sign-in page names it when it was opened at another. */
    publicUrl: z.string(),
    needsSetUp: z.boolean(),
  }),
  notices: z.array(notice),
  reviewsWaiting: z.int(),
  release: z.string(),
});
export type Me = z.infer<typeof me>;

export const person = z.strictObject({
  id: z.string(),
  name: z.string(),
  role,
  active: z.boolean(),
  /** Seen by admins only. */
  email: z.string().optional(),
  since: instant,
  lastSeen: instant.nullable().optional(),
});
export type Person = z.infer<typeof person>;

export const invitation = z.strictObject({
  id,
  email: z.string(),
  role,
  state: z.enum(['pending', 'expired']),
  invitedBy: z.string(),
  sentAt: instant,
  expiresAt: instant,
});
export type Invitation = z.infer<typeof invitation>;

/** A link shown once to the admin who made it. */
export const madeLink = z.strictObject({ url: z.string(), expiresAt: instant });

export const peopleContract = {
  'me.read': endpoint({ summary: 'Who is signed in, and what the shell needs', answer: me }),
  'me.dismissNotice': endpoint({
    summary: 'Mark a notice as read',
    params: z.strictObject({ id }),
    body: onlyRequestId,
    answer: z.strictObject({}),
  }),
  'setup.check': endpoint({
    summary: 'Whether a set-up link still works',
    body: z.strictObject({ token: linkToken }),
    answer: z.strictObject({ expiresAt: instant }),
  }),
  'setup.finish': endpoint({
    summary: 'Make the first admin',
    body: z.strictObject({ requestId, token: linkToken, name: personName, email, password: newPassword }),
    answer: z.strictObject({ email: z.string() }),
  }),
  'invitations.check': endpoint({
    summary: 'Whether an invitation still works',
    body: z.strictObject({ token: linkToken }),
    answer: z.strictObject({ email: z.string(), role, expiresAt: instant }),
  }),
  'invitations.accept': endpoint({
    summary: 'Accept an invitation: set name and password',
    body: z.strictObject({ requestId, token: linkToken, name: personName, password: newPassword }),
    answer: z.strictObject({ email: z.string() }),
  }),
  'invitations.list': endpoint({
    summary: 'Invitations that are pending or ran out',
    answer: z.strictObject({ invitations: z.array(invitation) }),
  }),
  'invitations.create': endpoint({
    summary: 'Invite a person by e-mail',
    body: z.strictObject({ requestId, email, role }),
    answer: invitation,
  }),
  'invitations.resend': endpoint({
    summary: 'Send an invitation again, with a new link',
    params: z.strictObject({ id }),
    body: onlyRequestId,
    answer: invitation,
  }),
  'invitations.revoke': endpoint({
    summary: 'Revoke an invitation',
    params: z.strictObject({ id }),
    body: onlyRequestId,
    answer: z.strictObject({}),
  }),
  'invitations.makeLink': endpoint({
    summary: 'Make a link for an invitation, to hand over by other means (audited)',
    params: z.strictObject({ id }),
    body: onlyRequestId,
    answer: madeLink,
  }),
  'people.list': endpoint({ summary: 'The people of the team', answer: z.strictObject({ people: z.array(person) }) }),
  'people.update': endpoint({
    summary: 'Change a role, deactivate or reactivate',
    params: z.strictObject({ id: z.string() }),
    body: z.strictObject({ requestId, role: role.optional(), active: z.boolean().optional() }),
    answer: person,
  }),
  'people.makeLink': endpoint({
    summary: 'Make a password link for a person (audited, told to that person)',
    params: z.strictObject({ id: z.string() }),
    body: onlyRequestId,
    answer: madeLink,
  }),
};
