import { randomInt } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { eq } from 'drizzle-orm';
import type { Logger } from 'pino';
import { ROLES, type Role } from '#api';
import { team } from '../database/schema.ts';
import { readEnv } from '../env.ts';
import type { Place } from '../place.ts';
import { scryptHash } from '../services/accounts/passwords.ts';
import { addPerson } from '../services/accounts/people-rows.ts';
import { type Running, startServer } from '../start-up.ts';
import { playScenario } from './demo-scenario.ts';

/** The invented workshop of a volunteer-run light railway. */
const PEOPLE = {
  reader: { name: 'Rhea Dallow (example)', email: 'rhea@railway.example' },
  author: { name: 'Aren Tilling (example)', email: 'aren@railway.example' },
  editor: { name: 'Edda Marsh (example)', email: 'edda@railway.example' },
  admin: { name: 'Ada Quill (example)', email: 'ada@railway.example' },
} satisfies Record<Role, { name: string; email: string }>;

const SYLLABLES = ['ba', 'do', 'fe', 'gi', 'ka', 'lu', 'mo', 'ne', 'pi', 'ro', 'su', 'ta', 'vi', 'wo', 'ye', 'zu'];

/** Starts the program over a data directory that is thrown away when it stops, with one account per role. */
export async function startDemo(
  variables: Readonly<Record<string, string | undefined>>,
  place: Place,
  log: Logger,
): Promise<{ running: Running; table: string }> {
  const folder = mkdtempSync(join(tmpdir(), 'quadrille-demo-'));
  process.once('exit', () => rmSync(folder, { recursive: true, force: true }));
  const env = readEnv({ ...variables, QUADRILLE_DATA: join(folder, 'data') });
  const running = await startServer({ env, place, log });
  const passwords = await addTeam(running);
  const account = (role: Role) => ({ email: PEOPLE[role].email, password: passwords[role] });
  const team = { author: account('author'), editor: account('editor'), reader: account('reader') };
  await playScenario(running.url, join(place.starters, 'demo'), team);
  const rows = ROLES.map((role) => [role, PEOPLE[role].email, passwords[role]]);
  return { running: { ...running, setUpLink: null }, table: columns([['role', 'e-mail', 'password'], ...rows]) };
}

async function addTeam({ frame }: Running): Promise<Record<Role, string>> {
  const passwords = Object.fromEntries(ROLES.map((role) => [role, inventPassword()])) as Record<Role, string>;
  const hashes = await Promise.all(ROLES.map((role) => scryptHash.hash(passwords[role])));
  await frame.db.transaction(async (tx) => {
    for (const [index, role] of ROLES.entries()) {
      await addPerson(
        { db: tx, ids: frame.ids, now: frame.clock() },
        { ...PEOPLE[role], role, passwordHash: hashes[index] ?? '' },
      );
    }
    await tx
      .update(team)
      .set({ name: 'Fernhollow Light Railway (example)', startingPutAway: true })
      .where(eq(team.id, 1));
  });
  return passwords;
}

/** Eight syllables of sixteen: 32 bits, enough for a demo of an hour on one's own machine. */
function inventPassword(): string {
  const part = () => Array.from({ length: 4 }, () => SYLLABLES[randomInt(SYLLABLES.length)]).join('');
  return `${part()}-${part()}`;
}

function columns(rows: readonly (readonly string[])[]): string {
  const widths = rows[0]?.map((_, column) => Math.max(...rows.map((row) => row[column]?.length ?? 0))) ?? [];
  return rows
    .map((row) =>
      row
        .map((cell, column) => cell.padEnd(widths[column] ?? 0))
        .join('   ')
        .trimEnd(),
    )
    .join('\n');
}
