import { eq } from 'drizzle-orm';
import request from 'supertest';
import { describe, expect, test } from 'vitest';
import { createApp } from '../../server/app.ts';
import { knownBrowser, session, signInFailure, user } from '../../server/database/schema.ts';
import { createAccounts } from '../../server/http/accounts.ts';
import { noPages } from '../../server/http/pages.ts';
import { ACCOUNT_SERVICES, type AccountApp, accountApp, type Browser, PASSWORD } from './account-app.ts';
import { ORIGIN } from './fresh-app.ts';
import { standIns } from './stand-ins.ts';

const MINUTE = 60_000;
const WRONG = 'nobody would guess this';

async function failTimes(browser: Browser, email: string, times: number): Promise<void> {
  for (let n = 0; n < times; n += 1) expect((await browser.signIn(email, WRONG)).status).toBe(400);
}

describe('signing in', () => {
  test('gives a session and no token in the answer, whatever the case of the address', async () => {
    const fresh = await accountApp();
    const browser = fresh.browser();
    const answer = await browser.signIn('Editor@Railway.EXAMPLE');
    expect([answer.status, answer.body]).toEqual([200, {}]);
    const cookies = answer.get('Set-Cookie') ?? [];
    expect(cookies.map((cookie) => cookie.split('=')[0]).sort()).toEqual([
      'quadrille.browser',
      'quadrille.session_token',
    ]);
    for (const cookie of cookies) {
      expect(cookie).toMatch(/; HttpOnly\b/);
      expect(cookie).toMatch(/; SameSite=Lax\b/);
      expect(cookie).not.toMatch(/; Secure\b/);
    }
    expect((await browser.get('/api/me')).body.person).toMatchObject({ email: 'editor@railway.example' });
  });

  test('at an https address sets cookies that go over https only', async () => {
    const fresh = await accountApp();
    const settings = { ...fresh.frame.settings, publicUrl: 'https://quadrille.test' };
    const origins = [settings.publicUrl];
    const accounts = createAccounts({ ...fresh.frame, settings, origins, password: fresh.hash });
    const app = createApp({
      frame: { ...fresh.frame, settings, accounts },
      services: standIns(ACCOUNT_SERVICES),
      origins,
      behindProxy: true,
      pages: noPages,
      securityHeaders: true,
    });
    const body = { email: 'editor@railway.example', password: PASSWORD };
    const answer = await request(app).post('/api/auth/sign-in/email').set('Origin', settings.publicUrl).send(body);
    const cookies = answer.get('Set-Cookie') ?? [];
    expect(cookies.map((cookie) => cookie.split('=')[0]).sort()).toEqual([
      '__Host-quadrille.browser',
      '__Secure-quadrille.session_token',
    ]);
    for (const cookie of cookies) expect(cookie).toMatch(/; Secure\b/);
    const carried = cookies.map((cookie) => cookie.split(';')[0]).join('; ');
    const me = await request(app).get('/api/me').set('Cookie', carried);
    expect(me.body.person).toMatchObject({ role: 'editor' });
  });

  test('answers a wrong password and an address of nobody alike, and works as hard for both', async () => {
    const fresh = await accountApp();
    const known = await fresh.browser().signIn('editor@railway.example', WRONG);
    const unknown = await fresh.browser().signIn('nobody@railway.example', WRONG);
    expect(known.status).toBe(400);
    expect(comparable(unknown.text)).toEqual(comparable(known.text));
    expect(unknown.status).toBe(known.status);
    // One run of the hash function each: scrypt costs the same for hashing and for verifying.
    expect(fresh.hash.asked).toEqual(['verify', 'hash']);
  });

  test('slows an address of nobody in the same steps as an account', async () => {
    const fresh = await accountApp();
    const steps = async (email: string, address: string) => {
      const seen: [number, string | undefined][] = [];
      for (let n = 0; n < 7; n += 1) {
        const { status, headers } = await fresh.browser(address).signIn(email, WRONG);
        seen.push([status, headers['retry-after']]);
      }
      return seen;
    };
    const known = await steps('editor@railway.example', '192.0.2.1');
    expect(await steps('nobody@railway.example', '192.0.2.2')).toEqual(known);
    expect(known.map(([status]) => status)).toEqual([400, 400, 400, 400, 400, 429, 429]);
  });

  test('refuses a deactivated person, telling why only who knows the password', async () => {
    const fresh = await accountApp();
    await fresh.db.update(user).set({ deactivatedAt: new Date() }).where(eq(user.id, fresh.people.author.id));
    const right = await fresh.browser().signIn('author@railway.example');
    expect([right.status, JSON.parse(right.text).detail]).toEqual([
      403,
      'This account is deactivated. An admin can activate it again.',
    ]);
    expect((await fresh.browser().signIn('author@railway.example', WRONG)).status).toBe(400);
    expect(await fresh.db.$count(session)).toBe(0);
  });

  test('from a page of another site is refused, with and without a cookie', async () => {
    const fresh = await accountApp();
    const body = { email: 'editor@railway.example', password: PASSWORD };
    for (const cookie of ['', 'quadrille.session_token=x']) {
      const call = request(fresh.app).post('/api/auth/sign-in/email').set('Origin', 'http://elsewhere.example');
      const answer = await call.set('Cookie', cookie).send(body);
      expect([answer.status, JSON.parse(answer.text).code]).toEqual([403, 'other-origin']);
    }
    expect(await fresh.db.$count(session)).toBe(0);
  });

  test('refuses fields that it does not know', async () => {
    const fresh = await accountApp();
    const body = { email: 'editor@railway.example', password: PASSWORD, callbackURL: 'http://elsewhere.example' };
    const answer = await fresh.browser().post('/api/auth/sign-in/email', body);
    expect([answer.status, JSON.parse(answer.text).fields]).toEqual([
      400,
      [{ field: 'callbackURL', message: 'Unexpected field.' }],
    ]);
  });

  test.each([
    '/api/auth/sign-up/email',
    '/api/auth/update-user',
    '/api/auth/delete-user',
    '/api/auth/change-email',
    '/api/auth/get-session',
    '/api/auth/list-sessions',
    '/api/auth/ok',
    '/api/auth/SIGN-OUT',
    '/api/auth/sign-out/',
  ])('leaves %s a 404', async (path) => {
    const fresh = await accountApp();
    const browser = fresh.browser();
    await browser.signIn('editor@railway.example');
    const posted = await browser.post(path, {});
    expect([posted.status, posted.type]).toEqual([404, 'application/problem+json']);
    expect((await browser.get(path)).status).toBe(404);
  });
});

describe('failed sign-ins', () => {
  test('are slowed per account and address with growing pauses, and the answer says how long to wait', async () => {
    const fresh = await accountApp();
    const browser = fresh.browser();
    await failTimes(browser, 'editor@railway.example', 5);
    const first = await browser.signIn('editor@railway.example');
    expect([first.status, first.type, first.headers['retry-after']]).toEqual([429, 'application/problem+json', '30']);
    expect(JSON.parse(first.text)).toMatchObject({ code: 'too-many', retryAfterSeconds: 30 });
    fresh.advance(29_001);
    expect((await browser.signIn('editor@railway.example')).headers['retry-after']).toBe('1');
    fresh.advance(1000);
    await failTimes(browser, 'editor@railway.example', 1);
    expect((await browser.signIn('editor@railway.example')).headers['retry-after']).toBe('60');
    fresh.advance(MINUTE);
    expect((await browser.signIn('editor@railway.example')).status).toBe(200);
  });

  test('do not slow the same account from another address until there are more of them', async () => {
    const fresh = await accountApp();
    await failTimes(fresh.browser('198.51.100.1'), 'editor@railway.example', 5);
    expect((await fresh.browser('192.0.2.1').signIn('editor@railway.example')).status).toBe(200);
  });

  test('from many addresses slow the account, but never a browser that has signed in to it before', async () => {
    const fresh = await accountApp();
    const own = fresh.browser('192.0.2.1');
    await own.signIn('editor@railway.example');
    await own.post('/api/auth/sign-out', {});
    for (let n = 0; n < 15; n += 1) await failTimes(fresh.browser(`198.51.100.${n}`), 'editor@railway.example', 1);
    const elsewhere = await fresh.browser('192.0.2.9').signIn('editor@railway.example');
    expect([elsewhere.status, elsewhere.headers['retry-after']]).toEqual([429, '15']);
    expect((await own.signIn('editor@railway.example')).status).toBe(200);
    // It is known to that account only.
    await failTimes(own, 'admin@railway.example', 5);
    expect((await own.signIn('admin@railway.example')).status).toBe(429);
    expect((await own.signIn('editor@railway.example')).status).toBe(200);
  });

  test('of a known browser itself are slowed too', async () => {
    const fresh = await accountApp();
    const own = fresh.browser();
    await own.signIn('editor@railway.example');
    await failTimes(own, 'editor@railway.example', 10);
    expect((await own.signIn('editor@railway.example')).headers['retry-after']).toBe('15');
  });

  test('sent all at once are counted one by one', async () => {
    const fresh = await accountApp();
    const answers = await Promise.all(
      Array.from({ length: 20 }, () => fresh.browser().signIn('editor@railway.example', WRONG)),
    );
    expect(answers.filter(({ status }) => status === 400)).toHaveLength(5);
    expect(answers.filter(({ status }) => status === 429)).toHaveLength(15);
  });

  test('are forgotten with time', async () => {
    const fresh = await accountApp();
    await failTimes(fresh.browser(), 'editor@railway.example', 4);
    fresh.advance(41 * MINUTE);
    await failTimes(fresh.browser(), 'editor@railway.example', 4);
    expect((await fresh.browser().signIn('editor@railway.example')).status).toBe(200);
    fresh.advance(4 * 24 * 60 * MINUTE);
    await failTimes(fresh.browser('198.51.100.1'), 'nobody@railway.example', 1);
    expect(await fresh.db.$count(signInFailure)).toBe(3);
  });

  test('by a client that makes up its forwarded address are counted under the address it really has', async () => {
    const fresh = await accountApp();
    fresh.app.set('trust proxy', false);
    for (let n = 0; n < 5; n += 1) await failTimes(fresh.browser(`198.51.100.${n}`), 'editor@railway.example', 1);
    expect((await fresh.browser('203.0.113.77').signIn('editor@railway.example')).status).toBe(429);
    const forged = request(fresh.app).post('/api/auth/sign-in/email').set('Origin', ORIGIN);
    await forged.set('X-Client-Ip', '203.0.113.5').send({ email: 'reader@railway.example', password: PASSWORD });
    const [row] = await fresh.db.select().from(session);
    expect(row?.ipAddress).toBe('127.0.0.1');
  });

  test('over IPv6 are counted per network of 64 bits', async () => {
    const fresh = await accountApp();
    for (let n = 1; n <= 5; n += 1) {
      await failTimes(fresh.browser(`2001:db8:0:7:${n}::9`), 'editor@railway.example', 1);
    }
    expect((await fresh.browser('2001:db8:0:7:ffff::1').signIn('editor@railway.example')).status).toBe(429);
    expect((await fresh.browser('2001:db8:0:8::1').signIn('editor@railway.example')).status).toBe(200);
  });
});

describe('one address', () => {
  async function crowd(fresh: AccountApp, size: number): Promise<string[]> {
    return Promise.all(Array.from({ length: size }, (_, n) => fresh.add(`worker${n}`, 'reader')));
  }

  test('lets 60 people sign in, each after three mistakes, and once more on other machines', async () => {
    const fresh = await accountApp();
    const emails = await crowd(fresh, 60);
    for (const email of emails) {
      const browser = fresh.browser('203.0.113.1');
      await failTimes(browser, email, 3);
      expect((await browser.signIn(email)).status).toBe(200);
    }
    for (const email of emails) expect((await fresh.browser('203.0.113.1').signIn(email)).status).toBe(200);
    expect(await fresh.db.$count(knownBrowser)).toBe(120);
  });

  test('that tries one password on account after account is slowed, while other addresses and known browsers go on', async () => {
    const fresh = await accountApp();
    const colleague = fresh.browser('203.0.113.1');
    await colleague.signIn('editor@railway.example');
    for (let n = 0; n < 240; n += 1) {
      expect((await fresh.browser('203.0.113.1').signIn(`guess${n}@railway.example`, WRONG)).status).toBe(400);
    }
    const next = await fresh.browser('203.0.113.1').signIn('admin@railway.example');
    expect([next.status, next.headers['retry-after']]).toEqual([429, '30']);
    expect((await colleague.signIn('editor@railway.example')).status).toBe(200);
    expect((await fresh.browser('192.0.2.1').signIn('admin@railway.example')).status).toBe(200);
  });
});

/** A problem without the id of its request. */
function comparable(text: string): unknown {
  return { ...JSON.parse(text), requestId: '' };
}
