import { eq } from 'drizzle-orm';
import { describe, expect, test } from 'vitest';
import type { Role, TeamSettings } from '#api';
import { auditEvent, draft, draftWriter, recipe, team, user } from '../../server/database/schema.ts';
import { noteStarterOpened } from '../../server/services/team.ts';
import { type AccountApp, accountApp, type Browser, requestId } from './account-app.ts';

async function pageOf(fresh: AccountApp, role: Role): Promise<Browser> {
  const browser = fresh.browser();
  await browser.signIn(`${role}@railway.example`);
  return browser;
}

async function update(admin: Browser, change: object): Promise<TeamSettings> {
  const answer = await admin.patch('/api/team', { requestId: requestId(), ...change });
  expect(answer.status).toBe(200);
  return answer.body;
}

function ticked(settings: TeamSettings): string[] {
  return settings.starting.steps.filter(({ done }) => done).map(({ step }) => step);
}

async function draftBy(fresh: AccountApp, writer: Role, state: 'draft' | 'in-review'): Promise<void> {
  const [made] = await fresh.db.insert(recipe).values({}).returning();
  const of = { recipeId: made?.id ?? '', ownerId: fresh.people.author.id, text: '', state };
  const [row] = await fresh.db.insert(draft).values(of).returning();
  await fresh.db.insert(draftWriter).values({ draftId: row?.id ?? '', userId: fresh.people[writer].id });
}

describe('the starting list', () => {
  test('ticks itself by what was done, one step after another', async () => {
    const fresh = await accountApp();
    await fresh.db.update(user).set({ role: 'author' }).where(eq(user.id, fresh.people.editor.id));
    const admin = await pageOf(fresh, 'admin');
    const at = (await admin.get('/api/team')).body;
    expect(at.starting.steps.map(({ step }: { step: string }) => step)).toEqual([
      'address',
      'mail',
      'backups',
      'time zone',
      'second editor',
      'open a starter recipe',
      'start your own',
    ]);
    expect([ticked(at), at.starting.putAway]).toEqual([[], false]);
    expect(ticked(await update(admin, { addressConfirmed: true }))).toEqual(['address']);
    expect(ticked(await update(admin, { mailNote: 'Links go by hand.' }))).toContain('mail');
    expect(ticked(await update(admin, { backupNote: 'NAS in the signal box, Aren' }))).toContain('backups');
    // UTC is what it was: saying so is what counts.
    expect(ticked(await update(admin, { timeZone: 'UTC' }))).toContain('time zone');
    expect(ticked(await update(admin, { startingPutAway: true }))).toHaveLength(4);
    await noteStarterOpened(fresh.db);
    await draftBy(fresh, 'author', 'draft');
    const later = (await admin.get('/api/team')).body;
    expect(ticked(later)).toEqual([
      'address',
      'mail',
      'backups',
      'time zone',
      'open a starter recipe',
      'start your own',
    ]);
    expect(later.starting.putAway).toBe(true);
  });

  test('asks for a second editor until there are two who may sign off, or authors may do it themselves', async () => {
    const fresh = await accountApp();
    const admin = await pageOf(fresh, 'admin');
    expect(ticked((await admin.get('/api/team')).body)).toContain('second editor');
    await fresh.db.update(user).set({ deactivatedAt: new Date() }).where(eq(user.id, fresh.people.editor.id));
    const alone = (await admin.get('/api/team')).body;
    expect(ticked(alone)).not.toContain('second editor');
    expect(alone.starting.steps[4].detail).toBe(
      'Without a second editor nothing can be signed off; or allow authors to sign off their own recipes.',
    );
    await admin.post('/api/invitations', { requestId: requestId(), email: 'e@railway.example', role: 'editor' });
    expect((await admin.get('/api/team')).body.starting.steps[4].detail).toMatch(/An invitation is waiting/);
    expect(ticked(await update(admin, { allowSelfSignOff: true }))).toContain('second editor');
  });
});

describe('team settings', () => {
  test('are kept, told to every page, and each change is in the audit log', async () => {
    const fresh = await accountApp();
    const admin = await pageOf(fresh, 'admin');
    const set = {
      name: 'Hollow Lane Light Railway',
      timeZone: 'Asia/Kolkata',
      hazardVolts: 25.5,
      topics: ['references'],
    };
    expect(await update(admin, set)).toMatchObject(set);
    const { team: told } = (await fresh.browser().get('/api/me')).body;
    expect(told).toMatchObject({
      name: 'Hollow Lane Light Railway',
      timeZone: 'Asia/Kolkata',
      publicUrl: 'http://quadrille.test',
    });
    const [line] = await fresh.db.select().from(auditEvent).where(eq(auditEvent.act, 'change team settings'));
    expect(line?.detail).toBe(
      'name: "" → "Hollow Lane Light Railway"; time zone: "UTC" → "Asia/Kolkata"; hazard voltage: 42.4 → 25.5; topics: 0 entries → 1 entries',
    );
    await update(admin, { name: 'Hollow Lane Light Railway' });
    expect(await fresh.db.$count(auditEvent)).toBe(1);
  });

  test.each(['+02:00', 'Nowhere/Town', ''])('refuse "%s" as a time zone', async (timeZone) => {
    const fresh = await accountApp();
    const admin = await pageOf(fresh, 'admin');
    const answer = await admin.patch('/api/team', { requestId: requestId(), timeZone });
    expect([answer.status, JSON.parse(answer.text).fields[0].field]).toEqual([400, 'timeZone']);
    const [row] = await fresh.db.select().from(team);
    expect(row).toMatchObject({ timeZone: 'UTC', timeZoneConfirmed: false });
  });
});

describe('the audit log', () => {
  test('is paged without losing lines that share an instant', async () => {
    const fresh = await accountApp();
    const admin = await pageOf(fresh, 'admin');
    const at = (n: number) => new Date(Date.UTC(2026, 2, 1, 0, 0, Math.floor(n / 3)));
    const lines = Array.from({ length: 130 }, (_, n) => ({
      at: at(n),
      byName: 'Ada Quill',
      act: 'try',
      about: `line ${n}`,
    }));
    await fresh.db.insert(auditEvent).values(lines);
    const seen: string[] = [];
    let before = '';
    for (let pages = 1; ; pages += 1) {
      const { events, more } = (await admin.get(`/api/team/audit${before}`)).body;
      seen.push(...events.map(({ about }: { about: string }) => about));
      before = `?before=${events.at(-1).at}`;
      if (!more) {
        expect(pages).toBe(3);
        break;
      }
    }
    expect(seen).toHaveLength(130);
    expect(new Set(seen).size).toBe(130);
  });

  test('of a team that did nothing yet is empty', async () => {
    const fresh = await accountApp();
    const answer = await (await pageOf(fresh, 'admin')).get('/api/team/audit');
    expect(answer.body).toEqual({ events: [], more: false });
  });
});

describe('me', () => {
  test('tells nobody in particular nothing of people', async () => {
    const fresh = await accountApp();
    const { status, body } = await fresh.browser().get('/api/me');
    expect(status).toBe(200);
    expect(body).toEqual({
      person: null,
      team: {
        name: '',
        timeZone: 'UTC',
        allowSelfSignOff: false,
        publicUrl: 'http://quadrille.test',
        needsSetUp: false,
      },
      notices: [],
      reviewsWaiting: 0,
      release: '0.0.0+test',
    });
  });

  test('counts the reviews that wait for this person: none they wrote in, unless the team allows it', async () => {
    const fresh = await accountApp();
    await draftBy(fresh, 'author', 'in-review');
    await draftBy(fresh, 'editor', 'in-review');
    await draftBy(fresh, 'author', 'draft');
    const waiting = async (role: Role) => (await (await pageOf(fresh, role)).get('/api/me')).body.reviewsWaiting;
    expect([await waiting('author'), await waiting('editor'), await waiting('admin')]).toEqual([0, 1, 2]);
    await update(await pageOf(fresh, 'admin'), { allowSelfSignOff: true });
    expect(await waiting('editor')).toBe(2);
  });
});
