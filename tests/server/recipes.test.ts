import { eq } from 'drizzle-orm';
import { beforeEach, describe, expect, test } from 'vitest';
import { auditEvent, recipe, recipeVersion } from '../../server/database/schema.ts';
import { clientId, freshWorkflow, hashText, recipeText, statuses, TICKS, type Workflow } from './workflow-app.ts';

let flow: Workflow;
beforeEach(async () => {
  flow = await freshWorkflow();
});

const TEXT = recipeText('bias-tee');

describe('the list of recipes', () => {
  test('holds what was published, by its current version, in the order of titles; never a draft', async () => {
    await flow.publish(recipeText('zener'));
    await flow.publish(recipeText('averager'));
    await flow.publish(`${recipeText('averager')}More.`, 'averager');
    await flow.start(flow.author, recipeText('hidden'));
    const { body } = await flow.get(flow.reader, '/api/recipes').expect(200);
    expect(body.recipes.map((r: { slug: string; version: number }) => [r.slug, r.version])).toEqual([
      ['averager', 2],
      ['zener', 1],
    ]);
    expect(body.recipes[0]).toMatchObject({
      number: 'Q-002',
      title: 'Recipe of averager',
      summary: 'What averager does.',
      state: 'published',
      owners: [flow.author.name],
      signedBy: flow.editor.name,
      origin: 'team',
      designs: 0,
      reviewDue: '2028-03-02',
      reviewOverdue: false,
    });
  });

  test('is closed to nobody signed in', async () => {
    await flow.send(null, 'GET', '/api/recipes').expect(401);
  });
});

describe('the page of a recipe', () => {
  test('gives the published version, or a named one, with the history of all', async () => {
    await flow.publish(TEXT);
    await flow.publish(`${TEXT}More.`, 'bias-tee');
    const now = await flow.get(flow.reader, '/api/recipes/bias-tee').expect(200);
    expect(now.body).toMatchObject({
      recipe: { version: 2 },
      version: {
        version: 2,
        state: 'published',
        signedBy: flow.editor.name,
        writtenBy: [flow.author.name],
        note: 'A note.',
      },
      textHash: hashText(`${TEXT}More.`),
      draft: null,
    });
    expect(now.body.versions.map((v: { version: number; state: string }) => [v.version, v.state])).toEqual([
      [2, 'published'],
      [1, 'superseded'],
    ]);
    const old = await flow.get(flow.reader, '/api/recipes/bias-tee?version=1').expect(200);
    expect(old.body).toMatchObject({ version: { version: 1, state: 'superseded' }, textHash: hashText(TEXT) });
    await flow.get(flow.reader, '/api/recipes/bias-tee?version=3').expect(404);
    await flow.get(flow.reader, '/api/recipes/bias-tee?version=0').expect(400);
    await flow.get(flow.reader, '/api/recipes/no-such').expect(404);
  });

  test('names the open change to those who may see it', async () => {
    await flow.publish(TEXT);
    const id = await flow.start(flow.author, undefined, 'bias-tee');
    const drafts = async () =>
      Promise.all(
        [flow.author, flow.editor, flow.outsider, flow.reader].map(
          async (who) => (await flow.get(who, '/api/recipes/bias-tee').expect(200)).body.draft,
        ),
      );
    expect(await drafts()).toEqual([{ id, mine: true }, { id, mine: false }, null, null]);
  });

  test('of a recipe in its first review is not there yet', async () => {
    const id = await flow.start(flow.author, TEXT);
    await flow.post(flow.author, `/api/drafts/${id}/send`, { ...(await flow.seen(id)), note: '' }).expect(200);
    await flow.get(flow.admin, '/api/recipes/bias-tee').expect(404);
    await flow.get(flow.admin, '/api/recipes/bias-tee/text').expect(404);
  });
});

describe('the text of a version', () => {
  test('is what its author wrote, for every version', async () => {
    await flow.publish(TEXT);
    await flow.publish(`${TEXT}More.`, 'bias-tee');
    expect((await flow.get(flow.reader, '/api/recipes/bias-tee/text').expect(200)).body).toEqual({
      slug: 'bias-tee',
      version: 2,
      text: `${TEXT}More.`,
    });
    expect((await flow.get(flow.reader, '/api/recipes/bias-tee/text?version=1').expect(200)).body.text).toBe(TEXT);
  });
});

describe('a version', () => {
  test('is not changed by any later act on its recipe', async () => {
    await flow.publish(TEXT);
    const frozen = ({ state: _state, ...rest }: typeof recipeVersion.$inferSelect) => rest;
    const first = async () =>
      (await flow.db.select().from(recipeVersion).where(eq(recipeVersion.version, 1))).map(frozen);
    const before = await first();
    const id = await flow.start(flow.author, undefined, 'bias-tee');
    await flow.save(flow.author, id, 0, `${TEXT}Next.`).expect(200);
    await flow.post(flow.author, `/api/drafts/${id}/discard`, await flow.seen(id)).expect(200);
    await flow.publish(`${TEXT}More.`, 'bias-tee', flow.coauthor, flow.admin);
    expect(await first()).toEqual(before);
  });
});

describe('signing off a supplied recipe', () => {
  beforeEach(async () => {
    await flow.publish(TEXT);
    await flow.db.update(recipe).set({ origin: 'supplied' });
    await flow.db
      .update(recipeVersion)
      .set({ suppliedWith: '0.1.0', signedBy: null, signedAt: null, reviewDue: null, ticks: [] });
    await flow.db.execute('delete from version_writer');
  });
  const sign = (who = flow.editor, more: object = {}) =>
    flow.post(who, '/api/recipes/bias-tee/sign-off', { version: 1, hash: hashText(TEXT), ticks: TICKS, ...more });

  test('adds the team’s signature to the text as it stands', async () => {
    const before = await flow.get(flow.reader, '/api/recipes/bias-tee').expect(200);
    expect(before.body).toMatchObject({
      recipe: { origin: 'supplied' },
      version: { signedBy: null, supplied: '0.1.0' },
    });
    expect((await sign().expect(200)).body).toEqual({ slug: 'bias-tee', version: 1 });
    const after = await flow.get(flow.reader, '/api/recipes/bias-tee').expect(200);
    expect(after.body).toMatchObject({
      recipe: { origin: 'team', reviewDue: '2028-03-02' },
      version: { version: 1, signedBy: flow.editor.name, supplied: '0.1.0', selfSigned: false },
      textHash: hashText(TEXT),
    });
    expect(
      await flow.db
        .select()
        .from(auditEvent)
        .where(eq(auditEvent.detail, `version 1 as supplied with 0.1.0, SHA-256 ${hashText(TEXT)}`)),
    ).toHaveLength(1);
  });

  test('by two editors at once signs once', async () => {
    expect(statuses(await Promise.all([sign(flow.editor), sign(flow.admin)]))).toEqual([200, 409]);
  });

  test('is refused for another text or version, without ticks, and to authors', async () => {
    await sign(flow.editor, { hash: hashText('x') }).expect(409);
    await sign(flow.editor, { version: 2 }).expect(409);
    await sign(flow.editor, { ticks: [] }).expect(400);
    await sign(flow.author).expect(403);
    await flow
      .post(flow.editor, '/api/recipes/no-such/sign-off', {
        requestId: clientId(),
        version: 1,
        hash: hashText(TEXT),
        ticks: [],
      })
      .expect(404);
  });

  test('is refused for a recipe of the team', async () => {
    await sign().expect(200);
    await sign().expect(409);
  });
});
