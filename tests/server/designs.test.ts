import { beforeEach, describe, expect, test } from 'vitest';
import { design } from '../../server/database/schema.ts';
import type { Person } from '../../server/http/context.ts';
import { clientId, freshWorkflow, recipeText, statuses, type Workflow } from './workflow-app.ts';

let flow: Workflow;
beforeEach(async () => {
  flow = await freshWorkflow();
  await flow.publish(recipeText('amp', 'GAIN 2'));
});

const SHOWN = {
  engine: 1,
  calculators: {
    amp: {
      results: { V_out: { text: '8.000 V', low: 8, high: 8 } },
      limits: { output: 'within', rejection: 'exceeded' },
    },
  },
};
const keep = (who: Person, more: object = {}) =>
  flow.post(who, '/api/designs', {
    slug: 'amp',
    version: 1,
    name: 'Signal lamp 4',
    project: 'North box',
    note: 'Check the lamp.',
    visibility: 'team',
    inputs: { amp: { V_in: '2 V', R: '' } },
    shown: SHOWN,
    ...more,
  });
const change = (who: Person, id: string, body: object) =>
  flow.send(who, 'PATCH', `/api/designs/${id}`, { requestId: clientId(), ...body });

describe('keeping a design', () => {
  test('keeps inputs, note and what was shown, pinned to the version, for the whole team to read', async () => {
    const { body: row } = await keep(flow.reader).expect(200);
    expect(row).toMatchObject({
      name: 'Signal lamp 4',
      project: 'North box',
      owner: { id: flow.reader.id, name: flow.reader.name },
      recipe: { slug: 'amp', number: 'Q-001', title: 'Recipe of amp' },
      version: 1,
      versionState: 'published',
      newestVersion: 1,
      limitsBroken: 1,
    });
    const { body } = await flow.get(flow.author, `/api/designs/${row.id}`).expect(200);
    expect(body).toMatchObject({
      inputs: { amp: { V_in: '2 V', R: '' } },
      note: 'Check the lamp.',
      shown: SHOWN,
      mayChange: false,
    });
    expect(body.document.calculators[0].id).toBe('amp');
  });

  test('stays on its version, with that document, when a newer one is published', async () => {
    const { body: row } = await keep(flow.reader).expect(200);
    const before = await flow.get(flow.reader, `/api/designs/${row.id}`).expect(200);
    await flow.publish(recipeText('amp', 'GAIN 3'), 'amp');
    const after = await flow.get(flow.reader, `/api/designs/${row.id}`).expect(200);
    expect(after.body.document).toEqual(before.body.document);
    expect(after.body).toMatchObject({
      design: { version: 1, versionState: 'superseded', newestVersion: 2 },
      shown: SHOWN,
    });
  });

  test('sent twice at once with one request id keeps one', async () => {
    const requestId = clientId();
    const answers = await Promise.all([keep(flow.reader, { requestId }), keep(flow.reader, { requestId })]);
    expect(statuses(answers)).toEqual([200, 200]);
    expect(answers[0]?.body).toEqual(answers[1]?.body);
    expect(await flow.db.select().from(design)).toHaveLength(1);
  });

  test('needs a version that exists and a name', async () => {
    await keep(flow.reader, { version: 2 }).expect(404);
    await keep(flow.reader, { slug: 'no-such' }).expect(404);
    const { body } = await keep(flow.reader, { name: ' ' }).expect(400);
    expect(body.fields).toEqual([{ field: 'name', message: 'Give the design a name.' }]);
  });
});

describe('changing a design', () => {
  test('changes what was sent and nothing else', async () => {
    const { body: row } = await keep(flow.reader).expect(200);
    flow.advance(1000);
    const { body } = await change(flow.reader, row.id, { updatedAt: row.updatedAt, name: 'Lamp 5' }).expect(200);
    expect(body).toMatchObject({ ...row, name: 'Lamp 5', updatedAt: '2026-03-02T09:00:01.000Z' });
    const page = await flow.get(flow.reader, `/api/designs/${row.id}`).expect(200);
    expect(page.body).toMatchObject({ inputs: { amp: { V_in: '2 V' } }, note: 'Check the lamp.', shown: SHOWN });
  });

  test('of two changes at once one wins, even within one millisecond, and the other gets what stands now', async () => {
    const { body: row } = await keep(flow.reader).expect(200);
    const answers = await Promise.all(
      ['left', 'right'].map((note) => change(flow.reader, row.id, { updatedAt: row.updatedAt, note })),
    );
    expect(statuses(answers)).toEqual([200, 409]);
    const lost = answers.find((a) => a.status === 409);
    const page = await flow.get(flow.reader, `/api/designs/${row.id}`).expect(200);
    expect(lost?.body).toMatchObject({ code: 'stale', note: page.body.note, design: page.body.design });
  });

  test('is for its owner: editors and admins may not', async () => {
    const { body: row } = await keep(flow.reader).expect(200);
    for (const who of [flow.author, flow.editor, flow.admin]) {
      await change(who, row.id, { updatedAt: row.updatedAt, name: 'Mine' }).expect(403);
      await flow.post(who, `/api/designs/${row.id}/remove`, { updatedAt: row.updatedAt }).expect(403);
    }
    await flow.post(flow.reader, `/api/designs/${row.id}/remove`, { updatedAt: row.updatedAt }).expect(200);
    await flow.get(flow.reader, `/api/designs/${row.id}`).expect(404);
  });

  test('is not removed by who saw an older one', async () => {
    const { body: row } = await keep(flow.reader).expect(200);
    await change(flow.reader, row.id, { updatedAt: row.updatedAt, note: 'New.' }).expect(200);
    await flow.post(flow.reader, `/api/designs/${row.id}/remove`, { updatedAt: row.updatedAt }).expect(409);
    expect(await flow.db.select().from(design)).toHaveLength(1);
  });
});

describe('an "only me" design', () => {
  test('is nowhere for anybody else: not in lists, counts, search, pages or refusals', async () => {
    const { body: row } = await keep(flow.reader, { visibility: 'only me', name: 'Zebra relay' }).expect(200);
    for (const who of [flow.author, flow.editor, flow.admin]) {
      await flow.get(who, `/api/designs/${row.id}`).expect(404);
      await change(who, row.id, { updatedAt: row.updatedAt, name: 'Mine' }).expect(404);
      await flow.post(who, `/api/designs/${row.id}/remove`, { updatedAt: row.updatedAt }).expect(404);
      for (const path of ['/api/designs', '/api/recipes', '/api/recipes/amp', '/api/recipes/search?q=zebra']) {
        const { text } = await flow.get(who, path).expect(200);
        expect(text).not.toContain('Zebra');
        expect(text).not.toContain(row.id);
      }
      expect((await flow.get(who, '/api/recipes')).body.recipes[0].designs).toBe(0);
      expect((await flow.get(who, '/api/recipes/amp')).body.recipe.designs).toBe(0);
    }
    expect((await flow.get(flow.reader, '/api/recipes')).body.recipes[0].designs).toBe(1);
    expect((await flow.get(flow.reader, '/api/designs')).body.designs).toHaveLength(1);
  });

  test('made private later vanishes for the others at once', async () => {
    const { body: row } = await keep(flow.reader).expect(200);
    await flow.get(flow.admin, `/api/designs/${row.id}`).expect(200);
    await change(flow.reader, row.id, { updatedAt: row.updatedAt, visibility: 'only me' }).expect(200);
    await flow.get(flow.admin, `/api/designs/${row.id}`).expect(404);
  });
});
