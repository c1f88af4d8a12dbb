import * as z from 'zod';
import { endpoint, id, instant, requestId } from './endpoint.ts';

/** The list that ticks itself after set-up. */
export const STARTING_STEPS = [
  'address',
  'mail',
  'backups',
  'time zone',
  'second editor',
  'open a starter recipe',
  'start your own',
] as const;
export const startingStep = z.strictObject({ step: z.enum(STARTING_STEPS), done: z.boolean(), detail: z.string() });

export const teamSettings = z.strictObject({
  name: z.string(),
  timeZone: z.string(),
  allowSelfSignOff: z.boolean(),
  publicUrl: z.string(),
  /** Where the team keeps its backups, in its own words. */
  backupNote: z.string(),
  mailNote: z.string(),
  hazardVolts: z.number(),
  purposes: z.array(z.string()),
  topics: z.array(z.string()),
  starting: z.strictObject({ steps: z.array(startingStep), putAway: z.boolean() }),
});
export type TeamSettings = z.infer<typeof teamSettings>;

export const mailRow = z.strictObject({
  id,
  kind: z.string(),
  to: z.string(),
  subject: z.string(),
  body: z.string(),
  state: z.enum(['captured', 'sent', 'failed']),
  at: instant,
});
export const auditRow = z.strictObject({
  id,
  at: instant,
  by: z.string(),
  act: z.string(),
  about: z.string(),
  detail: z.string(),
});

export const teamContract = {
  'team.read': endpoint({ summary: 'Settings of the team and the starting list', answer: teamSettings }),
  'team.update': endpoint({
    summary: 'Change settings of the team',
    body: z.strictObject({
      requestId,
      name: z.string().trim().min(1).max(100).optional(),
      timeZone: z.string().max(64).optional(),
      allowSelfSignOff: z.boolean().optional(),
      backupNote: z.string().max(500).optional(),
      mailNote: z.string().max(500).optional(),
      hazardVolts: z.number().positive().max(42.4).optional(),
      purposes: z.array(z.string().trim().min(1).max(60)).max(60).optional(),
      topics: z.array(z.string().trim().min(1).max(60)).max(200).optional(),
      addressConfirmed: z.boolean().optional(),
      startingPutAway: z.boolean().optional(),
    }),
    answer: teamSettings,
  }),
  'team.mail': endpoint({
    summary: 'Mail captured while no mail server is set',
    answer: z.strictObject({ mail: z.array(mailRow) }),
  }),
  'team.audit': endpoint({
    summary: 'The audit log, newest first',
    query: z.strictObject({ before: instant.optional() }),
    answer: z.strictObject({ events: z.array(auditRow), more: z.boolean() }),
  }),
};
