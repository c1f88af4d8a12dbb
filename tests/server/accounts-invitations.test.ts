import { eq } from 'drizzle-orm';
import { describe, expect, test } from 'vitest';
import { auditEvent, invitation, mail, session, user } from '../../server/database/schema.ts';
import { type AccountApp, accountApp, type Browser, PASSWORD, requestId, tokenIn } from './account-app.ts';

const DAY = 86_400_000;
const NEW = 'nils.berg@railway.example';

async function adminPage(fresh: AccountApp): Promise<Browser> {
  const browser = fresh.browser();
  expect((await browser.signIn('admin@railway.example')).status).toBe(200);
  return browser;
}

async function invite(admin: Browser, email = NEW, role = 'author'): Promise<string> {
  const answer = await admin.post('/api/invitations', { requestId: requestId(), email, role });
  expect(answer.status).toBe(200);
  return answer.body.id;
}

async function linkOf(admin: Browser, id: string): Promise<string> {
  const answer = await admin.post(`/api/invitations/${id}/link`, { requestId: requestId() });
  expect(answer.status).toBe(200);
  return tokenIn(answer.body.url);
}

function accept(token: string, password = PASSWORD) {
  return { requestId: requestId(), token, name: 'Nils Berg', password };
}

describe('inviting', () => {
  test('shows as pending with its role for 7 days, then as expired', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    const made = await admin.post('/api/invitations', {
      requestId: requestId(),
      email: 'Nils.Berg@Railway.example',
      role: 'author',
    });
    expect(made.body).toMatchObject({ email: NEW, role: 'author', state: 'pending', invitedBy: 'Ada Quill' });
    expect(made.body.expiresAt).toBe('2026-03-09T09:00:00.000Z');
    fresh.advance(7 * DAY - 1);
    expect((await admin.get('/api/invitations')).body.invitations[0].state).toBe('pending');
    fresh.advance(1);
    expect((await admin.get('/api/invitations')).body.invitations[0].state).toBe('expired');
  });

  test('puts a mail into the outbox that names kind and recipient, and no token', async () => {
    const fresh = await accountApp();
    await invite(await adminPage(fresh));
    const [row] = await fresh.db.select().from(mail);
    expect(row).toMatchObject({ kind: 'invitation', recipient: NEW, state: 'captured' });
    expect(row?.subject).toBe('Ada Quill invites you to Quadrille');
    expect(row?.body).toContain('an admin makes the link');
    expect(row?.body).not.toMatch(/token|[\w-]{40}/);
  });

  test('somebody who is in the team, deactivated or invited is told at the field', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    await fresh.db.update(user).set({ deactivatedAt: new Date() }).where(eq(user.id, fresh.people.reader.id));
    await invite(admin);
    const tell = async (email: string) => {
      const answer = await admin.post('/api/invitations', { requestId: requestId(), email, role: 'reader' });
      return [answer.status, JSON.parse(answer.text).fields];
    };
    expect(await tell('EDITOR@railway.example')).toEqual([
      400,
      [{ field: 'email', message: 'This address belongs to Edda Marsh, who is in the team already.' }],
    ]);
    expect(await tell('reader@railway.example')).toEqual([
      400,
      [
        {
          field: 'email',
          message: 'This address belongs to Rhea Dallow, who is deactivated; activate that account again.',
        },
      ],
    ]);
    expect(await tell(NEW.toUpperCase())).toEqual([
      400,
      [{ field: 'email', message: 'This address is invited already; send that invitation again.' }],
    ]);
    expect(await fresh.db.$count(mail)).toBe(1);
  });

  test('one address twice at once makes one invitation', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    const both = await Promise.all(
      [1, 2].map(() => admin.post('/api/invitations', { requestId: requestId(), email: NEW, role: 'reader' })),
    );
    expect(both.map(({ status }) => status).sort()).toEqual([200, 400]);
    expect(await fresh.db.$count(invitation)).toBe(1);
  });

  test('is for admins', async () => {
    const fresh = await accountApp();
    const editor = fresh.browser();
    await editor.signIn('editor@railway.example');
    expect((await editor.get('/api/invitations')).status).toBe(403);
    expect((await fresh.browser().get('/api/invitations')).status).toBe(401);
  });
});

describe('an invitation’s link', () => {
  test('is made by a named act, shown once, and stops working when another is made', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    const id = await invite(admin);
    const first = await linkOf(admin, id);
    const checked = await fresh.browser().post('/api/invitations/check', { token: first });
    expect(checked.body).toEqual({ email: NEW, role: 'author', expiresAt: '2026-03-09T09:00:00.000Z' });
    const second = await linkOf(admin, id);
    expect((await fresh.browser().post('/api/invitations/check', { token: first })).status).toBe(410);
    expect((await fresh.browser().post('/api/invitations/check', { token: second })).status).toBe(200);
    const lines = await fresh.db.select().from(auditEvent).where(eq(auditEvent.act, 'make a link for an invitation'));
    expect(lines.map(({ byName, about }) => [byName, about])).toEqual([
      ['Ada Quill', NEW],
      ['Ada Quill', NEW],
    ]);
  });

  test('asked for twice with one request id is made once and answered alike', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    const id = await invite(admin);
    const body = { requestId: requestId() };
    const both = await Promise.all([1, 2].map(() => admin.post(`/api/invitations/${id}/link`, body)));
    expect(both[0]?.body.url).toBe(both[1]?.body.url);
    const token = tokenIn(both[0]?.body.url);
    expect((await fresh.browser().post('/api/invitations/check', { token })).status).toBe(200);
  });

  test('stops working when the invitation is sent again, and then another lives 7 days from there', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    const id = await invite(admin);
    const old = await linkOf(admin, id);
    fresh.advance(6 * DAY);
    const again = await admin.post(`/api/invitations/${id}/resend`, { requestId: requestId() });
    expect(again.body).toMatchObject({ id, state: 'pending', expiresAt: '2026-03-15T09:00:00.000Z' });
    expect(await fresh.db.$count(mail)).toBe(2);
    expect((await fresh.browser().post('/api/invitations/accept', accept(old))).status).toBe(410);
    const fresher = await linkOf(admin, id);
    fresh.advance(7 * DAY - 1);
    expect((await fresh.browser().post('/api/invitations/accept', accept(fresher))).status).toBe(200);
  });

  test('runs out with its invitation, for which no other can be made until it is sent again', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    const id = await invite(admin);
    const token = await linkOf(admin, id);
    fresh.advance(7 * DAY);
    expect((await fresh.browser().post('/api/invitations/accept', accept(token))).status).toBe(410);
    const late = await admin.post(`/api/invitations/${id}/link`, { requestId: requestId() });
    expect([late.status, JSON.parse(late.text).detail]).toEqual([
      410,
      'This invitation has run out. Send it again, then make the link.',
    ]);
  });

  test('stops working when the invitation is revoked, and the address can be invited anew', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    const id = await invite(admin);
    const token = await linkOf(admin, id);
    expect((await admin.post(`/api/invitations/${id}/revoke`, { requestId: requestId() })).status).toBe(200);
    expect((await fresh.browser().post('/api/invitations/accept', accept(token))).status).toBe(410);
    expect((await admin.get('/api/invitations')).body.invitations).toEqual([]);
    for (const act of ['revoke', 'resend', 'link']) {
      expect((await admin.post(`/api/invitations/${id}/${act}`, { requestId: requestId() })).status).toBe(410);
    }
    await invite(admin);
    const nothing = `/api/invitations/7c1d4c3e-6f6e-4f53-9a83-1f4a0d3e6a11/revoke`;
    expect((await admin.post(nothing, { requestId: requestId() })).status).toBe(404);
  });
});

describe('accepting', () => {
  test('makes the account with name, password and role, and signs nobody in or out', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    const token = await linkOf(admin, await invite(admin));
    // The admin's own browser, in which a session is open.
    const accepted = await admin.post('/api/invitations/accept', accept(token));
    expect([accepted.body, accepted.get('Set-Cookie')]).toEqual([{ email: NEW }, undefined]);
    expect((await admin.get('/api/me')).body.person.name).toBe('Ada Quill');
    expect(await fresh.db.$count(session)).toBe(1);
    const nils = fresh.browser();
    expect((await nils.signIn(NEW)).status).toBe(200);
    expect((await nils.get('/api/me')).body.person).toMatchObject({ name: 'Nils Berg', role: 'author', email: NEW });
    expect((await admin.get('/api/invitations')).body.invitations).toEqual([]);
    expect((await fresh.browser().post('/api/invitations/accept', accept(token))).status).toBe(410);
  });

  test('twice at once makes one account', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    const token = await linkOf(admin, await invite(admin));
    const both = await Promise.all([1, 2].map(() => fresh.browser().post('/api/invitations/accept', accept(token))));
    expect(both.map(({ status }) => status).sort()).toEqual([200, 410]);
    expect(await fresh.db.$count(user, eq(user.email, NEW))).toBe(1);
  });

  test('at once with revoking leaves either an account or a revoked invitation, never both', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    const id = await invite(admin);
    const token = await linkOf(admin, id);
    const both = await Promise.all([
      fresh.browser().post('/api/invitations/accept', accept(token)),
      admin.post(`/api/invitations/${id}/revoke`, { requestId: requestId() }),
    ]);
    expect(both.map(({ status }) => status).sort()).toEqual([200, 410]);
    const [row] = await fresh.db.select().from(invitation);
    const accounts = await fresh.db.$count(user, eq(user.email, NEW));
    expect(row?.revokedAt === null ? 1 : 0).toBe(accounts);
  });

  test('with a password that is refused keeps the link, and says so at its field', async () => {
    const fresh = await accountApp();
    const admin = await adminPage(fresh);
    const token = await linkOf(admin, await invite(admin));
    const refused = await fresh.browser().post('/api/invitations/accept', accept(token, 'Nils.Berg 2026'));
    expect([refused.status, JSON.parse(refused.text).fields[0].field]).toEqual([400, 'password']);
    expect((await fresh.browser().post('/api/invitations/accept', accept(token))).status).toBe(200);
  });
});
