import { and, eq, sql } from 'drizzle-orm';
import { beforeEach, describe, expect, test } from 'vitest';
import {
  auditEvent,
  draft,
  draftAuthor,
  draftWriter,
  mail,
  recipe,
  recipeVersion,
  review,
  versionWriter,
} from '../../server/database/schema.ts';
import type { Person } from '../../server/http/context.ts';
import { addMonths, dateIn } from '../../server/services/calendar.ts';
import {
  clientId,
  fakeCompile,
  freshWorkflow,
  hashText,
  recipeText,
  setTeam,
  statuses,
  TICKS,
  type Workflow,
} from './workflow-app.ts';

let flow: Workflow;
beforeEach(async () => {
  flow = await freshWorkflow();
});

const TEXT = recipeText('bias-tee');
const versions = () => flow.db.select().from(recipeVersion).orderBy(recipeVersion.version);

/** A draft in review, written and sent by the author. */
async function inReview(text = TEXT, changes?: string): Promise<string> {
  const id = await flow.start(flow.author, undefined, changes);
  await flow.save(flow.author, id, 0, text).expect(200);
  await flow.post(flow.author, `/api/drafts/${id}/send`, { ...(await flow.seen(id)), note: 'Look.' }).expect(200);
  return id;
}
const signOff = async (who: Person, id: string, more: object = {}) =>
  flow.post(who, `/api/reviews/${id}/sign-off`, { ...(await flow.seen(id)), ticks: TICKS, note: '', ...more });

describe('every act, from every state, by everybody', () => {
  type State = 'draft' | 'in-review' | 'published' | 'discarded';
  const STATES: readonly State[] = ['draft', 'in-review', 'published', 'discarded'];
  const PEOPLE = ['reader', 'owner', 'invited', 'author', 'editor', 'writing editor', 'admin'] as const;
  type Row = readonly [number, number, number, number, number, number, number];
  /** Status for each person of PEOPLE. 409: the state is not the one that the act needs; for a save, the text is kept beside the draft. */
  const TABLE = {
    save: {
      draft: [404, 200, 200, 404, 403, 200, 403],
      'in-review': [404, 409, 409, 403, 403, 409, 403],
      published: [404, 409, 409, 404, 403, 409, 403],
      discarded: [404, 409, 409, 404, 403, 409, 403],
    },
    authors: {
      draft: [403, 200, 403, 404, 200, 200, 200],
      'in-review': [403, 200, 403, 403, 200, 200, 200],
      published: [403, 409, 403, 404, 409, 409, 409],
      discarded: [403, 409, 403, 404, 409, 409, 409],
    },
    discard: {
      draft: [403, 200, 403, 404, 200, 200, 200],
      'in-review': [403, 409, 403, 403, 409, 409, 409],
      published: [403, 409, 403, 404, 409, 409, 409],
      discarded: [403, 409, 403, 404, 409, 409, 409],
    },
    send: {
      draft: [403, 200, 200, 404, 403, 200, 403],
      'in-review': [403, 409, 409, 403, 403, 409, 403],
      published: [403, 409, 409, 404, 403, 409, 403],
      discarded: [403, 409, 409, 404, 403, 409, 403],
    },
    'take back': {
      draft: [403, 409, 409, 404, 409, 409, 409],
      'in-review': [403, 200, 403, 403, 403, 403, 403],
      published: [403, 409, 409, 404, 409, 409, 409],
      discarded: [403, 409, 409, 404, 409, 409, 409],
    },
    'send back': {
      draft: [403, 403, 403, 403, 409, 403, 409],
      'in-review': [403, 403, 403, 403, 200, 403, 200],
      published: [403, 403, 403, 403, 409, 403, 409],
      discarded: [403, 403, 403, 403, 409, 403, 409],
    },
    'sign off': {
      draft: [403, 403, 403, 403, 409, 403, 409],
      'in-review': [403, 403, 403, 403, 200, 403, 200],
      published: [403, 403, 403, 403, 409, 403, 409],
      discarded: [403, 403, 403, 403, 409, 403, 409],
    },
  } as const satisfies Record<string, Record<State, Row>>;
  type Act = keyof typeof TABLE;
  const AFTER = {
    save: null,
    authors: null,
    discard: 'discarded',
    send: 'in-review',
    'take back': 'draft',
    'send back': 'draft',
    'sign off': 'published',
  } as const satisfies Record<Act, State | null>;

  async function act(name: Act, who: Person, id: string) {
    const seen = await flow.seen(id);
    switch (name) {
      case 'save':
        return flow.save(who, id, seen.revision, `${TEXT}${clientId()}`);
      case 'authors':
        return flow.post(who, `/api/drafts/${id}/authors`, { personIds: [flow.coauthor.id, flow.editor2.id] });
      case 'discard':
        return flow.post(who, `/api/drafts/${id}/discard`, seen);
      case 'send':
        return flow.post(who, `/api/drafts/${id}/send`, { ...seen, note: '' });
      case 'take back':
        return flow.post(who, `/api/drafts/${id}/take-back`, seen);
      case 'send back':
        return flow.post(who, `/api/reviews/${id}/send-back`, { ...seen, reason: 'Because.' });
      case 'sign off':
        return flow.post(who, `/api/reviews/${id}/sign-off`, { ...seen, ticks: TICKS, note: '' });
    }
  }

  test.each((Object.keys(TABLE) as Act[]).flatMap((name) => STATES.map((state) => [name, state] as const)))(
    '%s, when %s',
    async (name, state) => {
      const id = await flow.start(flow.author, TEXT);
      await flow.db
        .insert(draftAuthor)
        .values([flow.coauthor, flow.editor2].map((p) => ({ draftId: id, userId: p.id })));
      await flow.db.insert(draftWriter).values({ draftId: id, userId: flow.editor2.id }).onConflictDoNothing();
      const people = [flow.reader, flow.author, flow.coauthor, flow.outsider, flow.editor, flow.editor2, flow.admin];
      const statuses: number[] = [];
      for (const who of people) {
        const sent = state === 'in-review' ? { sentBy: flow.author.id } : { sentBy: null };
        await flow.db
          .update(draft)
          .set({ state, ...sent })
          .where(eq(draft.id, id));
        const answer = await act(name, who, id);
        statuses.push(answer.status);
        const [after] = await flow.db.select().from(draft).where(eq(draft.id, id));
        expect(after?.state).toBe(answer.status === 200 ? (AFTER[name] ?? state) : state);
      }
      const named = (row: readonly number[]) => Object.fromEntries(PEOPLE.map((person, i) => [person, row[i]]));
      expect(named(statuses)).toEqual(named(TABLE[name][state]));
    },
  );
});

describe('signing off', () => {
  test('publishes the next whole version with hash, checks, ticks, writers and signature', async () => {
    const id = await inReview();
    const answer = await signOff(flow.editor, id, { note: 'Fine.' });
    expect(answer.body).toEqual({ slug: 'bias-tee', version: 1 });
    const [version] = await versions();
    expect(version).toMatchObject({
      version: 1,
      state: 'published',
      text: TEXT,
      textHash: hashText(TEXT),
      checks: [{ kind: 'example', title: 'An example', passed: true, detail: '' }],
      ticks: TICKS,
      note: 'Look.',
      signedBy: flow.editor.id,
      signedAt: flow.frame.clock(),
      selfSigned: false,
      suppliedWith: null,
      reviewDue: '2028-03-02',
    });
    expect(await flow.db.select().from(versionWriter)).toMatchObject([{ userId: flow.author.id, version: 1 }]);
    expect(await flow.db.select().from(recipe)).toMatchObject([{ slug: 'bias-tee', slugFixed: true, number: 'Q-001' }]);
    const lines = await flow.db.select().from(auditEvent).where(eq(auditEvent.act, 'sign off'));
    expect(lines).toMatchObject([
      { byName: flow.editor.name, about: 'Q-001 Recipe of bias-tee', userId: flow.editor.id },
    ]);
    expect(lines[0]?.detail).toContain(hashText(TEXT));
    const mails = await flow.db.select().from(mail).where(eq(mail.kind, 'published'));
    expect(mails.map((m) => m.recipient)).toEqual([flow.author.email]);
  });

  test('supersedes the version before and leaves its text as it was', async () => {
    await signOff(flow.editor, await inReview());
    const second = `${TEXT}More.\n`;
    const answer = await signOff(flow.editor, await inReview(second, 'bias-tee'));
    expect(answer.body.version).toBe(2);
    expect(await versions()).toMatchObject([
      { version: 1, state: 'superseded', text: TEXT, textHash: hashText(TEXT) },
      { version: 2, state: 'published', text: second },
    ]);
  });

  test('by two editors at once makes one version; the other is told that it is published', async () => {
    const id = await inReview();
    const answers = await Promise.all([signOff(flow.editor, id), signOff(flow.admin, id)]);
    expect(statuses(answers)).toEqual([200, 409]);
    expect(answers.find((a) => a.status === 409)?.body).toMatchObject({ state: 'published' });
    expect(await versions()).toHaveLength(1);
    expect(await flow.db.select().from(review).where(eq(review.act, 'signed-off'))).toHaveLength(1);
  });

  test('sent twice with one request id, as after a lost answer, signs once and answers the same', async () => {
    const id = await inReview();
    const body = { ...(await flow.seen(id)), ticks: TICKS, note: '' };
    const path = `/api/reviews/${id}/sign-off`;
    const answers = await Promise.all([flow.post(flow.editor, path, body), flow.post(flow.editor, path, body)]);
    expect(answers.map((a) => [a.status, a.body.version])).toEqual([
      [200, 1],
      [200, 1],
    ]);
    expect(await versions()).toHaveLength(1);
  });

  test('signs nothing when the text was taken back, changed and sent again; what changed comes with the answer', async () => {
    const id = await inReview();
    const seen = await flow.seen(id);
    const text = `${TEXT}Changed.`;
    await flow.post(flow.author, `/api/drafts/${id}/take-back`, seen).expect(200);
    await flow.save(flow.author, id, 1, text).expect(200);
    await flow.post(flow.author, `/api/drafts/${id}/send`, { ...(await flow.seen(id)), note: '' }).expect(200);
    const body = { ...seen, requestId: clientId(), ticks: TICKS, note: '' };
    const answer = await flow.post(flow.editor, `/api/reviews/${id}/sign-off`, body).expect(409);
    expect(answer.body).toMatchObject({
      state: 'in-review',
      revision: 2,
      text,
      baseText: TEXT,
      hash: hashText(text),
      savedBy: flow.author.name,
    });
    expect(await versions()).toEqual([]);
  });

  test('signs nothing when the hash is of another text than that of the revision', async () => {
    const id = await inReview();
    const answer = await signOff(flow.editor, id, { hash: hashText('another') });
    expect(answer.status).toBe(409);
    expect(answer.body.text).toBe(TEXT);
    expect(await versions()).toEqual([]);
  });

  test('runs the checks again, and signs nothing when one fails by now', async () => {
    let answer: Awaited<ReturnType<typeof fakeCompile>> | undefined;
    flow = await freshWorkflow(async (text, facts) => answer ?? fakeCompile(text, facts));
    const id = await inReview();
    answer = await fakeCompile(`${TEXT}FAILS`, {});
    const refused = await signOff(flow.editor, id);
    expect(refused.status).toBe(422);
    expect(refused.body.checks).toMatchObject([{ passed: false }]);
    expect(await versions()).toEqual([]);
  });

  test('asks for every tick', async () => {
    const id = await inReview();
    const answer = await signOff(flow.editor, id, { ticks: TICKS.slice(1) });
    expect(answer.status).toBe(400);
    expect(answer.body.fields).toEqual([{ field: 'ticks', message: `Tick “${TICKS[0]}” first.` }]);
  });

  test('is undone whole when its audit line cannot be written', async () => {
    const id = await inReview();
    await flow.db.execute(sql`alter table audit_event add constraint no_signing check (act <> 'sign off')`);
    try {
      expect((await signOff(flow.editor, id)).status).toBe(500);
      expect(await versions()).toEqual([]);
      expect(await flow.db.select().from(draft)).toMatchObject([{ state: 'in-review' }]);
      expect(await flow.db.select().from(mail).where(eq(mail.kind, 'published'))).toEqual([]);
    } finally {
      await flow.db.execute(sql`alter table audit_event drop constraint no_signing`);
    }
    expect((await signOff(flow.editor, id)).status).toBe(200);
  });

  test('takes a recipe that was supplied over: its owner is whoever changed it', async () => {
    const { id } = await flow.publish(TEXT);
    await flow.db.update(recipe).set({ origin: 'supplied' });
    await flow.db.execute(sql`delete from recipe_owner`);
    expect(id).toBeTruthy();
    await flow.publish(`${TEXT}Ours.`, 'bias-tee', flow.coauthor);
    const { body } = await flow.get(flow.reader, '/api/recipes/bias-tee').expect(200);
    expect(body.recipe).toMatchObject({ origin: 'team', owners: [flow.coauthor.name] });
  });
});

describe('the second person', () => {
  test('an owner who wrote nothing may sign off what an invited author wrote', async () => {
    const id = await flow.start(flow.editor);
    await flow.post(flow.editor, `/api/drafts/${id}/authors`, { personIds: [flow.author.id] }).expect(200);
    await flow.save(flow.author, id, 0, TEXT).expect(200);
    await flow.post(flow.author, `/api/drafts/${id}/send`, { ...(await flow.seen(id)), note: '' }).expect(200);
    expect((await signOff(flow.editor, id)).status).toBe(200);
  });

  test('an editor who wrote a part that is gone by now may not', async () => {
    const id = await flow.start(flow.author);
    await flow.post(flow.author, `/api/drafts/${id}/authors`, { personIds: [flow.editor.id] }).expect(200);
    await flow.save(flow.editor, id, 0, 'draft of the editor').expect(200);
    await flow.save(flow.author, id, 1, TEXT).expect(200);
    await flow.post(flow.author, `/api/drafts/${id}/send`, { ...(await flow.seen(id)), note: '' }).expect(200);
    const refused = await signOff(flow.editor, id);
    expect(refused.status).toBe(403);
    expect(refused.body.detail).toContain('second person');
    expect((await signOff(flow.editor2, id)).status).toBe(200);
  });

  test('what was written before the last version counts no more', async () => {
    await flow.publish(TEXT, undefined, flow.editor, flow.editor2);
    const { version } = await flow.publish(`${TEXT}More.`, 'bias-tee', flow.author, flow.editor);
    expect(version).toBe(2);
  });

  test('a team that allows it lets the author sign, and the version says so', async () => {
    await setTeam(flow, { allowSelfSignOff: true });
    await flow.publish(TEXT, undefined, flow.editor, flow.editor);
    expect(await versions()).toMatchObject([{ selfSigned: true, signedBy: flow.editor.id }]);
    const { body } = await flow.get(flow.reader, '/api/recipes/bias-tee').expect(200);
    expect(body.version).toMatchObject({ selfSigned: true, signedBy: flow.editor.name, writtenBy: [flow.editor.name] });
  });
});

describe('sending back', () => {
  test('needs a reason, tells it to those who wrote, and the draft can be written again', async () => {
    const id = await inReview();
    await flow
      .post(flow.editor, `/api/reviews/${id}/send-back`, { ...(await flow.seen(id)), reason: '  ' })
      .expect(400);
    const { body } = await flow
      .post(flow.editor, `/api/reviews/${id}/send-back`, { ...(await flow.seen(id)), reason: 'Say why 10 kΩ.' })
      .expect(200);
    expect(body).toMatchObject({
      state: 'draft',
      sentBy: null,
      sentBack: { by: flow.editor.name, reason: 'Say why 10 kΩ.', at: '2026-03-02T09:00:00.000Z' },
    });
    const mails = await flow.db.select().from(mail).where(eq(mail.kind, 'sent-back'));
    expect(mails.map((m) => m.recipient)).toEqual([flow.author.email]);
    await flow.save(flow.author, id, 1, `${TEXT}Because.`).expect(200);
  });

  test('is forgotten when the draft is sent again', async () => {
    const id = await inReview();
    await flow
      .post(flow.editor, `/api/reviews/${id}/send-back`, { ...(await flow.seen(id)), reason: 'No.' })
      .expect(200);
    flow.advance(1000);
    const { body } = await flow
      .post(flow.author, `/api/drafts/${id}/send`, { ...(await flow.seen(id)), note: '' })
      .expect(200);
    expect(body.sentBack).toBeNull();
  });
});

describe('the list of reviews', () => {
  test('is open to authors and says who may decide and why not', async () => {
    await inReview();
    const row = async (who: Person) => (await flow.get(who, '/api/reviews').expect(200)).body.reviews[0];
    expect(await row(flow.editor)).toMatchObject({ mayDecide: true, whyNot: null });
    expect(await row(flow.outsider)).toMatchObject({ mayDecide: false, whyNot: 'An editor decides this.' });
    await flow.get(flow.reader, '/api/reviews').expect(403);
  });
});

describe('the page of a review', () => {
  const GAIN_2 = recipeText('amp', 'GAIN 2');
  const GAIN_3 = recipeText('amp', 'GAIN 3');
  const keep = (who: Person, name: string, voltage: string, visibility = 'team') =>
    flow
      .post(who, '/api/designs', {
        slug: 'amp',
        version: 1,
        name,
        project: '',
        note: '',
        visibility,
        inputs: { amp: { V_in: voltage } },
        shown: { engine: 1, calculators: {} },
      })
      .expect(200);

  test('gives both texts, both documents, changed numbers, and each design that would change', async () => {
    await flow.publish(GAIN_2);
    await keep(flow.reader, 'Holds', '1 V');
    await keep(flow.reader, 'Breaks', '4 V');
    await keep(flow.coauthor, 'Nothing', '0 V');
    await keep(flow.coauthor, 'Hidden', '4 V', 'only me');
    const id = await inReview(GAIN_3, 'amp');
    const { body } = await flow.get(flow.editor, `/api/reviews/${id}`).expect(200);
    expect(body).toMatchObject({ text: GAIN_3, hash: hashText(GAIN_3), base: { version: 1, text: GAIN_2 } });
    expect(body.document.front.slug).toBe('amp');
    expect(body.base.document.front.slug).toBe('amp');
    expect(body.numbers.length).toBeGreaterThan(0);
    // By hand: 3 V/V × 1 V = 3 V where it was 2 V; × 4 V = 12 V, beyond 10 V, where it was 8 V; × 0 V stays 0 V.
    expect(body.designs.seen.map((one: { name: string }) => one.name)).toEqual(['Breaks', 'Holds']);
    expect(body.designs.seen[0].changes).toMatchObject([
      {
        label: 'V_out',
        before: expect.stringContaining('8.000'),
        after: expect.stringContaining('12.00'),
        newlyBroken: false,
      },
      { label: 'output', before: 'within', after: 'exceeded', newlyBroken: true },
    ]);
    expect(body.designs).toMatchObject({ unchanged: 1, privateCount: 1, privateNewlyBroken: 1 });
    expect(JSON.stringify(body)).not.toContain('Hidden');
    expect(body.ticks).toEqual([
      ...TICKS,
      `I know that a limit would break in “Breaks” of ${flow.reader.name}`,
      'I know that a limit would break in 1 private design',
    ]);
    expect((await signOff(flow.editor, id)).status).toBe(400);
    expect((await signOff(flow.editor, id, { ticks: body.ticks })).status).toBe(200);
    const told = await flow.db
      .select()
      .from(mail)
      .where(and(eq(mail.kind, 'published'), eq(mail.recipient, flow.coauthor.email)));
    expect(told).toHaveLength(1);
  });

  test('of a new recipe has no base and no designs', async () => {
    const id = await inReview();
    const { body } = await flow.get(flow.outsider, `/api/reviews/${id}`).expect(200);
    expect(body).toMatchObject({
      base: null,
      numbers: [],
      designs: { seen: [], unchanged: 0, privateCount: 0 },
      ticks: TICKS,
    });
  });
});

describe('the date of the next review', () => {
  test.each([
    ['UTC', '2026-03-02T23:30:00.000Z', '2026-03-02'],
    ['Pacific/Auckland', '2026-03-02T12:00:00.000Z', '2026-03-03'],
    ['America/Los_Angeles', '2026-03-02T07:59:00.000Z', '2026-03-01'],
    // Clocks go forward in Oslo at 2026-03-29 01:00 UTC: 22:30 UTC is 23:30 before it and 00:30 of the next day after it.
    ['Europe/Oslo', '2026-03-28T22:30:00.000Z', '2026-03-28'],
    ['Europe/Oslo', '2026-03-29T22:30:00.000Z', '2026-03-30'],
    // And back at 2026-10-25 01:00 UTC.
    ['Europe/Oslo', '2026-10-24T22:30:00.000Z', '2026-10-25'],
    ['Europe/Oslo', '2026-10-25T22:30:00.000Z', '2026-10-25'],
  ])('in %s the instant %s is on %s, whatever the zone of the server', (zone, at, expected) => {
    const before = process.env.TZ;
    try {
      for (const serverZone of ['UTC', 'Asia/Kathmandu', 'America/St_Johns']) {
        process.env.TZ = serverZone;
        expect(dateIn(zone, new Date(at))).toBe(expected);
      }
    } finally {
      if (before === undefined) delete process.env.TZ;
      else process.env.TZ = before;
    }
  });

  test.each([
    ['2026-03-02', 24, '2028-03-02'],
    ['2026-08-31', 6, '2027-02-28'],
    ['2027-08-31', 6, '2028-02-29'],
    ['2028-02-29', 12, '2029-02-28'],
    ['2026-12-31', 1, '2027-01-31'],
    ['2026-01-15', 60, '2031-01-15'],
  ])('%s and %i months is %s', (date, months, expected) => {
    expect(addMonths(date, months)).toBe(expected);
  });

  test('counts from the date of the signature in the team’s zone, and a recipe past it is overdue', async () => {
    await setTeam(flow, { timeZone: 'Pacific/Auckland' });
    // 2026-03-02 12:00 UTC is 2026-03-03 01:00 in Auckland.
    flow.advance(3 * 3600_000);
    await flow.publish(recipeText('bias-tee', 'Words.', 'review_months: 1\n'));
    expect((await versions())[0]?.reviewDue).toBe('2026-04-03');
    const row = async () => (await flow.get(flow.reader, '/api/recipes')).body.recipes[0];
    // The whole of 3 April in Auckland is in time; clocks go back there on 5 April, so midnight is 11:00 UTC.
    flow.advance(Date.parse('2026-04-03T10:59:00.000Z') - flow.frame.clock().getTime());
    expect(await row()).toMatchObject({ reviewDue: '2026-04-03', reviewOverdue: false });
    flow.advance(60_000);
    expect(await row()).toMatchObject({ reviewOverdue: true });
  });
});
