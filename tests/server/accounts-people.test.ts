import { eq } from 'drizzle-orm';
import request from 'supertest';
import { describe, expect, test } from 'vitest';
import { auditEvent, knownBrowser, mail, session, user } from '../../server/database/schema.ts';
import { makeLinkByCommand } from '../../server/services/accounts/people.ts';
import { type AccountApp, accountApp, type Browser, PASSWORD, requestId, tokenIn } from './account-app.ts';
import { ORIGIN } from './fresh-app.ts';

const NEXT = 'a lantern for platform two';

async function signedIn(fresh: AccountApp, email: string, address?: string): Promise<Browser> {
  const browser = fresh.browser(address);
  expect((await browser.signIn(email)).status).toBe(200);
  return browser;
}

function update(admin: Browser, id: string, change: object) {
  return admin.patch(`/api/people/${id}`, { requestId: requestId(), ...change });
}

async function personOf(browser: Browser): Promise<{ role: string } | null> {
  return (await browser.get('/api/me')).body.person;
}

describe('people', () => {
  test('are listed for everybody; addresses and last visits for admins only', async () => {
    const fresh = await accountApp();
    await fresh.db.update(user).set({ deactivatedAt: new Date() }).where(eq(user.id, fresh.people.author.id));
    const seen = (await (await signedIn(fresh, 'reader@railway.example')).get('/api/people')).body.people;
    expect(seen.map(({ name, active }: { name: string; active: boolean }) => [name, active])).toEqual([
      ['Ada Quill', true],
      ['Aren Tilling', false],
      ['Edda Marsh', true],
      ['Rhea Dallow', true],
    ]);
    expect(JSON.stringify(seen)).not.toContain('@');
    const all = (await (await signedIn(fresh, 'admin@railway.example')).get('/api/people')).body.people;
    expect(all[3]).toMatchObject({ email: 'reader@railway.example', since: '2026-03-02T09:00:00.000Z' });
    expect(Date.parse(all[3].lastSeen)).toBeGreaterThan(0);
    expect(all[1].lastSeen).toBeNull();
  });

  test('get another role that counts from their next request', async () => {
    const fresh = await accountApp();
    const admin = await signedIn(fresh, 'admin@railway.example');
    const aren = await signedIn(fresh, 'author@railway.example');
    expect((await personOf(aren))?.role).toBe('author');
    const changed = await update(admin, fresh.people.author.id, { role: 'editor' });
    expect(changed.body).toMatchObject({ role: 'editor', active: true });
    expect((await personOf(aren))?.role).toBe('editor');
    const [line] = await fresh.db.select().from(auditEvent).where(eq(auditEvent.act, 'change a role'));
    expect(line).toMatchObject({ byName: 'Ada Quill', about: 'Aren Tilling', detail: 'from author to editor' });
  });

  test('who are deactivated are out at once, cannot sign in, and come back without their old sessions', async () => {
    const fresh = await accountApp();
    const admin = await signedIn(fresh, 'admin@railway.example');
    const aren = await signedIn(fresh, 'author@railway.example');
    await personOf(aren);
    expect((await update(admin, fresh.people.author.id, { active: false })).body.active).toBe(false);
    expect(await personOf(aren)).toBeNull();
    expect(await fresh.db.$count(session, eq(session.userId, fresh.people.author.id))).toBe(0);
    expect((await aren.signIn('author@railway.example')).status).toBe(403);
    expect((await update(admin, fresh.people.author.id, { active: true })).body.active).toBe(true);
    expect(await personOf(aren)).toBeNull();
    expect((await aren.signIn('author@railway.example')).status).toBe(200);
  });

  test('refused a change leaves everything, the session memory too', async () => {
    const fresh = await accountApp();
    const admin = await signedIn(fresh, 'admin@railway.example');
    const refused = await update(admin, fresh.people.admin.id, { role: 'reader' });
    expect([refused.status, JSON.parse(refused.text).fields]).toEqual([
      400,
      [{ field: 'role', message: 'Ada Quill is the last active admin; make somebody else admin first.' }],
    ]);
    const off = await update(admin, fresh.people.admin.id, { active: false });
    expect([off.status, JSON.parse(off.text).fields[0].field]).toEqual([400, 'active']);
    expect((await personOf(admin))?.role).toBe('admin');
    expect(await fresh.db.$count(auditEvent)).toBe(0);
    expect((await update(admin, 'nobody', { role: 'reader' })).status).toBe(404);
  });

  test('who are admins and demote or deactivate each other at once leave one', async () => {
    for (const change of [{ role: 'reader' }, { active: false }]) {
      const fresh = await accountApp();
      const second = await fresh.add('second', 'admin');
      const [one, two] = [await signedIn(fresh, 'admin@railway.example'), await signedIn(fresh, second)];
      const both = await Promise.all([
        update(one, 'person-second', change),
        update(two, fresh.people.admin.id, change),
      ]);
      expect(both.filter(({ status }) => status === 200)).toHaveLength(1);
      const admins = await fresh.db.select().from(user).where(eq(user.role, 'admin'));
      expect(admins.filter(({ deactivatedAt }) => deactivatedAt === null)).toHaveLength(1);
    }
  });

  test('a deactivated admin does not count as one who is left', async () => {
    const fresh = await accountApp();
    await fresh.add('second', 'admin');
    const admin = await signedIn(fresh, 'admin@railway.example');
    expect((await update(admin, 'person-second', { active: false })).status).toBe(200);
    expect((await update(admin, fresh.people.admin.id, { role: 'editor' })).status).toBe(400);
  });
});

describe('a forgotten password', () => {
  test('asked for is answered alike for everybody, and mailed without a token to who is there', async () => {
    const fresh = await accountApp();
    await fresh.db.update(user).set({ deactivatedAt: new Date() }).where(eq(user.id, fresh.people.author.id));
    const answers = [];
    for (const email of ['Editor@railway.example', 'nobody@railway.example', 'author@railway.example']) {
      const { status, text } = await fresh.browser().post('/api/auth/request-password-reset', { email });
      answers.push([status, text]);
    }
    expect(answers).toEqual([answers[0], answers[0], answers[0]]);
    expect(answers[0]).toEqual([200, '{}']);
    const mails = await fresh.db.select().from(mail);
    expect(mails.map(({ kind, recipient }) => [kind, recipient])).toEqual([
      ['password-reset', 'editor@railway.example'],
    ]);
    expect(mails[0]).toMatchObject({ state: 'captured', userId: fresh.people.editor.id });
    expect(mails[0]?.body).toContain('an admin makes the link');
    expect(mails[0]?.body).not.toMatch(/token|[\w-]{40}/);
  });

  test('asked for again within ten minutes is mailed once', async () => {
    const fresh = await accountApp();
    const ask = () => fresh.browser().post('/api/auth/request-password-reset', { email: 'editor@railway.example' });
    await ask();
    await ask();
    expect(await fresh.db.$count(mail)).toBe(1);
    fresh.advance(600_001);
    await ask();
    expect(await fresh.db.$count(mail)).toBe(2);
  });

  async function linkFor(fresh: AccountApp, admin: Browser, id = fresh.people.editor.id): Promise<string> {
    const made = await admin.post(`/api/people/${id}/link`, { requestId: requestId() });
    expect(made.body.expiresAt).toBe('2026-03-03T09:00:00.000Z');
    return tokenIn(made.body.url);
  }

  test('is set anew by a link that an admin makes, which ends the sessions and is told at the next sign-in', async () => {
    const fresh = await accountApp();
    const admin = await signedIn(fresh, 'admin@railway.example');
    const old = await signedIn(fresh, 'editor@railway.example', '198.51.100.1');
    const token = await linkFor(fresh, admin);
    expect((await personOf(old))?.role).toBe('editor');
    const edda = fresh.browser();
    const set = await edda.post('/api/auth/reset-password', { token, newPassword: NEXT });
    expect([set.status, set.body]).toEqual([200, {}]);
    expect(await personOf(old)).toBeNull();
    expect((await edda.signIn('editor@railway.example')).status).toBe(400);
    expect((await edda.signIn('editor@railway.example', NEXT)).status).toBe(200);
    const { notices } = (await edda.get('/api/me')).body;
    expect(notices.map(({ text }: { text: string }) => text)).toEqual([
      'A link that sets a new password for you was made by Ada Quill. If you did not ask for it, speak to an admin.',
    ]);
    const seen = `/api/me/notices/${notices[0].id}/seen`;
    expect((await admin.post(seen, { requestId: requestId() })).status).toBe(404);
    expect((await edda.post(seen, { requestId: requestId() })).status).toBe(200);
    expect((await edda.get('/api/me')).body.notices).toEqual([]);
    const lines = await fresh.db.select().from(auditEvent);
    expect(lines.map(({ byName, act, about }) => [byName, act, about])).toEqual([
      ['Ada Quill', 'make a link for a person', 'Edda Marsh'],
      ['Edda Marsh', 'set a password by a link', 'Edda Marsh'],
    ]);
    // The others' sessions are none of its business.
    expect((await personOf(admin))?.role).toBe('admin');
    expect((await edda.post('/api/auth/reset-password', { token, newPassword: NEXT })).status).toBe(410);
  });

  test('is set once by two who use the link at once', async () => {
    const fresh = await accountApp();
    const token = await linkFor(fresh, await signedIn(fresh, 'admin@railway.example'));
    const words = [NEXT, 'another lantern for platform two'];
    const both = await Promise.all(
      words.map((newPassword) => fresh.browser().post('/api/auth/reset-password', { token, newPassword })),
    );
    expect(both.map(({ status }) => status).sort()).toEqual([200, 410]);
    const winner = words[both.findIndex(({ status }) => status === 200)];
    expect((await fresh.browser().signIn('editor@railway.example', winner)).status).toBe(200);
  });

  test('cannot be set by a link that ran out, was replaced, or belongs to somebody deactivated since', async () => {
    const fresh = await accountApp();
    const admin = await signedIn(fresh, 'admin@railway.example');
    const use = (token: string) => fresh.browser().post('/api/auth/reset-password', { token, newPassword: NEXT });
    const first = await linkFor(fresh, admin);
    const second = await linkFor(fresh, admin);
    expect((await use(first)).status).toBe(410);
    await update(admin, fresh.people.editor.id, { active: false });
    expect((await use(second)).status).toBe(410);
    expect((await admin.post(`/api/people/${fresh.people.editor.id}/link`, { requestId: requestId() })).status).toBe(
      410,
    );
    const readers = await linkFor(fresh, admin, fresh.people.reader.id);
    fresh.advance(86_400_000);
    expect((await use(readers)).status).toBe(410);
    expect((await use('a-token-that-nobody-made')).status).toBe(410);
  });

  test('set anew forgets browsers and failures, so that who guessed before no longer slows its owner', async () => {
    const fresh = await accountApp();
    const token = await linkFor(fresh, await signedIn(fresh, 'admin@railway.example'));
    await signedIn(fresh, 'editor@railway.example', '198.51.100.99');
    for (let n = 0; n < 15; n += 1)
      await fresh.browser(`198.51.100.${n}`).signIn('editor@railway.example', 'not this one');
    const edda = fresh.browser();
    expect((await edda.signIn('editor@railway.example')).status).toBe(429);
    await edda.post('/api/auth/reset-password', { token, newPassword: NEXT });
    expect((await edda.signIn('editor@railway.example', NEXT)).status).toBe(200);
    expect(await fresh.db.$count(knownBrowser, eq(knownBrowser.userId, fresh.people.editor.id))).toBe(1);
  });

  test('refuses a common one at its field and keeps the link', async () => {
    const fresh = await accountApp();
    const token = await linkFor(fresh, await signedIn(fresh, 'admin@railway.example'));
    const refused = await fresh.browser().post('/api/auth/reset-password', { token, newPassword: 'eddamarsh2026' });
    expect([refused.status, JSON.parse(refused.text).fields[0].field]).toEqual([400, 'newPassword']);
    expect((await fresh.browser().post('/api/auth/reset-password', { token, newPassword: NEXT })).status).toBe(200);
  });

  test('gets a link by the server’s own command, for people and for who is invited', async () => {
    const fresh = await accountApp();
    const admin = await signedIn(fresh, 'admin@railway.example');
    await admin.post('/api/invitations', { requestId: requestId(), email: 'new@railway.example', role: 'reader' });
    const made = await fresh.act(null, (context) => makeLinkByCommand(context, 'Editor@Railway.example'));
    if (!made.ok) throw new Error('expected a link');
    const body = { token: tokenIn(made.value.url), newPassword: NEXT };
    expect((await fresh.browser().post('/api/auth/reset-password', body)).status).toBe(200);
    const edda = fresh.browser();
    await edda.signIn('editor@railway.example', NEXT);
    expect((await edda.get('/api/me')).body.notices[0].text).toContain('was made by the server’s own command');
    const invited = await fresh.act(null, (context) => makeLinkByCommand(context, 'new@railway.example'));
    expect(invited.ok && new URL(invited.value.url).pathname).toBe('/invitation');
    const nobody = await fresh.act(null, (context) => makeLinkByCommand(context, 'nobody@railway.example'));
    expect(nobody).toMatchObject({ ok: false, error: { kind: 'not-found' } });
    const lines = await fresh.db.select().from(auditEvent).where(eq(auditEvent.byName, 'the server’s own command'));
    expect(lines.map(({ act, userId }) => [act, userId])).toEqual([
      ['make a link for a person', null],
      ['make a link for an invitation', null],
    ]);
  });
});

describe('one’s own account', () => {
  test('gets a new password, which ends the other sessions and keeps this one', async () => {
    const fresh = await accountApp();
    const here = await signedIn(fresh, 'editor@railway.example');
    const there = await signedIn(fresh, 'editor@railway.example');
    await personOf(there);
    const changed = await here.post('/api/auth/change-password', { currentPassword: PASSWORD, newPassword: NEXT });
    expect([changed.status, changed.body]).toEqual([200, {}]);
    expect((await personOf(here))?.role).toBe('editor');
    expect(await personOf(there)).toBeNull();
    expect((await fresh.browser().signIn('editor@railway.example')).status).toBe(400);
    expect((await fresh.browser().signIn('editor@railway.example', NEXT)).status).toBe(200);
    const lines = await fresh.db.select().from(auditEvent);
    expect(lines.map(({ act }) => act).sort()).toEqual(['change own password', 'end other sessions']);
  });

  test('keeps its password when the present one is wrong or the new one common, each told at its field', async () => {
    const fresh = await accountApp();
    const here = await signedIn(fresh, 'editor@railway.example');
    const change = (currentPassword: string, newPassword: string) =>
      here.post('/api/auth/change-password', { currentPassword, newPassword });
    const field = (text: string) => JSON.parse(text).fields[0].field;
    expect(field((await change('not this one', NEXT)).text)).toBe('currentPassword');
    expect(field((await change(PASSWORD, 'administrator1')).text)).toBe('newPassword');
    expect(field((await change(PASSWORD, 'short')).text)).toBe('newPassword');
    expect((await fresh.browser().signIn('editor@railway.example')).status).toBe(200);
  });

  test('slows guesses at the present password', async () => {
    const fresh = await accountApp();
    const here = await signedIn(fresh, 'editor@railway.example');
    const body = { currentPassword: 'not this one', newPassword: NEXT };
    for (let n = 0; n < 5; n += 1) expect((await here.post('/api/auth/change-password', body)).status).toBe(400);
    expect((await here.post('/api/auth/change-password', body)).headers['retry-after']).toBe('30');
  });

  test('ends its other sessions and no one else’s', async () => {
    const fresh = await accountApp();
    const here = await signedIn(fresh, 'editor@railway.example');
    const there = await signedIn(fresh, 'editor@railway.example');
    const other = await signedIn(fresh, 'author@railway.example');
    await personOf(there);
    expect((await here.post('/api/auth/revoke-other-sessions', {})).status).toBe(200);
    expect([await personOf(there), (await personOf(here))?.role, (await personOf(other))?.role]).toEqual([
      null,
      'editor',
      'author',
    ]);
  });

  test('signs out of this browser alone', async () => {
    const fresh = await accountApp();
    const here = await signedIn(fresh, 'editor@railway.example');
    const there = await signedIn(fresh, 'editor@railway.example');
    const copied = (await fresh.browser().signIn('editor@railway.example')).get('Set-Cookie') ?? [];
    const cookie = copied.map((one) => one.split(';')[0]).join('; ');
    await personOf(here);
    expect((await here.post('/api/auth/sign-out', {})).status).toBe(200);
    expect([await personOf(here), (await personOf(there))?.role]).toEqual([null, 'editor']);
    // A copy of the cookie dies with the session, even while the memory of it would last.
    const copy = () => request(fresh.app).get('/api/me').set('Cookie', cookie);
    expect((await copy()).body.person).not.toBeNull();
    const out = request(fresh.app).post('/api/auth/sign-out').set('Origin', ORIGIN).set('Cookie', cookie);
    expect((await out.send({})).status).toBe(200);
    expect((await copy()).body.person).toBeNull();
    expect(await fresh.db.$count(session)).toBe(1);
  });

  test('needs a sign-in to change', async () => {
    const fresh = await accountApp();
    for (const path of ['/api/auth/change-password', '/api/auth/revoke-other-sessions']) {
      const answer = await fresh.browser().post(path, { currentPassword: PASSWORD, newPassword: NEXT });
      expect([answer.status, JSON.parse(answer.text).code]).toEqual([401, 'not-signed-in']);
    }
  });
});
