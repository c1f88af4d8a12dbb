import { eq, sql } from 'drizzle-orm';
import { describe, expect, test } from 'vitest';
import { problemBody, RELEASE_HEADER } from '#api';
import { fail, ok } from '#text';
import { notice, requestAnswer, team } from '../../server/database/schema.ts';
import type { Service } from '../../server/http/context.ts';
import { type FreshApp, freshApp, ORIGIN } from './fresh-app.ts';
import { standIns } from './stand-ins.ts';

const ID = '0f8fad5b-d9cb-469f-a165-70867728950e';
const HASH = 'a'.repeat(64);
const invitation = {
  id: ID,
  email: 'new@railway.example',
  role: 'reader',
  state: 'pending',
  invitedBy: 'Ada Quill',
  sentAt: '2026-03-02T09:00:00.000Z',
  expiresAt: '2026-03-09T09:00:00.000Z',
} as const;

/** Adds one notice each time it acts, so that effects can be counted. */
const countingInvite: Service<'invitations.create'> = async (context) => {
  await context.db.insert(notice).values({ userId: context.person.id, kind: 'told', text: 'one' });
  return ok(invitation);
};

async function noticesIn(fresh: FreshApp): Promise<number> {
  const [row] = await fresh.db.select({ count: sql<number>`count(*)::int` }).from(notice);
  return row?.count ?? -1;
}

const invite = { requestId: 'request-0000000001', email: 'new@railway.example', role: 'reader' };

describe('a request', () => {
  test('with an unknown field and a wrong one is refused with an error for each', async () => {
    const fresh = await freshApp({ services: standIns({ 'invitations.create': { act: countingInvite } }) });
    const answer = await fresh.send(fresh.people.admin, 'POST', '/api/invitations', {
      ...invite,
      email: 'nobody',
      colour: 'red',
    });
    expect(answer.status).toBe(400);
    expect(answer.type).toBe('application/problem+json');
    const problem = problemBody.parse(JSON.parse(answer.text));
    expect(problem.code).toBe('invalid');
    expect(problem.fields).toEqual([
      { field: 'email', message: 'Write an address like name@example.org.' },
      { field: 'colour', message: 'Unexpected field.' },
    ]);
    expect(await noticesIn(fresh)).toBe(0);
  });

  test('without a session is told to sign in, and one of a lower role what it needs', async () => {
    const fresh = await freshApp({ services: standIns({}) });
    expect((await fresh.send(null, 'POST', '/api/invitations', invite)).status).toBe(401);
    const refused = await fresh.send(fresh.people.editor, 'POST', '/api/invitations', invite);
    expect(refused.status).toBe(403);
    expect(JSON.parse(refused.text).detail).toBe('Your role is editor, but this needs admin.');
  });

  test('that changes something from another site or from no named page is refused', async () => {
    const fresh = await freshApp({ services: standIns({}) });
    const foreign = await fresh
      .send(fresh.people.admin, 'POST', '/api/invitations', invite)
      .set('Origin', 'http://evil.test');
    expect(foreign.status).toBe(403);
    expect(JSON.parse(foreign.text).code).toBe('other-origin');
    const unnamed = await fresh.send(fresh.people.admin, 'POST', '/api/invitations', invite).unset('Origin');
    expect(unnamed.status).toBe(403);
  });

  test('whose body is not JSON, broken or too large is refused by name', async () => {
    const fresh = await freshApp({ services: standIns({}) });
    const post = () => fresh.send(fresh.people.admin, 'POST', '/api/invitations');
    expect((await post().type('text').send('x')).status).toBe(415);
    const broken = await post().type('json').send('{"requestId":');
    expect([broken.status, JSON.parse(broken.text).code]).toEqual([400, 'unread-body']);
    const large = await post()
      .type('json')
      .send(JSON.stringify({ ...invite, email: 'x'.repeat(1_100_000) }));
    expect([large.status, JSON.parse(large.text).code]).toEqual([413, 'too-large']);
  });

  test('with a draft of 400,000 characters of three bytes each is taken', async () => {
    const act: Service<'drafts.saveText'> = async (_context, { text }) =>
      ok({ revision: text.length, hash: HASH, at: '2026-03-02T09:00:00.000Z' });
    const fresh = await freshApp({ services: standIns({ 'drafts.saveText': { act } }) });
    const body = { saveId: 'save-0000000000001', baseRevision: 0, text: 'Ω'.repeat(199_999) + '≤'.repeat(200_001) };
    const answer = await fresh.send(fresh.people.author, 'PUT', `/api/drafts/${ID}/text`, body);
    expect([answer.status, answer.body.revision]).toEqual([200, 400_000]);
  });

  test('for an address that names nothing is not found', async () => {
    const fresh = await freshApp({ services: standIns({}) });
    for (const path of ['/api/nowhere', '/api/drafts/not-an-id', '/api/auth/sign-up/email', '/api/auth/ok']) {
      const answer = await fresh.send(fresh.people.author, 'GET', path);
      expect([path, answer.status, JSON.parse(answer.text).code]).toEqual([path, 404, 'not-found']);
    }
  });

  test('that meets a fault of ours is told nothing of its inside', async () => {
    const act: Service<'people.list'> = async () => {
      throw new Error('relation "secret" is missing');
    };
    const fresh = await freshApp({ services: standIns({ 'people.list': { act } }) });
    const answer = await fresh.send(fresh.people.reader, 'GET', '/api/people');
    expect(answer.status).toBe(500);
    expect(answer.text).not.toContain('secret');
    expect(JSON.parse(answer.text).code).toBe('fault');
  });
});

describe('every answer', () => {
  test('carries the release, is not stored, and a policy without inline script or eval', async () => {
    const fresh = await freshApp({ services: standIns({}) });
    const answer = await fresh.send(null, 'GET', '/api/me');
    expect(answer.headers[RELEASE_HEADER]).toBe('0.0.0+test');
    expect(answer.headers['cache-control']).toBe('private, no-store');
    const policy = String(answer.headers['content-security-policy']);
    expect(policy).toContain("script-src 'self';");
    expect(policy).toContain("style-src-attr 'none'");
    expect(policy).not.toContain('unsafe');
    expect(answer.headers['x-content-type-options']).toBe('nosniff');
  });
});

describe('a transaction', () => {
  const failing: Service<'invitations.create'> = async (context) => {
    await context.db.insert(notice).values({ userId: context.person.id, kind: 'told', text: 'lost' });
    context.afterCommit(() => ran.push('after'));
    return fail({ kind: 'stale', detail: 'It moved.', extra: { revision: 7 } });
  };
  const ran: string[] = [];

  test('of a refused request leaves nothing behind, and the problem carries what the client needs', async () => {
    const fresh = await freshApp({ services: standIns({ 'invitations.create': { act: failing } }) });
    const answer = await fresh.send(fresh.people.admin, 'POST', '/api/invitations', invite);
    const problem = JSON.parse(answer.text);
    expect([answer.status, problem.code, problem.revision]).toEqual([409, 'stale', 7]);
    expect(await noticesIn(fresh)).toBe(0);
    expect(await fresh.db.select().from(requestAnswer)).toEqual([]);
    expect(ran).toEqual([]);
  });

  test('of a service that keeps its failures stays', async () => {
    const row = { act: failing, keepsFailures: true } as const;
    const fresh = await freshApp({ services: standIns({ 'invitations.create': row }) });
    const answer = await fresh.send(fresh.people.admin, 'POST', '/api/invitations', invite);
    expect(answer.status).toBe(409);
    expect(await noticesIn(fresh)).toBe(1);
    expect(ran).toEqual(['after']);
  });
});

describe('a repeated request', () => {
  test('by the same person gets the first answer and has no second effect, also when both are under way', async () => {
    const fresh = await freshApp({ services: standIns({ 'invitations.create': { act: countingInvite } }) });
    const send = () => fresh.send(fresh.people.admin, 'POST', '/api/invitations', invite);
    const answers = await Promise.all([send(), send(), send()]);
    expect(answers.map((answer) => answer.status)).toEqual([200, 200, 200]);
    expect(answers.map((answer) => answer.body)).toEqual([invitation, invitation, invitation]);
    expect(await noticesIn(fresh)).toBe(1);
  });

  test('after 24 hours is a new one', async () => {
    const fresh = await freshApp({ services: standIns({ 'invitations.create': { act: countingInvite } }) });
    const send = () => fresh.send(fresh.people.admin, 'POST', '/api/invitations', invite);
    await send();
    fresh.advance(24 * 3600 * 1000);
    await send();
    expect(await noticesIn(fresh)).toBe(1);
    fresh.advance(1);
    await send();
    expect(await noticesIn(fresh)).toBe(2);
  });

  test('with an id that was used for another address is refused', async () => {
    const fresh = await freshApp({ services: standIns({ 'invitations.create': { act: countingInvite } }) });
    await fresh.send(fresh.people.admin, 'POST', '/api/invitations', invite);
    const answer = await fresh.send(fresh.people.admin, 'POST', `/api/invitations/${ID}/revoke`, {
      requestId: invite.requestId,
    });
    expect([answer.status, JSON.parse(answer.text).fields[0].field]).toEqual([400, 'requestId']);
  });

  test('whose answer holds a link gets it again, while the database does not hold it', async () => {
    let made = 0;
    const act: Service<'people.makeLink'> = async () => {
      made++;
      return ok({ url: `${ORIGIN}/password#token=secret-${made}`, expiresAt: '2026-03-03T09:00:00.000Z' });
    };
    const fresh = await freshApp({ services: standIns({ 'people.makeLink': { act, sealsAnswer: true } }) });
    const send = () =>
      fresh.send(fresh.people.admin, 'POST', '/api/people/person-reader/link', { requestId: 'request-0000000002' });
    const first = await send();
    const second = await send();
    expect(first.body.url).toBe(`${ORIGIN}/password#token=secret-1`);
    expect(second.body).toEqual(first.body);
    expect(JSON.stringify(await fresh.db.select().from(requestAnswer))).not.toContain('secret-1');
  });
});

describe('the open pages', () => {
  test('tell health without a session', async () => {
    const fresh = await freshApp({ services: standIns({}) });
    for (const path of ['/healthz', '/readyz']) {
      const answer = await fresh.send(null, 'GET', path);
      expect([answer.status, answer.body]).toEqual([200, { ok: true }]);
    }
  });

  test('give an OpenAPI 3.1 document that names every endpoint', async () => {
    const fresh = await freshApp({ services: standIns({}) });
    const { body } = await fresh.send(null, 'GET', '/api/openapi.json');
    expect(body.openapi).toBe('3.1.0');
    expect(body.paths['/api/drafts/{id}/text'].put.operationId).toBe('drafts.saveText');
    expect(body.paths['/api/drafts/{id}/text'].put.responses['409'].content).toHaveProperty([
      'application/problem+json',
    ]);
  });

  test('give a readable page without script, whose style carries the nonce of the policy', async () => {
    const fresh = await freshApp({ services: standIns({}) });
    const answer = await fresh.send(null, 'GET', '/api/docs');
    expect(answer.text).toContain('PUT /api/drafts/:id/text');
    expect(answer.text).not.toContain('<script');
    const nonce = /<style nonce="([^"]+)">/.exec(answer.text)?.[1];
    expect(String(answer.headers['content-security-policy'])).toContain(`'nonce-${nonce}'`);
  });
});

test('the database of a test starts with the one row of the team', async () => {
  const fresh = await freshApp({ services: standIns({}) });
  expect(await fresh.db.select({ id: team.id }).from(team).where(eq(team.id, 1))).toEqual([{ id: 1 }]);
});
