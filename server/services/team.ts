import { eq } from 'drizzle-orm';
import type { TeamSettings } from '#api';
import { fail, ok } from '#text';
import type { Db } from '../database/open.ts';
import { team } from '../database/schema.ts';
import type { Context, Input, Service } from '../http/context.ts';
import { refusedField } from './accounts/refusals.ts';
import { writeAudit } from './audit.ts';
import { startingSteps } from './starting-list.ts';

export type TeamRow = typeof team.$inferSelect;

/** The team's one row, there from the first start on. */
export async function readTeam(db: Db): Promise<TeamRow> {
  const [row] = await db.select().from(team).where(eq(team.id, 1));
  if (!row) throw new Error('The row of the team is not there.');
  return row;
}

export const readTeamSettings: Service<'team.read'> = async (context) => ok(await shown(context));

/** Changes settings of the team; saying the time zone ticks its step, whichever it is. When it cannot: `invalid` at `timeZone`. */
export const updateTeam: Service<'team.update'> = async (context, input) => {
  const { db, now } = context;
  const { requestId: _, ...changes } = input;
  if (changes.timeZone !== undefined && !isTimeZone(changes.timeZone)) {
    const message = `"${changes.timeZone}" is not a time zone; expected a name such as Europe/Oslo or UTC.`;
    return fail(refusedField('timeZone', message));
  }
  const before = await readTeam(db);
  const timeZoneConfirmed = before.timeZoneConfirmed || changes.timeZone !== undefined;
  await db
    .update(team)
    .set({ ...changes, timeZoneConfirmed, updatedAt: now })
    .where(eq(team.id, 1));
  const detail = whatChanged(before, changes);
  if (detail !== '') await writeAudit(context, { act: 'change team settings', about: 'the team', detail });
  return ok(await shown(context));
};

/** Ticks "open a starter recipe"; for the service that reads a supplied recipe. Costs one read when it is ticked already. */
export async function noteStarterOpened(db: Db): Promise<void> {
  const row = await readTeam(db);
  if (!row.starterOpened) await db.update(team).set({ starterOpened: true }).where(eq(team.id, 1));
}

const SETTING_WORDS = {
  name: 'name',
  timeZone: 'time zone',
  allowSelfSignOff: 'signing off one’s own',
  backupNote: 'where backups go',
  mailNote: 'mail',
  hazardVolts: 'hazard voltage',
  purposes: 'purposes',
  topics: 'topics',
  addressConfirmed: 'address confirmed',
  startingPutAway: 'starting list put away',
} as const satisfies Record<keyof Omit<Input<'team.update'>, 'requestId'>, string>;

function whatChanged(before: TeamRow, changes: Omit<Input<'team.update'>, 'requestId'>): string {
  const told: string[] = [];
  for (const [key, words] of Object.entries(SETTING_WORDS) as [keyof typeof SETTING_WORDS, string][]) {
    const [old, now] = [before[key], changes[key]];
    if (now === undefined || JSON.stringify(old) === JSON.stringify(now)) continue;
    told.push(`${words}: ${said(old)} → ${said(now)}`);
  }
  return told.join('; ');
}

function said(value: string | number | boolean | readonly string[]): string {
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (typeof value === 'string') return `"${value}"`;
  return typeof value === 'number' ? String(value) : `${value.length} entries`;
}

/** Names of the IANA data base only: an offset such as +02:00 would go wrong at the next change of clocks. */
function isTimeZone(name: string): boolean {
  if (!/^[A-Za-z]/.test(name)) return false;
  try {
    // Takes every name and alias; `Intl.supportedValuesOf` lists one of them each, and browsers differ in which they report.
    return new Intl.DateTimeFormat('en', { timeZone: name }).resolvedOptions().timeZone !== '';
  } catch {
    return false;
  }
}

async function shown({ db, settings }: Pick<Context, 'db' | 'settings'>): Promise<TeamSettings> {
  const row = await readTeam(db);
  return {
    name: row.name,
    timeZone: row.timeZone,
    allowSelfSignOff: row.allowSelfSignOff,
    publicUrl: settings.publicUrl,
    backupNote: row.backupNote,
    mailNote: row.mailNote,
    hazardVolts: row.hazardVolts,
    purposes: [...row.purposes],
    topics: [...row.topics],
    starting: { steps: await startingSteps(db, row, settings.publicUrl), putAway: row.startingPutAway },
  };
}
