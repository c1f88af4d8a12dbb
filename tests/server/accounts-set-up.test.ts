import { eq, sql } from 'drizzle-orm';
import { describe, expect, test } from 'vitest';
import { auditEvent, link, user } from '../../server/database/schema.ts';
import { type AccountApp, accountApp, PASSWORD, requestId, setUpToken } from './account-app.ts';

const HOUR = 3_600_000;

async function emptyTeam(): Promise<AccountApp> {
  const fresh = await accountApp();
  await fresh.db.delete(user);
  return fresh;
}

function finish(token: string, email: string, password = PASSWORD) {
  return { requestId: requestId(), token, name: 'Wanda Pike', email, password };
}

async function tokenOf(fresh: AccountApp): Promise<string> {
  const token = await setUpToken(fresh);
  if (token === null) throw new Error('expected a set-up link');
  return token;
}

describe('the set-up link', () => {
  test('makes the first admin, who can then sign in, and works no second time', async () => {
    const fresh = await emptyTeam();
    const token = await tokenOf(fresh);
    const page = fresh.browser();
    expect((await page.get('/api/me')).body.team.needsSetUp).toBe(true);
    expect((await page.post('/api/setup/check', { token })).body.expiresAt).toBe('2026-03-03T09:00:00.000Z');
    const done = await page.post('/api/setup', finish(token, 'Wanda@Railway.example'));
    expect(done.body).toEqual({ email: 'wanda@railway.example' });
    expect((await page.signIn('wanda@railway.example')).status).toBe(200);
    const me = (await page.get('/api/me')).body;
    expect(me.person).toMatchObject({ name: 'Wanda Pike', role: 'admin' });
    expect(me.team.needsSetUp).toBe(false);
    for (const path of ['/api/setup/check', '/api/setup']) {
      const body = path === '/api/setup' ? finish(token, 'second@railway.example') : { token };
      const again = await fresh.browser().post(path, body);
      expect([again.status, again.type]).toEqual([410, 'application/problem+json']);
    }
    const [line] = await fresh.db.select().from(auditEvent).where(eq(auditEvent.act, 'set up Quadrille'));
    expect(line).toMatchObject({ byName: 'Wanda Pike', about: 'Wanda Pike' });
  });

  test('used by two people at once makes one admin', async () => {
    const fresh = await emptyTeam();
    const token = await tokenOf(fresh);
    const both = await Promise.all(
      ['one@railway.example', 'two@railway.example'].map((email) =>
        fresh.browser().post('/api/setup', finish(token, email)),
      ),
    );
    expect(both.map(({ status }) => status).sort()).toEqual([200, 410]);
    expect(await fresh.db.$count(user)).toBe(1);
  });

  test('lives 24 hours', async () => {
    const fresh = await emptyTeam();
    const token = await tokenOf(fresh);
    fresh.advance(24 * HOUR - 1);
    expect((await fresh.browser().post('/api/setup/check', { token })).status).toBe(200);
    fresh.advance(1);
    expect((await fresh.browser().post('/api/setup/check', { token })).status).toBe(410);
    expect((await fresh.browser().post('/api/setup', finish(token, 'late@railway.example'))).status).toBe(410);
    expect(await fresh.db.$count(user)).toBe(0);
  });

  test('is renewed at each start, the one before stops working, and there is none once there is an admin', async () => {
    const fresh = await emptyTeam();
    const first = await tokenOf(fresh);
    const second = await tokenOf(fresh);
    expect((await fresh.browser().post('/api/setup', finish(first, 'a@railway.example'))).status).toBe(410);
    expect((await fresh.browser().post('/api/setup', finish(second, 'a@railway.example'))).status).toBe(200);
    expect(await setUpToken(fresh)).toBeNull();
  });

  test('survives a refused password, which is told at its field', async () => {
    const fresh = await emptyTeam();
    const token = await tokenOf(fresh);
    const refused = await fresh.browser().post('/api/setup', finish(token, 'w@railway.example', 'unbelievable99'));
    expect(refused.status).toBe(400);
    expect(JSON.parse(refused.text).fields).toEqual([
      { field: 'password', message: 'This is on the list of common passwords; choose another.' },
    ]);
    expect((await fresh.browser().post('/api/setup', finish(token, 'w@railway.example'))).status).toBe(200);
  });

  test('is stored as a hash only', async () => {
    const fresh = await emptyTeam();
    const token = await tokenOf(fresh);
    const [row] = await fresh.db.select({ all: sql<string>`${link}::text` }).from(link);
    expect(row?.all).toContain('set-up');
    expect(row?.all).not.toContain(token);
  });
});
