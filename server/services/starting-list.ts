import { and, inArray, isNull, ne } from 'drizzle-orm';
import { mayDo, ROLES, type STARTING_STEPS, type TeamSettings } from '#api';
import type { Db } from '../database/open.ts';
import { draft, invitation, type team, user } from '../database/schema.ts';

const MAY_DECIDE = ROLES.filter((role) => mayDo(role, 'decide reviews'));

type Step = (typeof STARTING_STEPS)[number];
type Told = Omit<TeamSettings['starting']['steps'][number], 'step'>;

/** The list that ticks itself after set-up, in the order of the contract. Every tick is read from what was really done. */
export async function startingSteps(
  db: Db,
  row: typeof team.$inferSelect,
  publicUrl: string,
): Promise<TeamSettings['starting']['steps']> {
  const told = {
    address: {
      done: row.addressConfirmed,
      detail: `People open Quadrille at ${publicUrl}. To change it, start the server with PUBLIC_URL; else say that it is right.`,
    },
    mail: {
      done: row.mailNote !== '',
      detail: 'No mail server is set: mails are kept here, and an admin hands links over. Note how your team does it.',
    },
    backups: {
      done: row.backupNote !== '',
      detail: 'Say where backups go and who looks after them: npm run backup -- FILE writes one.',
    },
    'time zone': {
      done: row.timeZoneConfirmed,
      detail: `Due dates are counted in ${row.timeZone}.`,
    },
    'second editor': await secondEditor(db, row.allowSelfSignOff),
    'open a starter recipe': {
      done: row.starterOpened,
      detail: 'Put in numbers of your own and see what a recipe answers.',
    },
    'start your own': {
      done: (await db.$count(draft, ne(draft.state, 'discarded'))) > 0,
      detail: 'Write down one circuit that your team asks for again and again.',
    },
  } satisfies Record<Step, Told>;
  return (Object.entries(told) as [Step, Told][]).map(([step, { done, detail }]) => ({ step, done, detail }));
}

async function secondEditor(db: Db, allowSelfSignOff: boolean): Promise<Told> {
  if (allowSelfSignOff) return { done: true, detail: 'Authors may sign off their own recipes; each page says so.' };
  const editors = await db.$count(user, and(inArray(user.role, MAY_DECIDE), isNull(user.deactivatedAt)));
  if (editors > 1) return { done: true, detail: `${editors} people may sign off.` };
  const open = and(isNull(invitation.acceptedAt), isNull(invitation.revokedAt));
  const invited = await db.$count(invitation, and(open, inArray(invitation.role, MAY_DECIDE)));
  const detail = 'Without a second editor nothing can be signed off; or allow authors to sign off their own recipes.';
  return { done: false, detail: invited > 0 ? `${detail} An invitation is waiting to be accepted.` : detail };
}
