import { and, eq } from 'drizzle-orm';
import { beforeEach, describe, expect, test } from 'vitest';
import { auditEvent, draft, draftSave, draftWriter, mail, recipe, review, user } from '../../server/database/schema.ts';
import { type KeptSave, pruneDraftSaves, savesToDrop } from '../../server/services/draft-saves.ts';
import { clientId, freshWorkflow, hashText, recipeText, sorted, statuses, type Workflow } from './workflow-app.ts';

let flow: Workflow;
beforeEach(async () => {
  flow = await freshWorkflow();
});

const stored = async (saveId: string) => (await flow.db.select().from(draftSave).where(eq(draftSave.id, saveId)))[0];
const rowOf = async (id: string) => (await flow.db.select().from(draft).where(eq(draft.id, id)))[0];
const invite = (id: string, ...people: { id: string }[]) =>
  flow.post(flow.author, `/api/drafts/${id}/authors`, { personIds: people.map((p) => p.id) }).expect(200);

describe('saving the text of a draft', () => {
  test('a save on the current revision goes on the draft and raises the revision by one', async () => {
    const id = await flow.start(flow.author, 'first');
    const { body } = await flow.save(flow.author, id, 0, 'second').expect(200);
    expect(body).toEqual({ revision: 1, hash: hashText('second'), at: '2026-03-02T09:00:00.000Z' });
    expect(await rowOf(id)).toMatchObject({ text: 'second', revision: 1, state: 'draft' });
  });

  test('a text that does not compile is saved all the same', async () => {
    const id = await flow.start(flow.author);
    await flow.save(flow.author, id, 0, '<<< {PROBLEM').expect(200);
    expect((await rowOf(id))?.text).toBe('<<< {PROBLEM');
  });

  test('a repeated save gets the stored answer, also after later saves', async () => {
    const id = await flow.start(flow.author);
    const saveId = clientId();
    const first = await flow.save(flow.author, id, 0, 'one', saveId).expect(200);
    await flow.save(flow.author, id, 1, 'two').expect(200);
    flow.advance(5000);
    const again = await flow.save(flow.author, id, 0, 'one', saveId).expect(200);
    expect(again.body).toEqual(first.body);
    expect(await rowOf(id)).toMatchObject({ text: 'two', revision: 2 });
  });

  test('the same save sent twice at once has one effect and one answer', async () => {
    const id = await flow.start(flow.author);
    const saveId = clientId();
    const [a, b] = await Promise.all([0, 1].map(() => flow.save(flow.author, id, 0, 'one', saveId)));
    expect([a?.status, b?.status]).toEqual([200, 200]);
    expect(a?.body).toEqual(b?.body);
    expect(await rowOf(id)).toMatchObject({ revision: 1 });
  });

  test('of two tabs that save on one base, one goes on the draft and the other is kept beside it with both texts', async () => {
    const id = await flow.start(flow.author, 'base');
    const ids = [clientId(), clientId()] as const;
    const answers = await Promise.all([
      flow.save(flow.author, id, 0, 'left', ids[0]),
      flow.save(flow.author, id, 0, 'right', ids[1]),
    ]);
    expect(statuses(answers)).toEqual([200, 409]);
    const loser = answers.findIndex((a) => a.status === 409);
    const [won, lost] = loser === 1 ? ['left', 'right'] : ['right', 'left'];
    expect(answers[loser]?.body).toMatchObject({
      code: 'stale',
      saveId: ids[loser],
      state: 'draft',
      revision: 1,
      text: won,
      baseText: 'base',
      savedBy: flow.author.name,
    });
    expect(await stored(ids[loser] ?? '')).toMatchObject({ text: lost, aside: 'stale', pinned: true, revision: null });
    expect((await rowOf(id))?.text).toBe(won);
  });

  test('a repeat of a save that was kept beside the draft gets its conflict again and stores nothing new', async () => {
    const id = await flow.start(flow.author, 'base');
    await flow.save(flow.author, id, 0, 'left').expect(200);
    const saveId = clientId();
    const first = await flow.save(flow.author, id, 0, 'right', saveId).expect(409);
    const again = await flow.save(flow.author, id, 0, 'right', saveId).expect(409);
    const { requestId: _a, ...one } = first.body;
    const { requestId: _b, ...two } = again.body;
    expect(two).toEqual(one);
    expect(await flow.db.select().from(draftSave).where(eq(draftSave.aside, 'stale'))).toHaveLength(1);
  });

  test('a conflict pins the save that it started from', async () => {
    const id = await flow.start(flow.author);
    const parent = clientId();
    await flow.save(flow.author, id, 0, 'parent', parent).expect(200);
    await flow.save(flow.author, id, 1, 'child').expect(200);
    expect((await stored(parent))?.pinned).toBe(false);
    await flow.save(flow.author, id, 1, 'other child').expect(409);
    expect((await stored(parent))?.pinned).toBe(true);
  });

  test.each([
    ['in-review', 'in-review'],
    ['discarded', 'discarded'],
    ['published', 'published'],
  ] as const)(
    'a save that arrives when the draft is %s is kept beside it and answered with that state',
    async (state, aside) => {
      const id = await flow.start(flow.author, 'base');
      await flow.db.update(draft).set({ state }).where(eq(draft.id, id));
      const saveId = clientId();
      const { body } = await flow.save(flow.author, id, 0, 'late', saveId).expect(409);
      expect(body).toMatchObject({ saveId, state, text: 'base' });
      expect(await stored(saveId)).toMatchObject({ text: 'late', aside, pinned: true });
      expect((await rowOf(id))?.text).toBe('base');
    },
  );

  test('a person taken off the authors loses nothing, learns nothing new, and can read back their own saves only', async () => {
    const id = await flow.start(flow.author, 'base');
    await invite(id, flow.coauthor);
    await invite(id);
    await flow.save(flow.author, id, 0, 'secret').expect(200);
    const saveId = clientId();
    const { body } = await flow.save(flow.coauthor, id, 0, 'mine', saveId).expect(409);
    expect(body).toMatchObject({ saveId, text: 'base', baseText: 'base', savedBy: '' });
    expect(JSON.stringify(body)).not.toContain('secret');
    expect(await stored(saveId)).toMatchObject({ text: 'mine', aside: 'not-allowed' });
    const { body: list } = await flow.get(flow.coauthor, `/api/drafts/${id}/saves`).expect(200);
    expect(list.saves.map((save: { saveId: string }) => save.saveId)).toEqual([saveId]);
    const { body: own } = await flow.get(flow.coauthor, `/api/drafts/${id}/saves/${saveId}`).expect(200);
    expect(own.text).toBe('mine');
    const all = await flow.get(flow.author, `/api/drafts/${id}/saves`).expect(200);
    const others = all.body.saves.find((save: { revision: number | null }) => save.revision === 1);
    await flow.get(flow.coauthor, `/api/drafts/${id}/saves/${others.saveId}`).expect(404);
    await flow.get(flow.coauthor, `/api/drafts/${id}`).expect(404);
  });

  test('somebody who never could write it is refused and nothing is stored', async () => {
    const id = await flow.start(flow.author, 'base');
    await flow.save(flow.outsider, id, 0, 'x').expect(404);
    await flow.save(flow.editor, id, 0, 'x').expect(403);
    await flow.save(flow.reader, id, 0, 'x').expect(404);
    expect(await flow.db.select().from(draftSave).where(eq(draftSave.draftId, id))).toHaveLength(1);
  });

  test('an author who was made a reader meanwhile changes nothing, and their last words are kept beside the draft', async () => {
    const id = await flow.start(flow.author, 'base');
    const saveId = clientId();
    await flow.db.update(user).set({ role: 'reader' }).where(eq(user.id, flow.author.id));
    const { body } = await flow.save(flow.author, id, 0, 'last words', saveId).expect(409);
    expect(body).toMatchObject({ saveId, text: 'base' });
    expect(await stored(saveId)).toMatchObject({ text: 'last words', aside: 'not-allowed', pinned: true });
    expect((await rowOf(id))?.text).toBe('base');
  });

  test('the id of another person’s save is refused', async () => {
    const id = await flow.start(flow.author, 'base');
    await invite(id, flow.coauthor);
    const saveId = clientId();
    await flow.save(flow.author, id, 0, 'one', saveId).expect(200);
    const { body } = await flow.save(flow.coauthor, id, 1, 'two', saveId).expect(400);
    expect(body.fields[0].field).toBe('saveId');
  });

  test('a save for a draft that does not exist is not found', async () => {
    await flow.save(flow.author, '00000000-0000-4000-8000-000000000000', 0, 'x').expect(404);
  });
});

describe('who counts as a writer', () => {
  const writers = async (id: string) =>
    sorted((await flow.db.select().from(draftWriter).where(eq(draftWriter.draftId, id))).map((row) => row.userId));

  test('starting without a text, and saving the text unchanged, is not writing', async () => {
    const id = await flow.start(flow.author);
    await flow.save(flow.author, id, 0, '').expect(200);
    expect(await writers(id)).toEqual([]);
  });

  test('everybody whose save went on the draft is one, even if the text was changed back', async () => {
    const id = await flow.start(flow.author, 'base');
    await invite(id, flow.coauthor);
    await flow.save(flow.coauthor, id, 0, 'theirs').expect(200);
    await flow.save(flow.author, id, 1, 'base').expect(200);
    expect(await writers(id)).toEqual(sorted([flow.author.id, flow.coauthor.id]));
  });

  test('whoever’s text was kept aside becomes one when another person takes it in', async () => {
    const id = await flow.start(flow.author);
    await invite(id, flow.coauthor);
    await flow.save(flow.author, id, 0, 'mine').expect(200);
    await flow.save(flow.coauthor, id, 0, 'theirs').expect(409);
    expect(await writers(id)).toEqual([flow.author.id]);
    await flow.save(flow.author, id, 1, 'theirs').expect(200);
    expect(await writers(id)).toEqual(sorted([flow.author.id, flow.coauthor.id]));
  });

  test('a new draft from a text that was kept aside counts whoever wrote that text', async () => {
    const id = await flow.start(flow.author);
    await invite(id, flow.coauthor);
    await flow.save(flow.author, id, 0, 'mine').expect(200);
    await flow.save(flow.coauthor, id, 0, 'theirs').expect(409);
    const other = await flow.start(flow.outsider, 'theirs');
    expect(await writers(other)).toEqual(sorted([flow.coauthor.id, flow.outsider.id]));
  });

  test('the first change by a person is one line of the audit log, later ones none', async () => {
    const id = await flow.start(flow.author);
    for (const n of [0, 1, 2]) await flow.save(flow.author, id, n, `text ${n}`).expect(200);
    const lines = await flow.db.select().from(auditEvent).where(eq(auditEvent.act, 'edit a draft'));
    expect(lines.map((line) => line.byName)).toEqual([flow.author.name]);
  });
});

describe('starting a draft', () => {
  test('a change starts from the published text and its recipe has one open change', async () => {
    const text = recipeText('bias-tee');
    await flow.publish(text);
    const first = await flow.post(flow.author, '/api/drafts', { changes: 'bias-tee' }).expect(200);
    const second = await flow.post(flow.author, '/api/drafts', { changes: 'bias-tee' }).expect(200);
    expect(first.body.already).toBe(false);
    expect(second.body).toEqual({ id: first.body.id, already: true });
    const { body } = await flow.get(flow.author, `/api/drafts/${first.body.id}`).expect(200);
    expect(body).toMatchObject({ text, base: { version: 1, text }, facts: { fixedSlug: 'bias-tee' } });
  });

  test('two people who start a change at once get one draft; who may not see it is told whose it is', async () => {
    await flow.publish(recipeText('bias-tee'));
    const answers = await Promise.all(
      [flow.author, flow.outsider].map((who) => flow.post(who, '/api/drafts', { changes: 'bias-tee' })),
    );
    expect(statuses(answers)).toEqual([200, 403]);
    expect(answers.find((a) => a.status === 403)?.body.detail).toContain('is changing this recipe');
  });

  test('a change of a recipe that does not exist is not found', async () => {
    await flow.post(flow.author, '/api/drafts', { changes: 'no-such' }).expect(404);
  });

  test('a reader may not start one', async () => {
    await flow.post(flow.reader, '/api/drafts').expect(403);
  });
});

describe('who sees a draft', () => {
  test('its owner, its authors, editors and admins; in review every author; never a reader', async () => {
    const id = await flow.start(flow.author, recipeText('bias-tee'));
    await invite(id, flow.coauthor);
    const seenBy = async () => {
      const seen: string[] = [];
      for (const who of [flow.author, flow.coauthor, flow.outsider, flow.editor, flow.admin, flow.reader]) {
        const one = await flow.get(who, `/api/drafts/${id}`);
        const list = await flow.get(who, '/api/drafts');
        const listed = list.status === 200 && list.body.drafts.length === 1;
        expect(listed).toBe(one.status === 200);
        if (listed) seen.push(who.name);
      }
      return seen;
    };
    const few = [flow.author.name, flow.coauthor.name, flow.editor.name, flow.admin.name];
    expect(await seenBy()).toEqual(few);
    await flow.post(flow.author, `/api/drafts/${id}/send`, { ...(await flow.seen(id)), note: '' }).expect(200);
    expect(await seenBy()).toEqual([
      flow.author.name,
      flow.coauthor.name,
      flow.outsider.name,
      flow.editor.name,
      flow.admin.name,
    ]);
  });
});

describe('the authors of a draft', () => {
  test('are named by its owner or an editor, and only people who may write', async () => {
    const id = await flow.start(flow.author, 'base');
    await invite(id, flow.coauthor);
    await flow.post(flow.coauthor, `/api/drafts/${id}/authors`, { personIds: [] }).expect(403);
    const { body } = await flow
      .post(flow.editor, `/api/drafts/${id}/authors`, { personIds: [flow.coauthor.id, flow.reader.id, 'nobody'] })
      .expect(400);
    expect(body.fields.map((f: { field: string }) => f.field)).toEqual(['personIds.1', 'personIds.2']);
    const again = await flow
      .post(flow.editor, `/api/drafts/${id}/authors`, { personIds: [flow.outsider.id] })
      .expect(200);
    expect(again.body.authors).toEqual([{ id: flow.outsider.id, name: flow.outsider.name }]);
  });

  test('a person taken off and invited again writes again', async () => {
    const id = await flow.start(flow.author, 'base');
    await invite(id, flow.coauthor);
    await invite(id);
    await invite(id, flow.coauthor);
    await flow.save(flow.coauthor, id, 0, 'back').expect(200);
  });
});

describe('putting a draft aside', () => {
  test('keeps its saves, frees the names that it reserved and lets a new change start', async () => {
    const id = await flow.start(flow.author, recipeText('bias-tee'));
    await flow.post(flow.author, `/api/drafts/${id}/send`, { ...(await flow.seen(id)), note: '' }).expect(200);
    await flow.post(flow.author, `/api/drafts/${id}/take-back`, await flow.seen(id)).expect(200);
    await flow.post(flow.author, `/api/drafts/${id}/discard`, await flow.seen(id)).expect(200);
    expect(await flow.db.select().from(recipe)).toMatchObject([{ slug: null, number: null }]);
    expect((await flow.get(flow.author, `/api/drafts/${id}/saves`).expect(200)).body.saves).toHaveLength(1);
    expect((await flow.get(flow.author, '/api/drafts')).body.drafts).toEqual([]);
  });

  test('does nothing when the text has moved since it was seen', async () => {
    const id = await flow.start(flow.author, 'base');
    const seen = await flow.seen(id);
    await flow.save(flow.author, id, 0, 'more').expect(200);
    const { body } = await flow.post(flow.author, `/api/drafts/${id}/discard`, seen).expect(409);
    expect(body).toMatchObject({ state: 'draft', revision: 1, text: 'more', baseText: 'base' });
    expect((await rowOf(id))?.state).toBe('draft');
  });
});

describe('sending for review', () => {
  const sendOff = async (id: string, text: string) => {
    const { requestId } = { requestId: clientId() };
    const row = await rowOf(id);
    return flow.post(flow.author, `/api/drafts/${id}/send`, {
      requestId,
      revision: row?.revision,
      hash: hashText(text),
      note: 'Look.',
    });
  };

  test('reserves slug and number, pins the save that was sent, records the act and asks editors by mail', async () => {
    const text = recipeText('bias-tee');
    const id = await flow.start(flow.author);
    const saveId = clientId();
    await flow.save(flow.author, id, 0, text, saveId).expect(200);
    const answer = await sendOff(id, text);
    expect(answer.body).toMatchObject({
      state: 'in-review',
      slug: 'bias-tee',
      number: 'Q-001',
      note: 'Look.',
      sentBy: { id: flow.author.id },
    });
    expect((await stored(saveId))?.pinned).toBe(true);
    expect(await flow.db.select().from(review)).toMatchObject([
      { act: 'sent', userId: flow.author.id, revision: 1, textHash: hashText(text) },
    ]);
    const lines = await flow.db.select().from(auditEvent).where(eq(auditEvent.act, 'send for review'));
    expect(lines).toHaveLength(1);
    const mails = await flow.db.select().from(mail).where(eq(mail.kind, 'review-asked'));
    expect(sorted(mails.map((m) => m.recipient))).toEqual(
      sorted([flow.admin, flow.editor, flow.editor2].map((p) => p.email)),
    );
  });

  test('is refused with diagnostics and checks while one of them is red', async () => {
    for (const body of ['PROBLEM', 'FAILS']) {
      const text = recipeText('bias-tee', body);
      const id = await flow.start(flow.author, text);
      const answer = await sendOff(id, text);
      expect(answer.status).toBe(422);
      expect(
        answer.body.diagnostics.length + answer.body.checks.filter((c: { passed: boolean }) => !c.passed).length,
      ).toBe(1);
      expect((await rowOf(id))?.state).toBe('draft');
    }
  });

  test('refuses a slug or a number that another recipe has, at the place where it stands', async () => {
    await flow.publish(recipeText('bias-tee', 'Words.', 'number: BT-1\n'));
    const cases = [
      [recipeText('bias-tee'), 'slug-taken', 3],
      [recipeText('other', 'Words.', 'number: BT-1\n'), 'number-taken', 6],
    ] as const;
    for (const [text, code, line] of cases) {
      const id = await flow.start(flow.author, text);
      const answer = await sendOff(id, text);
      expect(answer.status).toBe(422);
      expect(answer.body.diagnostics).toMatchObject([{ code, start: { line } }]);
    }
  });

  test('two drafts sent at once with one slug: one gets it', async () => {
    const text = recipeText('bias-tee');
    const ids = [await flow.start(flow.author, text), await flow.start(flow.author, text)];
    const answers = await Promise.all(ids.map((id) => sendOff(id, text)));
    expect(statuses(answers)).toEqual([200, 422]);
  });

  test('numbers run on, step over those that teams wrote themselves, and stay with a recipe', async () => {
    await flow.publish(recipeText('one', 'Words.', 'number: Q-007\n'));
    const two = recipeText('two');
    const id = await flow.start(flow.author, two);
    expect((await sendOff(id, two)).body.number).toBe('Q-008');
    await flow.post(flow.author, `/api/drafts/${id}/take-back`, await flow.seen(id)).expect(200);
    expect((await sendOff(id, two)).body.number).toBe('Q-008');
  });

  test('a save that arrives with the sending is either sent or kept beside the draft', async () => {
    const text = recipeText('bias-tee');
    const id = await flow.start(flow.author, text);
    const saveId = clientId();
    const later = `${text}More.`;
    const [sent, save] = await Promise.all([sendOff(id, text), flow.save(flow.author, id, 0, later, saveId)]);
    const row = await rowOf(id);
    if (save.status === 200) {
      expect(sent.status).toBe(409);
      expect(row).toMatchObject({ state: 'draft', text: later });
    } else {
      expect(sent.status).toBe(200);
      expect(row).toMatchObject({ state: 'in-review', text });
      expect(await stored(saveId)).toMatchObject({ text: later, aside: 'in-review' });
    }
  });
});

describe('what is kept of earlier saves', () => {
  const NOW = new Date('2026-03-02T12:00:00.000Z');
  const MINUTE = 60_000;
  const ago = (minutes: number, more: Partial<KeptSave> = {}): KeptSave => ({
    id: `${minutes} min`,
    userId: 'a',
    revision: null,
    at: new Date(NOW.getTime() - minutes * MINUTE),
    pinned: false,
    ...more,
  });
  const kept = (saves: readonly KeptSave[], now = NOW) => {
    const gone = savesToDrop(saves, now);
    return saves.filter((save) => !gone.includes(save.id)).map((save) => save.id);
  };

  test('every save of the last hour stays', () => {
    const saves = Array.from({ length: 60 }, (_, i) => ago(i));
    expect(kept(saves)).toHaveLength(60);
  });

  test('older than an hour, the last of each five minutes by the clock stays', () => {
    // 10:40 to 10:49 in steps of a minute: the last of 10:45–10:49 and of 10:40–10:44.
    const saves = Array.from({ length: 10 }, (_, i) => ago(71 + i));
    expect(kept([ago(0), ...saves])).toEqual(['0 min', '71 min', '76 min']);
  });

  test('two people’s saves are judged on their own', () => {
    const saves = [ago(0), ago(71), ago(72, { id: 'b', userId: 'b' })];
    expect(kept(saves)).toEqual(['0 min', '71 min', 'b']);
  });

  test('older than 7 days, the last of each sitting stays; a pause of more than 30 minutes ends one', () => {
    const week = 7 * 24 * 60;
    const saves = [ago(0), ago(week + 10), ago(week + 20), ago(week + 49), ago(week + 80), ago(week + 90)];
    expect(kept(saves)).toEqual(['0 min', `${week + 10} min`, `${week + 80} min`]);
  });

  test('older than 90 days, only pinned ones stay, and the newest of all', () => {
    const old = 91 * 24 * 60;
    expect(kept([ago(old), ago(old + 100), ago(old + 200, { pinned: true })])).toEqual([
      `${old} min`,
      `${old + 200} min`,
    ]);
  });

  test('keeping step by step keeps what keeping once at the end would', () => {
    let saves: readonly KeptSave[] = Array.from({ length: 3000 }, (_, i) => ago(i * 7, { pinned: i % 97 === 0 }));
    const all = saves;
    for (let hours = 0; hours <= 24 * 100; hours += 7) {
      const now = new Date(NOW.getTime() + hours * 60 * MINUTE);
      const names = kept(saves, now);
      saves = saves.filter((save) => names.includes(save.id));
    }
    expect(saves.map((save) => save.id)).toEqual(kept(all, new Date(NOW.getTime() + 2401 * 60 * MINUTE)));
  });

  test('the job drops from the database what the rule lets go', async () => {
    const id = await flow.start(flow.author);
    for (const n of [0, 1, 2, 3]) await flow.save(flow.author, id, n, `text ${n}`).expect(200);
    expect(await pruneDraftSaves(flow.db, new Date(flow.frame.clock().getTime() + 8 * 24 * 60 * MINUTE))).toBe(3);
    const left = await flow.db
      .select()
      .from(draftSave)
      .where(and(eq(draftSave.draftId, id)));
    expect(left.map((save) => save.revision ?? -1).sort((a, b) => a - b)).toEqual([0, 4]);
  });
});
